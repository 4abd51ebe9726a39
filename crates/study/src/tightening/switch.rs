//! Rows that a binary switches, and what a reach of the rest leaves of them.

use model::{ColumnId, Model, Number, Row, RowId};

use super::Rewritten;
use crate::propagate::{AtMost, sides};

/// A row that a binary switches.
pub(super) struct Switched {
    pub(super) row: RowId,
    pub(super) half: AtMost,
    turned: bool,
    pub(super) switch: ColumnId,
    pub(super) coefficient: Number,
}

impl Switched {
    /// The value of the switch that opens the row.
    pub(super) fn open(&self) -> Number {
        if self.coefficient < Number::ZERO { Number::ONE } else { Number::ZERO }
    }

    /// What the rest may reach at most where the row is open.
    pub(super) fn allows(&self) -> Number {
        &self.half.side - &self.coefficient * self.open()
    }

    /// The entries but that of the switch.
    pub(super) fn rest(&self) -> Vec<(ColumnId, Number)> {
        let own = |(column, _): &&(ColumnId, Number)| *column != self.switch;
        self.half.entries.iter().filter(own).cloned().collect()
    }
}

/// The rows that are in and one-sided, and whose largest coefficient is that of a binary.
pub(super) fn switched(model: &Model) -> Vec<Switched> {
    let rows = (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row));
    rows.filter_map(|row| switch_of(model, row)).collect()
}

fn switch_of(model: &Model, row: RowId) -> Option<Switched> {
    let mut sides = sides(model, row);
    let (half, turned) = sides.pop().filter(|_| sides.is_empty())?;
    if half.entries.len() < 2 {
        return None;
    }
    let size = |a: &Number| if *a < Number::ZERO { -a.clone() } else { a.clone() };
    let largest = half.entries.iter().map(|(_, a)| size(a)).max()?;
    let mut largest = half.entries.iter().filter(|(_, a)| size(a) == largest);
    let (switch, coefficient) = largest.next().filter(|_| largest.next().is_none())?.clone();
    model.is_binary(switch).then_some(Switched { row, half, turned, switch, coefficient })
}

/// The coefficient and the side that a reach leaves; none where the row is no smaller by it.
pub(super) fn smaller(switched: &Switched, reach: &Number) -> Option<(Number, Number)> {
    let (m, side) = (&switched.coefficient, &switched.half.side);
    if *m < Number::ZERO {
        let needed = side - reach;
        (needed > *m && needed < Number::ZERO).then(|| (needed, side.clone()))
    } else {
        let needed = m - (side - reach);
        (reach < side && needed > Number::ZERO).then(|| (needed, reach.clone()))
    }
}

/// Puts the tighter row in place.
pub(super) fn take(rows: &mut Rewritten, switched: &Switched, reach: Option<Number>) {
    let Some((coefficient, side)) = reach.and_then(|reach| smaller(switched, &reach)) else {
        return;
    };
    let back = |number: Number| if switched.turned { -number } else { number };
    let entries = switched.half.entries.iter().map(|(column, a)| {
        let a = if *column == switched.switch { &coefficient } else { a };
        (*column, back(a.clone()))
    });
    let entries = entries.collect();
    let side = Some(back(side));
    let row = if switched.turned {
        Row { entries, lower: side, upper: None }
    } else {
        Row { entries, lower: None, upper: side }
    };
    rows.insert(switched.row, row);
}
