//! The same model with something changed: what studies ask of a model beside what it says.

use std::collections::BTreeMap;

use crate::builder::merged;
use crate::{
    ColumnId, FamilyId, FamilyState, Model, ModelBuilder, ModelError, Number, Row, RowId, Sense,
    VariableId,
};

impl Model {
    /// The model with these families left out. `O(size of the model)`.
    #[must_use]
    pub fn left_out(&self, families: &[FamilyId]) -> Self {
        let mut model = self.clone();
        for id in families {
            model.families[id.index()].state = FamilyState::Out;
        }
        model.subset_families.retain(|family| !families.contains(&family.family));
        model
    }

    /// The model with the columns of these variables allowed to be fractional.
    #[must_use]
    pub fn relaxed(&self, variables: &[VariableId]) -> Self {
        let mut model = self.clone();
        for column in &mut model.columns {
            column.integer &= !variables.contains(&column.variable);
        }
        model
    }

    /// The model with these columns whole between 0 and 1.
    #[must_use]
    pub fn whole(&self, columns: &[ColumnId]) -> Self {
        let between = |&column: &ColumnId| (column, Some(Number::ZERO), Some(Number::ONE));
        let mut model = self.bounded(&columns.iter().map(between).collect::<Vec<_>>());
        for column in columns {
            model.columns[column.index()].integer = true;
        }
        model
    }

    /// The model with other bounds on these columns; `None` is infinite.
    #[must_use]
    pub fn bounded(&self, bounds: &[(ColumnId, Option<Number>, Option<Number>)]) -> Self {
        let mut model = self.clone();
        for (column, lower, upper) in bounds {
            let numbers = &mut model.numbers;
            let ids = [lower, upper].map(|side| side.as_ref().map(|number| numbers.intern(number)));
            let column = &mut model.columns[column.index()];
            [column.lower, column.upper] = ids;
        }
        model
    }

    /// The same rows under another objective: these costs, 0 for every other column, no constant.
    #[must_use]
    pub fn priced(&self, sense: Sense, costs: &[(ColumnId, Number)]) -> Self {
        let mut model = self.clone();
        model.sense = sense;
        model.offset = Number::ZERO;
        let zero = model.numbers.intern(&Number::ZERO);
        for column in &mut model.columns {
            column.cost = zero;
        }
        for (column, cost) in costs {
            model.columns[column.index()].cost = model.numbers.intern(cost);
        }
        model
    }

    /// The model with a further family of rows at its end.
    ///
    /// # Errors
    /// A row that names a column that is not there, or more rows than can be counted.
    pub fn with_rows(&self, family: &str, rows: Vec<Row>) -> Result<Self, ModelError> {
        let mut builder = ModelBuilder::from_model(self.clone());
        builder.family(family, FamilyState::In, false);
        for row in rows {
            builder.row(&[], row)?;
        }
        Ok(builder.build())
    }

    /// The same with the rows numbered from 1.
    ///
    /// # Errors
    /// As [`Self::with_rows`].
    pub fn with_numbered_rows(&self, family: &str, rows: Vec<Row>) -> Result<Self, ModelError> {
        let mut builder = ModelBuilder::from_model(self.clone());
        builder.family(family, FamilyState::In, false);
        for (place, row) in rows.into_iter().enumerate() {
            let label = builder.label(&(place + 1).to_string());
            builder.row(&[label], row)?;
        }
        Ok(builder.build())
    }

    /// The model with these rows in place of those that stand there. `O(size of the model)`.
    ///
    /// # Errors
    /// A row that names a column that is not there, or more entries than can be counted.
    pub fn rewritten(&self, rows: &BTreeMap<RowId, Row>) -> Result<Self, ModelError> {
        let mut model = self.clone();
        (model.entries, model.row_start) = (Vec::with_capacity(self.entries.len()), vec![0]);
        for id in (0..self.row_count()).map(RowId::from_index) {
            match rows.get(&id) {
                None => model.entries.extend_from_slice(self.row_entries(id)),
                Some(row) => model.rewrite(id, row)?,
            }
            let end = u32::try_from(model.entries.len()).map_err(|_| ModelError::TooLarge)?;
            model.row_start.push(end);
        }
        Ok(model)
    }

    fn rewrite(&mut self, id: RowId, row: &Row) -> Result<(), ModelError> {
        for (column, coefficient) in merged(row.entries.clone()) {
            if column.index() >= self.columns.len() {
                return Err(ModelError::UnknownColumn(column));
            }
            let number = self.numbers.intern(&coefficient);
            self.entries.push((column, number));
        }
        let numbers = &mut self.numbers;
        let mut side = |side: &Option<Number>| side.as_ref().map(|number| numbers.intern(number));
        self.row_sides[id.index()] = (side(&row.lower), side(&row.upper));
        Ok(())
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::ColumnSpec;

    fn number(value: i32) -> Number {
        Number::from(value)
    }

    /// min 2x + 3y + 1, cover: x + y ≥ 1, cap: x ≤ 4; both whole, 0 to 9.
    fn model() -> Result<Model, ModelError> {
        let mut builder = ModelBuilder::new("two", Sense::Minimise);
        let whole = |cost| ColumnSpec {
            lower: Some(Number::ZERO),
            upper: Some(number(9)),
            cost: number(cost),
            integer: true,
        };
        builder.offset(Number::ONE);
        builder.variable("x", false);
        let x = builder.column(&[], &whole(2))?;
        builder.variable("y", false);
        let y = builder.column(&[], &whole(3))?;
        builder.family("cover", FamilyState::In, false);
        let entries = vec![(x, number(1)), (y, number(1))];
        builder.row(&[], Row { entries, lower: Some(Number::ONE), upper: None })?;
        builder.family("cap", FamilyState::In, false);
        builder
            .row(&[], Row { entries: vec![(x, number(1))], lower: None, upper: Some(number(4)) })?;
        Ok(builder.build())
    }

    #[test]
    fn each_variant_changes_one_thing() -> Result<(), ModelError> {
        let model = model()?;
        let cap = FamilyId::from_index(1);
        let out = model.left_out(&[cap]);
        assert!(!out.row_is_in(RowId(1)) && out.row_is_in(RowId(0)));
        assert_eq!(out.columns(), model.columns());

        let relaxed = model.relaxed(&[VariableId::from_index(1)]);
        assert!(relaxed.columns()[0].integer && !relaxed.columns()[1].integer);

        let fixed = model.bounded(&[(ColumnId(0), Some(number(3)), Some(number(3)))]);
        let bound = |id: Option<crate::NumberId>| id.map(|id| fixed.numbers().exact(id).clone());
        assert_eq!(bound(fixed.columns()[0].lower), Some(number(3)));
        assert_eq!(bound(fixed.columns()[1].upper), Some(number(9)));

        let priced = model.priced(Sense::Maximise, &[(ColumnId(1), number(-7))]);
        assert_eq!(priced.offset(), &Number::ZERO);
        let cost = |column: usize| priced.numbers().exact(priced.columns()[column].cost).clone();
        assert_eq!((cost(0), cost(1)), (Number::ZERO, number(-7)));

        let entries = vec![(ColumnId(1), number(1))];
        let row = Row { entries, lower: None, upper: Some(number(2)) };
        let more = model.with_rows("further", vec![row.clone()])?;
        assert_eq!((more.row_count(), more.row_name(RowId(2))), (3, "further".to_owned()));
        assert_eq!(more.row(RowId(2)), row);

        let entries = vec![(ColumnId(0), number(1)), (ColumnId(1), number(5))];
        let row = Row { entries, lower: Some(number(2)), upper: None };
        let other = model.rewritten(&BTreeMap::from([(RowId(0), row.clone())]))?;
        assert_eq!((other.row(RowId(0)), other.row(RowId(1))), (row, model.row(RowId(1))));
        Ok(())
    }
}
