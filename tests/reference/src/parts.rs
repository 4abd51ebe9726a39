//! The relaxation of a model taken apart into columns and rows of exact numbers, changed and put together again.

use model::{ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, RowId, Sense};

/// Columns, and the rows that are in.
#[derive(Debug, Clone)]
pub struct Parts {
    /// Whether larger is better.
    pub sense: Sense,
    /// What is added to the objective.
    pub offset: Number,
    /// The columns.
    pub columns: Vec<ColumnSpec>,
    /// The rows.
    pub rows: Vec<Row>,
}

impl Parts {
    /// Takes the relaxation of a model apart: nothing must be whole.
    #[must_use]
    pub fn of(model: &Model) -> Self {
        let exact = |id: model::NumberId| model.numbers().exact(id).clone();
        let columns = model.columns().iter().map(|column| ColumnSpec {
            lower: column.lower.map(exact),
            upper: column.upper.map(exact),
            cost: exact(column.cost),
            integer: false,
        });
        let rows = (0..model.row_count()).map(RowId::from_index);
        let rows = rows.filter(|&row| model.row_is_in(row)).map(|row| model.row(row));
        Self {
            sense: model.sense(),
            offset: model.offset().clone(),
            columns: columns.collect(),
            rows: rows.collect(),
        }
    }

    /// Puts it together.
    ///
    /// # Panics
    /// When a row names a column that is not there.
    #[must_use]
    pub fn build(&self) -> Model {
        let mut builder = ModelBuilder::new("put together", self.sense);
        builder.offset(self.offset.clone());
        for (place, column) in self.columns.iter().enumerate() {
            builder.variable(&format!("x{place}"), false);
            builder.column(&[], column).unwrap();
        }
        builder.family("rows", FamilyState::In, false);
        for row in &self.rows {
            builder.row(&[], row.clone()).unwrap();
        }
        builder.build()
    }

    /// Sides so wide that the point at which every column is at the bound nearest to 0 is within
    /// all rows.
    pub fn widen(&mut self) {
        let at: Vec<Number> = self.columns.iter().map(nearest_to_zero).collect();
        for row in &mut self.rows {
            let value =
                row.entries.iter().fold(Number::ZERO, |sum, (c, a)| sum + a * &at[c.index()]);
            if row.lower.as_ref().is_some_and(|lower| *lower > value) {
                row.lower = Some(value.clone());
            }
            if row.upper.as_ref().is_some_and(|upper| *upper < value) {
                row.upper = Some(value);
            }
        }
    }

    /// Columns and rows in another order: `order` has the old place of each column.
    #[must_use]
    pub fn permuted(&self, order: &[usize]) -> Self {
        let mut place = vec![0; order.len()];
        order.iter().enumerate().for_each(|(new, &old)| place[old] = new);
        let moved = |row: &Row| Row {
            entries: row.entries.iter().map(|(c, a)| (at(place[c.index()]), a.clone())).collect(),
            ..row.clone()
        };
        Self {
            columns: order.iter().map(|&old| self.columns[old].clone()).collect(),
            rows: self.rows.iter().rev().map(moved).collect(),
            ..self.clone()
        }
    }

    /// Columns in other units and rows times a factor, all positive.
    #[must_use]
    pub fn scaled(&self, columns: &[Number], rows: &[Number]) -> Self {
        let mut out = self.clone();
        for (column, factor) in out.columns.iter_mut().zip(columns) {
            column.cost = &column.cost * factor;
            column.lower = column.lower.take().map(|bound| bound / factor);
            column.upper = column.upper.take().map(|bound| bound / factor);
        }
        for (row, factor) in out.rows.iter_mut().zip(rows) {
            row.entries.iter_mut().for_each(|(c, a)| *a = &*a * factor * &columns[c.index()]);
            row.lower = row.lower.take().map(|side| side * factor);
            row.upper = row.upper.take().map(|side| side * factor);
        }
        out
    }

    /// Every column and the objective turned round: the optimum changes its sign.
    #[must_use]
    pub fn negated(&self) -> Self {
        let mut out = self.clone();
        out.sense = match self.sense {
            Sense::Minimise => Sense::Maximise,
            Sense::Maximise => Sense::Minimise,
        };
        out.offset = -&self.offset;
        // x = −x' turns costs round, and so does the objective: they stay as they are.
        for (new, old) in out.columns.iter_mut().zip(&self.columns) {
            new.lower = old.upper.as_ref().map(|bound| -bound);
            new.upper = old.lower.as_ref().map(|bound| -bound);
        }
        // Entries turn round with their columns, so that the sides of a row stay.
        for row in &mut out.rows {
            row.entries.iter_mut().for_each(|(_, a)| *a = -&*a);
        }
        out
    }

    /// Every row a second time, doubled, and every column as the sum of two halves of its range.
    #[must_use]
    pub fn duplicated(&self) -> Self {
        let two = Number::from(2);
        let half = |bound: &Option<Number>| bound.as_ref().map(|bound| bound / &two);
        let one = |spec: &ColumnSpec| ColumnSpec {
            lower: half(&spec.lower),
            upper: half(&spec.upper),
            ..spec.clone()
        };
        let columns: Vec<ColumnSpec> =
            self.columns.iter().flat_map(|spec| [one(spec), one(spec)]).collect();
        let mut rows = Vec::new();
        for row in &self.rows {
            let both = |(c, a): &(ColumnId, Number)| {
                [(at(2 * c.index()), a.clone()), (at(2 * c.index() + 1), a.clone())]
            };
            let entries: Vec<(ColumnId, Number)> = row.entries.iter().flat_map(both).collect();
            let doubled = entries.iter().map(|(c, a)| (*c, a * &two)).collect();
            let times = |side: &Option<Number>| side.as_ref().map(|side| side * &two);
            let again =
                Row { entries: doubled, lower: times(&row.lower), upper: times(&row.upper) };
            rows.extend([Row { entries, ..row.clone() }, again]);
        }
        Self { columns, rows, ..self.clone() }
    }
}

fn at(place: usize) -> ColumnId {
    ColumnId::from_index(place)
}

fn nearest_to_zero(column: &ColumnSpec) -> Number {
    let zero = Number::ZERO;
    let over = column.lower.clone().filter(|lower| *lower > zero);
    let under = column.upper.clone().filter(|upper| *upper < zero);
    over.or(under).unwrap_or(zero)
}
