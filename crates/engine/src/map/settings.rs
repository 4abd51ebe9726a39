//! Rules and limits of a run.

use record::scenario::{BranchingRule, Run, Selection};

/// The search's settings; what this version does not have is replaced as
/// [`crate::left_out()`] says.
pub(crate) fn settings(run: &Run, seed: u64) -> tree::Settings {
    tree::Settings {
        branching: match run.branching {
            BranchingRule::MostFractional => tree::Branching::MostFractional,
            BranchingRule::Pseudocost => tree::Branching::Pseudocost,
            BranchingRule::Strong => tree::Branching::Strong,
            BranchingRule::Reliability => tree::Branching::Reliability,
            BranchingRule::ByHand => tree::Branching::ByHand,
        },
        selection: match run.selection {
            Selection::BestBound => tree::Selection::BestBound,
            Selection::DepthFirst => tree::Selection::DepthFirst,
            Selection::BestEstimate => tree::Selection::BestEstimate,
        },
        priority: run.priority.clone(),
        node_work: node_work(run),
        cuts: cuts(run),
        cutoff: run.best_known,
        node_limit: (run.nodes > 0).then_some(run.nodes),
        iteration_limit: (run.iterations > 0).then_some(run.iterations),
        search: run.search,
        seed,
    }
}

/// What is done at a node: the words of the scenario, or the default where it has none.
fn node_work(run: &Run) -> tree::NodeWork {
    let Some(words) = &run.node_work else { return tree::NodeWork::default() };
    let has = |wanted: &str| words.iter().any(|word| word == wanted);
    tree::NodeWork {
        propagation: has("propagation"),
        fixing: has("reduced costs"),
        lattice: has("objective step"),
    }
}

/// General cuts: those classes of the scenario that this version has.
fn cuts(run: &Run) -> tree::Cuts {
    let has = |wanted: &str| run.cuts.iter().flatten().any(|class| class == wanted);
    tree::Cuts { gomory: has("gomory"), mir: has("mir"), cover: has("cover") }
}
