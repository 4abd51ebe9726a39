//! The open nodes, in the order of each selection rule.

use std::collections::{BTreeMap, BTreeSet};

use crate::event::NodeId;
use crate::settings::Selection;

/// Open nodes with their bounds. Every operation is `O(log n)`.
#[derive(Debug, Default)]
pub(crate) struct Open {
    by_bound: BTreeSet<(u64, NodeId)>,
    by_number: BTreeSet<NodeId>,
    by_estimate: BTreeSet<(u64, NodeId)>,
    /// The estimates, of nodes that have one.
    estimates: BTreeMap<NodeId, f64>,
    /// The children of the node that was branched on since a node was last taken.
    fresh: Vec<NodeId>,
}

impl Open {
    /// Adds a node with its bound.
    pub(crate) fn insert(&mut self, node: NodeId, bound: f64) {
        self.by_bound.insert((key(bound), node));
        self.by_number.insert(node);
    }

    /// Adds a child with its bound and the estimate of its best solution.
    pub(crate) fn insert_child(&mut self, node: NodeId, bound: f64, estimate: f64) {
        self.insert(node, bound);
        self.by_estimate.insert((key(estimate), node));
        self.estimates.insert(node, estimate);
        self.fresh.push(node);
    }

    /// Takes out the `free` node that `selection` wants next; `bound_of` gives a node's bound.
    /// Each node that is passed over costs `O(1)` more.
    pub(crate) fn take(
        &mut self,
        selection: Selection,
        free: impl Fn(NodeId) -> bool,
        bound_of: impl Fn(NodeId) -> f64,
    ) -> Option<NodeId> {
        let node = match selection {
            Selection::BestBound => self.by_bound.iter().find(|&&(_, node)| free(node))?.1,
            Selection::DepthFirst => *self.by_number.iter().rev().find(|&&node| free(node))?,
            Selection::BestEstimate => self.estimated(&free)?,
        };
        self.fresh.clear();
        self.remove(node, bound_of(node));
        Some(node)
    }

    /// The best fresh child, else the best of all; nodes without an estimate come last.
    fn estimated(&self, free: &impl Fn(NodeId) -> bool) -> Option<NodeId> {
        let fresh = self.fresh.iter().filter(|&&node| self.by_number.contains(&node) && free(node));
        let rank = |node: NodeId| (self.estimates.get(&node).map_or(u64::MAX, |&e| key(e)), node);
        let plunge = fresh.map(|&node| rank(node)).min().map(|(_, node)| node);
        let best = || self.by_estimate.iter().find(|&&(_, node)| free(node)).map(|(_, node)| *node);
        plunge.or_else(best).or_else(|| self.by_number.iter().copied().find(|&node| free(node)))
    }

    /// Takes out every node whose bound `closes`, which must hold for all bounds from some
    /// value on. In rising order of their numbers.
    pub(crate) fn drain(&mut self, closes: impl Fn(f64) -> bool) -> Vec<NodeId> {
        let mut gone = Vec::new();
        while let Some(&(last, node)) = self.by_bound.last() {
            if !closes(value(last)) {
                break;
            }
            self.remove(node, value(last));
            gone.push(node);
        }
        gone.sort();
        gone
    }

    /// Takes out a node; false when it is not open. `bound` is the one it was added with.
    pub(crate) fn remove(&mut self, node: NodeId, bound: f64) -> bool {
        self.by_number.remove(&node);
        if let Some(estimate) = self.estimates.remove(&node) {
            self.by_estimate.remove(&(key(estimate), node));
        }
        self.by_bound.remove(&(key(bound), node))
    }

    /// Whether a node, which was added with `bound`, is open.
    pub(crate) fn holds(&self, node: NodeId, bound: f64) -> bool {
        self.by_bound.contains(&(key(bound), node))
    }

    /// The open nodes in rising order of their numbers.
    pub(crate) fn iter(&self) -> impl Iterator<Item = NodeId> {
        self.by_number.iter().copied()
    }

    /// The smallest bound of an open node.
    pub(crate) fn least(&self) -> Option<f64> {
        self.by_bound.first().map(|&(first, _)| value(first))
    }

    /// How many nodes are open.
    pub(crate) fn len(&self) -> u32 {
        u32::try_from(self.by_bound.len()).unwrap_or(u32::MAX)
    }
}

/// A whole number that is in the order of the (not NaN) float.
fn key(bound: f64) -> u64 {
    let bits = (bound + 0.0).to_bits();
    if bits >> 63 == 1 { !bits } else { bits | (1 << 63) }
}

fn value(key: u64) -> f64 {
    f64::from_bits(if key >> 63 == 1 { key & !(1 << 63) } else { !key })
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn keys_keep_the_order_and_the_bits() {
        let values = [f64::NEG_INFINITY, -3.5, -1e-300, 0.0, 1e-300, 2.0, 1e300, f64::INFINITY];
        for pair in values.windows(2) {
            assert!(key(pair[0]) < key(pair[1]), "{pair:?}");
        }
        assert!(values.iter().all(|&v| value(key(v)).to_bits() == v.to_bits()));
        assert_eq!(key(-0.0), key(0.0));
    }

    #[test]
    fn each_rule_takes_its_own() {
        let bounds = [9.0, 7.0, 7.0, 8.0];
        let bound_of = |n: NodeId| bounds[n.0 as usize - 1];
        let fill = || {
            let mut open = Open::default();
            (1..=4).for_each(|n| open.insert(NodeId(n), bound_of(NodeId(n))));
            open
        };
        let order = |selection| {
            let mut open = fill();
            std::iter::from_fn(|| open.take(selection, |_| true, bound_of))
                .map(|n| n.0)
                .collect::<Vec<_>>()
        };
        assert_eq!(order(Selection::BestBound), vec![2, 3, 4, 1]);
        assert_eq!(order(Selection::DepthFirst), vec![4, 3, 2, 1]);
        let mut open = Open::default();
        for (n, estimate) in [(1, 12.0), (2, 9.5), (3, 9.0), (4, 11.0)] {
            open.insert_child(NodeId(n), bound_of(NodeId(n)), estimate);
        }
        let mut take = || open.take(Selection::BestEstimate, |_| true, bound_of).map(|n| n.0);
        let order = [take(), take(), take(), take(), take()];
        assert_eq!(order, [Some(3), Some(2), Some(4), Some(1), None]);
        let mut open = fill();
        assert_eq!(open.drain(|b| b >= 8.0), vec![NodeId(1), NodeId(4)]);
        assert_eq!((open.len(), open.least()), (2, Some(7.0)));
        assert!(open.holds(NodeId(2), 7.0) && open.remove(NodeId(2), 7.0));
        assert!(!open.holds(NodeId(2), 7.0) && !open.remove(NodeId(2), 7.0));
        assert_eq!(open.iter().collect::<Vec<_>>(), vec![NodeId(3)]);
    }

    proptest! {
        #[test]
        fn keys_compare_as_their_floats(a in any::<f64>(), b in any::<f64>()) {
            prop_assume!(!a.is_nan() && !b.is_nan());
            prop_assert_eq!(key(a).cmp(&key(b)), a.partial_cmp(&b).unwrap());
            prop_assert_eq!(value(key(a)), a);
        }
    }
}
