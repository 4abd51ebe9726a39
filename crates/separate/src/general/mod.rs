//! General cuts: rows that hold for every whole point of a model though no family has them.
//!
//! Each is derived in exact arithmetic from rows and bounds that are exact, so it holds by its
//! derivation, whatever floating-point point and multipliers suggested it; the derivation goes with
//! the cut, and [`follows()`] checks it without the separator:
//!
//! * [`Class::Gomory`]: the rows of the simplex tableau that a fractional basic column gives,
//!   rounded by the mixed-integer rounding function (Gomory 1960);
//! * [`Class::Mir`]: single rows and sums of a few, complemented, divided and rounded (Marchand,
//!   Wolsey 2001);
//! * [`Class::Cover`]: covers of a knapsack row of binaries, lifted in sequence (Balas 1975; Padberg
//!   1975; Crowder, Johnson, Padberg 1983);
//! * [`Class::Clique`], [`Class::OddHole`]: of the conflict graph (Padberg 1973; Grötschel, Lovász,
//!   Schrijver 1988);
//! * [`Class::ZeroHalf`]: halves of whole rows (Caprara, Fischetti 1996);
//! * [`Class::FlowCover`]: rows with variable upper bounds (Padberg, Van Roy, Wolsey 1985);
//! * [`Class::LotSizing`]: (l,S) of a chain of stocks (Barany, Van Roy, Wolsey 1984);
//! * [`Class::Blossom`], [`Class::OddSet`]: of degree rows (Padberg, Rao 1982);
//! * [`Class::RoundTrip`]: D₃ and D₄ of directed round trips (Grötschel, Padberg 1985).

mod aggregate;
mod check;
mod class;
mod conflicts;
mod cover;
mod derivation;
mod flow_cover;
mod holes;
mod lots;
mod mir;
mod odd_cuts;
mod round;
mod shorten;
mod sketch;
#[cfg(test)]
mod tests;
mod trips;
mod zero_half;

pub use aggregate::{Aggregate, Frame};
pub use check::follows;
pub use class::{Class, Classes};
pub use conflicts::Conflicts;
pub use cover::cover;
pub use derivation::{Combination, Derivation, Literal, Used};
pub use flow_cover::{VariableBounds, flow_cover};
pub use lots::Lots;
pub use mir::{complemented, from_tableau};
pub use odd_cuts::OddCuts;
pub use round::{choose, cosine, fraction};
pub use trips::Trips;
pub use zero_half::ZeroHalf;

use model::Row;

/// A general cut that a point violates.
#[derive(Debug, Clone, PartialEq)]
pub struct GeneralCut {
    /// Its class.
    pub class: Class,
    /// The row, of the form `Σ a x ≤ b`.
    pub row: Row,
    /// How far the point is from it: the violation over the length of the row.
    pub efficacy: f64,
    /// How it follows.
    pub derivation: Derivation,
}

impl GeneralCut {
    /// How far another point is from it. `O(entries)`.
    #[must_use]
    pub fn efficacy_at(&self, x: &[f64]) -> f64 {
        mir::efficacy(&self.row, x)
    }

    /// What another point breaks it by; negative where it does not. `O(entries)`.
    #[must_use]
    pub fn violation_at(&self, x: &[f64]) -> f64 {
        let side = self.row.upper.as_ref().map_or(f64::INFINITY, model::nearest_f64);
        self.row.activity(x) - side
    }
}
