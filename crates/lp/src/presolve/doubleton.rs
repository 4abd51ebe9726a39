//! An equation with two columns, a x + b y = e: x leaves with it, as x = (e − b y) / a.
//!
//! What the bounds of x say becomes a bound of y; cost and entries of x go over to y, whose column
//! is then a_y − (b/a) a_x. On the way back y gets its own column again. When y is held by a bound
//! that came from x, x is the one that is nonbasic, at its bound, and y is basic; otherwise x is
//! basic. The one that is basic gives the row its dual: a π = c_x − a_xᵀπ or b π = c_y − a_yᵀπ over
//! the other rows.

use crate::basis::Status;

use super::implied_free::PIVOT;
use super::postsolve::{Postsolve, Restored, Step};
use super::work::{FEASIBILITY, Halt, Work};

/// Most rows of the column that leaves: its entries are added to the other column.
const MOST_ROWS: u32 = 4;

/// Bounds beyond this are left alone: what they do to the other column loses digits.
const LARGEST: f64 = 1e7;

/// A sum below this beside its terms is taken for cancelled; relative.
const NOISE: f64 = 1e-13;

/// Something for the lower and for the upper bound.
type ByBound<T> = (T, T);

/// One of the two columns, with its entry and its cost before.
#[derive(Clone, Copy, Debug)]
struct Side {
    column: u32,
    entry: f64,
    cost: f64,
}

/// A column that left with an equation of two columns.
#[derive(Clone, Debug)]
pub(crate) struct Pair {
    row: u32,
    side: f64,
    gone: Side,
    kept: Side,
    /// Whether the lower and the upper bound of the kept column come from the other.
    from: ByBound<bool>,
    /// Whether the kept column is fixed now.
    fixed: bool,
    /// The entries of the kept column before, zero where it had none, in the rows of the other.
    entries: Vec<(u32, f64)>,
}

/// Takes equations with two columns out, with one of the columns.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    for i in work.rows_in() {
        let (lower, upper) = work.sides(i);
        if work.row_size(i) == 2
            && lower == upper
            && let Some((gone, kept)) = choose(work, i)
        {
            substitute(work, (i, lower), (gone, kept))?;
        }
    }
    Ok(())
}

/// The column to leave and the one to stay: the shorter one leaves, if its entry is not small beside
/// the other's and its bounds are moderate.
fn choose(work: &Work, i: u32) -> Option<(Side, Side)> {
    let both = work.row(i).map(|(column, entry)| {
        let cost = work.cost[column as usize];
        Side { column, entry, cost }
    });
    let both: Vec<Side> = both.collect();
    let [first, second] = both[..] else { return None };
    let moderate = |bound: f64| bound.is_infinite() || bound.abs() <= LARGEST;
    let may_leave = |gone: Side, kept: Side| {
        let (lower, upper) = work.bounds(gone.column);
        let size = work.column_size(gone.column);
        let stable = gone.entry.abs() >= PIVOT * kept.entry.abs();
        size <= MOST_ROWS && stable && moderate(lower) && moderate(upper)
    };
    let ordered = if work.column_size(second.column) < work.column_size(first.column) {
        [(second, first), (first, second)]
    } else {
        [(first, second), (second, first)]
    };
    ordered.into_iter().find(|&(gone, kept)| may_leave(gone, kept))
}

fn substitute(
    work: &mut Work,
    (row, side): (u32, f64),
    (gone, kept): (Side, Side),
) -> Result<(), Halt> {
    let (from, bounds) = joint_bounds(work, side, (gone, kept))?;
    (work.lower[kept.column as usize], work.upper[kept.column as usize]) = bounds;
    let factor = kept.entry / gone.entry;
    work.cost[kept.column as usize] = sum(kept.cost, -factor * gone.cost);
    let mut entries = Vec::new();
    let column: Vec<(u32, f64)> = work.column(gone.column).filter(|&(i, _)| i != row).collect();
    for (i, value) in column {
        let old = work.entry(i, kept.column);
        entries.push((i, old));
        work.set_entry(i, kept.column, sum(old, -factor * value));
        let constant = value * side / gone.entry;
        work.row_lower[i as usize] -= constant;
        work.row_upper[i as usize] -= constant;
    }
    let fixed = bounds.0 == bounds.1;
    work.steps.push(Step::Doubleton(Pair { row, side, gone, kept, from, fixed, entries }));
    work.remove_row(row);
    work.remove_column(gone.column);
    Ok(())
}

/// a + b, or zero when the two cancel.
fn sum(a: f64, b: f64) -> f64 {
    let sum = a + b;
    if sum.abs() <= NOISE * (a.abs() + b.abs()) { 0.0 } else { sum }
}

/// The bounds of the kept column with those of the other, and which of them are the other's.
fn joint_bounds(
    work: &Work,
    side: f64,
    (gone, kept): (Side, Side),
) -> Result<(ByBound<bool>, ByBound<f64>), Halt> {
    let (lower, upper) = work.bounds(gone.column);
    let at = |x: f64| (side - gone.entry * x) / kept.entry;
    let falls = (gone.entry > 0.0) == (kept.entry > 0.0);
    let (least, most) = if falls { (at(upper), at(lower)) } else { (at(lower), at(upper)) };
    let (old_lower, old_upper) = work.bounds(kept.column);
    let room = |bound: f64| FEASIBILITY * (1.0 + bound.abs());
    if least > old_upper + room(old_upper) || most < old_lower - room(old_lower) {
        return Err(Halt::Infeasible(None));
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
    Ok((from, (new_lower, new_upper)))
}

/// Puts row and column back.
pub(crate) fn undo(post: &mut Postsolve, restored: &mut Restored, pair: &Pair) {
    let (x, y) = (pair.gone.column as usize, pair.kept.column as usize);
    for &(i, old) in &pair.entries {
        post.set_entry(i, pair.kept.column, old);
    }
    restored.x[x] = (pair.side - pair.kept.entry * restored.x[y]) / pair.gone.entry;
    let without =
        |restored: &Restored, side: Side| post.reduced_cost(restored, side.column, side.cost);
    let (of_gone, of_kept) = (without(restored, pair.gone), without(restored, pair.kept));
    let status = held_by(restored.status[y], restored.reduced_costs[y], pair);
    let from_gone =
        (status == Status::Lower && pair.from.0) || (status == Status::Upper && pair.from.1);
    let dual = if from_gone { of_kept / pair.kept.entry } else { of_gone / pair.gone.entry };
    let falls = (pair.gone.entry > 0.0) == (pair.kept.entry > 0.0);
    if from_gone {
        let at_upper = (status == Status::Lower) == falls;
        restored.status[x] = if at_upper { Status::Upper } else { Status::Lower };
        restored.reduced_costs[x] = of_gone - pair.gone.entry * dual;
        restored.status[y] = Status::Basic;
        restored.reduced_costs[y] = 0.0;
    } else {
        restored.status[x] = Status::Basic;
        restored.reduced_costs[x] = 0.0;
        restored.status[y] = status;
        if status != Status::Basic {
            restored.reduced_costs[y] = of_kept - pair.kept.entry * dual;
        }
    }
    restored.set_row(post, pair.row, dual, Status::Lower);
}

/// Which bound holds the kept column: of a fixed one the sign of its reduced cost says it.
fn held_by(status: Status, d: f64, pair: &Pair) -> Status {
    if status == Status::Basic || !pair.fixed {
        return status;
    }
    let bound_of_its_own = pair.from.0 && !pair.from.1;
    if d < 0.0 || (d == 0.0 && bound_of_its_own) { Status::Upper } else { Status::Lower }
}
