//! Bounds that follow from the rows where the model gives none: for a row Σ a_k x_k ≤ U and a
//! column with a_j > 0, x_j ≤ (U − Σ_{k≠j} least a_k x_k) / a_j, and so on for the other signs.
//! They make a bound finite whose reduced costs have the wrong sign by a rounding.

use dashu_int::IBig;
use model::Number;

use crate::rows::{Bounds, ExactRows};

/// Passes over the rows, there and back in turn, so that chains are followed either way; each
/// only fills sides that are still infinite.
const PASSES: usize = 6;

/// The model's bounds with infinite sides filled where one of the first `count` rows implies a
/// finite one.
/// `O(passes · non-zeros)` rational operations, none when all bounds are finite.
pub(crate) fn bounds(rows: &ExactRows, count: usize) -> Vec<Bounds> {
    let mut out = rows.bounds.clone();
    for turn in 0..PASSES {
        let finite = out.iter().all(|(lower, upper)| lower.is_some() && upper.is_some());
        let back = turn % 2 == 1;
        let order = (0..count).map(|row| if back { count - 1 - row } else { row });
        if finite || !pass(rows, order, &mut out) {
            break;
        }
    }
    out
}

/// One pass; whether a side was filled.
fn pass(rows: &ExactRows, order: impl Iterator<Item = usize>, out: &mut [Bounds]) -> bool {
    let mut filled = false;
    for row in order {
        if let Some(side) = rows.rows[row].upper.clone() {
            filled |= from_side(rows, row, &side, false, out);
        }
        if let Some(side) = rows.rows[row].lower.clone() {
            filled |= from_side(rows, row, &-side, true, out);
        }
    }
    filled
}

/// Uses Σ a x ≤ side, with every coefficient negated where `negated`.
fn from_side(rows: &ExactRows, row: usize, side: &IBig, negated: bool, out: &mut [Bounds]) -> bool {
    let (columns, coefficients) = rows.entries(row);
    let sign = |a: IBig| if negated { -a } else { a };
    let mut least = Number::ZERO;
    let mut missing: Option<usize> = None;
    let mut wanted = false;
    for (k, &column) in columns.iter().enumerate() {
        let a = sign(coefficients.at(k));
        let (lower, upper) = &out[column as usize];
        let (near, far) = if a > IBig::ZERO { (lower, upper) } else { (upper, lower) };
        wanted |= far.is_none();
        match near {
            Some(bound) => least += Number::from(a) * bound,
            None if missing.is_none() => missing = Some(k),
            None => return false,
        }
    }
    if !wanted {
        return false;
    }
    let slack = Number::from(side.clone()) - least;
    let mut filled = false;
    for (k, &column) in columns.iter().enumerate() {
        if missing.is_some_and(|only| only != k) {
            continue;
        }
        let a = sign(coefficients.at(k));
        let (lower, upper) = &mut out[column as usize];
        let (near, far) = if a > IBig::ZERO { (lower, upper) } else { (upper, lower) };
        if far.is_some() {
            continue;
        }
        let own = near.as_ref().map_or(Number::ZERO, |bound| Number::from(a.clone()) * bound);
        *far = Some((&slack + own) / Number::from(a));
        filled = true;
    }
    filled
}
