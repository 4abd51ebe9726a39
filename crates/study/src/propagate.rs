//! Bounds that follow from the data: propagation over the written rows in exact arithmetic
//! (Savelsbergh 1994, ORSA Journal on Computing 6).

use model::{ColumnId, Model, Number, Row, RowId};

use crate::desk::Desk;

/// Rounds over all rows at most.
const MOST_ROUNDS: u32 = 10;
/// A bound of a continuous column with a larger denominator is not taken: chains of such bounds
/// grow without end.
const MOST_DENOMINATOR: u32 = 1_000_000;

/// Lower and upper bound; `None` is infinite.
pub(crate) type Bounds = (Option<Number>, Option<Number>);

/// A row as `Σ a x ≤ side`.
#[derive(Debug, Clone)]
pub(crate) struct AtMost {
    pub(crate) entries: Vec<(ColumnId, Number)>,
    pub(crate) side: Number,
}

/// The sides of a row, each as at most; the second tells whether it was turned round.
pub(crate) fn sides(model: &Model, row: RowId) -> Vec<(AtMost, bool)> {
    sides_of(model.row(row))
}

/// The same of a row that need not be written.
pub(crate) fn sides_of(row: Row) -> Vec<(AtMost, bool)> {
    let mut out = Vec::new();
    if let Some(lower) = row.lower {
        let entries = row.entries.iter().map(|(column, a)| (*column, -a.clone())).collect();
        out.push((AtMost { entries, side: -lower }, true));
    }
    if let Some(upper) = row.upper {
        out.push((AtMost { entries: row.entries, side: upper }, false));
    }
    out
}

/// The exact bounds of every column as the model has them.
pub(crate) fn bounds_of(model: &Model) -> Vec<Bounds> {
    let exact = |id: Option<model::NumberId>| id.map(|id| model.numbers().exact(id).clone());
    model.columns().iter().map(|column| (exact(column.lower), exact(column.upper))).collect()
}

/// The bounds that follow from the rows that are in, and how many of them are new. `None` where
/// the rows leave nothing. `O(rounds · non-zeros)`.
pub(crate) async fn propagate(desk: &Desk, model: &Model) -> Option<(Vec<Bounds>, u32)> {
    let mut bounds = bounds_of(model);
    let rows = (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row));
    let halves: Vec<AtMost> =
        rows.flat_map(|row| sides(model, row)).map(|(half, _)| half).collect();
    let mut tightened = 0;
    for _ in 0..MOST_ROUNDS {
        let before = tightened;
        for half in &halves {
            desk.spend(half.entries.len() as u64).await;
            tightened += narrow(model, half, &mut bounds)?;
        }
        if tightened == before {
            break;
        }
    }
    Some((bounds, tightened))
}

/// Tightens the bounds of a row's columns; how many. `None` where the row cannot hold.
fn narrow(model: &Model, half: &AtMost, bounds: &mut [Bounds]) -> Option<u32> {
    let (sum, infinite) = least(&half.entries, bounds);
    if infinite == 0 && sum > half.side {
        return None;
    }
    if infinite > 1 {
        return Some(0);
    }
    let mut tightened = 0;
    for (column, a) in &half.entries {
        let own = part(a, &bounds[column.index()], false);
        let rest = match (&own, infinite) {
            (Some(own), 0) => &sum - own,
            (None, 1) => sum.clone(),
            _ => continue,
        };
        let limit = (&half.side - rest) / a;
        let integer = model.columns()[column.index()].integer;
        tightened += u32::from(tighten(&mut bounds[column.index()], a, limit, integer));
        if let (Some(lower), Some(upper)) = &bounds[column.index()]
            && lower > upper
        {
            return None;
        }
    }
    Some(tightened)
}

/// Takes `a·x ≤ a·limit` as a bound where it is better.
fn tighten(bounds: &mut Bounds, a: &Number, limit: Number, integer: bool) -> bool {
    let above = *a > Number::ZERO;
    let limit = match (integer, above) {
        (true, true) => Number::from(limit.floor()),
        (true, false) => Number::from(limit.ceil()),
        (false, _) if *limit.denominator() > MOST_DENOMINATOR.into() => return false,
        (false, _) => limit,
    };
    let (lower, upper) = bounds;
    if above && upper.as_ref().is_none_or(|upper| limit < *upper) {
        *upper = Some(limit);
        return true;
    }
    if !above && lower.as_ref().is_none_or(|lower| limit > *lower) {
        *lower = Some(limit);
        return true;
    }
    false
}

/// The least that an entry can add, or the most; `None` where that is infinite.
fn part(a: &Number, (lower, upper): &Bounds, most: bool) -> Option<Number> {
    let side = if (*a > Number::ZERO) == most { upper } else { lower };
    side.as_ref().map(|side| a * side)
}

/// The least activity without the entries that have none, and how many those are.
fn least(entries: &[(ColumnId, Number)], bounds: &[Bounds]) -> (Number, u32) {
    let (mut sum, mut infinite) = (Number::ZERO, 0);
    for (column, a) in entries {
        match part(a, &bounds[column.index()], false) {
            Some(part) => sum += part,
            None => infinite += 1,
        }
    }
    (sum, infinite)
}

/// The largest activity of all entries but that of `without`; `None` where it is infinite.
pub(crate) fn most(
    entries: &[(ColumnId, Number)],
    without: ColumnId,
    bounds: &[Bounds],
) -> Option<Number> {
    let mut sum = Number::ZERO;
    for (column, a) in entries.iter().filter(|(column, _)| *column != without) {
        sum += part(a, &bounds[column.index()], true)?;
    }
    Some(sum)
}

/// The model with these bounds in place of its own.
pub(crate) fn with_bounds(model: &Model, bounds: &[Bounds]) -> Model {
    let own = bounds_of(model);
    let changed = bounds.iter().zip(&own).enumerate().filter(|(_, (new, old))| new != old);
    let changed = changed.map(|(index, ((lower, upper), _))| {
        (ColumnId::from_index(index), lower.clone(), upper.clone())
    });
    model.bounded(&changed.collect::<Vec<_>>())
}
