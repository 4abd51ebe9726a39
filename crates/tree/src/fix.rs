//! Node work: bounds tightened before a node is solved, by rows, and after that, by reduced costs
//! (Dantzig, Fulkerson, Johnson 1954; Crowder, Johnson, Padberg 1983).
//!
//! A column that stands at its lower bound with the reduced cost d > 0 cannot be raised by k in a
//! better solution when the node's bound and k·d together reach the best known value. Each such
//! step is proved before it is used: with the column raised by k the node's own multipliers prove
//! that nothing better is there.

use model::ColumnId;

use crate::event::{Branch, NodeId, NodeState, Side};
use crate::relaxation::Relaxation;
use crate::search::{Hand, PointInHand, Progress, Search};
use crate::target::signed;

/// Bounds that are tightened by reduced costs at one node at most, those of the largest first:
/// each costs a proof.
const MOST_FIXED: usize = 50;
/// Entries of rows that these proofs look at, at most: fewer bounds are tightened on large models.
const MOST_WORK: usize = 500_000;
/// How much of a step is forgiven before its proof.
const NEAR: f64 = 1e-9;

impl Search {
    /// Propagates over rows at a node that comes in hand; `Some` when that closed it.
    pub(crate) fn narrow(&mut self, node: NodeId) -> Option<Option<Progress>> {
        let parent = self.tree.node(node).parent()?;
        let (propagator, relaxation) = (self.propagator.as_ref()?, self.relaxation.as_ref()?);
        let mut bounds = relaxation.bounds_at(&self.tree.path(node));
        let changed = self.tree.node(node).branch().into_iter();
        let changed = changed.chain(self.tree.tightened.after(parent).iter().copied());
        let changed: Vec<ColumnId> = changed.map(|branch| branch.column).collect();
        let all = parent == NodeId::ROOT;
        let done = propagator.run(&self.model, &mut bounds, (!all).then_some(&changed));
        let iterations = relaxation.simplex.stats().iterations;
        self.ledger.ticks += done.work + bounds.len() as u64;
        self.ledger.node_work.tightened += done.tightened.len() as u64;
        if !done.infeasible {
            self.tree.tightened.set_before(node, done.tightened);
            return None;
        }
        self.ledger.node_work.closed += 1;
        self.tree.node_mut(node).state = NodeState::Infeasible;
        self.count(true);
        self.close_without_bound(&Hand::new(node, iterations), NodeState::Infeasible);
        self.announce();
        Some(None)
    }

    /// Tightens bounds by the reduced costs of a node that is solved, for its children.
    pub(crate) fn fix(&mut self, node: NodeId, point: &PointInHand) {
        let (Some(best), true) = (self.target.best(), self.settings.node_work.fixing) else {
            return;
        };
        let mut found = self.candidates_to_fix(point, best - point.bound);
        found.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.column.cmp(&b.0.column)));
        let entries = self.relaxation.as_ref().map_or(0, Relaxation::entries);
        let room = (MOST_WORK / entries.max(1)).clamp(1, MOST_FIXED);
        found.truncate(room);
        let tried = found.len();
        let mut path = self.tree.path(node);
        let mut fixed = Vec::new();
        for (bound, _) in found {
            let side = if bound.side == Side::AtMost { Side::AtLeast } else { Side::AtMost };
            let step = if bound.side == Side::AtMost { 1.0 } else { -1.0 };
            path.push(Branch { column: bound.column, side, bound: bound.bound + step });
            if self.leaves_nothing(&path, &point.duals) {
                fixed.push(bound);
            }
            path.pop();
        }
        self.ledger.ticks += (path.len() + tried * entries) as u64;
        self.ledger.node_work.fixed += fixed.len() as u64;
        self.ledger.pruned |= !fixed.is_empty();
        self.tree.tightened.set_after(node, fixed);
    }

    /// Bounds that reduced costs seem to allow, with the size of these.
    fn candidates_to_fix(&self, point: &PointInHand, slack: f64) -> Vec<(Branch, f64)> {
        let Some(relaxation) = &self.relaxation else { return Vec::new() };
        let mut found = Vec::new();
        for &column in self.chooser.whole() {
            let cost = point.reduced_costs[column.index()];
            let (lower, upper) = relaxation.simplex.bounds(lp::Col(column.0));
            if cost == 0.0 || lower >= upper {
                continue;
            }
            let steps = (slack / cost.abs() + NEAR).floor();
            let value = point.x[column.index()];
            let bound = if cost > 0.0 && value <= lower && lower + steps < upper {
                Branch { column, side: Side::AtMost, bound: lower + steps + 0.0 }
            } else if cost < 0.0 && value >= upper && upper - steps > lower {
                Branch { column, side: Side::AtLeast, bound: upper - steps + 0.0 }
            } else {
                continue;
            };
            found.push((bound, cost.abs()));
        }
        found
    }

    /// Whether multipliers prove that no better solution is within the bounds of a path.
    fn leaves_nothing(&self, path: &[Branch], duals: &[f64]) -> bool {
        let proved = self.relaxation.as_ref().and_then(|r| r.prove_at(path, duals));
        proved.is_some_and(|bound| self.target.proves(&signed(&self.model, bound)))
    }
}
