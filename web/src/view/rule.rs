//! The rules of all rivals: which variable a node is branched on, and which open node comes next.

use record::file::{BRANCHING, SELECTION};
use record::scenario::{Preset, Run};
use web_sys::{HtmlSelectElement, HtmlTextAreaElement};
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::steer::Steer;
use crate::view::hands::Hands;

/// The settings that go together.
const PRESETS: [(&str, Preset); 2] =
    [("bare", Preset::Bare), ("as a production solver would", Preset::Production)];

/// What a choice does.
const ANEW: &str = "Another rule searches every rival anew.";
/// What the bare settings are.
const BARE: &str = "Bare: no presolve, propagation or general cuts. Plans come from the relaxations, their \
    roundings and, for round trips, nearest neighbour with 2-opt: they close nodes and move no bound. \
    Another choice searches every rival anew.";

/// The choices of a run.
pub(crate) fn rules(run: &Run, hands: &Hands) -> Html {
    let own = PRESETS.iter().all(|(words, _)| *words != run.mode());
    let settings = if own { "settings, changed" } else { "settings" };
    html! {
        <>
            { choice((settings, "preset", BARE), &PRESETS, run.preset, Steer::Preset, hands) }
            { choice(("branching", "rule", ANEW), &BRANCHING, run.branching, Steer::Rule, hands) }
            { choice(("next node", "next", ANEW), &SELECTION, run.selection, Steer::Next, hands) }
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

/// One choice, with its name, the mark that tests find it by and what it does.
fn choice<T: Copy + PartialEq + 'static>(
    (name, mark, title): (&'static str, &'static str, &'static str),
    known: &'static [(&'static str, T)],
    used: T,
    steer: fn(T) -> Steer,
    hands: &Hands,
) -> Html {
    let document = hands.document.clone();
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        if let Some((_, rule)) = known.iter().find(|(words, _)| *words == select.value()) {
            document.dispatch(DocumentAction::Steer(steer(*rule)));
        }
    });
    html! {
        <label class="family" {title}>
            { name }
            <select data-testid={mark} {onchange}>
                for (words, rule) in known {
                    <option value={*words} selected={*rule == used}>{ *words }</option>
                }
            </select>
        </label>
    }
}
