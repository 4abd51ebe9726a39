//! Floating-point simplex: rows and columns in, basis, duals and rays out.
//!
//! ```text
//! min  cᵀx     L ≤ Ax ≤ U,   l ≤ x ≤ u      (any side infinite)
//! ```
//!
//! [`Simplex`] holds a [`Problem`] and a basis. The bounded dual simplex method with steepest edge
//! is the main method; the primal one cleans up, follows changed costs and finds unbounded rays.
//! Bounds, costs and rows may change between solves, and the basis is kept. A solve goes on in
//! slices ([`Simplex::advance`]) and ends with an [`Outcome`]: optimal, infeasible or unbounded,
//! each with its certificate, checked against the rows as given before it is released.
//!
//! Everything is deterministic: no clock, no randomness, ties by index, the same bits for every
//! slicing. The values of an optimum are computed from fresh factors of its basis in canonical
//! order, so they depend on rows, bounds and basis alone.
//!
//! ```
//! use hullward_lp::{Limits, Outcome, Problem, Simplex};
//!
//! let mut problem = Problem::new();
//! let x = problem.add_column(-1.0, 0.0, 3.0)?;
//! let y = problem.add_column(-2.0, 0.0, f64::INFINITY)?;
//! problem.add_row(&[(x, 1.0), (y, 1.0)], f64::NEG_INFINITY, 4.0)?;
//! let mut simplex = Simplex::new(problem);
//! let Outcome::Optimal(solution) = simplex.solve(Limits::default()) else { unreachable!() };
//! assert_eq!((solution.objective, &solution.x[..]), (-8.0, &[0.0, 4.0][..]));
//! # Ok::<(), hullward_lp::ProblemError>(())
//! ```

mod basis;
mod basis_change;
mod care;
mod change;
mod check;
mod checkpoint;
mod compute;
mod condition;
mod dual;
mod extended;
mod kept;
mod lu;
mod machine;
mod outcome;
mod presolve;
mod primal;
mod problem;
mod random;
mod refine;
mod scale;
mod simplex;
mod sparse;
mod state;
mod tableau;
mod tolerances;
mod verify;

pub use basis::{Basis, Repair};
pub use basis_change::BasisChange;
pub use checkpoint::Checkpoint;
pub use outcome::{Outcome, Ray, Solution, StopReason};
pub use presolve::{
    Postsolve, Presolved, PresolvedSolve, Presolver, Restored, presolve, solve_presolved,
};
pub use problem::{Col, NewRow, Problem, ProblemError, RowId};
pub use simplex::{Limits, Progress, Simplex, Stats};
pub use tableau::TableauRow;
