//! General cuts: rows that hold for every whole point of a model though no family has them.
//!
//! Each is derived in exact arithmetic from rows and bounds that are exact, so it holds by its
//! derivation, whatever floating-point point and multipliers suggested it:
//!
//! * [`Class::Gomory`]: the rows of the simplex tableau that a fractional basic column gives,
//!   rounded by the mixed-integer rounding function (Gomory 1960);
//! * [`Class::Mir`]: single rows and sums of a few, complemented, divided and rounded (Marchand,
//!   Wolsey 2001);
//! * [`Class::Cover`]: covers of a knapsack row of binaries, lifted in sequence (Balas 1975; Padberg
//!   1975; Crowder, Johnson, Padberg 1983).

mod aggregate;
mod cover;
mod mir;
mod round;
mod shorten;
#[cfg(test)]
mod tests;

pub use aggregate::{Aggregate, Frame};
pub use cover::cover;
pub use mir::{complemented, from_tableau};
pub use round::{choose, fraction};

use model::Row;

/// The class of a general cut.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Class {
    /// Gomory's mixed-integer cut.
    Gomory,
    /// A complemented mixed-integer rounding.
    Mir,
    /// A lifted cover.
    Cover,
}

/// A general cut that a point violates.
#[derive(Debug, Clone, PartialEq)]
pub struct GeneralCut {
    /// Its class.
    pub class: Class,
    /// The row, of the form `Σ a x ≤ b`.
    pub row: Row,
    /// How far the point is from it: the violation over the length of the row.
    pub efficacy: f64,
}
