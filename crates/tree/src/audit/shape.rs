//! Whether the branchings of a log leave out no whole value, and each leaf has a reason.

use model::Model;

use super::testimony::Claim;
use super::{Fault, is_whole, number};
use crate::event::{Branch, NodeId, NodeState, Side};

/// What is wrong with the shape of a tree. `O(nodes)`.
pub(super) fn faults(model: &Model, claims: &[Claim]) -> Vec<Fault> {
    if claims.is_empty() {
        let why = "is not in the log".to_owned();
        return vec![Fault { node: NodeId::ROOT, why }];
    }
    let mut children: Vec<Vec<NodeId>> = vec![Vec::new(); claims.len()];
    for (place, claim) in claims.iter().enumerate() {
        if let Some(parent) = claim.parent {
            children[parent.0 as usize - 1].push(number(place));
        }
    }
    let mut faults = Vec::new();
    for (place, made) in children.iter().enumerate() {
        let state = claims[place].state;
        let why = match made.as_slice() {
            [] if state == NodeState::Branched => {
                Some("is branched on and nothing was made of it".to_owned())
            }
            [] => None,
            [one, other] => split(model, claims, *one, *other),
            [only] => {
                Some(format!("has node {} alone below it: its other side is missing", only.0))
            }
            more => Some(format!("has {} nodes below it", more.len())),
        };
        let contradicts = !made.is_empty() && ends(state);
        let why = why.or_else(|| contradicts.then(|| "is closed and branched on".to_owned()));
        faults.extend(why.map(|why| Fault { node: number(place), why }));
    }
    faults
}

fn ends(state: NodeState) -> bool {
    matches!(state, NodeState::Pruned | NodeState::Integer | NodeState::Infeasible)
}

/// What two nodes of one branching leave out.
fn split(model: &Model, claims: &[Claim], one: NodeId, other: NodeId) -> Option<String> {
    let of = |node: NodeId| claims[node.0 as usize - 1].branching;
    let covers = of(one).zip(of(other)).is_some_and(|(a, b)| covers(model, a, b));
    (!covers).then(|| {
        format!("is branched on so that nodes {} and {} leave something out", one.0, other.0)
    })
}

/// Whether two branchings take every value of a whole column.
fn covers(model: &Model, a: Branch, b: Branch) -> bool {
    let (down, up) = if a.side == Side::AtMost { (a, b) } else { (b, a) };
    let whole = model.columns().get(a.column.index()).is_some_and(|column| column.integer);
    whole
        && a.column == b.column
        && (down.side, up.side) == (Side::AtMost, Side::AtLeast)
        && is_whole(down.bound)
        && up.bound == down.bound + 1.0
}
