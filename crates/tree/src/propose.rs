//! Candidates for solutions: the relaxation's own point, its rounding, and round trips.

use std::collections::BTreeSet;

use model::ColumnId;

use crate::course::Found;
use crate::event::{Event, NodeId};
use crate::relaxation::{Addition, RowOrigin, direction};
use crate::search::{Ending, Incumbent, Job, Progress, Purpose, Search};
use crate::solution::{Completed, Solution, Verdict};
use crate::target::signed;

/// How near to the cut-off the first solution may be; relative to 1 + its size.
const NEAR: f64 = 1e-9;

/// The longest pause between two roundings that are completed, as a power of two.
const LONGEST_PAUSE: u32 = 8;

/// Which roundings are tried: none twice in a row, and those that need an LP ever more rarely
/// while they fail (after k failures in a row the next 2ᵏ − 1 are left out).
#[derive(Debug, Default)]
pub(crate) struct Roundings {
    last: Vec<f64>,
    failures: u32,
    pause: u32,
}

impl Roundings {
    /// Whether this one differs from the last, which it then becomes.
    fn is_new(&mut self, rounded: &[f64]) -> bool {
        let new = self.last != rounded;
        if new {
            self.last.clear();
            self.last.extend_from_slice(rounded);
        }
        new
    }

    /// Whether one may be completed now.
    fn may_complete(&mut self) -> bool {
        let now = self.pause == 0;
        self.pause = self.pause.saturating_sub(1);
        now
    }

    /// Notes how a completion ended.
    fn note(&mut self, found: bool) {
        self.failures = if found { 0 } else { (self.failures + 1).min(LONGEST_PAUSE) };
        self.pause = (1 << self.failures) - 1;
    }
}

impl Search {
    /// The point in hand has no fraction: checks whether it is a solution.
    pub(crate) fn propose(&mut self) -> Option<Progress> {
        let x = &self.hand.as_ref()?.point.as_ref()?.x;
        match self.checker.check(self.rounds.separators(), x) {
            Verdict::Solution(solution) if solution.member && !solution.exact => {
                let rounded = self.checker.rounded(x);
                self.complete(&rounded, Purpose::Relaxation)
            }
            Verdict::Solution(solution) => self.take(solution, Purpose::Relaxation),
            Verdict::Violates(violated) => self.tighten(Addition {
                origin: RowOrigin::Member { family: violated.family, subset: violated.subset },
                row: violated.row,
            }),
            Verdict::Broken => {
                let rounded = self.checker.rounded(x);
                self.complete(&rounded, Purpose::Relaxation)
            }
        }
    }

    /// Rounds a fractional point to the nearest whole numbers and checks it if it promises
    /// anything.
    pub(crate) fn round(&mut self, x: &[f64]) -> Option<Progress> {
        let rounded = self.checker.rounded(x);
        if !self.settings.heuristics.rounding || !self.roundings.is_new(&rounded) {
            return self.proceed();
        }
        let best = self.target.best();
        let direction = direction(&self.model);
        let found = self.incumbent.is_some();
        let promising =
            self.checker.promising(&rounded, |value| wanted(direction * value, best, found));
        if !promising {
            return self.proceed();
        }
        if self.checker.has_continuous() {
            if self.roundings.may_complete() {
                return self.complete(&rounded, Purpose::Rounding);
            }
            return self.proceed();
        }
        match self.checker.check(self.rounds.separators(), &rounded) {
            Verdict::Solution(solution) => self.take(solution, Purpose::Rounding),
            Verdict::Violates(_) | Verdict::Broken => self.proceed(),
        }
    }

    /// The round-trip heuristic has ended: fixes the arcs and asks for the rest.
    pub(crate) fn toured(&mut self) {
        let Job::Tour(tour) = std::mem::replace(&mut self.job, Job::None) else { return };
        self.ledger.ticks += tour.ticks();
        let (Some(trip), Some(used)) = (&self.trip, tour.columns()) else { return };
        let used: BTreeSet<ColumnId> = used.into_iter().collect();
        let arcs = self.model.columns()[trip.arcs[0].2.index()].variable;
        let columns = self.model.variables()[arcs.index()].columns.clone().map(ColumnId);
        let value = |column: ColumnId| if used.contains(&column) { 1.0 } else { 0.0 };
        let fixes: Vec<(ColumnId, f64)> = columns.map(|column| (column, value(column))).collect();
        if fixes.len() < self.model.columns().len() {
            if self.checker.begin(&fixes) {
                self.job = Job::Complete(Purpose::Tour);
            }
            return;
        }
        let x: Vec<f64> = fixes.iter().map(|&(_, value)| value).collect();
        if let Verdict::Solution(solution) = self.checker.check(self.rounds.separators(), &x) {
            self.accept(solution, Purpose::Tour);
        }
    }

    /// Solves the continuous part with the whole columns fixed, where there is one.
    fn complete(&mut self, rounded: &[f64], purpose: Purpose) -> Option<Progress> {
        let whole = self.chooser.whole().iter();
        let fixes: Vec<(ColumnId, f64)> =
            whole.map(|&column| (column, rounded[column.index()])).collect();
        if self.checker.has_continuous() && self.checker.begin(&fixes) {
            self.job = Job::Complete(purpose);
            return None;
        }
        self.proceed()
    }

    /// The continuous part is solved, or there is no point.
    pub(crate) fn completed(
        &mut self,
        purpose: Purpose,
        point: Option<Completed>,
    ) -> Option<Progress> {
        self.job = Job::None;
        let separators = self.rounds.separators();
        let near = point.as_ref().map(Completed::near);
        let mut verdict = point.map(|x| self.checker.check_completed(separators, x));
        let own = self.hand.as_ref().and_then(|hand| hand.point.as_ref());
        if let (Purpose::Relaxation, Some(own)) = (purpose, own)
            && !matches!(verdict, Some(Verdict::Solution(_)))
        {
            verdict = Some(self.checker.check(separators, &own.x));
        }
        if purpose == Purpose::Rounding {
            self.roundings.note(matches!(verdict, Some(Verdict::Solution(_))));
        }
        match verdict {
            Some(Verdict::Solution(solution)) => {
                if let Purpose::Suggested(by) = purpose {
                    self.told_of(by, Some(model::nearest_f64(&solution.value)));
                }
                self.take(solution, purpose)
            }
            _ => match purpose {
                Purpose::Suggested(by) => {
                    if !self.rounds_suggestion(by, near.as_deref()) {
                        self.told_of(by, None);
                    }
                    None
                }
                _ => self.proceed(),
            },
        }
    }

    /// A solution was found: takes it if it is the best and goes on.
    fn take(&mut self, solution: Solution, purpose: Purpose) -> Option<Progress> {
        let value = self.accept(solution, purpose);
        if let (Purpose::Relaxation, Some(hand)) = (purpose, &mut self.hand) {
            hand.accepted = Some(value);
        }
        self.proceed()
    }

    /// After a candidate: the node in hand is decided, or the opening goes on.
    fn proceed(&mut self) -> Option<Progress> {
        self.job = Job::None;
        if self.hand.is_some() { self.decide() } else { None }
    }

    /// Takes a solution as the incumbent if it is the best, and closes the open nodes that
    /// cannot be better. Gives its internal value.
    pub(crate) fn accept(&mut self, solution: Solution, purpose: Purpose) -> f64 {
        let exact = signed(&self.model, solution.value.clone());
        let internal = model::nearest_f64(&exact);
        let better = match self.incumbent {
            Some(_) => self.target.improves(&exact),
            None => wanted(internal, self.target.best(), false),
        };
        if !better {
            return internal;
        }
        if self.breaks_a_cut(&solution) {
            let why = "internal error: a solution breaks a general cut";
            self.end(Ending::Stopped(why.to_owned()));
            return internal;
        }
        let value = self.user(internal);
        let node = self.hand.as_ref().map_or(NodeId::ROOT, |hand| hand.node);
        self.incumbent = Some(Incumbent { solution, node, value });
        let (nodes, work, origin) = (self.ledger.nodes, self.work().ticks, purpose.origin());
        self.ledger.course.found.push(Found { nodes, work, value, origin: origin.clone() });
        self.events.push(Event::Incumbent { node, value, origin });
        self.target.improve(exact);
        self.paused |= std::mem::take(&mut self.to_a_plan);
        self.drop_closed();
        internal
    }
}

/// Whether a solution of this internal value would be taken: one better than the incumbent
/// (`found`), or the first one that is not worse than the cut-off.
fn wanted(value: f64, best: Option<f64>, found: bool) -> bool {
    best.is_none_or(
        |best| if found { value < best } else { value <= best + NEAR * (1.0 + best.abs()) },
    )
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn failures_make_the_pauses_longer_and_a_find_ends_them() {
        let mut roundings = Roundings::default();
        let mut tried = Vec::new();
        for node in 0..40 {
            if roundings.may_complete() {
                tried.push(node);
                roundings.note(false);
            }
        }
        assert_eq!(tried, vec![0, 2, 6, 14, 30]);
        roundings.note(true);
        assert!(roundings.may_complete() && roundings.may_complete());
        assert!(roundings.is_new(&[1.0]) && !roundings.is_new(&[1.0]) && roundings.is_new(&[2.0]));
    }

    #[test]
    fn the_first_solution_may_equal_the_cutoff_and_later_ones_must_be_better() {
        assert!(wanted(9.0, None, false));
        assert!(wanted(9.0, Some(9.0), false) && !wanted(9.1, Some(9.0), false));
        assert!(!wanted(9.0, Some(9.0), true) && wanted(8.9, Some(9.0), true));
    }
}
