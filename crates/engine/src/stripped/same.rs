//! Whether a model without names is the one that it was, and how a model loses its names.

use model::{
    ColumnId, ColumnSpec, FamilyState, LabelId, Model, ModelBuilder, ModelError, Number, NumberId,
    RowId,
};

use super::names::Names;

/// The same bounds, rows and whole columns, in the same order.
///
/// # Errors
/// What differs.
pub(super) fn rows(old: &Model, new: &Model) -> Result<(), String> {
    let exact =
        |model: &Model, id: Option<NumberId>| id.map(|id| model.numbers().exact(id).clone());
    if old.columns().len() != new.columns().len() || old.row_count() != new.row_count() {
        return Err("another number of columns or rows".to_owned());
    }
    for (place, (a, b)) in old.columns().iter().zip(new.columns()).enumerate() {
        let bounds = exact(old, a.lower) == exact(new, b.lower)
            && exact(old, a.upper) == exact(new, b.upper);
        if !bounds || a.integer != b.integer {
            return Err(format!("column {} differs", place + 1));
        }
    }
    let differs = |row: &RowId| {
        let (a, b) = (old.row(*row), new.row(*row));
        a.entries != b.entries || a.lower != b.lower || a.upper != b.upper
    };
    match (0..old.row_count()).map(RowId::from_index).find(differs) {
        Some(row) => Err(format!("row {} differs", row.index() + 1)),
        None => Ok(()),
    }
}

/// The same objective, up to a factor.
///
/// # Errors
/// What differs.
pub(super) fn same(old: &Model, new: &Model, factor: &Number) -> Result<(), String> {
    if old.sense() != new.sense() {
        return Err("the direction of the objective differs".to_owned());
    }
    if old.offset() * factor != *new.offset() {
        return Err("the constant of the objective differs".to_owned());
    }
    let cost =
        |model: &Model, place: usize| model.numbers().exact(model.columns()[place].cost).clone();
    let wrong =
        (0..old.columns().len()).find(|&place| cost(old, place) * factor != cost(new, place));
    match wrong {
        Some(place) => Err(format!("the cost of column {} differs", place + 1)),
        None => Ok(()),
    }
}

/// The model with its costs multiplied.
pub(super) fn priced(model: &Model, factor: &Number) -> Model {
    let mut builder = ModelBuilder::from_model(model.clone());
    builder.offset(model.offset() * factor);
    for place in 0..model.columns().len() {
        let cost = model.numbers().exact(model.columns()[place].cost) * factor;
        // The column is there.
        let _ = builder.cost(ColumnId::from_index(place), &cost);
    }
    builder.build()
}

/// The model with other names for variables, families and labels.
///
/// # Errors
/// More than can be counted, which the model itself was not.
pub(super) fn nameless(model: &Model, names: &mut Names) -> Result<Model, ModelError> {
    let mut builder = ModelBuilder::new("", model.sense());
    builder.offset(model.offset().clone());
    let mut tuple = |builder: &mut ModelBuilder, labels: &[LabelId]| -> Vec<LabelId> {
        let name = |label: &LabelId| names.label(model.labels().name(*label));
        let labels: Vec<String> = labels.iter().map(name).collect();
        labels.iter().map(|label| builder.label(label)).collect()
    };
    for (place, variable) in model.variables().iter().enumerate() {
        builder.variable(&format!("x{}", place + 1), false);
        for column in variable.columns.clone() {
            let id = ColumnId(column);
            let own = tuple(&mut builder, model.column_tuple(id));
            let column = &model.columns()[id.index()];
            let exact = |id: NumberId| model.numbers().exact(id).clone();
            builder.column(
                &own,
                &ColumnSpec {
                    lower: column.lower.map(exact),
                    upper: column.upper.map(exact),
                    cost: exact(column.cost),
                    integer: column.integer,
                },
            )?;
        }
    }
    for (place, family) in model.families().iter().enumerate() {
        builder.family(&format!("r{}", place + 1), FamilyState::In, false);
        for row in family.rows.clone() {
            let own = tuple(&mut builder, model.row_tuple(RowId(row)));
            builder.row(&own, model.row(RowId(row)))?;
        }
    }
    Ok(builder.build())
}
