//! Presolve in slices: one reduction over the whole problem a step.
//!
//! A step takes time in proportion to the nonzeros (the search for multiples sorts them as well), so
//! a caller who has to hear "stop" is never kept waiting for longer than one reduction takes. Where a
//! slice ends changes nothing.

use crate::problem::Problem;
use crate::simplex::Progress;

use super::work::{Halt, Work};
use super::{
    Presolved, dominated, doubleton, duplicate_columns, duplicate_rows, fixed, forcing,
    implied_free, postsolve, proof, redundant, singleton_row, slack,
};

/// Most rounds of all reductions.
const ROUNDS: u32 = 12;

type Reduction = fn(&mut Work) -> Result<(), Halt>;

/// The reductions of every round.
const EACH_ROUND: [Reduction; 8] = [
    singleton_row::reduce,
    forcing::reduce,
    redundant::reduce,
    fixed::reduce,
    implied_free::reduce,
    slack::reduce,
    doubleton::reduce,
    dominated::reduce,
];

/// Those of a round in which the others found nothing.
const AFTERWARDS: [Reduction; 2] = [duplicate_rows::reduce, duplicate_columns::reduce];

/// Presolve of a problem, step by step.
#[derive(Clone, Debug)]
pub struct Presolver {
    given: Problem,
    work: Work,
    round: u32,
    /// The next reduction of the round.
    next: usize,
    /// Reductions made before the round.
    before: usize,
    ended: Option<Result<(), Halt>>,
}

impl Presolver {
    /// Nothing done yet. Work: the nonzeros.
    #[must_use]
    pub fn new(problem: Problem) -> Self {
        let work = Work::new(&problem);
        let ended = work.refuse_crossed_ranges().err().map(Err);
        Self { given: problem, work, round: 0, next: 0, before: 0, ended }
    }

    /// Takes whole steps until `ticks` nonzeros were touched; at least one.
    pub fn advance(&mut self, ticks: u64) -> Progress {
        let cost = self.given.rows.iter().map(|row| row.entries.len() as u64 + 1).sum::<u64>() + 1;
        let mut left = ticks;
        while self.ended.is_none() {
            self.step();
            if left <= cost {
                break;
            }
            left -= cost;
        }
        if self.ended.is_some() { Progress::Finished } else { Progress::Working }
    }

    /// The result; steps that are left are taken first.
    #[must_use]
    pub fn finish(mut self) -> Presolved {
        while self.advance(u64::MAX) == Progress::Working {}
        match self.ended {
            Some(Err(Halt::NoOptimum)) => Presolved::NoOptimum,
            Some(Err(Halt::Infeasible(row))) => Presolved::Infeasible(proof(&self.given, row)),
            _ => {
                let (problem, postsolve) = postsolve::finish(self.work);
                Presolved::Reduced { problem, postsolve: Box::new(postsolve) }
            }
        }
    }

    fn step(&mut self) {
        let found_nothing = self.work.step_count() == self.before;
        let rest =
            if found_nothing || self.next > EACH_ROUND.len() { &AFTERWARDS[..] } else { &[] };
        let reduction = EACH_ROUND.iter().chain(rest).nth(self.next).copied();
        self.next += 1;
        if let Some(reduction) = reduction {
            self.ended = reduction(&mut self.work).err().map(Err);
            return;
        }
        self.round += 1;
        if found_nothing || self.round == ROUNDS {
            self.ended = Some(redundant::reduce(&mut self.work));
        }
        (self.next, self.before) = (0, self.work.step_count());
    }
}
