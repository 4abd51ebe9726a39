//! Sums of rows with multipliers, as equations with slacks that are not negative:
//! `Σ a x + Σ c s = b`.

use std::collections::BTreeMap;

use model::{ColumnId, Model, Number, Row, nearest_f64};

use super::derivation::Used;

/// What holds everywhere in the tree: the bounds of columns and which are whole.
#[derive(Debug, Clone)]
pub struct Frame {
    /// Lower and upper bound of each column; `None` is infinite.
    pub bounds: Vec<(Option<Number>, Option<Number>)>,
    /// Whether each column is whole.
    pub integer: Vec<bool>,
}

impl Frame {
    /// The bounds of a model.
    #[must_use]
    pub fn new(model: &Model) -> Self {
        let exact = |id: Option<model::NumberId>| id.map(|id| model.numbers().exact(id).clone());
        let columns = model.columns().iter();
        Self {
            bounds: columns.clone().map(|c| (exact(c.lower), exact(c.upper))).collect(),
            integer: columns.map(|c| c.integer).collect(),
        }
    }

    /// Whether a column is whole with the bounds 0 and 1.
    #[must_use]
    pub fn is_binary(&self, column: ColumnId) -> bool {
        let binary = (Some(Number::ZERO), Some(Number::ONE));
        self.integer[column.index()] && self.bounds[column.index()] == binary
    }

    pub(super) fn is_whole(&self, row: &Row) -> bool {
        row.entries.iter().all(|(column, a)| self.integer[column.index()] && a.is_int())
    }
}

/// The slack of a row against one of its sides.
#[derive(Debug, Clone)]
pub(super) struct Slack {
    /// Its coefficient in the sum.
    pub(super) coefficient: Number,
    /// The row as `entries ≤ side`, so that the slack is `side − entries`.
    pub(super) entries: Vec<(ColumnId, Number)>,
    pub(super) side: Number,
    /// Whether it is whole at every whole point.
    pub(super) whole: bool,
}

/// A sum of rows.
#[derive(Debug, Clone, Default)]
pub struct Aggregate {
    pub(super) coefficients: BTreeMap<ColumnId, Number>,
    pub(super) slacks: Vec<Slack>,
    pub(super) right: Number,
    /// The rows that it is made of.
    pub(super) used: Vec<(Used, Number)>,
}

impl Aggregate {
    /// Adds `multiplier · row`, of which the number is given, against the side that is nearer to
    /// `x`; false, and nothing added, where the row has none. `O(entries · log)`.
    pub fn add(
        &mut self,
        frame: &Frame,
        (number, row): (usize, &Row),
        multiplier: &Number,
        x: &[f64],
    ) -> bool {
        let activity = row.activity(x);
        let gap = |side: &Option<Number>| {
            side.as_ref().map_or(f64::INFINITY, |side| (nearest_f64(side) - activity).abs())
        };
        let upper = gap(&row.upper) <= gap(&row.lower);
        self.add_side(frame, (Used { row: number, upper }, row), multiplier)
    }

    /// Adds `multiplier · row` against this side; false where the row has none.
    pub(super) fn add_side(
        &mut self,
        frame: &Frame,
        (used, row): (Used, &Row),
        multiplier: &Number,
    ) -> bool {
        let upper = used.upper;
        let Some(side) = (if upper { &row.upper } else { &row.lower }) else { return false };
        for (column, a) in &row.entries {
            *self.coefficients.entry(*column).or_default() += a * multiplier;
        }
        self.coefficients.retain(|_, a| !a.is_zero());
        self.right += side * multiplier;
        self.used.push((used, multiplier.clone()));
        if row.lower == row.upper {
            return true;
        }
        let sign = Number::from(if upper { 1 } else { -1 });
        self.slacks.push(Slack {
            coefficient: multiplier * &sign,
            entries: row.entries.iter().map(|(column, a)| (*column, a * &sign)).collect(),
            side: side * &sign,
            whole: frame.is_whole(row) && side.is_int(),
        });
        true
    }

    /// The coefficient of a column.
    #[must_use]
    pub fn coefficient(&self, column: ColumnId) -> Option<&Number> {
        self.coefficients.get(&column)
    }

    /// The columns with a coefficient.
    pub fn columns(&self) -> impl Iterator<Item = ColumnId> {
        self.coefficients.keys().copied()
    }

    /// The same turned round: `Σ −a x + Σ −c s = −b`.
    #[must_use]
    pub fn turned(&self) -> Self {
        let mut turned = self.clone();
        turned.right = -turned.right;
        turned.used.iter_mut().for_each(|(_, y)| *y = -y.clone());
        turned.coefficients.values_mut().for_each(|a| *a = -a.clone());
        turned.slacks.iter_mut().for_each(|slack| slack.coefficient = -slack.coefficient.clone());
        turned
    }
}
