//! What may be done by hand at a node, said without doing it.

use model::ColumnId;

use crate::acts::Refusal;
use crate::event::{Branch, NodeId, Side};
use crate::relaxation::float_bounds;
use crate::search::{Search, State};

impl Search {
    /// Why a node is not branched on by hand, whatever the column; `None` where it may be.
    #[must_use]
    pub fn branching_refused(&self, node: NodeId) -> Option<Refusal> {
        if matches!(self.state, State::Finished(_)) {
            return Some(Refusal::Ended);
        }
        if !self.tree.has(node) {
            return Some(Refusal::NoSuchNode(node));
        }
        let record = self.tree.node(node);
        let root = node == NodeId::ROOT && self.plan.is_some();
        let open = root || self.open.holds(node, record.bound);
        (!open).then_some(Refusal::NotOpen(node, record.state))
    }

    /// Why a column is not branched on at a node where branching is not refused. `O(depth)`.
    pub(crate) fn column_refused(&self, node: NodeId, column: ColumnId) -> Option<Refusal> {
        let whole = self.model.columns().get(column.index()).is_some_and(|column| column.integer);
        if !whole {
            return Some(Refusal::NotWhole);
        }
        let (lower, upper) = self.bounds_at(node, column);
        (lower >= upper).then_some(Refusal::Fixed(node))
    }

    /// Why a subtree is not closed by hand; `None` where it may be. `O(open nodes · depth)`.
    #[must_use]
    pub fn closing_refused(&self, top: NodeId) -> Option<Refusal> {
        if matches!(self.state, State::Finished(_)) {
            return Some(Refusal::Ended);
        }
        if !self.tree.has(top) {
            return Some(Refusal::NoSuchNode(top));
        }
        if top == NodeId::ROOT {
            return Some(Refusal::WholeTree);
        }
        let open = self.open.iter().any(|node| self.tree.is_under(node, top));
        (!open).then_some(Refusal::NothingOpen(top))
    }

    /// The columns that may be branched on by hand at a node, in order. `O(columns + depth)`.
    pub(crate) fn branchable(&self, node: NodeId) -> Vec<ColumnId> {
        if self.branching_refused(node).is_some() {
            return Vec::new();
        }
        let path = self.tree.path(node);
        let free = |column: ColumnId| {
            let (lower, upper) = narrowed(float_bounds(&self.model, column), &path, column);
            lower < upper
        };
        self.chooser.whole().iter().copied().filter(|&column| free(column)).collect()
    }

    /// The bounds of a column at a node. `O(depth)`.
    pub(crate) fn bounds_at(&self, node: NodeId, column: ColumnId) -> (f64, f64) {
        narrowed(float_bounds(&self.model, column), &self.tree.path(node), column)
    }
}

/// The bounds of a column after the branchings of a path.
fn narrowed(mut bounds: (f64, f64), path: &[Branch], column: ColumnId) -> (f64, f64) {
    for branch in path.iter().filter(|branch| branch.column == column) {
        match branch.side {
            Side::AtMost => bounds.1 = branch.bound,
            Side::AtLeast => bounds.0 = branch.bound,
        }
    }
    bounds
}
