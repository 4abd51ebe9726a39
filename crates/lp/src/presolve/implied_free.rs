//! A column of one row whose bounds that row implies, free ones among them: it leaves with the row.
//!
//! The bounds say nothing that the row does not say, so d = 0 and y = c / a. The sign of y says
//! which side of the row is tight: b. Then x = (b − Σ a_k x_k) / a, and the other costs become
//! c_k − a_k y. On the way back the column is basic and the logical is at its side.

use crate::basis::Status;

use super::postsolve::{Postsolve, Restored, Step};
use super::tighten::{Implied, implied_bounds};
use super::work::{Halt, Work};

/// Smallest entry of the column beside the largest of its row.
pub(crate) const PIVOT: f64 = 1e-3;

/// A column that left with its row.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Pair {
    row: u32,
    column: u32,
    entry: f64,
    dual: f64,
    side: f64,
    status: Status,
}

/// Takes such columns out with their rows.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    let implied = implied_bounds(work);
    for j in work.columns_in() {
        if let Some((i, a)) = work.only_in_column(j)
            && a.abs() >= PIVOT * work.largest_entry(i)
            && is_implied(work, (i, j, a), &implied)
        {
            substitute(work, (i, j, a))?;
        }
    }
    Ok(())
}

/// Whether the row implies the bounds of the column, with bounds of the others that other rows may
/// imply.
fn is_implied(work: &Work, (i, j, a): (u32, u32, f64), implied: &[Implied]) -> bool {
    let (lower, upper) = work.bounds(j);
    let (side_lower, side_upper) = work.sides(i);
    let bounds = |k: u32| implied[k as usize].but_for(i, work, k);
    let extent = work.extent(i, bounds);
    let (low, high) = extent.without(a, bounds(j));
    let (least, most) = ((side_lower - high) / a, (side_upper - low) / a);
    let (least, most) = if a > 0.0 { (least, most) } else { (most, least) };
    (lower == f64::NEG_INFINITY || least >= lower) && (upper == f64::INFINITY || most <= upper)
}

fn substitute(work: &mut Work, (i, j, a): (u32, u32, f64)) -> Result<(), Halt> {
    let dual = work.cost[j as usize] / a;
    let (lower, upper) = work.sides(i);
    let at_lower = dual > 0.0 || (dual == 0.0 && lower.is_finite());
    let (side, status) = if at_lower { (lower, Status::Lower) } else { (upper, Status::Upper) };
    if !side.is_finite() {
        // A row without sides is redundant; a cost with nothing to stop it has no optimum.
        return if dual == 0.0 { Ok(()) } else { Err(Halt::NoOptimum) };
    }
    work.move_cost(i, j, dual);
    work.steps.push(Step::ImpliedFree(Pair { row: i, column: j, entry: a, dual, side, status }));
    work.remove_row(i);
    work.remove_column(j);
    Ok(())
}

/// Puts row and column back.
pub(crate) fn undo(post: &Postsolve, restored: &mut Restored, pair: Pair) {
    let j = pair.column as usize;
    restored.x[j] = (pair.side - post.activity(restored, pair.row)) / pair.entry;
    restored.status[j] = Status::Basic;
    restored.reduced_costs[j] = 0.0;
    restored.set_row(post, pair.row, pair.dual, pair.status);
}
