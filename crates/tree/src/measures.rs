//! Measures of a search and an estimate of the size of its tree.
//!
//! Three estimates of how many nodes there will be: nodes solved over the weight of the leaves,
//! a leaf at depth d weighing 2⁻ᵈ (Knuth 1975, Mathematics of Computation 29); the leaves over
//! that weight, twice (Kilby, Slaney, Thiébaux, Walsh 2006); and nodes solved over the share of
//! the root's gap that is closed. They disagree by their nature (Hendel, Anderson, Le Bodic,
//! Pfetsch 2022), so what is given is the band from the least to the largest and the middle one.

use crate::course::Found;
use crate::event::{NodeId, NodeState, Side};
use crate::search::{Search, State};

/// What branchings to one side raised the bound by.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct Gains {
    /// The mean over nodes that have a bound.
    pub mean: f64,
    /// How many there are.
    pub count: u32,
}

/// Leaves by the reason for which they are closed.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Leaves {
    /// Solved, and no better than the best known value.
    pub pruned: u32,
    /// Closed without being solved, because an incumbent closed them.
    pub dropped: u32,
    /// Without a point.
    pub infeasible: u32,
    /// Their point is a solution.
    pub integer: u32,
    /// Closed by hand, or not solved.
    pub other: u32,
}

impl Leaves {
    /// All of them.
    #[must_use]
    pub fn all(&self) -> u32 {
        self.pruned + self.dropped + self.infeasible + self.integer + self.other
    }
}

/// The measures.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Measures {
    /// Nodes solved at each depth, the root's first.
    pub depths: Vec<u32>,
    /// Leaves by reason.
    pub leaves: Leaves,
    /// What `column ≤ v` raised the bound by.
    pub down: Gains,
    /// What `column ≥ v + 1` raised it by.
    pub up: Gains,
    /// The integral of the incumbent's relative distance to the best over work; `None` without an
    /// incumbent, or where it is 0.
    pub primal_integral: Option<f64>,
    /// The same of the bound.
    pub dual_integral: Option<f64>,
    /// The incumbents in order.
    pub found: Vec<Found>,
    /// The most nodes in a row without a rise of the bound.
    pub plateau: u32,
    /// Branchings both of whose sides left the bound where it was.
    pub idle: u32,
    /// Branchings of which both sides have a bound or none.
    pub branchings: u32,
}

/// How many nodes there will be in all.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Estimate {
    /// The least of the estimates.
    pub low: f64,
    /// The middle one.
    pub middle: f64,
    /// The largest.
    pub high: f64,
}

/// Gains of less count as none, relative to max(1, |bound|).
const NO_GAIN: f64 = 1e-9;

impl Search {
    /// The measures so far. `O(nodes)`.
    #[must_use]
    pub fn measures(&self) -> Measures {
        let mut measures =
            Measures { found: self.ledger.course.found.clone(), ..Measures::default() };
        for node in self.tree.ids() {
            self.measure(node, &mut measures);
        }
        let (work, nodes) = (self.work().ticks, self.ledger.nodes);
        measures.plateau = self.ledger.course.plateau(nodes);
        if let Some(best) = &self.incumbent {
            let internal = crate::relaxation::direction(&self.model) * best.value;
            measures.primal_integral = self.ledger.course.primal_integral(best.value, work);
            measures.dual_integral = self.ledger.course.dual_integral(internal, work);
        }
        measures
    }

    fn measure(&self, node: NodeId, measures: &mut Measures) {
        let record = self.tree.node(node);
        let depth = record.depth as usize;
        if record.is_solved() {
            if measures.depths.len() <= depth {
                measures.depths.resize(depth + 1, 0);
            }
            measures.depths[depth] += 1;
        }
        match record.state {
            NodeState::Pruned if record.is_solved() => measures.leaves.pruned += 1,
            NodeState::Pruned => measures.leaves.dropped += 1,
            NodeState::Infeasible => measures.leaves.infeasible += 1,
            NodeState::Integer => measures.leaves.integer += 1,
            NodeState::Closed | NodeState::Unsolved => measures.leaves.other += 1,
            NodeState::Open | NodeState::Branched | NodeState::Unbounded => {}
        }
        let Some(gain) = self.gain(node) else { return };
        let side = if record.side == Side::AtMost { &mut measures.down } else { &mut measures.up };
        side.count += 1;
        side.mean += (gain - side.mean) / f64::from(side.count);
        // The sides of a branching are made one after the other.
        let twin = (record.side == Side::AtLeast).then(|| NodeId(node.0 - 1));
        if let Some(other) = twin.and_then(|twin| self.gain(twin)) {
            let bound = record.bound.abs();
            let none = NO_GAIN * if bound > 1.0 { bound } else { 1.0 };
            measures.branchings += 1;
            measures.idle += u32::from(gain <= none && other <= none);
        }
    }

    /// By how much a node's own bound is over its parent's.
    fn gain(&self, node: NodeId) -> Option<f64> {
        let record = self.tree.node(node);
        let own = record.is_solved() && record.state != NodeState::Infeasible;
        let above = self.tree.node(record.parent()?).bound;
        own.then_some(if record.bound > above { record.bound - above } else { 0.0 })
    }

    /// How many nodes there will be in all, by three estimates; `None` before the first leaf, and
    /// at the end, when it is known.
    #[must_use]
    pub fn estimate(&self) -> Option<Estimate> {
        let over = matches!(self.state, State::Finished(_)) && self.open.len() == 0;
        let (weight, leaves) = self.weight();
        if over || weight <= 0.0 {
            return None;
        }
        let nodes = f64::from(self.ledger.nodes);
        let least = nodes + f64::from(self.open.len());
        let mut all = vec![nodes / weight, 2.0 * leaves / weight - 1.0];
        all.extend(self.gap_closed().filter(|share| *share > 0.0).map(|share| nodes / share));
        for one in &mut all {
            *one = if *one < least { least } else { *one };
        }
        all.sort_by(f64::total_cmp);
        let middle = all[all.len() / 2];
        Some(Estimate { low: all[0], middle, high: all[all.len() - 1] })
    }

    /// The weight of the leaves and how many there are.
    fn weight(&self) -> (f64, f64) {
        let mut by_depth: Vec<u32> = Vec::new();
        for record in self.tree.ids().map(|node| self.tree.node(node)) {
            if matches!(record.state, NodeState::Open | NodeState::Branched) {
                continue;
            }
            let depth = record.depth as usize;
            if by_depth.len() <= depth {
                by_depth.resize(depth + 1, 0);
            }
            by_depth[depth] += 1;
        }
        let (mut weight, mut leaves, mut each) = (0.0, 0.0, 1.0);
        for count in by_depth {
            weight += f64::from(count) * each;
            leaves += f64::from(count);
            each *= 0.5;
        }
        (weight, leaves)
    }

    /// The share of the root's gap to the best known value that is closed.
    fn gap_closed(&self) -> Option<f64> {
        let best = self.target.best()?;
        let now = self.global_bound()?;
        let root = self.root.as_ref()?.bound?;
        let root = crate::relaxation::direction(&self.model) * root;
        (best > root).then(|| (now - root) / (best - root))
    }
}
