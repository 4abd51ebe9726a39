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

use std::cmp::Ordering;

use dashu_int::{IBig, UBig, ops::BitTest};
use model::{Number, nearest_f64};

use crate::kernel::Objective;
use crate::rows::{ExactRows, common_multiple};

/// Bits of the grid under the largest multiplier.
pub(crate) const GRID_BITS: i32 = 40;
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

impl Multipliers {
    /// The same with every sign turned.
    pub(crate) fn negated(&self) -> Self {
        let values = self.values.iter().map(|value| -value).collect();
        Self { values, denominator: self.denominator.clone() }
    }
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
        let allowed = has_side(rows, index, whole.cmp(&IBig::ZERO));
        values.push(if allowed { whole } else { IBig::ZERO });
    }
    let shift = usize::try_from(bits).unwrap_or_default();
    Some(Multipliers { values, denominator: UBig::ONE << shift })
}

/// The multipliers as simple fractions; `None` where one is not near any, or their common
/// denominator is too large.
pub(crate) fn snapped(rows: &ExactRows, objective: Objective, y: &[f64]) -> Option<Multipliers> {
    let fractions = fractions(rows, y)?;
    let scale = objective_scale(rows, objective);
    let small = || small_fractions(rows, i128::try_from(&scale).ok()?, &fractions);
    small().or_else(|| large_fractions(rows, &Number::from(scale.clone()), &fractions))
}

/// As [`snapped`], where machine words suffice.
pub(crate) fn snapped_in_words(
    rows: &ExactRows,
    objective: Objective,
    y: &[f64],
) -> Option<Multipliers> {
    let scale = i128::try_from(&objective_scale(rows, objective)).ok()?;
    small_fractions(rows, scale, &fractions(rows, y)?)
}

/// The simple fraction next to each multiplier, clipped.
fn fractions(rows: &ExactRows, y: &[f64]) -> Option<Vec<(i64, i64)>> {
    let mut fractions = Vec::with_capacity(rows.row_count());
    for index in 0..rows.row_count() {
        let (top, bottom) = simple_fraction(given(y, index)?)?;
        let clipped = if has_side(rows, index, top.cmp(&0)) { top } else { 0 };
        fractions.push((clipped, bottom));
    }
    Some(fractions)
}

/// The fractions times `scale`, for the scaled rows, over one denominator: in 128 bits, or
/// `None` where they do not suffice.
fn small_fractions(rows: &ExactRows, scale: i128, fractions: &[(i64, i64)]) -> Option<Multipliers> {
    let mut scaled: Vec<(i128, i128)> = Vec::with_capacity(fractions.len());
    let mut common = 1_i128;
    for (row, &(top, bottom)) in rows.rows.iter().zip(fractions) {
        if top == 0 {
            scaled.push((0, 1));
            continue;
        }
        let top = i128::from(top).checked_mul(scale)?;
        let bottom = i128::from(bottom).checked_mul(i128::try_from(&row.scale).ok()?)?;
        if bottom == 1 {
            scaled.push((top, 1));
            continue;
        }
        let divisor = common_divisor(top.checked_abs()?, bottom);
        let (top, bottom) = (top / divisor, bottom / divisor);
        if common % bottom != 0 {
            common = (common / common_divisor(common, bottom)).checked_mul(bottom)?;
        }
        scaled.push((top, bottom));
    }
    let value = |(top, bottom): (i128, i128)| Some(IBig::from(top.checked_mul(common / bottom)?));
    let values: Option<Vec<IBig>> = scaled.into_iter().map(value).collect();
    Some(Multipliers { values: values?, denominator: UBig::try_from(common).ok()? })
}

/// The greatest common divisor of two numbers that are not negative; in 64 bits, which are
/// far quicker to divide, once the numbers fit.
pub(crate) fn common_divisor(mut a: i128, mut b: i128) -> i128 {
    while b > i128::from(u64::MAX) || a > i128::from(u64::MAX) {
        if b == 0 {
            return a;
        }
        (a, b) = (b, a % b);
    }
    let (mut a, mut b) = (a as u64, b as u64);
    while b != 0 {
        (a, b) = (b, a % b);
    }
    i128::from(a)
}

/// The same without a limit to the numbers, but for the size of the denominator.
fn large_fractions(
    rows: &ExactRows,
    scale: &Number,
    fractions: &[(i64, i64)],
) -> Option<Multipliers> {
    let mut denominator = UBig::ONE;
    let mut scaled: Vec<Number> = Vec::with_capacity(fractions.len());
    for (row, &(top, bottom)) in rows.rows.iter().zip(fractions) {
        let plain = Number::from_parts(IBig::from(top), UBig::try_from(bottom).ok()?);
        let fraction = plain * scale / Number::from(row.scale.clone());
        denominator = common_multiple(denominator, fraction.denominator());
        if denominator.bit_len() > MOST_BITS {
            return None;
        }
        scaled.push(fraction);
    }
    let values = scaled
        .iter()
        .map(|fraction| fraction.numerator() * IBig::from(&denominator / fraction.denominator()));
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

/// Whether a row has a side for a multiplier of this sign.
pub(crate) fn has_side(rows: &ExactRows, index: usize, sign: Ordering) -> bool {
    let row = &rows.rows[index];
    match sign {
        Ordering::Equal => true,
        Ordering::Greater => row.lower.is_some(),
        Ordering::Less => row.upper.is_some(),
    }
}

/// The first convergent p/q of the continued fraction of `value` that is within the
/// tolerance, 10⁻⁹ relative to 1 + |value|; `None` when q grows over the limit, 5,000, first.
#[must_use]
pub fn simple_fraction(value: f64) -> Option<(i64, i64)> {
    let size = value.abs();
    if size == 0.0 {
        return Some((0, 1));
    }
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
pub(crate) fn exponent(value: f64) -> i32 {
    if value < f64::MIN_POSITIVE {
        return 0;
    }
    let biased = (value.to_bits() >> 52) & 0x7ff;
    i32::try_from(biased).unwrap_or_default() - 1023
}

/// 2^bits for −1022 ≤ bits ≤ 1023.
pub(crate) fn power_of_two(bits: i32) -> f64 {
    f64::from_bits(u64::from((bits + 1023).unsigned_abs()) << 52)
}
