//! A model for the kernel alone, without the search around it.

use lp::{Col, Problem};
use model::{Model, NumberId, RowId, Sense, nearest_f64};

/// A side or bound; `infinite` where there is none.
#[must_use]
pub fn side(model: &Model, id: Option<NumberId>, infinite: f64) -> f64 {
    id.map_or(infinite, |id| model.numbers().float(id))
}

/// The relaxation by the rows that are in, its costs turned round when the model maximises; the
/// offset is left out.
///
/// # Panics
/// Never on a model that was built.
#[must_use]
pub fn problem(model: &Model) -> Problem {
    let sign = if model.sense() == Sense::Maximise { -1.0 } else { 1.0 };
    let mut problem = Problem::new();
    for column in model.columns() {
        let lower = side(model, column.lower, f64::NEG_INFINITY);
        let upper = side(model, column.upper, f64::INFINITY);
        problem.add_column(sign * model.numbers().float(column.cost), lower, upper).unwrap();
    }
    for row in (0..model.row_count()).map(RowId::from_index).filter(|&r| model.row_is_in(r)) {
        let row = model.row(row);
        let entries: Vec<(Col, f64)> =
            row.entries.iter().map(|(c, a)| (Col(c.0), nearest_f64(a))).collect();
        let lower = row.lower.as_ref().map_or(f64::NEG_INFINITY, nearest_f64);
        let upper = row.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
        problem.add_row(&entries, lower, upper).unwrap();
    }
    problem
}
