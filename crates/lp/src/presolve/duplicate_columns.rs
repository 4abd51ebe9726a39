//! Columns that are multiples of one another, a_j = s a_k.
//!
//! With c_j = s c_k only x_k + s x_j matters: one column is kept with the sum of the ranges. On the
//! way back a nonbasic sum puts both at their bounds, a basic one is shared so that one of the two is
//! at a bound. With another cost, d_j = c_j − s c_k + s d_k: when the sign of d_k is known and agrees,
//! so is that of d_j, and column j stays at a bound.

use crate::basis::Status;

use super::parallel::multiples;
use super::postsolve::{Postsolve, Restored, Step};
use super::work::{Halt, Work};

/// A column that was merged into another.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Merged {
    kept: u32,
    removed: u32,
    factor: f64,
    kept_bounds: (f64, f64),
    bounds: (f64, f64),
}

/// Merges and fixes columns.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    let columns = work.columns_in().into_iter().map(|j| (j, work.column(j).collect())).collect();
    let mut fixed = vec![false; work.cost.len()];
    for (kept, removed, factor) in multiples(columns) {
        let differs = work.cost[removed as usize] - factor * work.cost[kept as usize];
        if differs == 0.0 {
            merge(work, (kept, removed), factor);
        } else if !fixed[kept as usize] {
            fixed[removed as usize] = true;
            fix(work, (kept, removed), (factor, differs))?;
        }
    }
    Ok(())
}

fn merge(work: &mut Work, (kept, removed): (u32, u32), factor: f64) {
    let (kept_bounds, bounds) = (work.bounds(kept), work.bounds(removed));
    let (low, high) = super::work::term(factor, bounds);
    let sum = (kept_bounds.0 + low, kept_bounds.1 + high);
    if sum.0.is_infinite() && sum.1.is_infinite() {
        return;
    }
    (work.lower[kept as usize], work.upper[kept as usize]) = sum;
    work.steps.push(Step::DuplicateColumn(Merged { kept, removed, factor, kept_bounds, bounds }));
    work.remove_column(removed);
}

/// Fixes the removed column when the other's reduced cost has a known sign that agrees.
fn fix(
    work: &mut Work,
    (kept, removed): (u32, u32),
    (factor, differs): (f64, f64),
) -> Result<(), Halt> {
    let (lower, upper) = work.bounds(kept);
    // s d_k ≥ 0, or ≤ 0, when column k has one bound only.
    let not_negative =
        if factor > 0.0 { upper == f64::INFINITY } else { lower == f64::NEG_INFINITY };
    let not_positive =
        if factor > 0.0 { lower == f64::NEG_INFINITY } else { upper == f64::INFINITY };
    let (value, status) = if differs > 0.0 && not_negative {
        (work.lower[removed as usize], Status::Lower)
    } else if differs < 0.0 && not_positive {
        (work.upper[removed as usize], Status::Upper)
    } else {
        return Ok(());
    };
    if !value.is_finite() {
        return Err(Halt::NoOptimum);
    }
    work.fix(removed, value, status);
    Ok(())
}

/// Puts the column back.
pub(crate) fn undo(_: &Postsolve, restored: &mut Restored, merged: Merged) {
    let (k, j) = (merged.kept as usize, merged.removed as usize);
    restored.reduced_costs[j] = merged.factor * restored.reduced_costs[k];
    let same = merged.factor > 0.0;
    let ((lower, upper), (kept_lower, kept_upper)) = (merged.bounds, merged.kept_bounds);
    let at = |lower_bound: bool| {
        if lower_bound { (lower, Status::Lower) } else { (upper, Status::Upper) }
    };
    match restored.status[k] {
        Status::Basic => share(restored, merged),
        Status::Lower => {
            restored.x[k] = kept_lower;
            (restored.x[j], restored.status[j]) = at(same);
        }
        Status::Upper => {
            restored.x[k] = kept_upper;
            (restored.x[j], restored.status[j]) = at(!same);
        }
        Status::Free => (restored.x[j], restored.status[j]) = (0.0, Status::Free),
    }
}

/// Shares a basic sum: one of the two at a bound, the other basic.
fn share(restored: &mut Restored, merged: Merged) {
    let (k, j) = (merged.kept as usize, merged.removed as usize);
    let (sum, factor) = (restored.x[k], merged.factor);
    let room = 1e-9 * (1.0 + sum.abs());
    let inside = |x: f64, (lower, upper): (f64, f64)| x >= lower - room && x <= upper + room;
    let sides = |(lower, upper): (f64, f64)| {
        [(lower, Status::Lower), (upper, Status::Upper)].into_iter().filter(|s| s.0.is_finite())
    };
    for (x, status) in sides(merged.bounds) {
        if inside(sum - factor * x, merged.kept_bounds) {
            (restored.x[j], restored.status[j]) = (x, status);
            restored.x[k] = sum - factor * x;
            return;
        }
    }
    for (x, status) in sides(merged.kept_bounds) {
        if inside((sum - x) / factor, merged.bounds) {
            (restored.x[k], restored.status[k]) = (x, status);
            (restored.x[j], restored.status[j]) = ((sum - x) / factor, Status::Basic);
            return;
        }
    }
    (restored.x[j], restored.status[j]) = (0.0, Status::Free);
}
