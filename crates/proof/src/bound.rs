//! Proved bounds and proofs that there is no point.

use model::{Number, Sense};

use crate::kernel::{Objective, Sum, sum};
use crate::mend::mended;
use crate::multipliers::{Multipliers, on_grid, snapped};
use crate::rows::{Bounds, ExactRows};

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
    let value = best(rows, Objective::Costs, bounds, multipliers)?;
    Some(match rows.sense {
        Sense::Minimise => value + &rows.offset,
        Sense::Maximise => &rows.offset - value,
    })
}

/// Whether the ray proves that no point meets the rows and `bounds`: with y the ray, the
/// least value of y'Ax that the rows allow is over the largest that the bounds allow. The
/// ray may have either direction. `O(non-zeros)`.
#[must_use]
pub fn infeasible(rows: &ExactRows, bounds: &[Bounds], multipliers: &[f64]) -> bool {
    if crossed(bounds) {
        return true;
    }
    let proves = |ray: &[f64]| {
        best(rows, Objective::Nothing, bounds, ray).is_some_and(|value| value > Number::ZERO)
    };
    let turned: Vec<f64> = multipliers.iter().map(|y| -y).collect();
    proves(multipliers) || proves(&turned)
}

/// Whether a column has its lower bound over its upper.
fn crossed(bounds: &[Bounds]) -> bool {
    bounds.iter().any(|(lower, upper)| match (lower, upper) {
        (Some(lower), Some(upper)) => lower > upper,
        _ => false,
    })
}

/// The best of the sums for the two roundings.
fn best(rows: &ExactRows, objective: Objective, bounds: &[Bounds], y: &[f64]) -> Option<Number> {
    if bounds.len() != rows.column_count() || y.len() > rows.row_count() {
        return None;
    }
    let roundings = [snapped(rows, objective, y), on_grid(rows, objective, y)];
    let values = roundings.into_iter().flatten();
    values.filter_map(|rounding| closed(rows, objective, bounds, rounding)).max()
}

/// The sum, with the columns that make it −∞ dealt with: by other multipliers, and by
/// bounds that follow from the rows of the model; the better of the two.
fn closed(
    rows: &ExactRows,
    objective: Objective,
    bounds: &[Bounds],
    rounding: Multipliers,
) -> Option<Number> {
    let open = match sum(rows, objective, bounds, &rounding) {
        Sum::Bound(value) => return Some(value),
        Sum::Open(open) => open,
    };
    let implied = within_implied(rows, bounds).and_then(|tighter| {
        match sum(rows, objective, &tighter, &rounding) {
            Sum::Bound(value) => Some(value),
            Sum::Open(_) => None,
        }
    });
    let mended = mended(rows, objective, bounds, (rounding, open));
    implied.max(mended)
}

/// `bounds` with its infinite sides filled from what follows from the model's rows and
/// bounds; `None` where `bounds` allows what the model's bounds do not.
fn within_implied(rows: &ExactRows, bounds: &[Bounds]) -> Option<Vec<Bounds>> {
    let mut out = Vec::with_capacity(bounds.len());
    for ((own, given), implied) in rows.bounds.iter().zip(bounds).zip(&rows.implied) {
        let lower = own.0.as_ref().is_none_or(|l| given.0.as_ref().is_some_and(|g| g >= l));
        let upper = own.1.as_ref().is_none_or(|u| given.1.as_ref().is_some_and(|g| g <= u));
        if !lower || !upper {
            return None;
        }
        let pick = |given: &Option<Number>, implied: &Option<Number>| {
            given.clone().or_else(|| implied.clone())
        };
        out.push((pick(&given.0, &implied.0), pick(&given.1, &implied.1)));
    }
    Some(out)
}
