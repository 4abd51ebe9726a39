//! A second opinion on the relaxation of a root: microlp, an LP code that shares nothing with
//! our kernel, solves it again from its rows and columns.
//!
//! ```
//! use record::opinion::{Opinion, Relaxation, RelaxationColumn, RelaxationRow};
//! use std::time::Duration;
//!
//! // max x + y, x + 2y ≤ 4, 3x + y ≤ 6, both at least 0: 2.8 at (1.6, 1.2)
//! let column = RelaxationColumn { cost: 1.0, lower: 0.0, upper: f64::INFINITY };
//! let row = |entries: [(u32, f64); 2], upper| RelaxationRow {
//!     lower: f64::NEG_INFINITY, upper, entries: entries.to_vec(),
//! };
//! let relaxation = Relaxation {
//!     maximise: true,
//!     offset: 0.0,
//!     columns: vec![column; 2],
//!     rows: vec![row([(0, 1.0), (1, 2.0)], 4.0), row([(0, 3.0), (1, 1.0)], 6.0)],
//! };
//! let said = hullward_opinion::ask(&relaxation, Duration::from_secs(10));
//! assert!(matches!(said, Opinion::Optimal(value) if (value - 2.8).abs() < 1e-9));
//! ```
//!
//! It is asked with the feasibility tolerance 1e-10, the smallest that it takes: an absolute
//! tolerance of 1e-7 times a large coefficient moves the optimum of a big-M model by percents.
//! What it says is never mixed with our own bound; `report::opinion` compares the two.
//!
//! The only limit that it knows is time, looked at every thousand pivots. So the value depends on
//! the machine in this one way: where the time ran out there is none.

use std::panic::{AssertUnwindSafe, catch_unwind};
use std::time::Duration;

use microlp::{ComparisonOp, Error, OptimizationDirection, Problem, SolveOptions, SolveOutcome};
use record::opinion::{Opinion, Relaxation, RelaxationRow, SECONDS};
use record::wire::{read_relaxation, write_opinion};

/// The feasibility tolerance: absolute, in the units of the rows.
const FEASIBILITY: f64 = 1e-10;

/// Solves a relaxation with at most about so much time.
#[must_use]
pub fn ask(relaxation: &Relaxation, limit: Duration) -> Opinion {
    let Some(problem) = problem(relaxation) else {
        return Opinion::Silent("the relaxation names a column that it does not have".to_owned());
    };
    let mut options = SolveOptions::default();
    options.tolerances.feasibility = FEASIBILITY;
    options.time_limit = Some(limit);
    // It promises not to panic; if it does, that must not take our own results along.
    let solved = catch_unwind(AssertUnwindSafe(|| problem.solve_with(options)));
    let Ok(solved) = solved else {
        return Opinion::Silent("the second LP code failed".to_owned());
    };
    match solved {
        Ok(SolveOutcome::Solution(solution)) => {
            Opinion::Optimal(solution.objective() + relaxation.offset + 0.0)
        }
        Ok(SolveOutcome::Interrupted(_)) => Opinion::too_late(limit.as_secs_f64()),
        Err(Error::Infeasible) => Opinion::Infeasible,
        Err(Error::Unbounded) => Opinion::Unbounded,
        Err(_) => Opinion::Silent("the second LP code could not solve it".to_owned()),
    }
}

/// Answers the bytes of a relaxation with those of an opinion, within [`SECONDS`].
#[must_use]
pub fn answer(relaxation: &[u8]) -> Vec<u8> {
    let opinion = match read_relaxation(relaxation) {
        Ok(relaxation) => ask(&relaxation, Duration::from_secs(SECONDS)),
        Err(error) => Opinion::Silent(error.to_string()),
    };
    write_opinion(&opinion).unwrap_or_default()
}

/// The relaxation as microlp takes it; `None` when a row names a column twice or one that is
/// not there.
fn problem(relaxation: &Relaxation) -> Option<Problem> {
    let mut problem = Problem::new(if relaxation.maximise {
        OptimizationDirection::Maximize
    } else {
        OptimizationDirection::Minimize
    });
    let columns: Vec<microlp::Variable> = relaxation
        .columns
        .iter()
        .map(|column| problem.add_var(column.cost, (column.lower, column.upper)))
        .collect();
    let mut last_row = vec![0; columns.len()];
    for (number, row) in (1..).zip(&relaxation.rows) {
        for &(column, _) in &row.entries {
            let last = last_row.get_mut(column as usize)?;
            if std::mem::replace(last, number) == number {
                return None;
            }
        }
        let entries =
            || row.entries.iter().map(|&(column, value)| (columns[column as usize], value));
        for (relation, side) in relations(row) {
            problem.add_constraint(entries(), relation, side);
        }
    }
    Some(problem)
}

/// A row as one or two one-sided relations; none where it has no side.
fn relations(row: &RelaxationRow) -> Vec<(ComparisonOp, f64)> {
    if row.lower.is_finite() && row.lower.to_bits() == row.upper.to_bits() {
        return vec![(ComparisonOp::Eq, row.lower)];
    }
    let below = (ComparisonOp::Ge, row.lower, f64::NEG_INFINITY);
    let above = (ComparisonOp::Le, row.upper, f64::INFINITY);
    let sides = [below, above].into_iter();
    let closed = sides.filter(|(_, side, open)| side.to_bits() != open.to_bits());
    closed.map(|(relation, side, _)| (relation, side)).collect()
}

#[cfg(test)]
mod tests;
