//! A row with one column is a bound of it: L ≤ a x ≤ U.
//!
//! On the way back, when the column is held by a bound that the row gave, its reduced cost d goes to
//! the row as y = d / a, the column becomes basic and the logical leaves; otherwise the row's dual is
//! zero.

use crate::basis::Status;

use super::postsolve::{Postsolve, Restored, Step};
use super::work::{FEASIBILITY, Halt, Work};

/// The bound that a row gave to its column.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Given {
    row: u32,
    column: u32,
    entry: f64,
    /// Whether the lower and the upper bound come from the row.
    lower: bool,
    upper: bool,
    /// Whether the column is fixed now.
    fixed: bool,
}

/// Turns rows with one column into bounds.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    for i in work.rows_in() {
        if let Some((j, a)) = work.only_in_row(i) {
            take_over(work, i, (j, a))?;
        }
    }
    Ok(())
}

fn take_over(work: &mut Work, i: u32, (j, a): (u32, f64)) -> Result<(), Halt> {
    let (lower, upper) = work.sides(i);
    let (least, most) = if a > 0.0 { (lower / a, upper / a) } else { (upper / a, lower / a) };
    let (old_lower, old_upper) = work.bounds(j);
    let room = |bound: f64| FEASIBILITY * (1.0 + bound.abs());
    if least > old_upper + room(old_upper) {
        return Err(Halt::Infeasible(Some((i, a.signum()))));
    }
    if most < old_lower - room(old_lower) {
        return Err(Halt::Infeasible(Some((i, -a.signum()))));
    }
    // A bound that oversteps the other by rounding is taken for equal to it.
    let least = if least > old_upper { old_upper } else { least };
    let most = if most < old_lower { old_lower } else { most };
    let from = (least > old_lower, most < old_upper);
    let new_lower = if from.0 { least } else { old_lower };
    let new_upper = if from.1 { most } else { old_upper };
    if new_lower > new_upper {
        return Err(Halt::Infeasible(None));
    }
    (work.lower[j as usize], work.upper[j as usize]) = (new_lower, new_upper);
    work.steps.push(Step::SingletonRow(Given {
        row: i,
        column: j,
        entry: a,
        lower: from.0,
        upper: from.1,
        fixed: new_lower == new_upper,
    }));
    work.remove_row(i);
    Ok(())
}

/// Puts the row back.
pub(crate) fn undo(post: &Postsolve, restored: &mut Restored, given: Given) {
    let j = given.column as usize;
    let status = held_by(restored.status[j], restored.reduced_costs[j], given);
    let from_row =
        (status == Status::Lower && given.lower) || (status == Status::Upper && given.upper);
    if !from_row {
        restored.status[j] = status;
        restored.set_row(post, given.row, 0.0, Status::Basic);
        return;
    }
    let dual = restored.reduced_costs[j] / given.entry;
    restored.reduced_costs[j] = 0.0;
    restored.status[j] = Status::Basic;
    let at_lower = (status == Status::Lower) == (given.entry > 0.0);
    let side = if at_lower { Status::Lower } else { Status::Upper };
    restored.set_row(post, given.row, dual, side);
}

/// Which bound holds a column: of a fixed one the sign of its reduced cost says it.
fn held_by(status: Status, d: f64, given: Given) -> Status {
    if status == Status::Basic || !given.fixed {
        return status;
    }
    let bound_of_its_own = given.lower && !given.upper;
    if d < 0.0 || (d == 0.0 && bound_of_its_own) { Status::Upper } else { Status::Lower }
}
