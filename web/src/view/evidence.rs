//! The rivals side by side in a table, with what the figures mean.

use record::results::Proof;
use report::number::count;
use report::proof;
use yew::prelude::*;

use crate::state::board::Board;
use crate::state::document::{Document, Slot};
use crate::view::differences::Differences;
use crate::view::figure::{figure, gap, share};
use crate::view::inspector::InspectorProps as EvidenceProps;
use crate::view::lane::is_over;
use crate::view::recorded::AgainstRecords;
use crate::view::results::Results;
use crate::view::rivals::HUES;
use crate::view::studies::Studies;

/// The section.
#[component]
pub(crate) fn Evidence(props: &EvidenceProps) -> Html {
    let (document, board) = (&props.document, &props.board);
    let best = crate::view::rivals::best_value(document, board);
    html! {
        <section aria-labelledby="evidence-heading" data-testid="evidence">
            <h2 id="evidence-heading">{ "Evidence" }</h2>
            <div class="scroll" tabindex="0" role="region" aria-label="The rivals side by side">
                <table>
                    <thead><tr>
                        for head in ["rival", "rows", "columns", "root bound", "root gap", "nodes", "bound now", "best found", "checked"] {
                            <th scope="col">{ head }</th>
                        }
                    </tr></thead>
                    <tbody>
                        for (place, slot) in document.slots.iter().enumerate() {
                            { row(document, board, place, slot, best) }
                        }
                    </tbody>
                </table>
            </div>
            <Results document={document.clone()} board={board.clone()} />
            <p class="prose">
                { "Gap is |incumbent − bound| / |incumbent|, with the best value known on this page as incumbent. \
                   A bound is called checked where exact arithmetic has proved that it is the optimum of the relaxation; \
                   checked to within an amount where what is proved is a bound that far from the figure. \
                   Node counts with + are of a search that is not finished." }
            </p>
            <AgainstRecords document={document.clone()} board={board.clone()} />
            <Differences document={document.clone()} board={board.clone()} />
            <Studies document={document.clone()} board={board.clone()} />
            <p class="prose caution">
                { "A plan that comes out of a model is a decision aid: the driving, working-time, energy and safety rules \
                   of the place, and the people licensed to apply them, come first." }
            </p>
        </section>
    }
}

fn row(document: &Document, board: &Board, place: usize, slot: &Slot, best: Option<f64>) -> Html {
    let lane = board.lane(slot.id);
    let size = |of: fn(&record::message::RivalReport) -> u32| {
        lane.rival.as_ref().map_or_else(|| "–".to_owned(), |rival| count(u64::from(of(rival))))
    };
    let open = if lane.nodes() > 0 && !is_over(&lane) { "+" } else { "" };
    let relaxation = document.is_relaxation(&slot.rival);
    let checked = match &lane.root {
        Some(root) if root.proof == Proof::Exact => "yes".to_owned(),
        Some(root) if root.proof == Proof::None => "no".to_owned(),
        Some(root) => proof::mark(root.proof, root.checked_within),
        None => "–".to_owned(),
    };
    html! {
        <tr key={slot.id.0} class={format!("hue-{}", place % HUES)}>
            <th scope="row"><span class="letter">{ Document::letter(place) }</span>{ " " }{ document.rival_title(&slot.rival) }</th>
            <td>{ size(|rival| rival.rows) }</td>
            <td>{ size(|rival| rival.columns) }</td>
            <td>{ figure(lane.root_bound()) }</td>
            <td>{ share(gap(best, lane.root_bound())) }</td>
            <td>{ count(u64::from(lane.nodes())) }{ open }</td>
            <td>{ figure(lane.bound()) }</td>
            <td>{ if relaxation { html! { <span class="soft">{ "a relaxation" }</span> } } else { figure(lane.incumbent()) } }</td>
            <td>{ checked }</td>
        </tr>
    }
}
