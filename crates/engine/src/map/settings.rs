//! Rules and limits of a run.

use record::scenario::{BranchingRule, Run, Selection};

/// The search's settings; what this version does not have is replaced as
/// [`crate::left_out()`] says.
pub(crate) fn settings(run: &Run, seed: u64) -> tree::Settings {
    tree::Settings {
        branching: match run.branching {
            BranchingRule::MostFractional => tree::Branching::MostFractional,
            BranchingRule::ByHand => tree::Branching::ByHand,
            _ => tree::Branching::Pseudocost,
        },
        selection: match run.selection {
            Selection::DepthFirst => tree::Selection::DepthFirst,
            _ => tree::Selection::BestBound,
        },
        cutoff: run.best_known,
        node_limit: (run.nodes > 0).then_some(run.nodes),
        iteration_limit: (run.iterations > 0).then_some(run.iterations),
        search: run.search,
        seed,
    }
}
