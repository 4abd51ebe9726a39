//! Steering from the inspector: what may be done by hand at the node that is shown, and why the
//! rest may not.

use record::message::{NodeDetail, RivalReport, ViolatedSubset};
use record::scenario::{Act, ActKind, FamilyState};
use yew::prelude::*;

use crate::state::board::Selection;
use crate::state::lane::{Lane, Phase};
use crate::state::words::sentence;
use crate::view::hands::Hands;

/// A callback that does acts by hand in a lane; `None` where its search has ended.
pub(crate) fn doing(hands: Option<&Hands>, at: Selection, lane: &Lane) -> Option<Callback<Act>> {
    let over = matches!(lane.phase, Phase::Done | Phase::Failed | Phase::Stopping);
    let session = hands.filter(|_| !over)?.session.clone();
    Some(Callback::from(move |act: Act| session.act(at.lane, act)))
}

/// The act that adds the row of a set.
pub(crate) fn cut(set: &ViolatedSubset) -> Act {
    let mut on = vec![set.family.clone()];
    on.extend(set.tuple.iter().chain(&set.subset).cloned());
    Act { after: 0, what: ActKind::Cut, node: None, on }
}

/// Whether a set's row may be added: its family is one of the rival's, on demand.
pub(crate) fn may_add(rival: Option<&RivalReport>, set: &ViolatedSubset) -> bool {
    rival.is_some_and(|rival| {
        let named = |family: &record::results::FamilyReport| family.name == set.family;
        let family = rival.families.iter().find(|family| named(family));
        family.is_some_and(|family| family.state == FamilyState::OnDemand)
    })
}

#[derive(Properties, PartialEq)]
pub(crate) struct SteeringProps {
    pub(crate) node: u32,
    /// Why it is not branched on, and not closed.
    pub(crate) branching: Option<String>,
    pub(crate) closing: Option<String>,
    /// Whether its relaxation has a point.
    pub(crate) pointed: bool,
    /// The column that it is to be branched on, as a person said.
    pub(crate) chosen: Option<String>,
    /// Does an act; `None` once the search has ended.
    pub(crate) act: Option<Callback<Act>>,
}

impl SteeringProps {
    /// For a node in full.
    pub(crate) fn of(
        detail: &NodeDetail,
        chosen: Option<String>,
        act: Option<Callback<Act>>,
    ) -> Self {
        let (branching, closing) = (detail.branching.clone(), detail.closing.clone());
        let pointed = !detail.values.is_empty();
        Self { node: detail.node.0, branching, closing, pointed, chosen, act }
    }
}

/// The part of the inspector.
#[component]
pub(crate) fn Steering(props: &SteeringProps) -> Html {
    let node = props.node;
    let close = props.act.as_ref().filter(|_| props.closing.is_none()).map(|act| {
        act.reform(move |_: MouseEvent| {
            let node = Some(node);
            Act { after: 0, what: ActKind::Close, node, on: Vec::new() }
        })
    });
    html! {
        <>
            <h3>{ "By hand" }</h3>
            <p class="small" data-testid="by-hand">{ hint(props) }</p>
            if let Some(onclick) = close {
                <button type="button" data-testid="close-subtree" {onclick}>{ "Close this subtree" }</button>
            }
        </>
    }
}

/// What may be done and why the rest may not.
fn hint(props: &SteeringProps) -> String {
    if props.act.is_none() {
        return "The search has ended: nothing can be done by hand any more.".to_owned();
    }
    let branch = match (&props.branching, &props.chosen) {
        (None, Some(column)) => {
            format!("It will be branched on {column}; another variable may still be chosen.")
        }
        (None, None) if !props.pointed => {
            "Its relaxation has no point: there is nothing to branch on.".to_owned()
        }
        (None, None) => "Branch on a variable of the table: the node comes next.".to_owned(),
        (Some(why), _) => format!("It cannot be branched on: {}", sentence(why)),
    };
    let close = match &props.closing {
        Some(why) if props.branching.as_ref() != Some(why) => {
            format!(" It cannot be closed: {}", sentence(why))
        }
        _ => String::new(),
    };
    branch + &close
}

#[cfg(test)]
mod tests {
    use super::*;

    fn props(branching: Option<&str>, closing: Option<&str>, able: bool) -> SteeringProps {
        SteeringProps {
            node: 3,
            branching: branching.map(str::to_owned),
            closing: closing.map(str::to_owned),
            pointed: true,
            chosen: None,
            act: able.then(Callback::noop),
        }
    }

    #[test]
    fn a_hint_says_what_cannot_be_done_and_why() {
        let said = hint(&props(Some("node 3 is not open: its bound closed it"), Some("no"), true));
        assert!(said.contains("its bound closed it.") && said.ends_with("cannot be closed: no."));
        assert!(hint(&props(None, Some("node 1 is the whole tree"), true)).contains("whole tree."));
        assert!(!hint(&props(None, None, true)).contains("cannot"));
        assert!(hint(&props(None, None, false)).contains("ended"));
        let empty = SteeringProps { pointed: false, ..props(None, None, true) };
        assert!(hint(&empty).contains("nothing to branch on"));
    }

    #[test]
    fn a_row_is_named_by_family_tuple_and_set() {
        let words = |words: &[&str]| words.iter().map(|&word| word.to_owned()).collect();
        let set = ViolatedSubset {
            family: "cover".to_owned(),
            tuple: words(&["p"]),
            subset: words(&["Ash", "Birch"]),
            violation: 0.5,
        };
        assert_eq!(cut(&set).on, ["cover", "p", "Ash", "Birch"]);
        assert!(!may_add(None, &set));
    }
}
