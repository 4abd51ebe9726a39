//! The same model with its rows and columns in another order: what a search that breaks ties by
//! number may go through otherwise.

use crate::{ColumnId, Model, NumberId, RowId};

impl Model {
    /// The model with the columns of each variable and the rows of each family in rising order of
    /// a key that is made of their names; the same names have the same order in every model.
    /// Also, for each new column, the number that it had. `O(non-zeros · log)`.
    #[must_use]
    pub fn reordered(&self, key: impl Fn(&str) -> u64) -> (Self, Vec<ColumnId>) {
        let mut model = self.clone();
        let mut columns: Vec<ColumnId> = Vec::with_capacity(self.columns.len());
        for variable in &self.variables {
            columns.extend(in_order(variable.columns.clone().map(ColumnId), |&column| {
                key(&self.column_name(column))
            }));
        }
        let mut place = vec![ColumnId(0); columns.len()];
        model.column_tuples = crate::model::Tuples::default();
        for (index, &old) in columns.iter().enumerate() {
            place[old.index()] = ColumnId::from_index(index);
            model.columns[index] = self.columns[old.index()];
            model.column_tuples.push(self.column_tuple(old));
        }
        let mut rows: Vec<RowId> = Vec::with_capacity(self.row_count());
        for family in &self.families {
            let own = family.rows.clone().map(RowId);
            rows.extend(in_order(own, |&row| key(&self.row_name(row))));
        }
        model.row_tuples = crate::model::Tuples::default();
        (model.entries, model.row_start) = (Vec::with_capacity(self.entries.len()), vec![0]);
        for (index, &old) in rows.iter().enumerate() {
            let entries = self.row_entries(old).iter();
            let mut entries: Vec<(ColumnId, NumberId)> =
                entries.map(|&(column, a)| (place[column.index()], a)).collect();
            entries.sort_unstable();
            model.entries.extend(entries);
            // No more entries than before.
            model.row_start.push(u32::try_from(model.entries.len()).unwrap_or(u32::MAX));
            model.row_sides[index] = self.row_sides[old.index()];
            model.row_tuples.push(self.row_tuple(old));
        }
        for family in &mut model.subset_families {
            family.terms.iter_mut().for_each(|term| term.column = place[term.column.index()]);
            family.terms.sort_by_key(|term| term.column);
        }
        (model, columns)
    }
}

/// These in rising order of a key, those of one key as they stood.
fn in_order<T>(items: impl Iterator<Item = T>, key: impl Fn(&T) -> u64) -> Vec<T> {
    let mut items: Vec<T> = items.collect();
    items.sort_by_cached_key(key);
    items
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{ColumnSpec, FamilyState, ModelBuilder, ModelError, Number, Row, Sense};

    #[test]
    fn every_entry_goes_with_its_row_and_column() -> Result<(), ModelError> {
        let mut builder = ModelBuilder::new("three", Sense::Minimise);
        builder.variable("x", false);
        let labels = ["a", "b", "c"].map(|name| builder.label(name));
        let mut columns = Vec::new();
        for (place, label) in labels.iter().enumerate() {
            let cost = Number::from(place);
            let spec = ColumnSpec { lower: None, upper: None, cost, integer: place == 0 };
            columns.push(builder.column(&[*label], &spec)?);
        }
        builder.family("r", FamilyState::In, false);
        for (place, label) in labels.iter().enumerate() {
            let entries = columns[..=place].iter().map(|&c| (c, Number::from(place + 1))).collect();
            builder
                .row(&[*label], Row { entries, lower: None, upper: Some(Number::from(place)) })?;
        }
        let model = builder.build();
        // Backwards: the last letter but one of "x[a]" is the label.
        let key = |name: &str| u64::MAX - u64::from(name.as_bytes()[2]);
        let (turned, from) = model.reordered(key);
        assert_eq!(from, [ColumnId(2), ColumnId(1), ColumnId(0)]);
        assert_eq!(turned.row_name(RowId(0)), "r[c]");
        assert_eq!(turned.column_name(ColumnId(2)), "x[a]");
        assert!(turned.columns()[2].integer && !turned.columns()[0].integer);
        for row in (0..3).map(RowId) {
            let old = RowId(2 - row.0);
            assert_eq!(turned.row_sides(row), model.row_sides(old));
            let mut back: Vec<_> =
                turned.row_entries(row).iter().map(|&(c, a)| (from[c.index()], a)).collect();
            back.sort_unstable();
            assert_eq!(back, model.row_entries(old));
        }
        Ok(())
    }
}
