//! A solve with presolve before and the way back after, for a relaxation that stands alone.

use crate::outcome::Outcome;
use crate::problem::Problem;
use crate::simplex::{Limits, Simplex, Stats};

use super::{Presolved, presolve};

/// A solved problem and what presolve made of it.
#[derive(Clone, Debug)]
pub struct PresolvedSolve {
    /// The solver of the problem as given, at its outcome. Its own work is what was left to do from
    /// the restored basis.
    pub simplex: Simplex,
    /// Rows of the reduced problem; all when presolve had nothing to solve.
    pub rows: u32,
    /// Columns of the reduced problem.
    pub columns: u32,
    /// Work on the reduced problem.
    pub reduced: Stats,
}

/// Solves a problem by way of a reduced one. The outcome is that of the problem as given at the
/// restored basis, checked like every other; where the reduced problem has no optimum the problem as
/// given is solved for its own certificate.
#[must_use]
pub fn solve_presolved(problem: &Problem) -> PresolvedSolve {
    let mut solve = PresolvedSolve {
        rows: problem.row_count(),
        columns: problem.column_count(),
        reduced: Stats::default(),
        simplex: Simplex::new(problem.clone()),
    };
    if let Presolved::Reduced { problem: reduced, postsolve } = presolve(problem) {
        (solve.rows, solve.columns) = (reduced.row_count(), reduced.column_count());
        let mut small = Simplex::new(reduced);
        if let Outcome::Optimal(solution) = small.solve(Limits::default()).clone() {
            let restored = postsolve.restore(&solution, &small.basis());
            solve.simplex.load_basis(&restored.basis());
        }
        solve.reduced = small.stats();
    }
    solve.simplex.solve(Limits::default());
    solve
}
