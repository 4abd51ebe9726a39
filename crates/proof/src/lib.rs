//! Exact check of bounds, rays and points.
//!
//! A floating-point kernel says what it believes; this crate says what follows from it.
//! For min c'x over L ≤ Ax ≤ U, l ≤ x ≤ u **any** multipliers y give, with d = c − A'y,
//!
//! ```text
//! c'x  ≥  Σ_i (y_i > 0 ? y_i L_i : y_i U_i)  +  Σ_j (d_j > 0 ? d_j l_j : d_j u_j)
//! ```
//!
//! so the multipliers may be rounded at will, as long as the sum itself is exact. They are
//! rounded twice, to a dyadic grid and to simple fractions, and the better sum is kept.
//! All sums are over integers: rows and costs are scaled once, when [`ExactRows`] is built.
//!
//! | item | use it for |
//! |---|---|
//! | [`ExactRows`] | the rows of a relaxation, kept over many nodes |
//! | [`bound()`] | a proved bound from the multipliers of a relaxation |
//! | [`infeasible`] | whether a ray proves that a relaxation has no point |
//! | [`Certifier`] | the exact optimum of a relaxation, or an exact ray, from its final basis |
//! | [`Point`], [`violations`] | a point against every written row and bound |
//!
//! A certifier solves the systems of the basis p-adically and asks its caller, who has a
//! floating-point kernel, for the solution of residual problems where the basis is slightly wrong.
//!
//! Sources: Neumaier, Shcherbina 2004 (safe bounds); Cook, Koch, Steffy, Wolter 2013 (mending
//! multipliers exactly); Dixon 1982 (p-adic lifting); Wang 1981 (fractions from residues);
//! Gleixner, Steffy, Wolter 2016 (iterative refinement); Farkas 1902.

mod basis;
mod bound;
mod certify;
mod implied;
mod kernel;
mod lifting;

mod mend;
mod multipliers;
mod point;
mod project;
mod ray;
mod refine;
mod rows;
mod small;
#[cfg(test)]
mod tests;
mod vertex;
mod words;

pub use basis::{Standing, Standings};
pub use bound::{bound, infeasible, quick_bound};
pub use certify::{Budget, Certifier, ExactMultipliers, Progress, Wish};
pub use multipliers::simple_fraction;
pub use point::{Place, Point, Violation, violations};
pub use refine::Residual;
pub use rows::{Bounds, ExactRows, bounds_of};
