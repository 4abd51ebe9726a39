//! Mending multipliers: a column without a finite bound must not have a reduced cost of the
//! wrong sign. The multiplier of one row that holds the column is moved just as far as the
//! reduced cost needs, the sum is taken anew, and so on for a few rounds.

use std::collections::BTreeMap;

use dashu_int::{IBig, UBig, ops::Abs};
use model::Number;

use crate::kernel::{Objective, Open, Sum, sum};
use crate::multipliers::Multipliers;
use crate::rows::{Bounds, ExactRows};

/// Rounds of mending.
const ROUNDS: usize = 4;

/// The sum after mending; `None` when some column stays open.
/// `O(non-zeros)` a round.
pub(crate) fn mended(
    rows: &ExactRows,
    objective: Objective,
    bounds: &[Bounds],
    (mut multipliers, mut open): (Multipliers, Vec<Open>),
) -> Option<Number> {
    for _ in 0..ROUNDS {
        if !correct(rows, bounds, &mut multipliers, &open) {
            return None;
        }
        match sum(rows, objective, bounds, &multipliers) {
            Sum::Bound(value) => return Some(value),
            Sum::Open(next) => open = next,
        }
    }
    None
}

/// A way to close one column: a new multiplier for one row.
struct Correction {
    row: usize,
    value: IBig,
    /// How many other columns it may open, and how far it moves the multiplier.
    cost: (usize, UBig),
}

/// Chooses and applies a correction for each open column; false when one has none.
fn correct(rows: &ExactRows, bounds: &[Bounds], y: &mut Multipliers, open: &[Open]) -> bool {
    let mut chosen: BTreeMap<usize, Correction> = BTreeMap::new();
    let place: BTreeMap<usize, &Open> = open.iter().map(|o| (o.column, o)).collect();
    for row in 0..rows.row_count() {
        let (columns, coefficients) = rows.entries(row);
        for (k, &column) in columns.iter().enumerate() {
            let Some(open) = place.get(&(column as usize)) else { continue };
            let a = coefficients.at(k);
            let free = is_free(&bounds[open.column]);
            let Some(change) = needed(&open.reduced, &a, free) else { continue };
            let Some(new) = correction(rows, bounds, &y.values[row], (row, change)) else {
                continue;
            };
            let old = chosen.get(&open.column);
            if old.is_none_or(|old| new.cost < old.cost) {
                chosen.insert(open.column, new);
            }
        }
    }
    let all = chosen.len() == open.len();
    for correction in chosen.into_values() {
        y.values[correction.row] = correction.value;
    }
    all
}

fn is_free(bounds: &Bounds) -> bool {
    bounds.0.is_none() && bounds.1.is_none()
}

/// The least change of a multiplier with coefficient `a` that takes `reduced` to 0 or just
/// over to the other sign; for a free column exactly to 0, or `None`.
fn needed(reduced: &IBig, a: &IBig, free: bool) -> Option<IBig> {
    let (size, divisor) = (reduced.clone().abs(), a.clone().abs());
    let whole = &size / &divisor;
    let exact = &whole * &divisor == size;
    if free && !exact {
        return None;
    }
    let steps = if exact { whole } else { whole + IBig::ONE };
    let same_sign = (*reduced > IBig::ZERO) == (*a > IBig::ZERO);
    Some(if same_sign { steps } else { -steps })
}

/// The correction that adds `change` to the multiplier of a row, if the row has a side for it.
fn correction(
    rows: &ExactRows,
    bounds: &[Bounds],
    old: &IBig,
    (row, change): (usize, IBig),
) -> Option<Correction> {
    let value = old + &change;
    let sides = &rows.rows[row];
    let side = if value > IBig::ZERO { &sides.lower } else { &sides.upper };
    if side.is_none() && !value.is_zero() {
        return None;
    }
    let (columns, coefficients) = rows.entries(row);
    let mut opened = 0;
    for (k, &column) in columns.iter().enumerate() {
        let falls = (coefficients.at(k) > IBig::ZERO) == (change > IBig::ZERO);
        let (lower, upper) = &bounds[column as usize];
        opened += usize::from(if falls { upper.is_none() } else { lower.is_none() });
    }
    let moved = dashu_int::ops::UnsignedAbs::unsigned_abs(change);
    Some(Correction { row, value, cost: (opened, moved) })
}
