//! Floating-point multipliers made exact, in two ways, with one common denominator.
//!
//! * **Grid**: whole multiples of 2⁻ᵍ, g = 40 when multipliers and scales are near 1. The
//!   grid is finer by the largest scale of a row against that of the costs, and finer
//!   again when all multipliers are small, so that it is always 40 bits under the largest.
//! * **Simple fractions**: each multiplier becomes the first convergent of its continued
//!   fraction within 10⁻⁹ of it, with a denominator of at most 5,000. Where
//!   the true multipliers are such fractions the bound is the true optimum.
//!
//! Both also clip: a multiplier whose sign has no side in its row becomes 0.

use dashu_int::{IBig, UBig};
use model::{Number, nearest_f64};

use crate::kernel::Objective;
use crate::rows::{ExactRows, common_multiple};

/// Bits of the grid under the largest multiplier.
const GRID_BITS: i32 = 40;
/// The largest denominator of a simple fraction.
const LARGEST_DENOMINATOR: i64 = 5_000;
/// How far a simple fraction may be from its multiplier, relative to 1 + |y|.
const SNAP_TOLERANCE: f64 = 1e-9;
/// The most bits of a common denominator of simple fractions.
const MOST_BITS: usize = 200;

/// Multipliers of the scaled rows: `values[i] / denominator`.
#[derive(Debug, Clone)]
pub(crate) struct Multipliers {
    pub(crate) values: Vec<IBig>,
    pub(crate) denominator: UBig,
}

/// The multipliers on a dyadic grid; `None` where one is not finite.
pub(crate) fn on_grid(rows: &ExactRows, objective: Objective, y: &[f64]) -> Option<Multipliers> {
    let scale = objective_scale(rows, objective);
    let scale = nearest_f64(&Number::from(scale));
    let mut scaled = Vec::with_capacity(rows.row_count());
    let (mut largest, mut widest) = (0.0_f64, 1.0_f64);
    for (index, row) in rows.rows.iter().enumerate() {
        let ratio = if row.scale.is_one() {
            scale
        } else {
            scale / nearest_f64(&Number::from(row.scale.clone()))
        };
        let value = given(y, index)? * ratio;
        if !value.is_finite() {
            return None;
        }
        largest = if value.abs() > largest { value.abs() } else { largest };
        widest = if value != 0.0 && 1.0 / ratio > widest { 1.0 / ratio } else { widest };
        scaled.push(value);
    }
    let small = if largest < 1.0 { -exponent(largest) } else { 0 };
    let bits = (GRID_BITS + small + exponent(widest)).clamp(GRID_BITS, 900);
    let step = power_of_two(bits);
    let mut values = Vec::with_capacity(scaled.len());
    for (index, value) in scaled.iter().enumerate() {
        let whole = IBig::try_from((value * step).round()).ok()?;
        values.push(clipped(rows, index, whole));
    }
    let shift = usize::try_from(bits).unwrap_or_default();
    Some(Multipliers { values, denominator: UBig::ONE << shift })
}

/// The multipliers as simple fractions; `None` where one is not near any, or their common
/// denominator is too large.
pub(crate) fn snapped(rows: &ExactRows, objective: Objective, y: &[f64]) -> Option<Multipliers> {
    let scale = Number::from(objective_scale(rows, objective));
    let mut denominator = UBig::ONE;
    let mut fractions: Vec<Number> = Vec::with_capacity(rows.row_count());
    for (index, row) in rows.rows.iter().enumerate() {
        let (top, bottom) = simple_fraction(given(y, index)?)?;
        if top == 0 {
            fractions.push(Number::ZERO);
            continue;
        }
        let plain = Number::from_parts(IBig::from(top), UBig::try_from(bottom).ok()?);
        let fraction = plain * &scale / Number::from(row.scale.clone());
        denominator = common_multiple(denominator, fraction.denominator());
        if dashu_int::ops::BitTest::bit_len(&denominator) > MOST_BITS {
            return None;
        }
        fractions.push(fraction);
    }
    let values = fractions.iter().enumerate().map(|(index, fraction)| {
        let factor = IBig::from(&denominator / fraction.denominator());
        clipped(rows, index, fraction.numerator() * factor)
    });
    Some(Multipliers { values: values.collect(), denominator })
}

/// The multiplier of a row: 0 beyond the end of the list, `None` where it is no number.
fn given(y: &[f64], index: usize) -> Option<f64> {
    let value = y.get(index).copied().unwrap_or(0.0);
    value.is_finite().then_some(value)
}

fn objective_scale(rows: &ExactRows, objective: Objective) -> UBig {
    match objective {
        Objective::Costs => rows.cost_scale.clone(),
        Objective::Nothing => UBig::ONE,
    }
}

/// 0 where the row has no side for the sign of the multiplier.
fn clipped(rows: &ExactRows, index: usize, value: IBig) -> IBig {
    let row = &rows.rows[index];
    let side = if value > IBig::ZERO { &row.lower } else { &row.upper };
    if side.is_some() { value } else { IBig::ZERO }
}

/// The first convergent p/q of the continued fraction of `value` that is within the
/// tolerance; `None` when q grows over the limit first.
pub(crate) fn simple_fraction(value: f64) -> Option<(i64, i64)> {
    let size = value.abs();
    if size > 1e15 {
        return None;
    }
    let tolerance = SNAP_TOLERANCE * (1.0 + size);
    let (mut before, mut now) = ((0_i64, 1_i64), (1_i64, 0_i64));
    let mut rest = size;
    loop {
        let whole = rest.floor();
        if whole > 1e15 {
            return None;
        }
        let step = whole as i64;
        let next = (
            step.checked_mul(now.0)?.checked_add(before.0)?,
            step.checked_mul(now.1)?.checked_add(before.1)?,
        );
        if next.1 > LARGEST_DENOMINATOR {
            return None;
        }
        if (next.0 as f64 / next.1 as f64 - size).abs() <= tolerance {
            return Some((if value < 0.0 { -next.0 } else { next.0 }, next.1));
        }
        (before, now) = (now, next);
        rest = 1.0 / (rest - whole);
    }
}

/// The exponent e with 2ᵉ ≤ value < 2ᵉ⁺¹ of a positive normal number; 0 for 0.
fn exponent(value: f64) -> i32 {
    if value < f64::MIN_POSITIVE {
        return 0;
    }
    let biased = (value.to_bits() >> 52) & 0x7ff;
    i32::try_from(biased).unwrap_or_default() - 1023
}

/// 2^bits for −1022 ≤ bits ≤ 1023.
fn power_of_two(bits: i32) -> f64 {
    f64::from_bits(u64::from((bits + 1023).unsigned_abs()) << 52)
}
