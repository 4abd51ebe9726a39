//! Dominated columns: the sign of the reduced cost is known whatever the duals.
//!
//! A row without upper side has y ≥ 0, one without lower side y ≤ 0. A column that is alone in a row
//! and has no upper bound has d ≥ 0, so c ≥ a y bounds the row's dual, and the same from the other
//! side. With bounds on y every d = c − Σ a y lies in a range; when that is positive the column is at
//! its lower bound, when negative at its upper. By the signs of the rows alone zero is enough. The
//! bounds on y used for a column come from columns that are in when it goes, so they hold when it
//! comes back.

use crate::basis::Status;

use super::work::{Halt, Work};

/// What the range of a reduced cost must be away from zero; relative to 1 + the size of the terms.
const AWAY: f64 = 1e-9;

/// Bounds on the dual of a row.
type Range = (f64, f64);

/// Fixes columns whose reduced cost has one sign.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    let mut duals = vec![(f64::NEG_INFINITY, f64::INFINITY); work.row_lower.len()];
    for i in work.rows_in() {
        duals[i as usize] = dual_range(work, i);
    }
    for j in work.columns_in() {
        let Some((value, status)) = at_bound(work, j, &duals) else { continue };
        if !value.is_finite() {
            return Err(Halt::NoOptimum);
        }
        let rows: Vec<u32> = work.column(j).map(|(i, _)| i).collect();
        work.fix(j, value, status);
        for i in rows {
            duals[i as usize] = dual_range(work, i);
        }
    }
    Ok(())
}

/// Bounds on a dual by the sides of the row.
fn by_sides(work: &Work, i: u32) -> Range {
    let (lower, upper) = work.sides(i);
    (
        if upper == f64::INFINITY { 0.0 } else { f64::NEG_INFINITY },
        if lower == f64::NEG_INFINITY { 0.0 } else { f64::INFINITY },
    )
}

/// Bounds on a dual by the sides of the row and the columns that are alone in it.
fn dual_range(work: &Work, i: u32) -> Range {
    let (mut least, mut most) = by_sides(work, i);
    for (j, a) in work.row(i).filter(|&(j, _)| work.column_size(j) == 1) {
        let (lower, upper) = work.bounds(j);
        let limit = work.cost[j as usize] / a;
        if (upper == f64::INFINITY && a > 0.0 || lower == f64::NEG_INFINITY && a < 0.0)
            && limit < most
        {
            most = limit;
        }
        if (upper == f64::INFINITY && a < 0.0 || lower == f64::NEG_INFINITY && a > 0.0)
            && limit > least
        {
            least = limit;
        }
    }
    (least, most)
}

/// The bound at which a column stays, if its reduced cost has one sign.
fn at_bound(work: &Work, j: u32, duals: &[Range]) -> Option<(f64, Status)> {
    let (lower, upper) = work.bounds(j);
    let by_rows = reduced_range(work, j, |i| by_sides(work, i));
    if by_rows.0 >= 0.0 && lower.is_finite() {
        return Some((lower, Status::Lower));
    }
    if by_rows.1 <= 0.0 && upper.is_finite() {
        return Some((upper, Status::Upper));
    }
    let range = reduced_range(work, j, |i| duals[i as usize]);
    if range.0 > AWAY * (1.0 + range.2) {
        Some((lower, Status::Lower))
    } else if range.1 < -AWAY * (1.0 + range.2) {
        Some((upper, Status::Upper))
    } else {
        None
    }
}

/// The range of c − Σ a y, and the size of its terms.
fn reduced_range(work: &Work, j: u32, duals: impl Fn(u32) -> Range) -> (f64, f64, f64) {
    let cost = work.cost[j as usize];
    let (mut least, mut most, mut size) = (cost, cost, cost.abs());
    for (i, a) in work.column(j) {
        let (low, high) = duals(i);
        let (low, high) = if a > 0.0 { (a * low, a * high) } else { (a * high, a * low) };
        // A zero bound stays zero times any entry; an infinite one ends the range.
        least -= high;
        most -= low;
        size += [low, high].iter().filter(|v| v.is_finite()).map(|v| v.abs()).sum::<f64>();
    }
    (least, most, size)
}
