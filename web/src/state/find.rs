//! Finding nodes of a tree by number, column, depth or how they ended.

use record::event::NodeState;

use crate::state::tree::Tree;
use crate::state::words::node_state;

/// What is looked for.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Wanted {
    /// The node of a number.
    Number(u32),
    /// The nodes at a depth.
    Depth(u32),
    /// The nodes that stand so.
    State(NodeState),
    /// The nodes branched on a column whose name holds the text.
    Column(String),
}

const STATES: [NodeState; 8] = [
    NodeState::Open,
    NodeState::Branched,
    NodeState::Integer,
    NodeState::Infeasible,
    NodeState::Pruned,
    NodeState::Closed,
    NodeState::Unbounded,
    NodeState::Unsolved,
];

impl Wanted {
    /// Reads "17", "depth 5", "infeasible", or a part of a column's name; `None` for nothing.
    pub(crate) fn read(text: &str) -> Option<Self> {
        let text = text.trim();
        if text.is_empty() {
            return None;
        }
        let number = text.strip_prefix("node").unwrap_or(text).trim();
        if let Ok(number) = number.parse() {
            return Some(Self::Number(number));
        }
        let depth = text.strip_prefix("depth").and_then(|depth| depth.trim().parse().ok());
        if let Some(depth) = depth {
            return Some(Self::Depth(depth));
        }
        let lower = text.to_lowercase();
        let named = |state: &NodeState| lower.len() >= 4 && node_state(*state).starts_with(&lower);
        let state = STATES.into_iter().find(named);
        Some(state.map_or_else(|| Self::Column(text.to_owned()), Self::State))
    }

    /// The places of the nodes that match, in the order of their numbers. O(nodes).
    pub(crate) fn places(&self, tree: &Tree, columns: &[String]) -> Vec<usize> {
        let named: Vec<bool> = match self {
            Self::Column(text) => columns.iter().map(|name| name.contains(text)).collect(),
            _ => Vec::new(),
        };
        let nodes = tree.nodes().iter().enumerate();
        nodes
            .filter(|(place, node)| match self {
                Self::Number(number) => Tree::number(*place).0 == *number,
                Self::Depth(depth) => node.depth == *depth,
                Self::State(state) => node.state == *state,
                Self::Column(_) => {
                    let column = node.branching.as_ref().map(|by| by.column as usize);
                    column.and_then(|column| named.get(column)).is_some_and(|&named| named)
                }
            })
            .map(|(place, _)| place)
            .collect()
    }
}

/// The match that comes after a node, the first one again after the last.
pub(crate) fn next(places: &[usize], after: Option<usize>) -> Option<usize> {
    let at = after.map_or(0, |after| places.partition_point(|&place| place <= after));
    places.get(at).or(places.first()).copied()
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::small;

    fn found(text: &str) -> Vec<usize> {
        let names = ["x[Ash,Birch]".to_owned()];
        Wanted::read(text).map_or_else(Vec::new, |wanted| wanted.places(&small(), &names))
    }

    #[test]
    fn nodes_are_found_by_number_depth_state_and_column() {
        assert_eq!(found("2"), [1]);
        assert_eq!(found(" node 3 "), [2]);
        assert_eq!(found("depth 1"), [1, 2]);
        assert_eq!(found("infeas"), [1]);
        assert_eq!(found("Open"), [2]);
        assert_eq!(found("Ash,"), [1, 2]);
        assert!(found("Cedar").is_empty() && found("99").is_empty() && found("  ").is_empty());
    }

    #[test]
    fn the_next_match_comes_round() {
        assert_eq!(next(&[1, 4, 9], None), Some(1));
        assert_eq!(next(&[1, 4, 9], Some(4)), Some(9));
        assert_eq!(next(&[1, 4, 9], Some(9)), Some(1));
        assert_eq!(next(&[], Some(9)), None);
    }
}
