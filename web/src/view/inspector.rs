//! One node in full: how it was reached, its bound, its relaxation drawn on the map, its values,
//! and what it violates.

use record::event::{Branching, NodeState};
use record::message::{InstanceReport, NodeDetail, RivalReport, ViolatedSubset};
use record::results::Proof;
use record::scenario::{Act, ActKind};
use report::number::{count, fixed, full, of, short};
use report::proof;
use wasm_bindgen::JsCast;
use web_sys::HtmlElement;
use yew::prelude::*;

use crate::state::board::{Board, Selection};
use crate::state::document::Document;
use crate::state::pointer::Shared;
use crate::state::steer::column_words;
use crate::state::words::{branching, node_state};
use crate::view::hands::{Hands, use_hands};
use crate::view::picture::{Pictures, cycle_words};
use crate::view::rivals::HUES;
use crate::view::steering::{Steering, SteeringProps, cut, doing, may_add};
use crate::view::values::Values;

/// The id of its heading.
const HEADING: &str = "node-heading";
/// Violated sets and rows of a ray shown at most.
const SHOWN: usize = 12;

/// Leads the focus to the inspector.
pub(crate) fn focus_inspector() {
    focus(HEADING);
}

/// Leads the focus to an element.
pub(crate) fn focus(id: &str) {
    let element = gloo_utils::document().get_element_by_id(id);
    if let Some(element) = element.and_then(|element| element.dyn_into::<HtmlElement>().ok()) {
        // An element that takes no focus leaves it where it was.
        let _ = element.focus();
    }
}

#[derive(Properties, PartialEq)]
pub(crate) struct InspectorProps {
    pub(crate) document: Document,
    pub(crate) board: Board,
}

/// The section.
#[component]
pub(crate) fn Inspector(props: &InspectorProps) -> Html {
    let hands = use_hands();
    let drawn = use_state_eq(String::new);
    let selection = props.board.selection;
    let node = selection.and_then(|at| known(hands.as_ref()?, at));
    let place =
        selection.and_then(|at| props.document.slots.iter().position(|slot| slot.id == at.lane));
    let acts = place.map_or(0, |place| props.document.slots[place].rival.acts.len());
    let is_shown = |node: &&Known| node.solved || node.state == NodeState::Open;
    let wanted = node.as_ref().filter(is_shown).map(|node| (node.state, node.solved, acts));
    let is_known = wanted.is_some();
    {
        let hands = hands.clone();
        use_effect_with((selection, wanted), move |(selection, wanted)| {
            if let (Some(hands), Some(at), Some(_)) = (hands, selection, wanted) {
                hands.session.inspect(at.lane, at.node);
            }
        });
    }
    let (Some(at), Some(place)) = (selection, place) else { return Html::default() };
    let lane = props.board.lane(at.lane);
    let act = doing(hands.as_ref(), at, &lane);
    let chosen = chosen(&props.document.slots[place].rival.acts, at.node.0, lane.rival.as_deref());
    html! {
        <section
            class={classes!("node", format!("hue-{}", place % HUES))} aria-labelledby={HEADING}
            data-testid="inspector"
        >
            <h2 id={HEADING} tabindex="-1">{ heading(at, place) }</h2>
            if let Some(detail) = props.board.detail.clone().filter(|_| is_known) {
                <Detail {detail} report={report(&props.document)} rival={lane.rival.clone()} {drawn} {act} {chosen} />
            } else if let Some(node) = node.filter(|node| !node.solved && node.state != NodeState::Open) {
                { unsolved(&node, lane.rival.as_deref()) }
            } else {
                <p class="soft">{ "Asking the worker for this node…" }</p>
            }
        </section>
    }
}

/// What is known of the instance; nothing where every rival brings its data along.
fn report(document: &Document) -> Shared<InstanceReport> {
    document.accepted.as_ref().map_or_else(Shared::default, |accepted| accepted.report.clone())
}

/// The column on which a person wants a node branched.
fn chosen(acts: &[Act], node: u32, rival: Option<&RivalReport>) -> Option<String> {
    let here = |act: &&Act| act.what == ActKind::Branch && act.node == Some(node);
    let columns = rival.map_or(&[][..], |rival| rival.column_names.as_slice());
    acts.iter().rev().find(here).map(|act| column_words(&act.on, columns))
}

/// What the page knows of a node without its worker.
struct Known {
    state: NodeState,
    solved: bool,
    stand: Option<f64>,
    path: Vec<Branching>,
}

fn known(hands: &Hands, at: Selection) -> Option<Known> {
    let tree = hands.session.tree(at.lane)?;
    let tree = tree.borrow();
    let place = tree.place(at.node)?;
    let node = tree.nodes().get(place)?;
    let (state, solved, stand) = (node.state, node.solved, node.stand);
    Some(Known { state, solved, stand, path: tree.path(place) })
}

fn unsolved(node: &Known, rival: Option<&RivalReport>) -> Html {
    let bound = node.stand.map_or_else(String::new, |stand| {
        format!(" Its parent's bound, {}, stands for it.", short(stand))
    });
    html! {
        <div class="say">
            <p>{ format!("This node is {}; its relaxation was not solved.{bound}", node_state(node.state)) }</p>
            { path(&node.path, rival) }
        </div>
    }
}

fn heading(at: Selection, place: usize) -> String {
    let root = if at.node.0 == 1 { ", the root" } else { "" };
    format!("Node {} of {}{root}", at.node.0, Document::letter(place))
}

#[derive(Properties, PartialEq)]
struct DetailProps {
    detail: Shared<NodeDetail>,
    report: Shared<InstanceReport>,
    rival: Option<Shared<RivalReport>>,
    drawn: UseStateHandle<String>,
    /// Does an act by hand; `None` once the search has ended.
    act: Option<Callback<Act>>,
    chosen: Option<String>,
}

#[component]
fn Detail(props: &DetailProps) -> Html {
    let column = use_state_eq(|| None::<u32>);
    let set = use_state_eq(|| None::<usize>);
    let choose = {
        let column = column.setter();
        Callback::from(move |chosen: Option<u32>| column.set(chosen))
    };
    let (detail, report) = (&props.detail, &props.report);
    let tint = set.and_then(|index| detail.violated.get(index)).map(|violated| {
        let named = |label: &String| report.stops.iter().position(|stop| stop.label == *label);
        Shared::new(violated.subset.iter().filter_map(named).collect::<Vec<usize>>())
    });
    let show = {
        let (set, shown) = (set.setter(), *set);
        Callback::from(move |index: usize| set.set((shown != Some(index)).then_some(index)))
    };
    html! {
        <div class="node-parts">
            <div class="say">
                <p>{ sentence(detail) }</p>
                { bound(detail) }
                { path(&detail.path, props.rival.as_deref()) }
                { families(detail) }
                { violated(props, *set, &show) }
                { cycle(detail, &report.unit) }
                { ray(detail) }
                <Steering ..SteeringProps::of(detail, props.chosen.clone(), props.act.clone()) />
            </div>
            <Pictures
                detail={detail.clone()} report={report.clone()} drawn={props.drawn.clone()} set={tint}
                column={*column}
            />
            if !detail.values.is_empty() {
            <Values
                detail={detail.clone()} rival={props.rival.clone()} unit={report.unit.clone()}
                column={*column} {choose} act={props.act.clone()}
            />
            }
        </div>
    }
}

/// How the node stands, in a sentence.
fn sentence(detail: &NodeDetail) -> String {
    let fractional = detail.values.iter().filter(|value| value.fractional).count() as u64;
    let depth = if detail.depth == 0 {
        String::new()
    } else {
        format!(", {}", of(u64::from(detail.depth), "branching") + " deep")
    };
    let state = node_state(detail.state);
    if detail.ahead && (detail.bound.is_some() || !detail.ray.is_empty()) {
        let begun =
            format!("This node is {state}{depth}. The search has not solved it; its relaxation");
        return match (detail.bound, fractional) {
            (None, _) => format!("{begun} has no point."),
            (Some(_), 0) => format!("{begun} would leave no variable fractional."),
            (Some(_), some) => {
                format!("{begun} would leave {} fractional.", of(some, "variable"))
            }
        };
    }
    if detail.bound.is_none() {
        return format!("This node is {state}{depth}.");
    }
    let whole = if fractional == 0 {
        "every variable that must be whole is whole".to_owned()
    } else {
        format!(
            "{} that must be whole {} not",
            of(fractional, "variable"),
            if fractional == 1 { "is" } else { "are" }
        )
    };
    format!("This node is {state}{depth}: in its relaxation {whole}.")
}

fn bound(detail: &NodeDetail) -> Html {
    let Some(bound) = detail.bound else { return Html::default() };
    let checked = match (detail.proof, &detail.checked_bound) {
        (Proof::Exact, Some(exact)) => format!("checked exactly: {exact}"),
        _ => proof::mark(detail.proof, detail.checked_within),
    };
    let meaning = proof::meaning(detail.proof, detail.checked_bound.as_deref());
    html! {
        <p class="small">
            { "Bound " }<b><data value={bound.to_string()} title={full(bound)} data-testid="node-bound">{ short(bound) }</data></b>
            { ", " }<span class="exact" data-testid="node-checked" title={meaning}>{ checked }</span>
        </p>
    }
}

fn path(steps: &[Branching], rival: Option<&RivalReport>) -> Html {
    if steps.is_empty() {
        return Html::default();
    }
    let columns = rival.map_or(&[][..], |rival| rival.column_names.as_slice());
    html! {
        <>
            <h3>{ "Branchings from the root" }</h3>
            <ol class="path small" data-testid="path">
                for step in steps.iter() { <li>{ branching(step, columns) }</li> }
            </ol>
        </>
    }
}

/// What each family does here: which rows hold the vertex, and what they cost.
fn families(detail: &NodeDetail) -> Html {
    if detail.families.is_empty() {
        return Html::default();
    }
    html! {
        <details class="folded small" data-testid="node-families">
            <summary>{ "Duals by family" }</summary>
            <table>
                <thead><tr>
                    <th scope="col">{ "family" }</th><th scope="col">{ "rows" }</th>
                    <th scope="col" title="Rows that hold the vertex: they are not basic">{ "tight" }</th>
                    <th scope="col" title="Rows whose dual is not 0">{ "priced" }</th>
                    <th scope="col">{ "greatest" }</th>
                </tr></thead>
                <tbody>
                    for family in detail.families.iter() {
                        <tr>
                            <th scope="row">{ family.family.clone() }</th>
                            <td>{ count(u64::from(family.rows)) }</td><td>{ count(u64::from(family.held)) }</td>
                            <td>{ count(u64::from(family.priced)) }</td><td>{ short(family.greatest) }</td>
                        </tr>
                    }
                </tbody>
            </table>
            <p class="soft">{ "Duals say what a unit of a right-hand side buys at this vertex; in a degenerate one they are one choice of many." }</p>
        </details>
    }
}

fn violated(props: &DetailProps, shown: Option<usize>, show: &Callback<usize>) -> Html {
    let sets = props.detail.violated.as_slice();
    if sets.is_empty() {
        return Html::default();
    }
    let press = |index: usize| {
        let show = show.clone();
        Callback::from(move |_: MouseEvent| show.emit(index))
    };
    let more = sets.len().saturating_sub(SHOWN) as u64;
    html! {
        <>
            <h3>{ "Violated sets" }</h3>
            <ul class="sets small" data-testid="violated">
                for (index, set) in sets.iter().take(SHOWN).enumerate() {
                    <li key={index}>
                        { format!("{} violated by {}: ", set.family, fixed(set.violation, 3)) }
                        <button type="button" class="link" onclick={press(index)}
                            aria-pressed={if shown == Some(index) { "true" } else { "false" }}
                        >{ set.subset.join(", ") }</button>
                        { add_row(props, set) }
                    </li>
                }
                if more > 0 { <li class="soft">{ format!("and {more} more") }</li> }
            </ul>
            if !sets.iter().any(|set| may_add(props.rival.as_deref(), set)) {
                <p class="small soft">{ "This rival has no such family on demand, so their rows cannot be added by hand." }</p>
            }
        </>
    }
}

/// The cycle that proves it, in words.
fn cycle(detail: &NodeDetail, unit: &str) -> Html {
    let Some(cycle) = &detail.cycle else { return Html::default() };
    let why = if detail.state == NodeState::Unbounded {
        "Whatever goes once more around it, improves the objective: there is no best.".to_owned()
    } else {
        format!("Added up around it, its rows say 0 ≤ {}.", short(cycle.total))
    };
    html! {
        <>
            <h3>{ "A cycle that proves it" }</h3>
            <p data-testid="cycle">{ cycle_words(cycle, unit) }</p>
            <p class="small soft">{ why }</p>
        </>
    }
}

/// "Add this row", where the set's family is on demand.
fn add_row(props: &DetailProps, set: &ViolatedSubset) -> Html {
    let act = props.act.as_ref().filter(|_| may_add(props.rival.as_deref(), set));
    let Some(act) = act else { return Html::default() };
    let row = cut(set);
    let onclick = act.reform(move |_: MouseEvent| row.clone());
    let label = format!("Add this row, {} of {}", set.family, set.subset.join(", "));
    html! {
        <>{ " " }<button type="button" class="add-row" {onclick} aria-label={label}>{ "Add this row" }</button></>
    }
}

fn ray(detail: &NodeDetail) -> Html {
    if detail.ray.is_empty() {
        return Html::default();
    }
    html! {
        <>
            <h3>{ "Rows that prove it infeasible" }</h3>
            <p class="small soft">{ "Added up with these multipliers they contradict the variables' bounds." }</p>
            <ul class="sets small" data-testid="ray">
                for (name, multiplier) in detail.ray.iter().take(SHOWN) {
                    <li>{ format!("{} × {name}", short(*multiplier)) }</li>
                }
                if detail.ray.len() > SHOWN {
                    <li class="soft">{ format!("and {} more", detail.ray.len() - SHOWN) }</li>
                }
            </ul>
        </>
    }
}
