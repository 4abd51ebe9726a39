//! Rows that are multiples of one another: one is kept with the tighter sides.
//!
//! With a_k = s a_i the row k says L_k / s ≤ a_i x ≤ U_k / s, the two exchanged for s < 0. On the way
//! back the dual stays with row i unless the side that holds it came from k: then y_k = y_i / s, the
//! logical of k leaves and that of i becomes basic.

use crate::basis::Status;

use super::parallel::multiples;
use super::postsolve::{Postsolve, Restored, Step};
use super::work::{FEASIBILITY, Halt, Work};

/// A row that was merged into another.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Merged {
    kept: u32,
    removed: u32,
    factor: f64,
    /// Whether the lower and the upper side came from the removed row.
    lower: bool,
    upper: bool,
    /// Whether the sides are equal now.
    equation: bool,
}

/// Merges rows.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    let rows = work.rows_in().into_iter().map(|i| (i, work.row(i).collect())).collect();
    multiples(rows)
        .into_iter()
        .try_for_each(|(kept, removed, factor)| merge(work, (kept, removed), factor))
}

fn merge(work: &mut Work, (kept, removed): (u32, u32), factor: f64) -> Result<(), Halt> {
    let (lower, upper) = work.sides(kept);
    let (a, b) = work.sides(removed);
    let (least, most) =
        if factor > 0.0 { (a / factor, b / factor) } else { (b / factor, a / factor) };
    let room = |side: f64| FEASIBILITY * (1.0 + side.abs());
    if least > upper + room(upper) || most < lower - room(lower) {
        return Err(Halt::Infeasible(None));
    }
    let least = if least > upper { upper } else { least };
    let most = if most < lower { lower } else { most };
    let from = (least > lower, most < upper);
    let sides = (if from.0 { least } else { lower }, if from.1 { most } else { upper });
    (work.row_lower[kept as usize], work.row_upper[kept as usize]) = sides;
    work.steps.push(Step::DuplicateRow(Merged {
        kept,
        removed,
        factor,
        lower: from.0,
        upper: from.1,
        equation: sides.0 == sides.1,
    }));
    work.remove_row(removed);
    Ok(())
}

/// Puts the row back.
pub(crate) fn undo(post: &Postsolve, restored: &mut Restored, merged: Merged) {
    let dual = restored.duals[merged.kept as usize];
    let mut held = restored.status[post.logical(merged.kept)];
    if held != Status::Basic && merged.equation && dual != 0.0 {
        held = if dual > 0.0 { Status::Lower } else { Status::Upper };
    }
    let moved = (held == Status::Lower && merged.lower) || (held == Status::Upper && merged.upper);
    if !moved {
        restored.set_row(post, merged.kept, dual, held);
        restored.set_row(post, merged.removed, 0.0, Status::Basic);
        return;
    }
    let same = (held == Status::Lower) == (merged.factor > 0.0);
    let side = if same { Status::Lower } else { Status::Upper };
    restored.set_row(post, merged.kept, 0.0, Status::Basic);
    restored.set_row(post, merged.removed, dual / merged.factor, side);
}
