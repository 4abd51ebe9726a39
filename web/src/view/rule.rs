//! The branching rule of all rivals: which variable a node is branched on.

use record::scenario::BranchingRule;
use web_sys::HtmlSelectElement;
use yew::prelude::*;

use crate::state::document::DocumentAction;
use crate::state::steer::Steer;
use crate::view::hands::Hands;

/// The rules that are offered, each with a word for people.
const RULES: [(BranchingRule, &str); 3] = [
    (BranchingRule::MostFractional, "most fractional"),
    (BranchingRule::Pseudocost, "pseudocost"),
    (BranchingRule::ByHand, "by hand"),
];

/// The choice; a rule that this version does not have stands as what is used in its place.
pub(crate) fn rule(rule: BranchingRule, hands: &Hands) -> Html {
    let used = if RULES.iter().any(|(known, _)| *known == rule) {
        rule
    } else {
        BranchingRule::Pseudocost
    };
    let document = hands.document.clone();
    let onchange = Callback::from(move |event: Event| {
        let select: HtmlSelectElement = event.target_unchecked_into();
        if let Some((rule, _)) = RULES.iter().find(|(_, words)| *words == select.value()) {
            document.dispatch(DocumentAction::Steer(Steer::Rule(*rule)));
        }
    });
    html! {
        <label class="family" title="Another rule searches every rival anew.">
            { "branching" }
            <select data-testid="rule" {onchange}>
                for (known, words) in RULES {
                    <option value={words} selected={known == used}>{ words }</option>
                }
            </select>
        </label>
    }
}
