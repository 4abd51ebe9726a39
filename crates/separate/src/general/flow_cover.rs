//! Flow covers: of a row `Σ ± f ≤ b` whose columns have variable upper bounds `f ≤ u y`
//! (Padberg, Van Roy, Wolsey 1985; lifted: Gu, Nemhauser, Savelsbergh 1999).
//!
//! Each such column that is nearer to its variable bound than to 0 is replaced by `u y − s`, which
//! adds the bound's row to the sum; complemented mixed-integer rounding of the sum, with the u as
//! divisors, then gives the flow cover and its lifting (Marchand, Wolsey 2001, section 5).

use std::collections::BTreeMap;

use model::{ColumnId, Number, Row, nearest_f64};

use super::aggregate::{Aggregate, Frame};
use super::mir::complemented;
use super::{Class, GeneralCut};

/// The variable bounds of columns: rows with two entries of which one is binary and the other not.
#[derive(Debug, Clone, Default)]
pub struct VariableBounds(BTreeMap<ColumnId, Vec<usize>>);

impl VariableBounds {
    /// The variable bounds among some rows. `O(rows)`.
    #[must_use]
    pub fn new(rows: &[Row], frame: &Frame) -> Self {
        let mut bounds = Self::default();
        for (number, row) in rows.iter().enumerate() {
            let &[(a, _), (b, _)] = row.entries.as_slice() else { continue };
            match (frame.is_binary(a), frame.is_binary(b)) {
                (true, false) => bounds.0.entry(b).or_default().push(number),
                (false, true) => bounds.0.entry(a).or_default().push(number),
                _ => {}
            }
        }
        bounds
    }

    /// The rows that bound a column.
    pub(super) fn of(&self, column: ColumnId) -> &[usize] {
        self.0.get(&column).map_or(&[], Vec::as_slice)
    }
}

/// The flow cover of a row that a point violates, in the better of its two directions.
#[must_use]
pub fn flow_cover(
    rows: &[Row],
    number: usize,
    bounds: &VariableBounds,
    frame: &Frame,
    x: &[f64],
) -> Option<GeneralCut> {
    let row = &rows[number];
    if row.entries.len() < 2 || row.entries.iter().all(|(c, _)| bounds.of(*c).is_empty()) {
        return None;
    }
    let mut sum = Aggregate::default();
    if !sum.add(frame, (number, row), &Number::ONE, x) {
        return None;
    }
    let columns: Vec<ColumnId> = sum.columns().collect();
    let mut replaced = false;
    for column in columns {
        let near = |place: &&usize| gap(&rows[**place], x) <= tight(column, rows, **place, x);
        let Some(&bound) = bounds.of(column).iter().filter(|p| **p != number).find(near) else {
            continue;
        };
        let entry = rows[bound].entries.iter().find(|(c, _)| *c == column);
        let (Some((_, own)), Some(a)) = (entry, sum.coefficient(column).cloned()) else { continue };
        replaced |= sum.add(frame, (bound, &rows[bound]), &-(a / own), x);
    }
    if !replaced {
        return None;
    }
    let turned = complemented(Class::FlowCover, &sum.turned(), frame, x);
    match (complemented(Class::FlowCover, &sum, frame, x), turned) {
        (Some(a), Some(b)) => Some(if b.efficacy > a.efficacy { b } else { a }),
        (a, b) => a.or(b),
    }
}

/// How far a point is from the nearer side of a row.
fn gap(row: &Row, x: &[f64]) -> f64 {
    let activity = row.activity(x);
    let side = |side: &Option<Number>| {
        side.as_ref().map_or(f64::INFINITY, |side| (nearest_f64(side) - activity).abs())
    };
    let (lower, upper) = (side(&row.lower), side(&row.upper));
    if lower < upper { lower } else { upper }
}

/// How far a row may be off for its column to be replaced: less than the column is from 0.
fn tight(column: ColumnId, rows: &[Row], bound: usize, x: &[f64]) -> f64 {
    let entry = rows[bound].entries.iter().find(|(c, _)| *c == column);
    let size = entry.map_or(0.0, |(_, a)| (nearest_f64(a) * x[column.index()]).abs());
    if size > 1e-9 { size } else { -1.0 }
}
