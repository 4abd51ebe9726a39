//! The values of a table put in their places in the square, with complaints where the rows do
//! not fit it and where labels do not agree.

use std::collections::BTreeMap;

use crate::cells::{Cell, Style, is_blank};
use crate::complaint::{Complaints, excerpt, plural};
use crate::number::{number_text, parse};
use crate::square::{Square, counted};

use super::labels::Headings;
use super::shape::Shape;
use super::{Row, Value, row_name};

/// The square and whether a blank half was filled from the other; or complaints. O(n²).
pub(crate) async fn square(
    rows: &[Row<'_>],
    values: Vec<Vec<Value>>,
    shape: &Shape,
    headings: &Headings<'_>,
    sink: &mut Complaints<'_>,
) -> Option<(Square, bool)> {
    check_rows(rows, shape, sink);
    if shape.n < 2 {
        let span = rows.first().map_or(0..0, |row| row.end..row.end);
        let mend = "Paste a table with a row and a column for each stop.";
        sink.error(span, "too-few-stops", "a round needs at least two stops", mend);
        return None;
    }
    let (labels, order) = labels(shape, headings, sink)?;
    if sink.errors() > 0 {
        return None;
    }
    let mut square = Square::empty(labels);
    for (number, row) in values.into_iter().enumerate() {
        let i = shape.stop(number);
        sink.spend(row.len()).await;
        for (place, value) in row.into_iter().enumerate() {
            let column = shape.column(number, place);
            let j = order.get(column).copied().unwrap_or(column);
            let value = if let Value::Number(number) = value { Some(number) } else { None };
            if shape.is_half() {
                square.put(j, i, value.clone());
            }
            square.put(i, j, value);
        }
    }
    let mirrored = mirror_blank_half(&mut square, sink).await;
    Some((square, mirrored))
}

fn check_rows(rows: &[Row], shape: &Shape, sink: &mut Complaints) {
    for (number, row) in rows.iter().enumerate().take(shape.rows()) {
        let (found, wanted) = (row.cells.len(), shape.width(number));
        if found == wanted {
            continue;
        }
        let found_values = plural(found, "value", "values");
        let are = if wanted == 1 { "is" } else { "are" };
        let message =
            format!("{} has {found_values}, where {wanted} {are} expected", row_name(number));
        let (span, mend) = match row.cells.get(wanted) {
            Some(extra) => (extra.span.start..row.end, "Take out the values that are too many."),
            None => (row.end..row.end, "Add what is missing, or a dash where there is no drive."),
        };
        sink.error(span, "row-length", message, mend);
    }
    let (found, wanted) = (rows.len(), shape.rows());
    let message = format!("the table has {}, where {wanted} are expected", row_count(found));
    if found > wanted {
        let first = rows[wanted].cells.first().map_or(rows[wanted].end, |cell| cell.span.start);
        let mend = "Take out the rows that are too many, or add their columns.";
        sink.error(first..rows[wanted].end, "row-count", message, mend);
    } else if found < wanted {
        let end = rows.last().map_or(0, |row| row.end);
        sink.error(end..end, "row-count", message, "Add the rows that are missing.");
    }
}

fn row_count(count: usize) -> String {
    plural(count, "row", "rows")
}

/// The labels in the order of the rows, and for each written column its place in that order
/// (empty when it is the same).
fn labels(
    shape: &Shape,
    headings: &Headings,
    sink: &mut Complaints,
) -> Option<(Vec<String>, Vec<usize>)> {
    let text = |cells: &[Cell]| cells.iter().map(|cell| cell.text.to_string()).collect::<Vec<_>>();
    for cells in [&headings.columns, &headings.rows].into_iter().flatten() {
        check_labels(cells, sink);
    }
    match (&headings.columns, &headings.rows) {
        (None, None) => Some((counted(shape.n), Vec::new())),
        (Some(columns), None) => {
            check_count(columns, shape.n, sink);
            Some((text(columns), Vec::new()))
        }
        (None, Some(rows)) if shape.rows() < shape.n => {
            missing_label(shape, rows, sink);
            None
        }
        (None, Some(rows)) => Some((text(rows), Vec::new())),
        (Some(columns), Some(rows)) => {
            check_count(columns, shape.n, sink);
            if shape.rows() < shape.n || shape.is_half() {
                check_same(columns, rows, shape, sink);
                return Some((text(columns), Vec::new()));
            }
            match permutation(columns, rows) {
                Some(order) => Some((text(rows), order)),
                None => {
                    check_same(columns, rows, shape, sink);
                    Some((text(rows), Vec::new()))
                }
            }
        }
    }
}

fn check_labels(cells: &[Cell], sink: &mut Complaints) {
    let mut seen: BTreeMap<&str, &Cell> = BTreeMap::new();
    for cell in cells {
        if is_blank(&cell.text) {
            let mend = "Give every stop a name, or none.";
            sink.error(cell.span.clone(), "label-missing", "a label is missing here", mend);
        } else if let Some(first) = seen.insert(&cell.text, cell) {
            let (line, column) = sink.place(first.span.start);
            let message = format!("the label `{}` is given twice", excerpt(&cell.text));
            let mend = format!(
                "Labels must tell stops apart; the first is at line {line}, column {column}."
            );
            sink.error(cell.span.clone(), "label-twice", message, mend);
        }
    }
}

fn check_count(columns: &[Cell], n: usize, sink: &mut Complaints) {
    if columns.len() == n {
        return;
    }
    let end = columns.last().map_or(0, |cell| cell.span.end);
    let message = format!(
        "the first row has {}, where {n} are expected",
        plural(columns.len(), "label", "labels")
    );
    sink.error(end..end, "label-count", message, "Give each column its label.");
}

fn missing_label(shape: &Shape, rows: &[Cell], sink: &mut Complaints) {
    let lower = shape.stop(0) == 1;
    let (cell, which) = if lower { (rows.first(), "first") } else { (rows.last(), "last") };
    let Some(cell) = cell else { return };
    let place = if lower { "before" } else { "after" };
    let message = format!("the {which} stop has no label, since its row is left out");
    let mend = format!("Put its label alone on a line {place} `{}`.", excerpt(&cell.text));
    sink.error(cell.span.clone(), "label-missing", message, mend);
}

/// Complains of each row label that differs from its column's.
fn check_same(columns: &[Cell], rows: &[Cell], shape: &Shape, sink: &mut Complaints) {
    for (number, row) in rows.iter().enumerate() {
        let Some(column) = columns.get(shape.stop(number)) else { continue };
        if row.text != column.text {
            let message = format!(
                "{} is `{}`, but its column is `{}`",
                row_name(number),
                excerpt(&row.text),
                excerpt(&column.text)
            );
            let mend = "Rows and columns must have the same labels.";
            sink.error(row.span.clone(), "label-differs", message, mend);
        }
    }
}

/// Where each column's label stands among the rows', if they are the same labels.
fn permutation(columns: &[Cell], rows: &[Cell]) -> Option<Vec<usize>> {
    let places: BTreeMap<&str, usize> =
        rows.iter().enumerate().map(|(place, cell)| (&*cell.text, place)).collect();
    if columns.len() != rows.len() || places.len() != rows.len() {
        return None;
    }
    columns.iter().map(|cell| places.get(&*cell.text).copied()).collect()
}

/// Where one half of a square is blank throughout and the other is not, takes each distance for
/// both directions and says so.
async fn mirror_blank_half(square: &mut Square, sink: &Complaints<'_>) -> bool {
    let n = square.len();
    let (mut lower, mut upper) = (0, 0);
    for i in 0..n {
        sink.spend(i).await;
        for j in 0..i {
            lower += usize::from(square.at(i, j).is_some());
            upper += usize::from(square.at(j, i).is_some());
        }
    }
    if (lower == 0) == (upper == 0) || lower + upper + 1 < n {
        return false;
    }
    for i in 0..n {
        for j in 0..i {
            let value = square.at(i, j).or_else(|| square.at(j, i)).cloned();
            square.put(j, i, value.clone());
            square.put(i, j, value);
        }
    }
    true
}

/// Says so where the diagonal holds something that was not read.
pub(crate) fn diagonal_note(rows: &[Row], shape: &Shape, style: Style) -> Option<String> {
    for (number, row) in rows.iter().enumerate() {
        for (place, cell) in row.cells.iter().enumerate() {
            let on = shape.column(number, place) == shape.stop(number);
            let value = parse(&cell.text, style.decimal_comma);
            if let (true, Ok(value)) = (on, value)
                && !value.is_zero()
            {
                let value = number_text(&value);
                return Some(format!("The diagonal was not read (it holds {value})."));
            }
        }
    }
    None
}
