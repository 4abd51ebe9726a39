//! What a search suffered from, from its measures, with the figures that each finding rests on.
//! The thresholds are ours.

use model::LabelId;

use crate::measures::Measures;
use crate::search::Search;
use crate::summary::Summary;
use crate::symmetry::copies;

/// The least share of the best value that the root's bound is away for it to be weak.
const WEAK: f64 = 0.05;
/// The share of all nodes after which an incumbent is late.
const LATE: f64 = 0.5;
/// The share of all nodes without a rise that is a plateau.
const PLATEAU: f64 = 0.4;
/// How many times the mean gain of one side is the other's in an unbalanced branching.
const UNBALANCED: f64 = 10.0;
/// The share of leaves without a point that is many.
const MANY: f64 = 0.5;
/// The share of leaves that are not proved that is a matter of numerics.
const UNPROVED: f64 = 0.05;
/// Nodes of which fewer tell nothing.
const FEW: u32 = 30;

/// One finding.
#[derive(Debug, Clone, PartialEq)]
pub enum Diagnosis {
    /// The root's bound is far from the best value.
    WeakRoot {
        /// The root's bound.
        root: f64,
        /// The best value.
        best: f64,
        /// The distance over the size of the best value.
        gap: f64,
    },
    /// The best plan was found late.
    IncumbentLate {
        /// Nodes solved before it.
        after: u32,
        /// Nodes solved in all.
        nodes: u32,
    },
    /// The bound stood still for long.
    Plateau {
        /// Nodes in a row without a rise.
        stretch: u32,
        /// Nodes solved in all.
        nodes: u32,
        /// Branchings that raised the bound on neither side.
        idle: u32,
        /// Branchings of which both sides are solved.
        branchings: u32,
    },
    /// One side of a branching changes much and the other nothing.
    Unbalanced {
        /// The mean gain of `column ≤ v`.
        down: f64,
        /// The mean gain of `column ≥ v + 1`.
        up: f64,
        /// The nodes that they are means over.
        nodes: u32,
    },
    /// Labels that the model does not tell apart.
    Copies {
        /// The labels.
        labels: Vec<LabelId>,
        /// Branchings that raised the bound on neither side.
        idle: u32,
        /// Branchings of which both sides are solved.
        branchings: u32,
    },
    /// Many leaves have no point.
    Infeasible {
        /// Leaves without a point.
        empty: u32,
        /// All leaves.
        leaves: u32,
    },
    /// Floating-point arithmetic did not suffice.
    Numerics {
        /// Leaves that are not proved.
        unproved: u32,
        /// Nodes that could not be solved.
        unsolved: u32,
        /// All leaves.
        leaves: u32,
        /// Whether the best plan meets a row only within the tolerance.
        rounded: bool,
    },
}

impl Search {
    /// What the search suffered from, what weighs most first. `O(nodes)` and what looking for
    /// labels that are not told apart costs.
    #[must_use]
    pub fn diagnosis(&self, measures: &Measures) -> Vec<Diagnosis> {
        let summary = self.summary();
        let unsolved = u32::try_from(self.ledger.unsolved.len()).unwrap_or(u32::MAX);
        let rounded = self
            .incumbent
            .as_ref()
            .is_some_and(|best| best.solution.member && !best.solution.exact);
        let leaves = [summary.leaves_unchecked, unsolved, measures.leaves.all()];
        let found = [
            numerics(leaves, rounded),
            self.weak_root(&summary),
            self.copies(&summary, measures),
            late(&summary, measures),
            plateau(&summary, measures),
            unbalanced(&summary, measures),
            infeasible(&summary, measures),
        ];
        found.into_iter().flatten().collect()
    }

    fn weak_root(&self, summary: &Summary) -> Option<Diagnosis> {
        let best = summary.incumbent.or(self.settings.cutoff).filter(|best| *best != 0.0)?;
        let root = self.root.as_ref()?.bound?;
        let gap = (best - root).abs() / best.abs();
        (gap >= WEAK && summary.nodes > 1).then_some(Diagnosis::WeakRoot { root, best, gap })
    }

    fn copies(&self, summary: &Summary, measures: &Measures) -> Option<Diagnosis> {
        let (idle, branchings) = (measures.idle, measures.branchings);
        if summary.nodes < FEW || idle == 0 {
            return None;
        }
        let labels = copies(&self.model);
        (!labels.is_empty()).then_some(Diagnosis::Copies { labels, idle, branchings })
    }
}

fn numerics([unproved, unsolved, leaves]: [u32; 3], rounded: bool) -> Option<Diagnosis> {
    let many = unproved > 0 && share(unproved, leaves) >= UNPROVED;
    let told = unsolved > 0 || many || rounded;
    told.then_some(Diagnosis::Numerics { unproved, unsolved, leaves, rounded })
}

fn late(summary: &Summary, measures: &Measures) -> Option<Diagnosis> {
    let last = measures.found.last()?;
    let late = summary.nodes >= FEW && share(last.nodes, summary.nodes) >= LATE;
    late.then_some(Diagnosis::IncumbentLate { after: last.nodes, nodes: summary.nodes })
}

fn plateau(summary: &Summary, measures: &Measures) -> Option<Diagnosis> {
    let (stretch, nodes) = (measures.plateau, summary.nodes);
    let (idle, branchings) = (measures.idle, measures.branchings);
    let long = nodes >= FEW && share(stretch, nodes) >= PLATEAU;
    long.then_some(Diagnosis::Plateau { stretch, nodes, idle, branchings })
}

fn unbalanced(summary: &Summary, measures: &Measures) -> Option<Diagnosis> {
    let (down, up) = (measures.down.mean, measures.up.mean);
    let (less, more) = if down < up { (down, up) } else { (up, down) };
    let nodes = measures.down.count + measures.up.count;
    let size = summary.bound.map_or(1.0, |bound| if bound.abs() > 1.0 { bound.abs() } else { 1.0 });
    let uneven = nodes >= FEW && more > 1e-6 * size && more >= UNBALANCED * less;
    uneven.then_some(Diagnosis::Unbalanced { down, up, nodes })
}

fn infeasible(summary: &Summary, measures: &Measures) -> Option<Diagnosis> {
    let (empty, leaves) = (measures.leaves.infeasible, measures.leaves.all());
    let many = summary.nodes >= FEW && share(empty, leaves) >= MANY;
    many.then_some(Diagnosis::Infeasible { empty, leaves })
}

fn share(part: u32, all: u32) -> f64 {
    if all == 0 { 0.0 } else { f64::from(part) / f64::from(all) }
}

#[cfg(test)]
mod tests {
    use super::*;

    // The exact proof of a leaf succeeds on every model that we have, so these are asked alone.
    #[test]
    fn leaves_without_a_proof_and_nodes_without_a_solution_are_numerics() {
        let told = |leaves| numerics(leaves, false);
        assert!(matches!(told([5, 0, 100]), Some(Diagnosis::Numerics { unproved: 5, .. })));
        assert!(matches!(told([0, 1, 100]), Some(Diagnosis::Numerics { unsolved: 1, .. })));
        assert_eq!(told([1, 0, 100]), None);
        assert_eq!(told([0, 0, 0]), None);
        assert!(matches!(numerics([0, 0, 1], true), Some(Diagnosis::Numerics { .. })));
    }
}
