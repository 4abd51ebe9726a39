//! The rows of a model from both sides: by row and by column.

use model::{ColumnId, FamilyState, Model, Number, NumberId, RowId};

/// A model with its rows by column.
pub(super) struct Facts<'m> {
    pub(super) model: &'m Model,
    /// The written rows of families that hold.
    pub(super) rows: Vec<RowId>,
    /// Their entries by column.
    pub(super) by_column: Vec<Vec<(RowId, NumberId)>>,
    /// Whether a column stands in a family over subsets.
    pub(super) separated: Vec<bool>,
}

/// A side or a bound; `None` is infinite.
pub(super) type End<'n> = Option<&'n Number>;

impl<'m> Facts<'m> {
    pub(super) fn new(model: &'m Model) -> Self {
        let holds = |row: &RowId| {
            let family = &model.families()[model.row_family(*row).index()];
            family.state != FamilyState::Out
        };
        let rows: Vec<RowId> =
            (0..model.row_count()).map(RowId::from_index).filter(holds).collect();
        let mut by_column = vec![Vec::new(); model.columns().len()];
        for &row in &rows {
            for &(column, a) in model.row_entries(row) {
                by_column[column.index()].push((row, a));
            }
        }
        let mut separated = vec![false; model.columns().len()];
        for term in model.subset_families().iter().flat_map(|family| &family.terms) {
            separated[term.column.index()] = true;
        }
        Self { model, rows, by_column, separated }
    }

    pub(super) fn number(&self, id: NumberId) -> &'m Number {
        self.model.numbers().exact(id)
    }

    /// Lower and upper side of a row.
    pub(super) fn sides(&self, row: RowId) -> (End<'m>, End<'m>) {
        let (lower, upper) = self.model.row_sides(row);
        (lower.map(|id| self.number(id)), upper.map(|id| self.number(id)))
    }

    /// Lower and upper bound of a column.
    pub(super) fn bounds(&self, column: ColumnId) -> (End<'m>, End<'m>) {
        let found = &self.model.columns()[column.index()];
        (found.lower.map(|id| self.number(id)), found.upper.map(|id| self.number(id)))
    }

    /// Whether a column takes 0 and 1 only.
    pub(super) fn is_binary(&self, column: ColumnId) -> bool {
        let whole = self.model.columns()[column.index()].integer;
        let ends = |value: End<'_>, end: &Number| value.is_some_and(|value| value == end);
        let (lower, upper) = self.bounds(column);
        whole && ends(lower, &Number::ZERO) && ends(upper, &Number::ONE)
    }

    /// The number of the variable of a column.
    pub(super) fn variable(&self, column: ColumnId) -> usize {
        self.model.columns()[column.index()].variable.index()
    }

    /// The number of the family of a row.
    pub(super) fn family(&self, row: RowId) -> usize {
        self.model.row_family(row).index()
    }

    /// A row with one side as entries with an upper side; `None` for a row with two sides.
    pub(super) fn at_most(&self, row: RowId) -> Option<(Vec<(ColumnId, Number)>, Number)> {
        let entries = self.model.row_entries(row).iter();
        let exact = entries.map(|&(column, a)| (column, self.number(a).clone()));
        match self.sides(row) {
            (None, Some(upper)) => Some((exact.collect(), upper.clone())),
            (Some(lower), None) => Some((exact.map(|(c, a)| (c, -a)).collect(), -lower.clone())),
            _ => None,
        }
    }
}
