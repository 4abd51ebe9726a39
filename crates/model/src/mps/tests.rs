//! Round trips of random models, each disputed reading by a little file, and what is refused.

mod disputed;
mod refused;
mod round_trip;

use super::{Complaint, read};
use crate::{ColumnId, Model, RowId};

/// A text that must be read, with its warnings' codes.
fn model(text: &str) -> (Model, Vec<&'static str>) {
    match read(text) {
        Ok((model, complaints)) => (model, complaints.iter().map(|c| c.code).collect()),
        Err(complaints) => panic!("{text}\n{complaints:?}"),
    }
}

/// A text that must not be read, with its complaints.
fn refused(text: &str) -> Vec<Complaint> {
    match read(text) {
        Ok(_) => panic!("read:\n{text}"),
        Err(complaints) => complaints,
    }
}

/// A file with an objective of 1 on each column and one row `r` of type L with RHS 10, to
/// which `tail` is added.
fn small(columns: &str, tail: &str) -> String {
    let rows = "NAME small\nROWS\n N cost\n L r\nCOLUMNS\n";
    format!("{rows}{columns}RHS\n RHS r 10\n{tail}ENDATA\n")
}

fn text_of(model: &Model, id: Option<crate::NumberId>, infinite: &str) -> String {
    id.map_or(infinite.to_owned(), |id| model.numbers().exact(id).to_string())
}

/// Bounds of a column, `*` after whole ones.
fn bounds(model: &Model, column: u32) -> String {
    let column = model.columns()[column as usize];
    let (lower, upper) =
        (text_of(model, column.lower, "-inf"), text_of(model, column.upper, "inf"));
    format!("{lower} {upper}{}", if column.integer { " *" } else { "" })
}

/// Sides of a row.
fn sides(model: &Model, row: u32) -> String {
    let (lower, upper) = model.row_sides(RowId(row));
    format!("{} {}", text_of(model, lower, "-inf"), text_of(model, upper, "inf"))
}

/// All that a model means, and its names: equal texts mean equal models.
fn meaning(model: &Model) -> String {
    let mut out = format!("{:?} {}\n", model.sense(), model.offset());
    for at in 0..u32::try_from(model.columns().len()).unwrap() {
        let cost = model.numbers().exact(model.columns()[at as usize].cost);
        let name = model.column_name(ColumnId(at)).replace(" → ", ", ");
        out += &format!("{name} {cost} {}\n", bounds(model, at));
    }
    for at in (0..u32::try_from(model.row_count()).unwrap()).map(RowId) {
        let name = model.row_name(at).replace(" → ", ", ");
        out += &format!("{name} {} {:?}\n", sides(model, at.0), model.row(at).entries);
    }
    out
}
