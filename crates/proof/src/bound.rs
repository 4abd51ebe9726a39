//! Proved bounds and proofs that there is no point.

use model::{Number, nearest_f64};

use crate::kernel::{Objective, Sides, Sum, sum, sum_in_words};
use crate::mend::mended;
use crate::multipliers::{Multipliers, on_grid, snapped, snapped_in_words};
use crate::project::projected;
use crate::rows::{Bounds, ExactRows};
use crate::words::bound_in_words;

/// A bound on the objective over the points of the relaxation, proved in exact arithmetic:
/// a lower bound when the model minimises, an upper bound when it maximises, the offset
/// included. `None` when these multipliers prove none.
///
/// `bounds` has one pair a column and may be tighter than the model's, as at a node of a
/// search. `multipliers` has one number a row, as a kernel that minimises gives them
/// (reduced cost = c − A'y), so for a model that maximises they belong to min −c'x; those
/// that are missing at the end are 0. Any numbers are allowed: bad ones give weak bounds,
/// never wrong ones.
///
/// `O(non-zeros)` whole-number operations, and as many again for each mend (see the crate).
#[must_use]
pub fn bound(rows: &ExactRows, bounds: &[Bounds], multipliers: &[f64]) -> Option<Number> {
    let value = values(rows, Objective::Costs, bounds, multipliers).max()?;
    Some(rows.as_given(value))
}

/// How near to the value in floating point a bound must be to be taken at once; relative to 1 + its
/// size.
const NEAR: f64 = 1e-9;

/// As [`bound`], with less care: the first bound that is near `value`, which the multipliers have in
/// floating point; on a dyadic grid in machine words, then by simple fractions. The inner nodes of a
/// search, which need no proof of their own, are bounded so. `O(non-zeros)`, at a fraction of the cost
/// of [`bound`].
#[must_use]
pub fn quick_bound(
    rows: &ExactRows,
    bounds: &[Bounds],
    multipliers: &[f64],
    value: f64,
) -> Option<Number> {
    if bounds.len() != rows.column_count() || multipliers.len() > rows.row_count() {
        return None;
    }
    let is_near = |bound: &Number| {
        let bound = nearest_f64(&rows.as_given(bound.clone()));
        (bound - value).abs() <= NEAR * (1.0 + value.abs())
    };
    let on_words = bound_in_words(rows, bounds, multipliers);
    if on_words.as_ref().is_some_and(is_near) {
        return on_words.map(|bound| rows.as_given(bound));
    }
    let objective = Objective::Costs;
    let in_words = || {
        let rounding = snapped_in_words(rows, objective, multipliers)?;
        let sides = Sides { given: bounds, implied: None };
        match sum_in_words(rows, objective, sides, &rounding)? {
            Sum::Bound(value) => Some(value),
            Sum::Open(_) => None,
        }
    };
    let first = in_words();
    if first.as_ref().is_some_and(is_near) {
        return first.map(|bound| rows.as_given(bound));
    }
    let rounding = on_grid(rows, objective, multipliers);
    let second = rounding.and_then(|rounding| closed(rows, objective, bounds, &rounding));
    on_words.max(first).max(second).map(|bound| rows.as_given(bound))
}

/// Whether the ray proves that no point meets the rows and `bounds`: with y the ray, the
/// least value of y'Ax that the rows allow is over the largest that the bounds allow. The
/// ray may have either direction. `O(non-zeros)`.
#[must_use]
pub fn infeasible(rows: &ExactRows, bounds: &[Bounds], multipliers: &[f64]) -> bool {
    if crossed(bounds) {
        return true;
    }
    let turned: Vec<f64> = multipliers.iter().map(|y| -y).collect();
    let rays = [multipliers, &turned];
    rays.into_iter().any(|ray| {
        let mut values = values(rows, Objective::Nothing, bounds, ray);
        values.any(|value| value > Number::ZERO)
    })
}

/// Whether a column has its lower bound over its upper.
fn crossed(bounds: &[Bounds]) -> bool {
    bounds.iter().any(|(lower, upper)| match (lower, upper) {
        (Some(lower), Some(upper)) => lower > upper,
        _ => false,
    })
}

/// The sums for the two roundings, where they are finite.
fn values<'a>(
    rows: &'a ExactRows,
    objective: Objective,
    bounds: &'a [Bounds],
    y: &'a [f64],
) -> impl Iterator<Item = Number> + 'a {
    let fits = bounds.len() == rows.column_count() && y.len() <= rows.row_count();
    let roundings = [snapped, on_grid].into_iter().filter(move |_| fits);
    roundings.filter_map(move |round| closed(rows, objective, bounds, &round(rows, objective, y)?))
}

/// The sum, with the columns that make it −∞ dealt with: by other multipliers, and by
/// bounds that follow from the rows of the model; the better of the two.
pub(crate) fn closed(
    rows: &ExactRows,
    objective: Objective,
    bounds: &[Bounds],
    rounding: &Multipliers,
) -> Option<Number> {
    let sides = Sides { given: bounds, implied: None };
    let open = match sum(rows, objective, sides, rounding) {
        Sum::Bound(value) => return Some(value),
        Sum::Open(open) => open,
    };
    let implied = within_model(rows, bounds).then(|| {
        let sides = Sides { given: bounds, implied: Some(rows.implied()) };
        match sum(rows, objective, sides, rounding) {
            Sum::Bound(value) => Some(value),
            Sum::Open(_) => None,
        }
    });
    let mended = mended(rows, objective, bounds, (rounding.clone(), open.clone()));
    let best = implied.flatten().max(mended);
    best.or_else(|| projected(rows, objective, bounds, (rounding, &open)))
}

/// Whether `bounds` allows nothing that the model's own bounds do not, so that what follows
/// from the model's rows and bounds holds.
fn within_model(rows: &ExactRows, bounds: &[Bounds]) -> bool {
    rows.bounds.iter().zip(bounds).all(|(own, given)| {
        let lower = own.0.as_ref().is_none_or(|l| given.0.as_ref().is_some_and(|g| g >= l));
        let upper = own.1.as_ref().is_none_or(|u| given.1.as_ref().is_some_and(|g| g <= u));
        lower && upper
    })
}
