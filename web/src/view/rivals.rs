//! The rivals: one lane each under one shared axis.

use record::message::CatalogueEntry;
use record::scenario::MOST_RIVALS;
use report::axis::Axis;
use report::number::short;
use web_sys::HtmlSelectElement;
use yew::prelude::*;

use crate::browser::size::use_width;
use crate::state::board::Board;
use crate::state::document::{Document, DocumentAction};
use crate::state::editor::{Draft, Edit};
use crate::state::lane::Phase;
use crate::state::lens::Lens;
use crate::state::pointer::Shared;
use crate::view::axis::{AxisView, Best, TICK};
use crate::view::hands::{Hands, use_hands};
use crate::view::lane::LaneView;
use crate::view::replay::Replay;
use crate::view::rule::{plan, rules};
use crate::view::shelf::Shelf;

/// Hues, after which they come again.
pub(crate) const HUES: usize = 6;

/// The id of the heading, where the focus goes when a rival leaves.
pub(crate) const HEADING: &str = "rivals-heading";

/// The id of what holds the catalogue.
const SHELF: &str = "shelf";

#[derive(Properties, PartialEq)]
pub(crate) struct RivalsProps {
    pub(crate) document: Document,
    pub(crate) board: Board,
}

/// The section.
#[component]
pub(crate) fn Rivals(props: &RivalsProps) -> Html {
    let hands = use_hands();
    let node = use_node_ref();
    let width = use_width(&node);
    let lens = use_reducer(Lens::default);
    let (document, board) = (&props.document, &props.board);
    let best = best(document, board);
    let domain = board.domain(best.as_ref().map(|best| best.value));
    let axis = domain.map(|(low, high)| Axis::fit(low, high, (width / TICK) as u32));
    html! {
        <ContextProvider<UseReducerHandle<Lens>> context={lens}>
        <section class="rivals" aria-labelledby={HEADING}>
            <div class="heading">
                <h2 id={HEADING} tabindex="-1">{ heading(document) }</h2>
                if let Some(hands) = &hands { { for_all(document, board, hands) } }
            </div>
            <Replay most={most(board)} />
            <div class="axis-row">
                <div ref={node} class="axis-place">
                    if let Some(axis) = axis { if width > 0.0 { <AxisView {axis} {width} best={best.clone()} /> } }
                </div>
            </div>
            for (place, slot) in document.slots.iter().enumerate() {
                <LaneView
                    key={slot.id.0} slot={slot.clone()} letter={Document::letter(place)}
                    hue={place % HUES} title={document.rival_title(&slot.rival)}
                    source={document.rival_source(&slot.rival)} relaxation={document.is_relaxation(&slot.rival)}
                    draft={Draft::of(&slot.rival, &document.catalogue)} copied={document.is_fresh_copy(slot)}
                    lane={board.lane(slot.id)} run={document.run.clone()} seed={document.seed}
                    text={document.instance_of(slot)}
                    {axis} {width} best={best.as_ref().map(|best| best.value)}
                    selected={board.selection.filter(|at| at.lane == slot.id).map(|at| at.node)}
                />
            }
            <Key />
            if document.is_full() {
                <p class="small soft">{ format!("{MOST_RIVALS} rivals: a scenario holds no more.") }</p>
            } else {
                <AddRival catalogue={document.catalogue.clone()} family={family(document)} />
            }
        </section>
        </ContextProvider<UseReducerHandle<Lens>>>
    }
}

/// Nodes and work of the longest search: iterations weighted by coefficients.
fn most(board: &Board) -> (u64, u64) {
    board.lanes.values().fold((0, 0), |(nodes, work), lane| {
        let coefficients = lane.rival.as_ref().map_or(1, |rival| rival.nonzeros);
        let spent = lane.tally.iterations.saturating_mul(coefficients);
        (nodes.max(u64::from(lane.tally.solved)), work.max(spent))
    })
}

/// The family of the first rival that is shipped.
fn family(document: &Document) -> Option<String> {
    let mut entries = document.slots.iter().filter_map(|slot| document.entry(&slot.rival));
    entries.next().map(|entry| entry.family.clone())
}

fn heading(document: &Document) -> String {
    let unit = document.accepted.as_ref().map_or("", |accepted| accepted.report.unit.as_str());
    if unit.is_empty() {
        "Rivals, by the bound that their relaxations give".to_owned()
    } else {
        format!("Rivals, by the {unit} that their relaxations allow")
    }
}

/// The best known value: the best of all lanes, or the one the scenario gives.
fn best(document: &Document, board: &Board) -> Option<Best> {
    let given = document.run.best_known;
    let rival = |id| {
        let slot = document.slots.iter().find(|slot| slot.id == id);
        slot.is_some_and(|slot| !document.is_relaxation(&slot.rival))
    };
    let found = board.best(rival);
    match (found, given) {
        (Some(found), Some(given)) if found != given && board.is_better(given, found) => {
            Some(Best { value: given, whose: "given".to_owned() })
        }
        (Some(value), _) => Some(Best { value, whose: finders(document, board, value) }),
        (None, Some(value)) => Some(Best { value, whose: "given".to_owned() }),
        (None, None) => None,
    }
}

/// The best known value alone.
pub(crate) fn best_value(document: &Document, board: &Board) -> Option<f64> {
    best(document, board).map(|best| best.value)
}

/// "proved by C", else "found by A, C".
fn finders(document: &Document, board: &Board, value: f64) -> String {
    let with = |wanted: fn(&crate::state::lane::Lane) -> bool| {
        let letters: Vec<String> = document
            .slots
            .iter()
            .enumerate()
            .filter(|(_, slot)| {
                let lane = board.lane(slot.id);
                let counts = wanted(&lane) && !document.is_relaxation(&slot.rival);
                counts && lane.incumbent().map(short) == Some(short(value))
            })
            .map(|(place, _)| Document::letter(place))
            .collect();
        letters.join(", ")
    };
    let proved = with(crate::view::lane::is_over);
    if proved.is_empty() {
        format!("found by {}", with(|_| true))
    } else {
        format!("proved by {proved}")
    }
}

fn for_all(document: &Document, board: &Board, hands: &Hands) -> Html {
    let lanes = document.slots.iter().map(|slot| (slot.id, board.lane(slot.id).phase));
    let phases: Shared<Vec<_>> = Shared::new(lanes.collect());
    let run = {
        let (phases, session) = (phases.clone(), hands.session.clone());
        Callback::from(move |_: MouseEvent| {
            for &(id, phase) in phases.iter() {
                match phase {
                    Phase::Loading => session.search_when_ready(id),
                    phase if phase.can_go_on() => session.search(id, None),
                    _ => {}
                }
            }
        })
    };
    let stop = {
        let session = hands.session.clone();
        Callback::from(move |_: MouseEvent| {
            for &(id, _) in phases.iter().filter(|(_, phase)| phase.can_stop()) {
                session.stop(id);
            }
        })
    };
    html! {
        <div class="acts" role="group" aria-label="All rivals">
            { rules(&document.run, hands) }
            { plan(document.run.plan.as_ref(), hands) }
            <button type="button" data-testid="run-all" onclick={run}>{ "Run all" }</button>
            <button type="button" data-testid="stop-all" onclick={stop}>{ "Stop all" }</button>
        </div>
    }
}

/// The marks in words.
#[component]
fn Key() -> Html {
    let item = |shape: Html, words: &'static str| {
        html! {
            <li><svg width="14" height="14" viewBox="0 0 14 14" aria-hidden="true">{ shape }</svg>{ words }</li>
        }
    };
    html! {
        <ul class="key small soft">
            { item(html! { <circle class="full" cx="7" cy="7" r="3" /> }, "branched") }
            { item(html! { <circle class="ring" cx="7" cy="7" r="3.5" /> }, "open") }
            { item(html! { <path class="full" d="M7 2l5 5-5 5-5-5z" /> }, "integer") }
            { item(html! { <path class="ring" d="M4 4l6 6M4 10l6-6" /> }, "infeasible") }
            { item(html! { <path class="ring" d="M7 3v8" /> }, "pruned by bound") }
            <li>{ "A node stands at its own bound, or its parent's where it has none. The nearer to the best known value, the stronger." }</li>
        </ul>
    }
}

/// The entries with their place in the catalogue, family by family in the order of the catalogue.
pub(crate) fn by_family(
    catalogue: &[CatalogueEntry],
) -> Vec<(&str, Vec<(usize, &CatalogueEntry)>)> {
    let mut families: Vec<(&str, Vec<_>)> = Vec::new();
    for (place, entry) in catalogue.iter().enumerate() {
        match families.iter_mut().find(|(family, _)| *family == entry.family) {
            Some((_, entries)) => entries.push((place, entry)),
            None => families.push((&entry.family, vec![(place, entry)])),
        }
    }
    families
}

fn choice(entry: &CatalogueEntry, selected: bool) -> Html {
    html! {
        <option
            key={entry.id.clone()} value={entry.id.clone()} title={entry.citation.clone()} {selected}
        >{ entry.title.clone() }</option>
    }
}

#[derive(Properties, PartialEq)]
struct AddProps {
    catalogue: Shared<Vec<CatalogueEntry>>,
    family: Option<String>,
}

#[component]
fn AddRival(props: &AddProps) -> Html {
    let hands = use_hands();
    let select = use_node_ref();
    let browsing = use_state_eq(|| false);
    if props.catalogue.is_empty() {
        return Html::default();
    }
    let write = {
        let hands = hands.clone();
        Callback::from(move |_: MouseEvent| {
            if let Some(hands) = &hands {
                hands.document.dispatch(DocumentAction::Edit(Edit::Write));
            }
        })
    };
    let add = {
        let select = select.clone();
        Callback::from(move |_: MouseEvent| {
            let chosen = select.cast::<HtmlSelectElement>().map(|select| select.value());
            if let (Some(hands), Some(id)) = (&hands, chosen) {
                hands.document.dispatch(DocumentAction::Add(id));
            }
        })
    };
    let (browsed, shown) = (browsing.setter(), *browsing);
    let browse = Callback::from(move |_: MouseEvent| browsed.set(!shown));
    html! {
        <>
        <div class="row add">
            <label class="field">
                { "Another rival" }
                <select ref={select} data-testid="catalogue">
                    for (family, entries) in by_family(&props.catalogue) {
                        <optgroup key={family} label={family.to_owned()}>
                            for (place, entry) in entries { { choice(entry, place == 0) } }
                        </optgroup>
                    }
                </select>
            </label>
            <button type="button" data-testid="add" onclick={add}>{ "Add" }</button>
            <button type="button" data-testid="write" onclick={write}>{ "Write my own" }</button>
            <button
                type="button" data-testid="browse" aria-expanded={if shown { "true" } else { "false" }}
                aria-controls={SHELF} onclick={browse}
            >{ "Look through the catalogue" }</button>
        </div>
        <div id={SHELF} hidden={!shown}>
            if shown { <Shelf catalogue={props.catalogue.clone()} family={props.family.clone()} /> }
        </div>
        </>
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn entries_are_grouped_in_the_order_of_the_catalogue() {
        let entry = |id: &str, family: &str| CatalogueEntry {
            id: id.to_owned(),
            family: family.to_owned(),
            ..CatalogueEntry::default()
        };
        let catalogue = [entry("a", "round"), entry("b", "path"), entry("c", "round")];
        let places = |entries: &[(usize, &CatalogueEntry)]| entries.iter().map(|e| e.0).collect();
        let groups: Vec<(&str, Vec<usize>)> = by_family(&catalogue)
            .iter()
            .map(|(family, entries)| (*family, places(entries)))
            .collect();
        assert_eq!(groups, [("round", vec![0, 2]), ("path", vec![1])]);
    }
}
