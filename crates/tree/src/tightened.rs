//! Bounds that node work tightened, by node: before its relaxation was solved (they hold in it) and
//! after that (they hold in its children). Each was checked in exact arithmetic.

use std::collections::BTreeMap;

use crate::event::{Branch, NodeId};

/// The tightened bounds of all nodes.
#[derive(Debug, Default)]
pub(crate) struct Tightened {
    before: BTreeMap<NodeId, Vec<Branch>>,
    after: BTreeMap<NodeId, Vec<Branch>>,
}

impl Tightened {
    /// What was tightened before a node was solved.
    pub(crate) fn before(&self, node: NodeId) -> &[Branch] {
        self.before.get(&node).map_or(&[], Vec::as_slice)
    }

    /// What was tightened after that.
    pub(crate) fn after(&self, node: NodeId) -> &[Branch] {
        self.after.get(&node).map_or(&[], Vec::as_slice)
    }

    /// Notes what was tightened before a node was solved.
    pub(crate) fn set_before(&mut self, node: NodeId, bounds: Vec<Branch>) {
        if !bounds.is_empty() {
            self.before.insert(node, bounds);
        }
    }

    /// Notes what was tightened after that.
    pub(crate) fn set_after(&mut self, node: NodeId, bounds: Vec<Branch>) {
        if !bounds.is_empty() {
            self.after.insert(node, bounds);
        }
    }
}
