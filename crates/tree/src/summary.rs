//! What a search gave, so far or at its end.

use crate::root::Status;
use crate::search::{Ending, Search, State};

/// What node work did.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct NodeWorkCounts {
    /// Nodes that propagation over rows closed without solving them.
    pub closed: u32,
    /// Bounds that it tightened.
    pub tightened: u64,
    /// Bounds that reduced costs tightened.
    pub fixed: u64,
    /// Leaves that only the step of the objective closed: without it their bound would have left
    /// them open.
    pub stepped: u32,
    /// Nodes closed after general cuts were added for them; the root among them.
    pub cut_off: u32,
}

/// What a search gave. Bounds and values are in the direction of the objective.
#[derive(Debug, Clone, PartialEq)]
pub struct Summary {
    /// How it stands. `Optimal` says that no solution is better than `bound`, which is the
    /// incumbent's value or, where there is none, the cut-off that was given.
    pub status: Status,
    /// The bound of the whole tree.
    pub bound: Option<f64>,
    /// The value of the best solution found.
    pub incumbent: Option<f64>,
    /// |incumbent − bound| / |incumbent|; 0 when both are equal; `None` while one is missing or
    /// the incumbent is 0 and the bound is not.
    pub gap: Option<f64>,
    /// Nodes solved.
    pub nodes: u32,
    /// Nodes still open.
    pub open: u32,
    /// Simplex iterations.
    pub iterations: u64,
    /// Non-zeros touched: the same on every machine.
    pub work: u64,
    /// The best solution, one value a column; empty without one.
    pub solution: Vec<f64>,
    /// Whether the search is at its end and every leaf and the solution were checked in exact
    /// arithmetic.
    pub checked: bool,
    /// Leaves that were checked in exact arithmetic.
    pub leaves_checked: u32,
    /// Leaves that rest on floating-point arithmetic.
    pub leaves_unchecked: u32,
    /// What stopped it, when the status is a limit.
    pub stopped: Option<String>,
    /// What node work did.
    pub node_work: NodeWorkCounts,
}

impl Search {
    /// What the search gave so far. `O(columns)`.
    #[must_use]
    pub fn summary(&self) -> Summary {
        let (status, stopped) = self.standing();
        let bound = match status {
            Status::Infeasible | Status::Unbounded => None,
            _ => {
                self.global_bound().filter(|bound| bound.is_finite()).map(|bound| self.user(bound))
            }
        };
        let incumbent = self.incumbent.as_ref().map(|incumbent| incumbent.value);
        let exact = self.incumbent.as_ref().is_none_or(|incumbent| incumbent.solution.exact);
        let ended = matches!(status, Status::Optimal | Status::Infeasible);
        let work = self.work();
        Summary {
            status,
            bound,
            incumbent,
            gap: incumbent.zip(bound).and_then(|(incumbent, bound)| gap(incumbent, bound)),
            nodes: self.ledger.nodes,
            open: self.open.len() + self.put_aside() + u32::from(self.hand.is_some()),
            iterations: work.iterations,
            work: work.ticks,
            solution: self
                .incumbent
                .as_ref()
                .map_or_else(Vec::new, |incumbent| incumbent.solution.x.clone()),
            checked: ended && exact && self.ledger.leaves_unchecked == 0,
            leaves_checked: self.ledger.leaves_checked,
            leaves_unchecked: self.ledger.leaves_unchecked,
            stopped,
            node_work: self.ledger.node_work,
        }
    }

    /// How the search stands, and what stopped it.
    fn standing(&self) -> (Status, Option<String>) {
        let State::Finished(ending) = &self.state else { return (Status::Running, None) };
        match ending {
            Ending::Unbounded => (Status::Unbounded, None),
            Ending::NodeLimit => (Status::Limit, Some("node limit".to_owned())),
            Ending::IterationLimit => (Status::Limit, Some("iteration limit".to_owned())),
            Ending::Stopped(why) => (Status::Limit, Some(why.clone())),
            Ending::Complete => self.complete_standing(),
        }
    }

    fn complete_standing(&self) -> (Status, Option<String>) {
        let unsolved = self.ledger.unsolved.len();
        if unsolved > 0 {
            let nodes = if unsolved == 1 { "a node" } else { "nodes" };
            let why = format!(
                "{nodes} could not be solved ({unsolved}; the last: {})",
                self.ledger.trouble
            );
            return (Status::Limit, Some(why));
        }
        let closed = self.ledger.closed.len();
        if closed > 0 {
            let nodes = if closed == 1 { "a node" } else { "nodes" };
            return (Status::Limit, Some(format!("{nodes} closed by hand ({closed})")));
        }
        match &self.incumbent {
            Some(incumbent) if !incumbent.solution.member => {
                let why = "not proved: a family over subsets has no exact membership check";
                (Status::Limit, Some(why.to_owned()))
            }
            Some(_) => (Status::Optimal, None),
            None if self.ledger.pruned => (Status::Optimal, None),
            None => (Status::Infeasible, None),
        }
    }
}

fn gap(incumbent: f64, bound: f64) -> Option<f64> {
    let distance = (incumbent - bound).abs();
    if distance == 0.0 {
        return Some(0.0);
    }
    (incumbent != 0.0).then(|| distance / incumbent.abs())
}

#[cfg(test)]
mod tests {
    use super::gap;

    #[test]
    fn the_gap_is_relative_to_the_incumbent() {
        assert_eq!(gap(200.0, 150.0), Some(0.25));
        assert_eq!(gap(-200.0, -250.0), Some(0.25));
        assert_eq!(gap(0.0, 0.0), Some(0.0));
        assert_eq!(gap(0.0, 1.0), None);
    }
}
