//! Completion times: a variable that says when something is done is a chart over time, a strip for
//! each, which ends there (Gantt 1919).
//!
//! How long each lasts is read from the rows. Of two on one machine, `C_j ≥ C_i + p_j − M (1 − d)`:
//! with the choice made, the later one ends `p_j` after the other. In a linear ordering,
//! `C_j ≥ p_j + Σ p_i d_ij`: with nothing before it, it lasts until it ends.

use std::collections::BTreeMap;

use model::{ColumnId, Model, RowId, VariableId};
use record::message::{Drawing, Part};

use super::strips::{PARTS, Stacked, at_least};
use super::{TIGHT, name_of, values};

/// How a variable of completion times is drawn.
#[derive(Debug, Clone)]
pub(super) struct Ends {
    variable: VariableId,
    /// How long what each column ends has lasted.
    lasts: BTreeMap<ColumnId, f64>,
}

/// What rows say of how long each lasts.
#[derive(Default)]
struct Told {
    lasts: BTreeMap<ColumnId, f64>,
    /// The earliest end of each.
    earliest: BTreeMap<ColumnId, f64>,
}

impl Ends {
    /// The chart of a continuous variable with one index, each of whose columns is seen to last, and
    /// cannot end before. `O(nonzeros)`.
    pub(super) fn new(model: &Model, variable: VariableId, length: usize) -> Option<Self> {
        let columns = model.variables()[variable.index()].columns.clone().map(ColumnId);
        let whole = columns.clone().any(|column| model.columns()[column.index()].integer);
        if whole || columns.len() > PARTS || length != 1 {
            return None;
        }
        let mut told = Told::default();
        for column in columns.clone() {
            let lower = model.columns()[column.index()].lower;
            told.ends_after(column, lower.map_or(0.0, |id| model.numbers().float(id)));
        }
        for row in (0..model.row_count()).map(RowId::from_index) {
            told.hear(model, variable, row)?;
        }
        let fits = |column| {
            let (lasts, earliest) = (told.lasts.get(&column), told.earliest.get(&column));
            lasts.zip(earliest).is_some_and(|(lasts, earliest)| earliest - lasts >= -TIGHT * lasts)
        };
        columns.clone().all(fits).then_some(Self { variable, lasts: told.lasts })
    }

    /// The chart of a point.
    pub(super) fn drawing(&self, model: &Model, x: &[f64]) -> Drawing {
        let mut strips = Stacked::default();
        for (column, to) in values(model, self.variable, x) {
            let from = to - self.lasts.get(&column).copied().unwrap_or_default();
            let part = Part { name: String::new(), from, to, value: 1.0, column: column.0 };
            strips.add(model, model.column_tuple(column), None, &part);
        }
        strips.drawing(name_of(model, self.variable))
    }
}

impl Told {
    fn ends_after(&mut self, column: ColumnId, time: f64) {
        let known = self.earliest.entry(column).or_insert(time);
        if time > *known {
            *known = time;
        }
    }

    /// Takes in what a row says; none where it contradicts what another said, as rows with times between
    /// jobs do.
    fn hear(&mut self, model: &Model, variable: VariableId, row: RowId) -> Option<()> {
        let Some((sign, side)) = at_least(model, row) else { return Some(()) };
        let own = |column: ColumnId| model.columns()[column.index()].variable == variable;
        let entries = model.row_entries(row).iter();
        let entries = entries.map(|&(column, a)| (column, sign * model.numbers().float(a)));
        let (ends, others): (Vec<_>, Vec<_>) = entries.partition(|&(column, _)| own(column));
        let chosen = others.iter().all(|&(column, _)| model.columns()[column.index()].integer);
        match (ends.as_slice(), others.as_slice()) {
            (&[(column, a)], []) if a > 0.0 => self.ends_after(column, side / a),
            (&[(column, a)], rest) if a > 0.0 && chosen && rest.iter().all(|one| one.1 < 0.0) => {
                let time = side / a;
                let known = self.lasts.entry(column).or_insert(time);
                if time > *known {
                    *known = time;
                }
            }
            (&[one, other], &[(_, choice)]) if chosen && one.1 + other.1 == 0.0 => {
                let (column, a) = if one.1 > 0.0 { one } else { other };
                let made = if choice < 0.0 { side - choice } else { side };
                let time = made / a;
                let known = *self.lasts.entry(column).or_insert(time);
                if (known - time).abs() > TIGHT * (1.0 + time.abs()) {
                    return None;
                }
            }
            _ => {}
        }
        Some(())
    }
}
