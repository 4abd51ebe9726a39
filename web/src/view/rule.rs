//! The rules of all rivals: which variable a node is branched on, and which open node comes next.

use record::scenario::{BranchingRule, Preset, Run, Selection};
use web_sys::{HtmlSelectElement, HtmlTextAreaElement};
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::steer::Steer;
use crate::view::hands::Hands;

/// The rules that are offered, each with a word for people.
const RULES: [(BranchingRule, &str); 5] = [
    (BranchingRule::MostFractional, "most fractional"),
    (BranchingRule::Pseudocost, "pseudocost"),
    (BranchingRule::Strong, "strong"),
    (BranchingRule::Reliability, "reliability"),
    (BranchingRule::ByHand, "by hand"),
];

/// The rules for the next node.
const NEXT: [(Selection, &str); 3] = [
    (Selection::BestBound, "best bound"),
    (Selection::DepthFirst, "depth first"),
    (Selection::BestEstimate, "best estimate"),
];

/// The settings that go together.
const PRESETS: [(Preset, &str); 2] =
    [(Preset::Bare, "bare"), (Preset::Production, "as a production solver would")];

/// The choices of a run.
pub(crate) fn rules(run: &Run, hands: &Hands) -> Html {
    let own = PRESETS.iter().all(|(_, words)| *words != run.mode());
    let settings = if own { "settings, changed" } else { "settings" };
    html! {
        <>
            { choice((settings, "preset"), &PRESETS, run.preset, Steer::Preset, hands) }
            { choice(("branching", "rule"), &RULES, run.branching, Steer::Rule, hands) }
            { choice(("next node", "next"), &NEXT, run.selection, Steer::Next, hands) }
        </>
    }
}

/// The plan that every search begins with.
pub(crate) fn plan(text: Option<&String>, hands: &Hands) -> Html {
    let document = hands.document.clone();
    let onchange = Callback::from(move |event: Event| {
        let area: HtmlTextAreaElement = event.target_unchecked_into();
        document.dispatch(DocumentAction::Steer(Steer::Plan(area.value())));
    });
    html! {
        <label class="family" title="A round trip, x[Ash, Birch] = 1 or Milk: Depot 2 a line. What it breaks is said in each lane.">
            { "a plan to begin with" }
            <textarea data-testid="plan" rows="1" spellcheck="false" value={text.cloned().unwrap_or_default()} {onchange} />
        </label>
    }
}

/// One choice, with its name and the mark that tests find it by.
fn choice<T: Copy + PartialEq + 'static>(
    (name, mark): (&'static str, &'static str),
    known: &'static [(T, &'static str)],
    used: T,
    steer: fn(T) -> Steer,
    hands: &Hands,
) -> Html {
    let document = hands.document.clone();
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        if let Some((rule, _)) = known.iter().find(|(_, words)| *words == select.value()) {
            document.dispatch(DocumentAction::Steer(steer(*rule)));
        }
    });
    html! {
        <label class="family" title="Another rule searches every rival anew.">
            { name }
            <select data-testid={mark} {onchange}>
                for (rule, words) in known {
                    <option value={*words} selected={*rule == used}>{ *words }</option>
                }
            </select>
        </label>
    }
}
