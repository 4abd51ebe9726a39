//! Bounds that a row implies for its columns, with the row they come from.
//!
//! For a_j > 0: x_j ≤ (U − min Σ_{k≠j} a_k x_k) / a_j and x_j ≥ (L − max Σ_{k≠j} a_k x_k) / a_j,
//! the two exchanged for a_j < 0. Each follows from one row and the bounds of its columns. They are
//! never put into the problem, where a solution held by one would have no dual of its own to go
//! back with: they only show that a row or a bound says nothing new.

use super::work::Work;

/// No row.
const NONE: u32 = u32::MAX;

/// The best bounds that some row implies for a column.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Implied {
    lower: f64,
    lower_row: u32,
    upper: f64,
    upper_row: u32,
}

impl Implied {
    const NOTHING: Self =
        Self { lower: f64::NEG_INFINITY, lower_row: NONE, upper: f64::INFINITY, upper_row: NONE };

    /// The bounds of column j with those that rows in the problem imply, but for one row.
    pub(crate) fn but_for(&self, row: u32, work: &Work, j: u32) -> (f64, f64) {
        let (lower, upper) = work.bounds(j);
        let holds = |from: u32| from != NONE && from != row && work.has_row(from);
        (
            if holds(self.lower_row) && self.lower > lower { self.lower } else { lower },
            if holds(self.upper_row) && self.upper < upper { self.upper } else { upper },
        )
    }
}

/// For each column the best bounds by one row each.
pub(crate) fn implied_bounds(work: &Work) -> Vec<Implied> {
    let mut implied = vec![Implied::NOTHING; work.lower.len()];
    for i in work.rows_in() {
        let (lower, upper) = work.sides(i);
        let extent = work.extent(i, |j| work.bounds(j));
        if extent.low_missing > 1 && extent.high_missing > 1 {
            continue;
        }
        for (j, a) in work.row(i) {
            let (low, high) = extent.without(a, work.bounds(j));
            let (least, most) = ((lower - high) / a, (upper - low) / a);
            let (least, most) = if a > 0.0 { (least, most) } else { (most, least) };
            let at = &mut implied[j as usize];
            if least > at.lower && least.is_finite() {
                (at.lower, at.lower_row) = (least, i);
            }
            if most < at.upper && most.is_finite() {
                (at.upper, at.upper_row) = (most, i);
            }
        }
    }
    implied
}
