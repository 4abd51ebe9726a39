//! Fixed columns, and columns of no row, which go to the bound that their cost asks for.

use crate::basis::Status;

use super::postsolve::{Postsolve, Restored};
use super::work::{Halt, Work};

/// Takes fixed and empty columns out.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    for j in work.columns_in() {
        let (lower, upper) = work.bounds(j);
        if lower == upper {
            work.fix(j, lower, Status::Lower);
        } else if work.column_size(j) == 0 {
            let (value, status) = best(work.cost[j as usize], lower, upper);
            if !value.is_finite() {
                return Err(Halt::NoOptimum);
            }
            work.fix(j, value, status);
        }
    }
    Ok(())
}

/// The value that a cost asks for, any finite one when it is zero.
fn best(cost: f64, lower: f64, upper: f64) -> (f64, Status) {
    if cost > 0.0 {
        (lower, Status::Lower)
    } else if cost < 0.0 {
        (upper, Status::Upper)
    } else if lower.is_finite() {
        (lower, Status::Lower)
    } else if upper.is_finite() {
        (upper, Status::Upper)
    } else {
        (0.0, Status::Free)
    }
}

/// Puts the column back: its reduced cost follows from the duals.
pub(crate) fn undo(
    post: &Postsolve,
    restored: &mut Restored,
    (column, cost): (u32, f64),
    (value, status): (f64, Status),
) {
    let j = column as usize;
    restored.x[j] = value;
    restored.status[j] = status;
    restored.reduced_costs[j] = post.reduced_cost(restored, column, cost);
}
