//! The root's relaxation as a second LP code gets it.
//!
//! It is written from the exact model and the rows that separation added, not from what our own
//! kernel holds, so that what the kernel does to its copy is judged as well.

use model::{Model, NumberId, RowId, Sense, nearest_f64};
use record::opinion::{MOST_ENTRIES, Relaxation, RelaxationColumn, RelaxationRow};
use record::wire::write_relaxation;
use tree::Search;

use super::tidy;

/// The root's relaxation as bytes, or why it is not handed over. `O(entries)`.
pub(crate) fn relaxation(model: &Model, search: &Search) -> Result<Vec<u8>, String> {
    let added = search.root_rows().ok_or("the root is not solved")?;
    let written = (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row));
    let entries = written.clone().map(|row| model.row_entries(row).len()).sum::<usize>()
        + added.iter().map(|row| row.entries.len()).sum::<usize>();
    if entries > MOST_ENTRIES {
        return Err(format!("it has more than {MOST_ENTRIES} entries"));
    }
    let mut rows: Vec<RelaxationRow> = written.map(|row| written_row(model, row)).collect();
    rows.extend(added.iter().map(|row| RelaxationRow {
        lower: row.lower,
        upper: row.upper,
        entries: row.entries.iter().map(|&(column, value)| (column.0, value)).collect(),
    }));
    let columns = model.columns().iter().map(|column| RelaxationColumn {
        cost: tidy(model.numbers().float(column.cost)),
        lower: side(model, column.lower, f64::NEG_INFINITY),
        upper: side(model, column.upper, f64::INFINITY),
    });
    let relaxation = Relaxation {
        maximise: model.sense() == Sense::Maximise,
        offset: tidy(nearest_f64(model.offset())),
        columns: columns.collect(),
        rows,
    };
    write_relaxation(&relaxation).map_err(|error| error.to_string())
}

fn written_row(model: &Model, row: RowId) -> RelaxationRow {
    let (lower, upper) = model.row_sides(row);
    let entries = model.row_entries(row).iter();
    RelaxationRow {
        lower: side(model, lower, f64::NEG_INFINITY),
        upper: side(model, upper, f64::INFINITY),
        entries: entries.map(|&(column, value)| (column.0, model.numbers().float(value))).collect(),
    }
}

fn side(model: &Model, id: Option<NumberId>, infinite: f64) -> f64 {
    id.map_or(infinite, |id| model.numbers().float(id))
}
