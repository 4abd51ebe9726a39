//! Every rival on every instance: the chosen one as its lanes run, the others as they were left,
//! or run one after another in a worker of their own.

use record::message::LaneJob;
use record::scenario::InstanceText;
use report::number::count;
use yew::prelude::*;

use crate::browser::elsewhere::{Elsewhere, Job};
use crate::state::board::Board;
use crate::state::document::{Document, Slot};
use crate::state::instances::instance_title;
use crate::state::lane::Phase;
use crate::state::outcomes::{MOST, Outcome};
use crate::view::figure::figure;
use crate::view::hands::use_hands;
use crate::view::inspector::InspectorProps as EvidenceProps;
use crate::view::rivals::HUES;

/// The table; nothing where there is one instance.
#[component]
pub(crate) fn Results(props: &EvidenceProps) -> Html {
    let (document, board) = (&props.document, &props.board);
    let hands = use_hands();
    let elsewhere =
        use_memo((), |()| hands.as_ref().map(|hands| Elsewhere::new(hands.board.clone())));
    if document.others.is_empty() {
        return Html::default();
    }
    let onclick = {
        let (document, board) = (document.clone(), board.clone());
        Callback::from(move |_: MouseEvent| {
            let (Some(hands), Some(elsewhere)) = (&hands, &*elsewhere) else { return };
            if board.elsewhere {
                return elsewhere.stop();
            }
            for slot in &document.slots {
                match board.lane(slot.id).phase {
                    Phase::Loading => hands.session.search_when_ready(slot.id),
                    phase if phase.can_go_on() => hands.session.search(slot.id, None),
                    _ => {}
                }
            }
            elsewhere.run(jobs(&document, &board));
        })
    };
    html! {
        <>
            <div class="heading">
                <h3>{ "Instances" }</h3>
                <button type="button" data-testid="run-instances" {onclick}>
                    { if board.elsewhere { "Stop the other instances" } else { "Run all instances" } }
                </button>
            </div>
            <div class="scroll" tabindex="0" role="region" aria-label="Every rival on every instance">
                <table data-testid="results">
                    <thead><tr>
                        for head in ["instance and rival", "root bound", "best plan", "nodes", "status"] {
                            <th scope="col">{ head }</th>
                        }
                    </tr></thead>
                    for (place, text) in document.instances().iter().enumerate() {
                        <tbody key={place}>
                            <tr><th scope="rowgroup" colspan="5">{ instance_title(text, place) }</th></tr>
                            for (number, slot) in document.slots.iter().enumerate() {
                                { row(document, slot, number, outcome(document, board, slot, (place, text))) }
                            }
                        </tbody>
                    }
                </table>
            </div>
            if document.others.len() * document.slots.len() > MOST {
                <p class="small" data-testid="kept-most">
                    { format!("The last {MOST} results on other instances are kept: older ones are run again when they are asked for.") }
                </p>
            }
        </>
    }
}

/// What a rival gave on the instance at a place.
fn outcome(
    document: &Document,
    board: &Board,
    slot: &Slot,
    (place, text): (usize, &InstanceText),
) -> Option<Outcome> {
    let live = document.accepted.as_ref().is_some_and(|accepted| accepted.text == document.draft);
    if place == document.chosen && live {
        return Outcome::of(&board.lane(slot.id));
    }
    board.kept_of(&slot.rival, text)
}

fn row(document: &Document, slot: &Slot, number: usize, outcome: Option<Outcome>) -> Html {
    let outcome = outcome.unwrap_or(Outcome { words: "not run yet", ..Outcome::default() });
    html! {
        <tr key={slot.id.0} class={format!("hue-{}", number % HUES)}>
            <th scope="row"><span class="letter">{ Document::letter(number) }</span>{ " " }{ document.rival_title(&slot.rival) }</th>
            <td>{ figure(outcome.root) }</td>
            <td>{ figure(outcome.best) }</td>
            <td>{ count(u64::from(outcome.nodes)) }</td>
            <td>{ outcome.words }</td>
        </tr>
    }
}

/// The runs that are left on instances that are not chosen.
fn jobs(document: &Document, board: &Board) -> Vec<Job> {
    let all = document.instances().into_iter().enumerate();
    let others = all.filter(|(place, _)| *place != document.chosen);
    let pairs =
        others.flat_map(|(_, text)| document.slots.iter().map(move |slot| (text.clone(), slot)));
    let left = pairs.filter(|(text, slot)| {
        board.kept_of(&slot.rival, text).is_none_or(|outcome| !outcome.over)
    });
    let jobs = left.map(|(text, slot)| Job {
        lane: LaneJob {
            instance: Some((*text).clone()),
            rival: (*slot.rival).clone(),
            settings: (*document.run).clone(),
            seed: document.seed,
            ..LaneJob::default()
        },
        search: !document.is_relaxation(&slot.rival),
    });
    jobs.collect()
}
