//! Presolve: a smaller problem with the same optimum, and the way back with duals and basis.
//!
//! Reductions are made one after the other and put on a stack; the way back undoes them in reverse.
//! Each undo takes a basic solution that is optimal for the problem after its reduction to one that
//! is optimal for the problem before it: values, duals, reduced costs and statuses. So the restored
//! basis is optimal for the problem as given, up to rounding.
//!
//! A row's dual is not negative where the row is held from below and not positive where it is held
//! from above; reduced costs are d = c − Aᵀy with the same signs for bounds.
//!
//! | file | reduction |
//! |---|---|
//! | `redundant` | empty rows, rows that bounds imply |
//! | `forcing` | rows that hold only with every column at one bound |
//! | `singleton_row` | a row with one column becomes a bound |
//! | `fixed` | fixed and empty columns |
//! | `implied_free` | a column of one row whose bounds that row implies leaves with the row |
//! | `slack` | a column of one row that is a slack widens the row |
//! | `doubleton` | an equation with two columns leaves with one of them |
//! | `dominated` | columns whose reduced cost has one sign whatever the duals |
//! | `duplicate_rows` | rows that are multiples of one another |
//! | `duplicate_columns` | columns that are multiples of one another |
//! | `tighten` | bounds that follow from rows; used by the tests above, never kept in the problem |
//!
//! Off unless asked for: a comparison of formulations solves them as they are written.
//!
//! Source: Andersen, Andersen, Mathematical Programming 71 (1995) 221–245.

mod dominated;
mod doubleton;
mod duplicate_columns;
mod duplicate_rows;
mod fixed;
mod forcing;
mod implied_free;
mod parallel;
mod passes;
mod postsolve;
mod redundant;
mod singleton_row;
mod slack;
mod solve;
mod tighten;
mod work;

pub use passes::Presolver;
pub use postsolve::{Postsolve, Restored};
pub use solve::{PresolvedSolve, solve_presolved};

use crate::outcome::Ray;
use crate::problem::Problem;
use crate::verify::make_whole;
/// What presolve finds.
#[derive(Clone, Debug)]
pub enum Presolved {
    /// A problem with the same optimal value up to a constant, perhaps without rows and columns.
    Reduced {
        /// What is left.
        problem: Problem,
        /// The way back.
        postsolve: Box<Postsolve>,
    },
    /// No point satisfies the rows and bounds; with the proof where one row of the problem as given
    /// is enough for it.
    Infeasible(Option<Ray>),
    /// There is no optimum: no point, or an objective that falls without limit.
    NoOptimum,
}

/// Reduces a problem, to the end: [`Presolver`] does it in slices. Deterministic; each round takes
/// time in proportion to the nonzeros, but for sorting rows and columns in the search for multiples.
#[must_use]
pub fn presolve(problem: &Problem) -> Presolved {
    Presolver::new(problem.clone()).finish()
}

/// The proof that a row of the problem as given cannot hold within the bounds as given.
fn proof(problem: &Problem, row: Option<(u32, f64)>) -> Option<Ray> {
    let mut multipliers = vec![0.0; problem.rows.len()];
    let Some((row, sign)) = row else {
        let crossed = |lower: &[f64], upper: &[f64]| lower.iter().zip(upper).any(|(l, u)| l > u);
        let rows = problem.rows.iter().any(|row| row.lower > row.upper);
        let any = rows || crossed(&problem.lower, &problem.upper);
        return any.then_some(Ray { multipliers });
    };
    multipliers[row as usize] = sign;
    let given = &problem.rows[row as usize];
    let side = if sign > 0.0 { given.lower } else { given.upper };
    let (mut value, mut size) = (sign * side, side.abs());
    for &(j, a) in &given.entries {
        let g = -sign * a;
        let bound = if g > 0.0 { problem.lower[j as usize] } else { problem.upper[j as usize] };
        value += g * bound;
        size += (g * bound).abs();
    }
    make_whole(&mut multipliers);
    (value > work::FEASIBILITY * (1.0 + size) && value.is_finite()).then_some(Ray { multipliers })
}
