//! Every tolerance of the kernel that is the same in every attempt (see `care` for the others):
//! what it bounds, absolute or relative, in which units.

/// Violation of a bound or a row range that counts as none; absolute, in the units of the row.
pub(crate) const PRIMAL: f64 = 1e-9;

/// What is added to [`PRIMAL`] per unit of the bound's own size: rounding of large values;
/// relative.
pub(crate) const PRIMAL_RELATIVE: f64 = 1e-14;

/// Wrong-signed reduced cost that counts as none; absolute, in units of the objective per unit of
/// the column.
pub(crate) const DUAL: f64 = 1e-9;

/// How far reduced costs may overstep zero in the first pass of the dual ratio test (Harris 1973);
/// absolute.
pub(crate) const HARRIS_DUAL: f64 = 1e-9;

/// How far basic values may overstep a bound in the first pass of the primal ratio test; absolute.
pub(crate) const HARRIS_PRIMAL: f64 = 1e-9;

/// Smallest pivot taken while the factors carry updates, below it they are made afresh first;
/// relative to the largest entry of its column, and to 1 where that is larger.
pub(crate) const PIVOT_AFTER_UPDATES: f64 = 1e-5;

/// Difference allowed between a pivot computed by row and by column while the factors carry
/// updates; relative.
pub(crate) const AGREEMENT_AFTER_UPDATES: f64 = 1e-6;

/// The same with fresh factors; relative.
pub(crate) const AGREEMENT_FRESH: f64 = 1e-5;

/// Values produced by a solve below this are taken for cancelled; relative to the largest of them,
/// and to 1 where that is larger.
const SOLVE_DROP: f64 = 1e-14;

/// The value below which the results of a solve are dropped when this is the largest.
pub(crate) fn solve_drop(largest: f64) -> f64 {
    if largest < 1.0 { SOLVE_DROP * largest } else { SOLVE_DROP }
}

/// Entries of the active submatrix below this are taken for cancelled; absolute.
pub(crate) const FACTOR_DROP: f64 = 1e-14;

/// Columns and rows examined in one Markowitz search (Suhl, Suhl 1990).
pub(crate) const MARKOWITZ_CANDIDATES: usize = 4;

/// A stored steepest-edge weight this many times off the computed one is mended before the row is
/// used.
pub(crate) const WEIGHT_RATIO: f64 = 4.0;

/// Smallest steepest-edge weight.
pub(crate) const WEIGHT_FLOOR: f64 = 1e-4;

/// Steps without progress before costs or bounds are perturbed.
pub(crate) const STALL: u32 = 40;

/// Size of a cost perturbation, relative to 1 + |cost|.
pub(crate) const PERTURB_COST: f64 = 5e-7;

/// Size of a bound perturbation, relative to 1 + |bound|.
pub(crate) const PERTURB_BOUND: f64 = 1e-7;

/// Most updates before the factors are made afresh: more for more rows, whose factors are dearer to
/// make. Common practice.
pub(crate) fn most_updates(rows: usize) -> usize {
    let updates = 100 + rows / 100;
    if updates < 1000 { updates } else { 1000 }
}

/// Difference allowed between the new diagonal of an update and the one that follows from the
/// pivot; relative. Beyond it the factors are made afresh.
pub(crate) const UPDATE_AGREEMENT: f64 = 1e-7;

/// Share of nonzeros from which a triangular solve walks every slot.
pub(crate) const HYPERSPARSE: f64 = 0.1;

/// Row violation of a released point; relative to the largest |a x| of the row, plus 1 in the
/// caller's or in scaled units, whichever is less.
pub(crate) const VERIFY_ROW: f64 = 2e-9;

/// Wrong-signed reduced cost of released duals; relative to 1 + the largest |y a| of the column.
pub(crate) const VERIFY_DUAL: f64 = 2e-9;

/// Difference of primal and dual objective of a released optimum; relative to 1 + the sum of the sizes
/// of the objective's terms. Those of the dual bound do not count: multipliers may be 10¹² times them.
pub(crate) const VERIFY_GAP: f64 = 1e-8;

/// Noise in a column of a released ray, taken for zero; relative to the sum of the terms' sizes.
pub(crate) const VERIFY_RAY: f64 = 1e-9;

/// A Farkas proof must exceed zero by this; relative to the sum of the terms' sizes.
pub(crate) const VERIFY_FARKAS: f64 = 1e-9;

/// The same where no term was taken for noise: then only rounding stands between the value and its
/// sign.
pub(crate) const VERIFY_FARKAS_WHOLE: f64 = 1e-12;
