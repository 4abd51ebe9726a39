//! The headings of a table: a first row of column labels, a first column of row labels, and the
//! corner where they meet.

use crate::cells::{Cell, Separator, Style, is_blank, is_word};
use crate::complaint::excerpt;
use crate::number::parse;

use super::{Row, unit_of};

/// The headings taken off a table.
pub(crate) struct Headings<'a> {
    pub(crate) corner: Option<String>,
    pub(crate) columns: Option<Vec<Cell<'a>>>,
    pub(crate) rows: Option<Vec<Cell<'a>>>,
}

impl Headings<'_> {
    /// The unit, from the corner or else the title; a corner that names none is noted.
    pub(crate) fn unit(&self, title: &str, notes: &mut Vec<String>) -> String {
        let corner = self.corner.as_deref().unwrap_or("");
        if let Some(unit) = unit_of(corner).or_else(|| unit_of(title)) {
            return unit.to_owned();
        }
        if !corner.is_empty() {
            notes.push(format!("The corner cell `{}` names no unit.", excerpt(corner)));
        }
        String::new()
    }
}

/// Takes the headings off the rows, which keep their values. A row of mostly words is column
/// labels, a column of mostly words row labels; numbers are labels when the first row and the
/// first column agree, or when they count from 1 beside a square.
pub(crate) fn take<'a>(rows: &mut Vec<Row<'a>>, style: Style) -> Headings<'a> {
    if numbers_label(rows, style) {
        return split_off(rows, true, true, style);
    }
    let header = counts_above_square(rows)
        || rows.first().is_some_and(|row| {
            let cells = &row.cells[usize::from(row.cells.len() > 1)..];
            let words =
                cells.iter().filter(|cell| is_word(&cell.text, style.decimal_comma)).count();
            words * 2 > cells.len() && (row.cells.len() > 1 || rows.len() == 1)
        });
    let body = &rows[usize::from(header)..];
    let words = body
        .iter()
        .filter(|row| row.cells.first().is_some_and(|c| is_word(&c.text, style.decimal_comma)))
        .count();
    let column = words * 2 > body.len() || counts_beside_square(body);
    split_off(rows, header, column, style)
}

/// Whether the first column counts 1, 2, … beside as many values as there are rows.
fn counts_beside_square(rows: &[Row]) -> bool {
    rows.len() > 1
        && rows.iter().enumerate().all(|(number, row)| {
            row.cells.len() == rows.len() + 1 && row.cells[0].text == (number + 1).to_string()
        })
}

/// Whether the first row counts 1, 2, … above a square of at least three.
fn counts_above_square(rows: &[Row]) -> bool {
    let Some((first, rest)) = rows.split_first() else { return false };
    let counts = |(place, cell): (usize, &Cell)| cell.text == (place + 1).to_string();
    rest.len() > 2
        && rows.iter().all(|row| row.cells.len() == rest.len())
        && first.cells.iter().enumerate().all(counts)
}

/// Whether the first row and the first column hold the same numbers as labels.
fn numbers_label(rows: &[Row], style: Style) -> bool {
    let Some((first, rest)) = rows.split_first() else { return false };
    let corner = usize::from(first.cells.len() == rest.len() + 1);
    if rest.len() < 2 || first.cells.len() != rest.len() + corner {
        return false;
    }
    if corner == 0 && style.separator != Separator::Space {
        return false;
    }
    if corner == 1 && parse(&first.cells[0].text, style.decimal_comma).is_ok() {
        return false;
    }
    let same = |(head, row): (&Cell, &Row)| {
        row.cells.len() == rest.len() + 1 && row.cells[0].text == head.text
    };
    first.cells[corner..].iter().zip(rest).all(same)
        && first.cells[corner..].iter().all(|cell| !is_blank(&cell.text))
}

fn split_off<'a>(
    rows: &mut Vec<Row<'a>>,
    header: bool,
    column: bool,
    style: Style,
) -> Headings<'a> {
    let head = if header { Some(rows.remove(0)) } else { None };
    let labels: Option<Vec<Cell>> = column.then(|| {
        rows.iter_mut()
            .map(|row| match row.cells.is_empty() {
                true => Cell { text: "".into(), span: row.end..row.end },
                false => row.cells.remove(0),
            })
            .collect()
    });
    let mut corner = None;
    let columns = head.map(|row| {
        let mut cells = row.cells;
        if column && has_corner(&cells, rows, labels.as_deref(), style) {
            corner = Some(cells.remove(0).text.into_owned());
        }
        while cells.last().is_some_and(|cell| cell.text.is_empty()) {
            cells.pop();
        }
        cells
    });
    Headings { corner, columns, rows: labels }
}

/// Whether the first cell of the header stands over the row labels. The labels themselves decide
/// where they can; then the count; a half matrix whose first row is left out has no corner.
fn has_corner(head: &[Cell], rows: &[Row], labels: Option<&[Cell]>, style: Style) -> bool {
    let label = labels.and_then(<[Cell]>::first).map(|cell| &*cell.text);
    let first = head.first().map(|cell| &*cell.text);
    if first.is_none_or(str::is_empty) {
        return first.is_some();
    }
    if first == label {
        return false;
    }
    let over = rows.iter().map(|row| row.cells.len()).max().unwrap_or(0);
    let second = head.get(1).map(|cell| &*cell.text);
    if second == label && head.len() == rows.len() + 1 {
        let last = rows.last().and_then(|row| row.cells.last());
        let half = rows.first().is_some_and(|row| row.cells.len() == 1) && rows.len() > 1;
        let empty = |cell: &Cell| {
            let zero = parse(&cell.text, style.decimal_comma).is_ok_and(|number| number.is_zero());
            zero || is_blank(&cell.text)
        };
        return !half || last.is_some_and(empty);
    }
    head.len() != over
}
