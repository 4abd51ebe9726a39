//! Labels that a model does not tell apart: exchanging two of them in every tuple gives the same
//! columns with the same data and the same rows. Such labels make copies of each plan, and a
//! search meets them all.

use std::collections::BTreeMap;

use model::{ColumnId, LabelId, Model, RowId};

/// Entries looked at in all at most.
const MOST_WORK: usize = 5_000_000;

/// The largest set of labels next to each other that the model does not tell apart; empty where
/// there are no two, or where families over subsets make it hard to say. `O(labels · non-zeros)`,
/// cut short at a fixed amount of work.
pub(crate) fn copies(model: &Model) -> Vec<LabelId> {
    if !model.subset_families().is_empty() {
        return Vec::new();
    }
    let mut work = MOST_WORK;
    let size = model.columns().len()
        + (0..model.row_count())
            .map(|r| 1 + model.row_entries(RowId::from_index(r)).len())
            .sum::<usize>();
    let mut best: Vec<LabelId> = Vec::new();
    for labels in index_sets(model) {
        let mut run: Vec<LabelId> = Vec::new();
        for label in labels {
            let same = match run.last() {
                Some(&last) if work >= size => {
                    work -= size;
                    is_exchangeable(model, last, label)
                }
                _ => false,
            };
            if !same {
                run.clear();
            }
            run.push(label);
            if run.len() > best.len() {
                best.clone_from(&run);
            }
        }
    }
    if best.len() > 1 { best } else { Vec::new() }
}

/// The labels at each place of each variable's tuples, without repeated sets.
#[must_use]
pub fn index_sets(model: &Model) -> Vec<Vec<LabelId>> {
    let mut sets: Vec<Vec<LabelId>> = Vec::new();
    for variable in model.variables() {
        let columns = variable.columns.clone().map(ColumnId);
        let mut places: Vec<Vec<LabelId>> = Vec::new();
        for column in columns {
            let tuple = model.column_tuple(column);
            places.resize(
                if tuple.len() > places.len() { tuple.len() } else { places.len() },
                Vec::new(),
            );
            for (place, &label) in places.iter_mut().zip(tuple) {
                place.push(label);
            }
        }
        for mut labels in places {
            labels.sort_unstable();
            labels.dedup();
            if !sets.contains(&labels) {
                sets.push(labels);
            }
        }
    }
    sets
}

/// Whether exchanging two labels gives the same model.
fn is_exchangeable(model: &Model, a: LabelId, b: LabelId) -> bool {
    exchanged(model, a, b).is_some_and(|image| is_symmetry(model, &image))
}

/// Whether a permutation of columns (the column that each becomes) gives the same written model:
/// the same data of columns, and each row becomes another with the same sides. Families over
/// subsets are not looked at. `O(non-zeros · log)`.
#[must_use]
pub fn is_symmetry(model: &Model, image: &[usize]) -> bool {
    let data = |column: usize| {
        let column = &model.columns()[column];
        (column.cost, column.lower, column.upper, column.integer)
    };
    if (0..image.len()).any(|column| data(column) != data(image[column])) {
        return false;
    }
    let rows = || (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row));
    let written = |row: RowId, of: &dyn Fn(usize) -> usize| {
        let entries = model.row_entries(row).iter();
        let mut entries: Vec<(usize, model::NumberId)> =
            entries.map(|&(column, a)| (of(column.index()), a)).collect();
        entries.sort_unstable();
        (entries, model.row_sides(row))
    };
    // Only rows that an exchanged column stands in can change.
    let moved = |row: &RowId| {
        model.row_entries(*row).iter().any(|(column, _)| image[column.index()] != column.index())
    };
    let mut count: BTreeMap<_, i64> = BTreeMap::new();
    for row in rows().filter(moved) {
        *count.entry(written(row, &|column| column)).or_default() += 1;
        *count.entry(written(row, &|column| image[column])).or_default() -= 1;
    }
    count.values().all(|&count| count == 0)
}

/// The column that each becomes when two labels are exchanged in every tuple; `None` where one has
/// no image, or no tuple has them.
#[must_use]
pub fn exchanged(model: &Model, a: LabelId, b: LabelId) -> Option<Vec<usize>> {
    let mut image: Vec<usize> = (0..model.columns().len()).collect();
    let mut any = false;
    for variable in model.variables() {
        let columns = || variable.columns.clone().map(ColumnId);
        let touched = |column: &ColumnId| {
            let tuple = model.column_tuple(*column);
            tuple.contains(&a) || tuple.contains(&b)
        };
        let places: BTreeMap<&[LabelId], usize> =
            columns().filter(touched).map(|c| (model.column_tuple(c), c.index())).collect();
        for column in columns().filter(touched) {
            let turned: Vec<LabelId> = model
                .column_tuple(column)
                .iter()
                .map(|&label| {
                    if label == a {
                        b
                    } else if label == b {
                        a
                    } else {
                        label
                    }
                })
                .collect();
            image[column.index()] = *places.get(turned.as_slice())?;
            any = true;
        }
    }
    any.then_some(image)
}
