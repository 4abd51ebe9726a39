//! Whether what a log says of a leaf agrees with itself: a leaf without a point has no bound, and the
//! bound of one that its relaxation closed closes it.

use super::testimony::Claim;
use super::{Tools, one_or_size};
use crate::event::NodeState;

/// How far a float that the search took for the best value may be from the exact one, relative to
/// max(1, |value|).
const NEAR: f64 = 1e-6;

/// What contradicts itself in a leaf's record; `bound` is its bound as an internal one.
pub(super) fn contradiction(claim: &Claim, tools: &Tools, bound: Option<f64>) -> Option<String> {
    let said = claim.bound.filter(|_| claim.children == 0)?;
    if !said.is_finite() {
        return Some(format!("is said to have the bound {said}, which is no number"));
    }
    let bound = bound.unwrap_or(said);
    let best = tools.target.best();
    let near = best.is_some_and(|best| bound >= best - NEAR * one_or_size(best));
    let why = match claim.state {
        _ if !claim.solved => return None,
        NodeState::Infeasible => "has no point",
        NodeState::Unsolved => "was not solved",
        NodeState::Integer if !near => "is a plan no better than the best",
        NodeState::Pruned if !near && !tools.target.closes(bound) => "is closed by its bound",
        _ => return None,
    };
    Some(format!("is said to have the bound {said}, which is not that of a leaf that {why}"))
}
