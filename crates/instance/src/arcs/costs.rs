//! The columns of a list of drives: its ends, and the costs with their names and units.

use std::collections::{BTreeMap, BTreeSet};

use crate::cells::{Cell, Style, is_blank, is_word};
use crate::complaint::{Complaints, excerpt};
use crate::facts::is_unit;
use crate::matrix::Row;
use crate::names;
use crate::number::{Number, parse};

use super::are_ends;

/// A row that names columns.
pub(super) type Headline<'a> = Option<Row<'a>>;

/// A column of costs.
pub(super) struct Column {
    pub(super) place: usize,
    pub(super) name: String,
    pub(super) unit: String,
}

/// Where a row holds what.
pub(super) struct Costs {
    pub(super) from: usize,
    pub(super) to: usize,
    pub(super) width: usize,
    pub(super) columns: Vec<Column>,
    /// The unit of `c`.
    pub(super) unit: String,
}

/// Takes the headline off the rows: a first row without numbers that names the ends of drives,
/// or names columns that hold numbers.
pub(super) fn headline<'a>(rows: &mut Vec<Row<'a>>, style: Style) -> Headline<'a> {
    let number = |cell: &Cell| parse(&cell.text, style.decimal_comma).is_ok();
    let first = rows.first()?;
    let costs = first.cells.get(2..).unwrap_or(&[]);
    let words = costs.iter().any(|cell| is_word(&cell.text, style.decimal_comma));
    let named = words && rows.iter().any(|row| row.cells.iter().any(number));
    let is = !first.cells.iter().any(number) && (named || ends(first).is_some());
    is.then(|| rows.remove(0))
}

/// The columns that a headline names as ends.
fn ends(row: &Row) -> Option<usize> {
    row.cells.windows(2).position(|pair| are_ends(&pair[0].text, &pair[1].text))
}

/// The columns and what is said of them.
pub(super) fn find(
    headline: &Headline,
    rows: &[Row],
    style: Style,
    sink: &mut Complaints,
) -> (Costs, Vec<String>) {
    let from = headline.as_ref().and_then(ends).unwrap_or(0);
    let width = headline.as_ref().map_or_else(|| most_common_width(rows), |row| row.cells.len());
    let mut costs = Costs { from, to: from + 1, width, columns: Vec::new(), unit: String::new() };
    let mut notes = Vec::new();
    let (read, unread): (Vec<_>, Vec<_>) = (0..width)
        .filter(|place| *place != from && *place != from + 1)
        .partition(|place| *place > from && (headline.is_none() || is_read(rows, *place, style)));
    let Some(row) = headline else {
        costs.columns.extend(read.iter().enumerate().map(|(number, &place)| Column {
            place,
            name: if number == 0 { "c".to_owned() } else { format!("c{}", number + 1) },
            unit: String::new(),
        }));
        if let Some(last) = costs.columns.last().filter(|column| column.name != "c") {
            notes.push(format!("Without a headline the cost columns are c to {}.", last.name));
        }
        return (costs, notes);
    };
    for place in unread {
        let heading = excerpt(&row.cells[place].text);
        notes.push(format!("The column `{heading}` holds no costs and was not read."));
    }
    if let [place] = read[..] {
        let (unit, note) = single(&row.cells[place].text);
        notes.extend(note);
        costs.columns.push(Column { place, name: "c".to_owned(), unit: unit.clone() });
        costs.unit = unit;
        return (costs, notes);
    }
    named(row, &read, (&mut costs, &mut notes), sink);
    let of_c = costs.columns.iter().find(|column| column.name == "c");
    if let Some(column) = of_c.or(costs.columns.first()) {
        costs.unit.clone_from(&column.unit);
    }
    (costs, notes)
}

/// The unit of an only column, whose table is `c` whatever its heading.
fn single(heading: &str) -> (String, Option<String>) {
    if heading == "c" {
        return (String::new(), None);
    }
    let named = names::name(heading);
    let unit = match named {
        Some(name) if name.unit.is_empty() && is_unit(&name.text) => name.text,
        Some(name) => name.unit,
        None if is_unit(heading) => heading.to_owned(),
        None => String::new(),
    };
    (unit, Some(format!("c holds the column `{}`.", excerpt(heading))))
}

/// Names several columns by their headings.
fn named(
    row: &Row,
    read: &[usize],
    (costs, notes): (&mut Costs, &mut Vec<String>),
    sink: &mut Complaints,
) {
    let mut taken: BTreeSet<String> = ["V", "A"].map(str::to_owned).into();
    for &place in read {
        let cell = &row.cells[place];
        let Some(mut name) = names::name(&cell.text) else {
            let message = format!("`{}` makes no name", excerpt(&cell.text));
            let mend = "Name the column with letters and digits, a letter first.";
            sink.error(cell.span.clone(), "no-name", message, mend);
            continue;
        };
        notes.extend(name.note(&excerpt(&cell.text)));
        if !taken.insert(name.text.clone()) {
            let message = format!("the name {} is taken", excerpt(&name.text));
            let mend = "Give each column a name of its own, other than V and A.";
            sink.error(cell.span.clone(), "name-twice", message, mend);
        }
        if name.unit.is_empty() && is_unit(&name.text) {
            name.unit.clone_from(&name.text);
        }
        costs.columns.push(Column { place, name: name.text, unit: name.unit });
    }
    let list: Vec<&str> = costs.columns.iter().map(|column| column.name.as_str()).collect();
    if !list.is_empty() {
        notes.push(format!("The cost columns are the tables {}.", list.join(", ")));
    }
}

/// Whether a column is one of costs: not every cell is a word or blank.
fn is_read(rows: &[Row], place: usize, style: Style) -> bool {
    rows.iter()
        .filter_map(|row| row.cells.get(place))
        .any(|cell| !is_blank(&cell.text) && !is_word(&cell.text, style.decimal_comma))
}

fn most_common_width(rows: &[Row]) -> usize {
    let mut counts: BTreeMap<usize, usize> = BTreeMap::new();
    for row in rows.iter().filter(|row| row.cells.len() > 1) {
        *counts.entry(row.cells.len()).or_default() += 1;
    }
    counts.into_iter().max_by_key(|(_, count)| *count).map_or(3, |(width, _)| width)
}

/// A cost; complains where there is none.
pub(super) fn cost(cell: &Cell, style: Style, sink: &mut Complaints) -> Option<Number> {
    match parse(&cell.text, style.decimal_comma) {
        Ok(number) => {
            sink.met(cell, style.decimal_comma, &number);
            Some(number)
        }
        Err(_) if is_blank(&cell.text) => {
            let mend = "Every drive needs its cost; leave out a line that is no drive.";
            sink.error(cell.span.clone(), "blank", "a cost is missing here", mend);
            None
        }
        Err(why) => {
            let message = format!("`{}` is not a number", excerpt(&cell.text));
            sink.error(cell.span.clone(), "not-a-number", message, why.mend());
            None
        }
    }
}
