//! The tree of nodes: one small record a node, in the order of creation.
//!
//! A record is 64 bytes beside its final basis, which is kept as a difference to its parent's; at
//! every 16th depth it is kept whole, so that a basis is put together of few differences. Bounds
//! in the tree are internal: for a minimisation, offset included.

use lp::{Basis, BasisChange};
use model::ColumnId;

use crate::event::{Branch, NodeId, NodeState, Side};
use crate::tightened::Tightened;

/// At depths that are a multiple of it a basis is kept whole.
const WHOLE: u32 = 16;

/// How a final basis is kept.
#[derive(Debug)]
enum Kept {
    Whole(Basis),
    /// The difference to the parent's.
    Change(BasisChange),
}

/// One node.
#[derive(Debug)]
pub(crate) struct Node {
    /// The final basis of its relaxation, once solved.
    basis: Option<Box<Kept>>,
    /// Its own bound once it has one; before that the best its ancestors gave.
    pub(crate) bound: f64,
    /// A bound proved in exact arithmetic for it or an ancestor, rounded to the safe side.
    pub(crate) proved: f64,
    /// The new bound of the branching column.
    pub(crate) branch_bound: f64,
    /// How far the branching moved the column from its value at the parent.
    pub(crate) distance: f64,
    /// The branching column.
    pub(crate) column: ColumnId,
    /// The number of its parent; 0 for the root.
    pub(crate) parent: u32,
    /// How many rows its relaxation had when the basis was taken.
    pub(crate) rows: u32,
    /// Its depth; the root's is 0.
    pub(crate) depth: u32,
    /// How it stands.
    pub(crate) state: NodeState,
    /// Which side of the branching it is.
    pub(crate) side: Side,
}

impl Node {
    /// The branching that made it; `None` for the root.
    pub(crate) fn branch(&self) -> Option<Branch> {
        (self.parent != 0).then_some(Branch {
            column: self.column,
            side: self.side,
            bound: self.branch_bound,
        })
    }

    /// Whether its relaxation was solved, or found to have no point.
    pub(crate) fn is_solved(&self) -> bool {
        self.basis.is_some()
    }

    /// Its parent; `None` for the root.
    pub(crate) fn parent(&self) -> Option<NodeId> {
        (self.parent != 0).then_some(NodeId(self.parent))
    }
}

/// All nodes.
#[derive(Debug, Default)]
pub(crate) struct Tree {
    nodes: Vec<Node>,
    /// Bounds that node work tightened.
    pub(crate) tightened: Tightened,
}

impl Tree {
    /// A tree of the root alone.
    pub(crate) fn new() -> Self {
        let mut tree = Self::default();
        tree.nodes.push(Node {
            basis: None,
            bound: f64::NEG_INFINITY,
            proved: f64::NEG_INFINITY,
            branch_bound: 0.0,
            distance: 0.0,
            column: ColumnId(0),
            parent: 0,
            rows: 0,
            depth: 0,
            state: NodeState::Open,
            side: Side::AtMost,
        });
        tree
    }

    /// Makes a child of `parent` with the bound that it inherits.
    pub(crate) fn child(
        &mut self,
        parent: NodeId,
        branch: Branch,
        distance: f64,
        bound: f64,
    ) -> NodeId {
        let above = self.node(parent);
        let node = Node {
            basis: None,
            bound,
            proved: above.proved,
            branch_bound: branch.bound,
            distance,
            column: branch.column,
            parent: parent.0,
            rows: 0,
            depth: above.depth + 1,
            state: NodeState::Open,
            side: branch.side,
        };
        self.nodes.push(node);
        NodeId(u32::try_from(self.nodes.len()).unwrap_or(u32::MAX))
    }

    /// Keeps the final basis of a node. `O(variables)`.
    pub(crate) fn keep_basis(&mut self, id: NodeId, basis: Basis) {
        let record = self.node(id);
        let near = record.parent().filter(|_| !record.depth.is_multiple_of(WHOLE));
        let from = near.and_then(|parent| self.basis(parent));
        let kept = from.map(|from| Kept::Change(basis.change_from(&from)));
        self.node_mut(id).basis = Some(Box::new(kept.unwrap_or(Kept::Whole(basis))));
    }

    /// The final basis of a node, once it is solved. `O(variables)`.
    pub(crate) fn basis(&self, id: NodeId) -> Option<Basis> {
        let mut changes = Vec::new();
        let mut at = id;
        let mut basis = loop {
            let record = self.node(at);
            match record.basis.as_deref()? {
                Kept::Whole(basis) => break basis.clone(),
                Kept::Change(change) => changes.push(change),
            }
            at = record.parent()?;
        };
        for change in changes.into_iter().rev() {
            basis = basis.changed(change);
        }
        Some(basis)
    }

    /// Bytes of the bases that are kept, and how many they are.
    #[cfg(test)]
    pub(crate) fn basis_bytes(&self) -> (usize, usize) {
        let kept = self.nodes.iter().filter_map(|node| node.basis.as_deref());
        kept.fold((0, 0), |(bytes, count), kept| {
            let own = match kept {
                Kept::Whole(basis) => {
                    (basis.column_count() as usize + basis.row_count() as usize).div_ceil(4)
                }
                Kept::Change(change) => change.len(),
            };
            (bytes + size_of::<Kept>() + own, count + 1)
        })
    }

    /// The record of a node that exists.
    pub(crate) fn node(&self, id: NodeId) -> &Node {
        &self.nodes[id.0 as usize - 1]
    }

    /// The record of a node, to be changed.
    pub(crate) fn node_mut(&mut self, id: NodeId) -> &mut Node {
        &mut self.nodes[id.0 as usize - 1]
    }

    /// Whether there is such a node.
    pub(crate) fn has(&self, id: NodeId) -> bool {
        id.0 >= 1 && id.0 as usize <= self.nodes.len()
    }

    /// The numbers of all nodes in order.
    pub(crate) fn ids(&self) -> impl Iterator<Item = NodeId> + use<> {
        (1..=u32::try_from(self.nodes.len()).unwrap_or(u32::MAX)).map(NodeId)
    }

    /// Whether a node is `top` or comes from it. `O(depth)`.
    pub(crate) fn is_under(&self, id: NodeId, top: NodeId) -> bool {
        let mut at = Some(id);
        while let Some(here) = at.filter(|&here| here > top) {
            at = self.node(here).parent();
        }
        at == Some(top)
    }

    /// The branchings from the root to a node. `O(depth)`.
    pub(crate) fn branchings(&self, id: NodeId) -> Vec<Branch> {
        let mut path: Vec<Branch> =
            self.ancestry(id).filter_map(|here| self.node(here).branch()).collect();
        path.reverse();
        path
    }

    /// A node and those above it, the root last.
    fn ancestry(&self, id: NodeId) -> impl Iterator<Item = NodeId> {
        std::iter::successors(Some(id), |&here| self.node(here).parent())
    }

    /// The bounds of a node in the order in which they were set: branchings, and what was
    /// tightened at each node before it was solved (and, above the node, after that).
    /// `O(depth + tightened)`.
    pub(crate) fn path(&self, id: NodeId) -> Vec<Branch> {
        let mut path = Vec::with_capacity(self.node(id).depth as usize);
        for here in self.ancestry(id) {
            if here != id {
                path.extend(self.tightened.after(here).iter().rev());
            }
            path.extend(self.tightened.before(here).iter().rev());
            path.extend(self.node(here).branch());
        }
        path.reverse();
        path
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_record_is_small() {
        assert!(size_of::<Node>() <= 64, "{} bytes", size_of::<Node>());
    }

    #[test]
    fn the_path_runs_from_the_root() {
        let mut tree = Tree::new();
        let down = Branch { column: ColumnId(3), side: Side::AtMost, bound: 0.0 };
        let up = Branch { column: ColumnId(1), side: Side::AtLeast, bound: 2.0 };
        let child = tree.child(NodeId::ROOT, down, 0.5, 1.0);
        let grandchild = tree.child(child, up, 0.5, 2.0);
        assert_eq!(tree.path(grandchild), vec![down, up]);
        assert_eq!(tree.node(grandchild).depth, 2);
        assert!(tree.is_under(grandchild, child) && tree.is_under(child, child));
        assert!(!tree.is_under(child, grandchild) && tree.is_under(child, NodeId::ROOT));
        assert!(tree.path(NodeId::ROOT).is_empty());
        assert!(!tree.has(NodeId(0)) && !tree.has(NodeId(4)));
    }
}
