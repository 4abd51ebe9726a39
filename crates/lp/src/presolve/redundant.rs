//! Rows that bounds imply, empty ones among them: their dual is zero and their logical basic.
//!
//! With m ≤ Σ a_j x_j ≤ M over the bounds, a row with L ≤ m and M ≤ U holds by itself. A bound may
//! also be one that another row implies (`tighten`): that row is in when this one goes, so on the
//! way back it holds when this one is put back.

use super::postsolve::Step;
use super::tighten::{Implied, implied_bounds};
use super::work::{Extent, FEASIBILITY, Halt, Work};

/// Takes the rows out that hold by themselves.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    let implied = implied_bounds(work);
    for i in work.rows_in() {
        let extent = work.extent(i, |j| work.bounds(j));
        refuse(work, i, &extent)?;
        if is_implied(work, i, &extent) || is_implied_by_others(work, i, &implied) {
            work.steps.push(Step::Redundant { row: i });
            work.remove_row(i);
        }
    }
    Ok(())
}

/// Ends when a row cannot hold.
fn refuse(work: &Work, i: u32, extent: &Extent) -> Result<(), Halt> {
    let (lower, upper) = work.sides(i);
    let over = |by: f64, side: f64| by > FEASIBILITY * (1.0 + side.abs() + extent.size);
    if extent.low_missing == 0 && over(extent.low() - upper, upper) {
        return Err(Halt::Infeasible(Some((i, -1.0))));
    }
    if extent.high_missing == 0 && over(lower - extent.high(), lower) {
        return Err(Halt::Infeasible(Some((i, 1.0))));
    }
    Ok(())
}

fn is_implied(work: &Work, i: u32, extent: &Extent) -> bool {
    let (lower, upper) = work.sides(i);
    let empty = work.row_size(i) == 0;
    empty || (lower <= extent.low() && extent.high() <= upper)
}

fn is_implied_by_others(work: &Work, i: u32, implied: &[Implied]) -> bool {
    let extent = work.extent(i, |j| implied[j as usize].but_for(i, work, j));
    is_implied(work, i, &extent)
}
