//! Lift maps: from a plan in the natural variable of a family to the further columns of a rival,
//! the labels, flows and products that come with it.
//!
//! A rival says which further values go with a plan by its own rows: with the natural columns fixed
//! what is left is a small program, a flow, a potential or a choice, and any solution of it is a
//! lift. That none exists proves that the rival forbids the plan. So no rival needs a map of its
//! own, and a text that a person has edited has one too.

use std::collections::BTreeMap;

use model::{ColumnId, Model, Number};
use record::results::SolutionEntry;

/// Values within so much of a whole number are that number.
const WHOLE: f64 = 1e-6;

/// The values of one variable by their index labels.
pub type Part = BTreeMap<Vec<String>, f64>;

/// The columns of a variable by their index labels. `O(columns)`.
fn columns<'m>(
    model: &'m Model,
    variable: &'m str,
) -> impl Iterator<Item = (Vec<String>, ColumnId)> + 'm {
    let is_of = move |index: &usize| {
        let column = &model.columns()[*index];
        model.variables()[column.variable.index()].name == variable
    };
    (0..model.columns().len()).filter(is_of).map(move |index| {
        let id = ColumnId::from_index(index);
        let labels = model.column_tuple(id).iter();
        (labels.map(|&label| model.labels().name(label).to_owned()).collect(), id)
    })
}

/// The part of a solution that is of one variable. Empty where the model has no such variable.
#[must_use]
pub fn part(model: &Model, variable: &str, solution: &[f64]) -> Part {
    let value = |id: ColumnId| solution.get(id.index()).copied().unwrap_or_default();
    columns(model, variable).map(|(labels, id)| (labels, value(id))).collect()
}

/// The model with the columns of a variable held to a plan, those that the plan does not name left
/// free: a solution of it is a lift of the plan. `None` where it has no column that the plan names.
#[must_use]
pub fn given(model: &Model, variable: &str, plan: &Part) -> Option<Model> {
    let named = columns(model, variable);
    let values: Vec<(ColumnId, f64)> =
        named.filter_map(|(labels, id)| Some((id, *plan.get(&labels)?))).collect();
    (!values.is_empty()).then(|| held(model, &values))
}

/// The model with columns held to values, whole ones to whole numbers.
#[must_use]
pub fn held(model: &Model, values: &[(ColumnId, f64)]) -> Model {
    let bounds = values.iter().map(|&(column, value)| {
        let value = Number::try_from(rounded(value)).ok();
        (column, value.clone(), value)
    });
    model.bounded(&bounds.collect::<Vec<_>>())
}

/// A value of a column as results print it.
pub(crate) fn entry(model: &Model, column: ColumnId, value: f64) -> SolutionEntry {
    let labels = model.column_tuple(column).iter();
    let variable = model.columns()[column.index()].variable;
    SolutionEntry {
        variable: model.variables()[variable.index()].name.clone(),
        indices: labels.map(|&label| model.labels().name(label).to_owned()).collect(),
        value: rounded(value),
    }
}

/// The whole number that a value is meant to be, where it is meant to be one.
pub(crate) fn rounded(value: f64) -> f64 {
    if (value - value.round()).abs() < WHOLE { value.round() + 0.0 } else { value }
}
