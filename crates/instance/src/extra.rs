//! The further columns of a list of points: tables over the stops, named by their headings.

use std::collections::{BTreeMap, BTreeSet};

use crate::cells::{self, Cell, Style, is_blank, is_word};
use crate::complaint::{Complaints, excerpt};
use crate::instance::Datum;
use crate::matrix::Row;
use crate::names::{Name, name};
use crate::number::{Number, parse};

/// Tables with their names and units.
pub(crate) type Tables = Vec<(Name, Datum)>;

/// Reads the columns `places` below a heading; blank cells have no number, and columns of words
/// are left out. What is said of them goes to `notes`.
pub(crate) fn tables(
    (head, body): (&Row, &[Row]),
    (labels, places): (&[String], &[usize]),
    style: Style,
    notes: &mut Vec<String>,
    sink: &mut Complaints,
) -> Tables {
    let mut taken: BTreeSet<String> = ["V", "A", "E", "c", "r"].map(str::to_owned).into();
    let mut tables = Vec::new();
    for &place in places {
        let heading = excerpt(&head.cells[place].text);
        let cells = || body.iter().map(|row| &row.cells[place]);
        let words = cells().filter(|cell| is_word(&cell.text, style.decimal_comma)).count();
        let Some(name) = name(&head.cells[place].text).filter(|_| words * 2 <= body.len()) else {
            notes.push(format!(
                "The column `{heading}` was not read: it holds words, or its heading none."
            ));
            continue;
        };
        if !taken.insert(name.text.clone()) {
            let message = format!("the name {} is taken", excerpt(&name.text));
            let mend = "Give each column a name of its own, other than V, A, E, c and r.";
            sink.error(head.cells[place].span.clone(), "name-twice", message, mend);
            continue;
        }
        notes.extend(name.note(&heading));
        notes.push(format!("{} is a table over the stops.", name.text));
        let numbers: BTreeMap<Vec<String>, Number> = labels
            .iter()
            .zip(cells())
            .filter_map(|(label, cell)| Some((vec![label.clone()], number(cell, style, sink)?)))
            .collect();
        tables.push((name, Datum::Table { arity: 1, cells: numbers }));
    }
    tables
}

/// A number; a blank cell has none.
fn number(cell: &Cell, style: Style, sink: &mut Complaints) -> Option<Number> {
    let blank = is_blank(&cell.text) && parse(&cell.text, style.decimal_comma).is_err();
    if blank { None } else { cells::number(cell, style.decimal_comma, sink) }
}
