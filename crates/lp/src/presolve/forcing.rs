//! Rows that hold only with every column at one of its bounds.
//!
//! When the least value of Σ a_j x_j is the upper side U, columns with a_j > 0 are at their lower
//! and those with a_j < 0 at their upper bounds. On the way back the row gets the dual y = −t, the
//! smallest t ≥ 0 for which every d_j + a_j t has the sign of its bound; the column that asks for it
//! becomes basic and the logical leaves. When the greatest value is the lower side: the same with
//! all signs turned.

use crate::basis::Status;

use super::postsolve::{Forced, Postsolve, Restored, Step};
use super::work::{Extent, Halt, Work};

/// Difference between the extreme value and the side up to which the row forces; relative to 1 +
/// the size of the terms.
const FORCES: f64 = 1e-12;

/// Fixes the columns of forcing rows and takes the rows out.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    for i in work.rows_in() {
        if work.row_size(i) == 0 {
            continue;
        }
        let extent = work.extent(i, |j| work.bounds(j));
        if let Some(from_above) = forces(work.sides(i), &extent) {
            force(work, i, from_above);
        }
    }
    Ok(())
}

/// Whether a row forces: true from above, false from below.
fn forces((lower, upper): (f64, f64), extent: &Extent) -> Option<bool> {
    let meets = |a: f64, b: f64| (a - b).abs() <= FORCES * (1.0 + extent.size);
    if extent.low_missing == 0 && upper.is_finite() && meets(extent.low(), upper) {
        Some(true)
    } else if extent.high_missing == 0 && lower.is_finite() && meets(extent.high(), lower) {
        Some(false)
    } else {
        None
    }
}

fn force(work: &mut Work, i: u32, from_above: bool) {
    let entries: Vec<(u32, f64)> = work.row(i).collect();
    let mut columns = Vec::with_capacity(entries.len());
    for (j, a) in entries {
        let (lower, upper) = work.bounds(j);
        let at_lower = (a > 0.0) == from_above;
        let (value, status) =
            if at_lower { (lower, Status::Lower) } else { (upper, Status::Upper) };
        columns.push(Forced { column: j, entry: a, value, status, cost: work.cost[j as usize] });
        work.settle_column(j, value);
    }
    work.steps.push(Step::Forcing { row: i, from_above, columns });
    work.remove_row(i);
}

/// Puts the row back.
pub(crate) fn undo(
    post: &Postsolve,
    restored: &mut Restored,
    (row, from_above): (u32, bool),
    columns: &[Forced],
) {
    let sign = if from_above { 1.0 } else { -1.0 };
    let (mut step, mut basic) = (0.0, None);
    for forced in columns {
        let j = forced.column;
        restored.x[j as usize] = forced.value;
        restored.status[j as usize] = forced.status;
        let d = post.reduced_cost(restored, j, forced.cost);
        restored.reduced_costs[j as usize] = d;
        let asked = -sign * d / forced.entry;
        if asked > step {
            (step, basic) = (asked, Some(j));
        }
    }
    let Some(basic) = basic else {
        restored.set_row(post, row, 0.0, Status::Basic);
        return;
    };
    for forced in columns {
        restored.reduced_costs[forced.column as usize] += sign * step * forced.entry;
    }
    restored.status[basic as usize] = Status::Basic;
    restored.reduced_costs[basic as usize] = 0.0;
    let status = if from_above { Status::Upper } else { Status::Lower };
    restored.set_row(post, row, -sign * step, status);
}
