//! A solve with presolve before and the way back after, for a relaxation that stands alone.

use crate::outcome::Outcome;
use crate::problem::Problem;
use crate::simplex::{Limits, Progress, Simplex, Stats};

use super::postsolve::Postsolve;
use super::{Presolved, Presolver};

/// A problem that is solved by way of a reduced one, and what presolve made of it.
#[derive(Clone, Debug)]
pub struct PresolvedSolve {
    /// The solver of the problem as given, in the end at its outcome. Its own work is what was left
    /// to do from the restored basis.
    pub simplex: Simplex,
    /// Rows of the reduced problem; all when presolve had nothing to solve.
    pub rows: u32,
    /// Columns of the reduced problem.
    pub columns: u32,
    /// Work on the reduced problem.
    pub reduced: Stats,
    stage: Stage,
}

/// What is under way.
#[derive(Clone, Debug)]
enum Stage {
    Presolve(Box<Presolver>),
    Reduced(Box<Simplex>, Box<Postsolve>),
    Given,
}

impl PresolvedSolve {
    /// Begins; nothing is solved yet.
    #[must_use]
    pub fn new(problem: Problem) -> Self {
        Self {
            rows: problem.row_count(),
            columns: problem.column_count(),
            reduced: Stats::default(),
            simplex: Simplex::new(problem.clone()),
            stage: Stage::Presolve(Box::new(Presolver::new(problem))),
        }
    }

    /// Goes on until about `ticks` nonzeros were touched, or a stage ends. Where slices end changes
    /// no byte of the outcome.
    pub fn advance(&mut self, ticks: u64) -> Progress {
        match &mut self.stage {
            Stage::Presolve(presolver) => {
                if presolver.advance(ticks) == Progress::Finished
                    && let Stage::Presolve(presolver) =
                        std::mem::replace(&mut self.stage, Stage::Given)
                {
                    self.begin_reduced(presolver.finish());
                }
                Progress::Working
            }
            Stage::Reduced(small, postsolve) => {
                if small.advance(ticks) == Progress::Finished {
                    self.reduced = small.stats();
                    if let Some(Outcome::Optimal(solution)) = small.outcome() {
                        let restored = postsolve.restore(solution, &small.basis());
                        self.simplex.load_basis(&restored.basis());
                    }
                    self.begin_given();
                }
                Progress::Working
            }
            Stage::Given => self.simplex.advance(ticks),
        }
    }

    fn begin_reduced(&mut self, presolved: Presolved) {
        let Presolved::Reduced { problem, postsolve } = presolved else {
            self.begin_given();
            return;
        };
        (self.rows, self.columns) = (problem.row_count(), problem.column_count());
        let mut small = Simplex::new(problem);
        small.start(Limits::default());
        self.stage = Stage::Reduced(Box::new(small), postsolve);
    }

    fn begin_given(&mut self) {
        self.simplex.start(Limits::default());
        self.stage = Stage::Given;
    }
}

/// Solves a problem by way of a reduced one, to the end. The outcome is that of the problem as given
/// at the restored basis, checked like every other; where the reduced problem has no optimum the
/// problem as given is solved for its own certificate.
#[must_use]
pub fn solve_presolved(problem: &Problem) -> PresolvedSolve {
    let mut solve = PresolvedSolve::new(problem.clone());
    while solve.advance(u64::MAX) == Progress::Working {}
    solve
}
