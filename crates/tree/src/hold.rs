//! Branching by hand as a rule: a node that is solved and must be branched on is held, open, until
//! a person says on which column. The search goes on with the nodes that are not solved yet and
//! stands still when only held ones are left.
//!
//! A held node counts as solved, so an act that branches on it comes between two nodes like any
//! other and is replayed to the same events.

use std::collections::BTreeMap;

use model::ColumnId;

use crate::acts::Refusal;
use crate::branching::{Choice, split};
use crate::event::{NodeId, NodeState};
use crate::search::Search;
use crate::settings::Branching;

/// A node that waits for its column.
#[derive(Debug)]
pub(crate) struct Held {
    /// Its relaxation's point.
    x: Vec<f64>,
    /// The bound that its children inherit.
    bound: f64,
}

impl Held {
    /// Its relaxation's point.
    pub(crate) fn x(&self) -> &[f64] {
        &self.x
    }
}

/// The nodes that wait.
#[derive(Debug, Default)]
pub(crate) struct Holding {
    nodes: BTreeMap<NodeId, Held>,
}

impl Holding {
    /// Whether a node waits for its column.
    pub(crate) fn holds(&self, node: NodeId) -> bool {
        self.nodes.contains_key(&node)
    }

    /// Takes all out, in rising order of their numbers.
    pub(crate) fn take_all(&mut self) -> Vec<(NodeId, Held)> {
        std::mem::take(&mut self.nodes).into_iter().collect()
    }

    /// Lets a node wait again.
    pub(crate) fn put_back(&mut self, node: NodeId, held: Held) {
        self.nodes.insert(node, held);
    }
}

impl Search {
    /// Whether the search stands still because every open node waits for a person's branching.
    #[must_use]
    pub fn waits_for_a_branching(&self) -> bool {
        let mut open = self.open.iter().peekable();
        open.peek().is_some() && open.all(|node| self.holding.holds(node))
    }

    /// Whether a node that must be branched on is to be held.
    pub(crate) fn is_to_be_held(&self, node: NodeId) -> bool {
        self.settings.branching == Branching::ByHand && self.acts.column(node).is_none()
    }

    /// Holds a node that is solved; it is open again, with its own bound.
    pub(crate) fn hold(&mut self, node: NodeId, bound: f64, x: Vec<f64>) {
        self.holding.nodes.insert(node, Held { x, bound });
        self.open.insert(node, self.tree.node(node).bound);
    }

    /// Branches on a node that is held; `false` when it is not.
    pub(crate) fn release(&mut self, node: NodeId, column: ColumnId) -> Result<bool, Refusal> {
        let Some(held) = self.holding.nodes.get(&node) else { return Ok(false) };
        let bounds = self.bounds_at(node, column);
        let choice = split(column, held.x[column.index()], bounds).ok_or(Refusal::Fixed(node))?;
        let Some(held) = self.holding.nodes.remove(&node) else { return Ok(false) };
        self.branch_held(node, &held, &choice);
        Ok(true)
    }

    /// Branches on a node that waited.
    pub(crate) fn branch_held(&mut self, node: NodeId, held: &Held, choice: &Choice) {
        self.open.remove(node, self.tree.node(node).bound);
        self.tree.node_mut(node).state = NodeState::Branched;
        self.branch(node, held.bound, choice, &held.x);
        self.announce();
    }
}
