//! Cuts with short numbers: coefficients are rounded to a grid, and the right side pays for it by
//! what the bounds of the columns allow, so that the row still holds.

use dashu_int::UBig;
use model::{Number, Row, nearest_f64};

use super::aggregate::Frame;

/// Denominators over this are rounded to it.
const GRID: u32 = 1 << 20;
/// The largest ratio of two coefficients.
const MOST_RANGE: f64 = 1e6;
/// The most entries.
const MOST_ENTRIES: usize = 2_000;

/// The row with numbers of few digits; `None` where a bound that is needed lacks, or the numbers
/// range too far for a floating-point kernel.
pub(super) fn shortened(row: &Row, frame: &Frame) -> Option<Row> {
    let largest = row.entries.iter().map(|(_, a)| nearest_f64(a).abs());
    let largest = largest.fold(0.0, |most: f64, a| if a > most { a } else { most });
    if row.entries.len() > MOST_ENTRIES || !largest.is_finite() || largest == 0.0 {
        return None;
    }
    let mut side = row.upper.clone()?;
    let mut entries = Vec::new();
    for (column, a) in &row.entries {
        let small = nearest_f64(a).abs() * MOST_RANGE < largest;
        let short = if small { Number::ZERO } else { on_grid(a) };
        let change = &short - a;
        if !change.is_zero() {
            let (lower, upper) = &frame.bounds[column.index()];
            let bound = if change > Number::ZERO { upper } else { lower };
            side += change * bound.as_ref()?;
        }
        if !short.is_zero() {
            entries.push((*column, short));
        }
    }
    let side = if *side.denominator() > UBig::from(GRID) { raised(&side) } else { side };
    Some(Row { entries, lower: None, upper: Some(side) })
}

/// The nearest number on the grid, or the number itself where it is short.
fn on_grid(a: &Number) -> Number {
    if *a.denominator() <= UBig::from(GRID) {
        return a.clone();
    }
    let grid = Number::from(GRID);
    Number::from((a * &grid + Number::from_parts(1.into(), 2_u32.into())).floor()) / grid
}

/// The least number on the grid that is not smaller.
fn raised(a: &Number) -> Number {
    let grid = Number::from(GRID);
    Number::from((a * &grid).ceil()) / grid
}
