//! The dual share of a family, Σ yᵢ·sideᵢ over its rows, as a range: optimal multipliers need not be
//! unique, and the least and the most over all of them are the slopes of the bound when the sides of
//! the family shrink and grow together (sensitivity of a linear program: Gauvin 1980). A family whose
//! sides are all 0 has share 0, whatever it is worth.

use std::collections::BTreeMap;
use std::rc::Rc;

use model::{FamilyId, FamilyState, Model, Number, RowId};

use crate::desk::Desk;

/// Sides are changed by one in so many: small enough that no other basis comes in on data of
/// usual size.
const PART: i32 = 100_000;

/// The least and the most; `None` where that has no end. Nothing where rows on demand belong to it,
/// or the bound does not exist.
pub(super) async fn share(
    desk: &Desk,
    model: &Rc<Model>,
    (family, bound): (FamilyId, Option<f64>),
) -> Option<(Option<f64>, Option<f64>)> {
    let bound = bound?;
    let own = &model.families()[family.index()];
    if own.state != FamilyState::In || own.over_subsets {
        return None;
    }
    let rows: Vec<RowId> = own.rows.clone().map(RowId).collect();
    let has_sides = |row: &RowId| {
        let (lower, upper) = model.row_sides(*row);
        [lower, upper].into_iter().flatten().any(|id| !model.numbers().exact(id).is_zero())
    };
    if !rows.iter().any(has_sides) {
        return Some((Some(0.0), Some(0.0)));
    }
    let mut slopes = [None, None];
    for (slope, sign) in slopes.iter_mut().zip([-1, 1]) {
        let factor = Number::ONE + Number::from(sign) / Number::from(PART);
        let changed: BTreeMap<RowId, model::Row> = rows
            .iter()
            .map(|&row| {
                let mut written = model.row(row);
                written.lower = written.lower.map(|side| side * &factor);
                written.upper = written.upper.map(|side| side * &factor);
                (row, written)
            })
            .collect();
        let Ok(model) = model.rewritten(&changed) else { continue };
        let solved = desk.relax(&Rc::new(model)).await;
        *slope = solved.bound.map(|moved| tidied((moved - bound) * f64::from(sign * PART)));
    }
    let [shrunk, grown] = slopes;
    Some(match (shrunk, grown) {
        (Some(a), Some(b)) if a > b => (Some(b), Some(a)),
        pair => pair,
    })
}

/// Differences of bounds are known to about ten digits.
fn tidied(slope: f64) -> f64 {
    let rounded = (slope * 1e4).round() / 1e4;
    rounded + 0.0
}
