//! Rows that leave one order of interchangeable labels: what a variable says of the first is at
//! least what it says of the second, and so on. Every plan has a copy that meets them, since
//! exchanging labels exchanges those values.

use std::collections::BTreeSet;

use model::{ColumnId, LabelId, Model, Number, Row};

use super::rows;

/// What a variable says of each of the labels: the columns whose value is compared.
struct Measure {
    variable: String,
    /// Columns by label, in the order of the labels.
    columns: Vec<Vec<ColumnId>>,
}

/// The order rows of a class of labels, in words.
pub(super) fn words(model: &Model, labels: &[LabelId]) -> Vec<String> {
    let Some(measure) = measure(model, labels) else { return Vec::new() };
    let side = |place: usize| match measure.columns[place].as_slice() {
        [one] => model.column_name(*one),
        _ => format!("Σ {}[…{}…]", measure.variable, model.labels().name(labels[place])),
    };
    (1..labels.len()).map(|place| format!("{} ≥ {}", side(place - 1), side(place))).collect()
}

/// The model with the order rows of every class, in MPS; `None` where there are none or they
/// cannot be written.
pub(super) fn ordered(model: &Model, classes: &[Vec<LabelId>]) -> Option<String> {
    let mut added = Vec::new();
    // The order of one class may take away the freedom of another: one class is ordered.
    let largest =
        classes.iter().max_by_key(|labels| (labels.len(), usize::MAX - labels[0].index()))?;
    let measure = measure(model, largest)?;
    for pair in measure.columns.windows(2) {
        let part = |columns: &[ColumnId], one: Number| {
            columns.iter().map(move |&column| (column, one.clone())).collect::<Vec<_>>()
        };
        let entries = [part(&pair[0], Number::ONE), part(&pair[1], -Number::ONE)].concat();
        added.push(Row { entries, lower: Some(Number::ZERO), upper: None });
    }
    let ordered = model.with_rows("in order", added).ok()?;
    model::mps::write(&ordered).ok().map(|written| written.text)
}

/// The variable that has the fewest columns of each label, those whose values add up to a
/// constant left out.
fn measure(model: &Model, labels: &[LabelId]) -> Option<Measure> {
    let fixed = fixed_sums(model);
    let mut best: Option<Measure> = None;
    for variable in model.variables() {
        let ids = || variable.columns.clone().map(ColumnId);
        let places = ids().map(|column| model.column_tuple(column).len()).max().unwrap_or(0);
        for place in 0..places {
            let of = |label: &LabelId| {
                let own = |column: &ColumnId| model.column_tuple(*column).get(place) == Some(label);
                ids().filter(own).collect::<Vec<ColumnId>>()
            };
            let columns: Vec<Vec<ColumnId>> = labels.iter().map(of).collect();
            let usable = |own: &Vec<ColumnId>| {
                !own.is_empty() && !fixed.contains(&own.iter().copied().collect::<BTreeSet<_>>())
            };
            let better = best.as_ref().is_none_or(|b| columns[0].len() < b.columns[0].len());
            if columns.iter().all(usable) && better {
                best = Some(Measure { variable: variable.name.clone(), columns });
            }
        }
    }
    best
}

/// The sets of columns whose plain sum a row fixes.
fn fixed_sums(model: &Model) -> BTreeSet<BTreeSet<ColumnId>> {
    let fixes = |row: &model::RowId| {
        let (lower, upper) = model.row_sides(*row);
        let entries = model.row_entries(*row);
        lower.is_some() && lower == upper && entries.iter().all(|entry| entry.1 == entries[0].1)
    };
    let set = |row| model.row_entries(row).iter().map(|entry| entry.0).collect();
    rows(model).filter(fixes).map(set).collect()
}
