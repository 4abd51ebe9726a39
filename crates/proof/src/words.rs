//! The exact sum behind a bound in machine words alone, from multipliers on a dyadic grid: what the inner
//! nodes of a search are bounded with. One pass over the rows that have a multiplier, without a number
//! that is allocated; where something does not fit, there is no bound by this way.
//!
//! With costs C and rows in whole numbers and Y = 2^b y rounded,
//!
//! ```text
//! D = 2^b C − A'Y,     2^b K bound = Σ_i Y_i side_i + Σ_j D_j bound_j
//! ```

use dashu_int::{IBig, UBig};
use model::{Number, nearest_f64};

use crate::multipliers::{GRID_BITS, exponent, power_of_two};
use crate::rows::{Bounds, ExactRows};

/// A multiplier on the grid is less than 2 to this.
const MOST_BITS: i32 = 61;

/// The costs and sides of the rows as words.
#[derive(Debug, Clone, Default)]
pub(crate) struct Words {
    /// The scaled costs; `None` where one does not fit.
    pub(crate) costs: Option<Vec<i64>>,
    pub(crate) rows: Vec<RowWords>,
    /// The scale of the costs.
    scale: f64,
}

/// What a row has beside its coefficients.
#[derive(Debug, Clone, Copy)]
pub(crate) struct RowWords {
    /// The scale of the costs over that of the row.
    ratio: f64,
    lower: Side,
    upper: Side,
}

/// A side of a row.
#[derive(Debug, Clone, Copy)]
enum Side {
    Missing,
    At(i64),
    /// It does not fit.
    Wide,
}

impl Side {
    fn new(side: Option<&IBig>) -> Self {
        side.map_or(Self::Missing, |side| i64::try_from(side).map_or(Self::Wide, Self::At))
    }
}

impl Words {
    /// The words of the costs, before there are rows.
    pub(crate) fn new(costs: &[IBig], scale: &UBig) -> Self {
        let costs = costs.iter().map(|cost| i64::try_from(cost).ok()).collect();
        Self { costs, rows: Vec::new(), scale: float(scale) }
    }

    /// Takes a row in by its scale and sides.
    pub(crate) fn add(&mut self, scale: &UBig, sides: (Option<&IBig>, Option<&IBig>)) {
        self.rows.push(RowWords {
            ratio: self.scale / float(scale),
            lower: Side::new(sides.0),
            upper: Side::new(sides.1),
        });
    }
}

fn float(scale: &UBig) -> f64 {
    if scale.is_one() { 1.0 } else { nearest_f64(&Number::from(scale.clone())) }
}

/// The largest multiplier of a scaled row; `None` where one is no number.
fn largest(rows: &ExactRows, multipliers: &[f64]) -> Option<f64> {
    let mut largest = 0.0;
    for (row, y) in rows.words.rows.iter().zip(multipliers) {
        let size = (y * row.ratio).abs();
        if !size.is_finite() {
            return None;
        }
        largest = if size > largest { size } else { largest };
    }
    Some(largest)
}

/// The bound of these multipliers, to be minimised and without the offset; `None` where words do not
/// suffice, a column is open or a bound of one is no whole number.
pub(crate) fn bound_in_words(
    rows: &ExactRows,
    bounds: &[Bounds],
    multipliers: &[f64],
) -> Option<Number> {
    let costs = rows.words.costs.as_ref()?;
    let largest = exponent(largest(rows, multipliers)?);
    let bits = (GRID_BITS + (-largest).max(0)).min(MOST_BITS - 1 - largest).min(MOST_BITS);
    let step = if bits >= 0 { power_of_two(bits) } else { return None };
    let mut reduced: Vec<i128> = costs.iter().map(|&cost| i128::from(cost) << bits).collect();
    let mut total = 0_i128;
    for (place, (row, y)) in rows.words.rows.iter().zip(multipliers).enumerate() {
        // Less than 2^61 by the choice of the step.
        let value = (y * row.ratio * step).round() as i64;
        let side = match if value > 0 { row.lower } else { row.upper } {
            _ if value == 0 => continue,
            Side::Missing => continue,
            Side::Wide => return None,
            Side::At(side) => side,
        };
        total = total.checked_add(i128::from(value) * i128::from(side))?;
        let (columns, coefficients) = rows.small_entries(place)?;
        for (&column, &a) in columns.iter().zip(coefficients) {
            let at = &mut reduced[column as usize];
            *at = at.checked_sub(i128::from(value) * i128::from(a))?;
        }
    }
    for (value, (lower, upper)) in reduced.iter().zip(bounds).filter(|(value, _)| **value != 0) {
        let bound = if *value > 0 { lower.as_ref()? } else { upper.as_ref()? };
        let bound = i128::from(i64::try_from(bound.numerator()).ok().filter(|_| bound.is_int())?);
        total = total.checked_add(value.checked_mul(bound)?)?;
    }
    let scale = &rows.cost_scale << usize::try_from(bits).ok()?;
    Some(Number::from_parts(IBig::from(total), scale))
}
