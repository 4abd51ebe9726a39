//! Long tables: a heading over each column.
//!
//! Columns of words are indices, and so is the first column; where these do not tell the rows
//! apart, columns of whole numbers are taken as indices too, from the left.

use std::collections::{BTreeMap, BTreeSet};
use std::ops::Range;

use crate::cells::{Cell, is_blank};
use crate::complaint::{Complaints, excerpt, plural};
use crate::instance::Datum;
use crate::matrix::Row;
use crate::pace::Pace;

use super::MAX_ENTRIES;
use super::draft::{Cells, Draft, said, whole};
use super::section::Section;

/// No table has more indices than this.
const MAX_INDICES: usize = 8;
/// No more columns of whole numbers than this are tried as indices.
const MAX_WHOLE: usize = 4;

/// Reads a long table.
pub(super) async fn read(section: &Section<'_>, draft: &mut Draft, sink: &mut Complaints<'_>) {
    let Some((head, body)) = section.rows.split_first() else { return };
    let width = head.cells.len();
    let rows: Vec<&Row> = body.iter().filter(|row| fits(row, width, sink)).collect();
    if body.is_empty() {
        let mend = "Add the rows below the heading.";
        sink.error(head.end..head.end, "no-rows", "the table has no rows", mend);
        return;
    }
    sink.spend(width.saturating_mul(rows.len())).await;
    let indices = indices(section, &rows, width, &sink.pace()).await;
    let values: Vec<usize> = (0..width).filter(|place| !indices.contains(place)).collect();
    let labels = rows.len().saturating_mul(indices.len()).saturating_mul(values.len());
    if indices.len() > MAX_INDICES || labels > MAX_ENTRIES {
        let message = "the table has too many indices or too many cells";
        let mend = format!("Keep to {MAX_INDICES} columns of labels and a smaller instance.");
        return sink.error(head.cells[0].span.start..head.end, "too-large", message, mend);
    }
    let mut names = Vec::new();
    for &place in &indices {
        let Some(name) = draft.name(&head.cells[place], sink) else { return };
        draft.extend(&name, column(&rows, place).filter(|label| !is_blank(label)));
        names.push(name);
    }
    sink.spend(rows.len()).await;
    let keys = keys(&rows, &indices, sink);
    if values.is_empty() {
        return tuples(section, (&names, &keys), draft, sink);
    }
    if let ([name], true, true) = (&*names, values.len() > 1, section.is_word_column(0)) {
        draft.note(format!(
            "Each column was taken for a table over {name}; to have one table over rows and \
             columns, write `{name} \\ columns` in the corner, with the names of both sets."
        ));
    }
    for &place in indices.iter().filter(|&&place| place > 0 && !section.is_word_column(place)) {
        let heading = excerpt(&head.cells[place].text);
        draft.note(format!("The whole numbers of `{heading}` are an index: they tell rows apart."));
    }
    for place in values {
        let heading = &head.cells[place];
        let Some(name) = draft.name(heading, sink) else { continue };
        let mut cells = Cells::new();
        for (row, key) in rows.iter().zip(&keys) {
            sink.spend(2).await;
            if let Some(key) = key {
                cells.put(key.clone(), &row.cells[place], section.style, sink);
            }
        }
        let datum = cells.finish(&name, indices.len(), draft);
        draft.note(said(&name, &datum, &names.join(", ")));
        draft.datum(&name, heading, datum, sink);
    }
}

fn column<'r>(rows: &'r [&Row], place: usize) -> impl Iterator<Item = &'r str> {
    rows.iter().map(move |row| &*row.cells[place].text)
}

/// Whether a row is as wide as the heading; complains if not.
fn fits(row: &Row, width: usize, sink: &mut Complaints) -> bool {
    let found = row.cells.len();
    if found != width && sink.is_full() {
        sink.count_error();
    } else if found != width {
        let cells = plural(found, "cell", "cells");
        let start = row.cells.first().map_or(row.end, |cell| cell.span.start);
        let message = format!("{cells}, where the heading has {width}");
        let mend = "Write a cell for each heading; put labels with blanks in double quotes.";
        sink.error(start..row.end, "row-length", message, mend);
    }
    found == width
}

/// The columns that are indices.
async fn indices(
    section: &Section<'_>,
    rows: &[&Row<'_>],
    width: usize,
    pace: &Pace,
) -> Vec<usize> {
    let words: BTreeSet<usize> =
        (0..width).filter(|&place| place == 0 || section.is_word_column(place)).collect();
    // One row given twice is a slip; where a quarter of the rows repeat, an index is missing.
    if words.len() > MAX_INDICES || told_apart(rows, &words, pace).await * 4 > rows.len() * 3 {
        return words.into_iter().collect();
    }
    let is_whole = |place: &usize| column(rows, *place).all(|text| whole(text).is_some());
    let mut indices = words.clone();
    for place in (0..width).filter(|place| !words.contains(place)).filter(is_whole).take(MAX_WHOLE)
    {
        indices.insert(place);
        if indices.len() < width && told_apart(rows, &indices, pace).await == rows.len() {
            return indices.into_iter().collect();
        }
    }
    words.into_iter().collect()
}

/// How many rows some columns tell apart.
async fn told_apart(rows: &[&Row<'_>], indices: &BTreeSet<usize>, pace: &Pace) -> usize {
    let mut seen = BTreeSet::new();
    for row in rows {
        pace.spend(8 * indices.len()).await;
        seen.insert(indices.iter().map(|&place| &*row.cells[place].text).collect::<Vec<_>>());
    }
    seen.len()
}

/// The index of each row; complains of what is missing or given twice.
fn keys(rows: &[&Row], indices: &[usize], sink: &mut Complaints) -> Vec<Option<Vec<String>>> {
    let mut seen: BTreeMap<Vec<String>, Range<usize>> = BTreeMap::new();
    let mut key = |row: &Row| {
        let cells: Vec<&Cell> = indices.iter().map(|&place| &row.cells[place]).collect();
        if let Some(cell) = cells.iter().find(|cell| is_blank(&cell.text)) {
            let mend = "Write the label in every row, also where it is that of the row above.";
            sink.error(cell.span.clone(), "label-missing", "a label is missing here", mend);
            return None;
        }
        let key: Vec<String> = cells.iter().map(|cell| cell.text.to_string()).collect();
        let span = row.cells[0].span.start..row.end;
        if let Some(first) = seen.get(&key) {
            if sink.is_full() {
                sink.count_error();
                return None;
            }
            let message = format!("({}) is given twice", excerpt(&key.join(", ")));
            let line = sink.place(first.start).0;
            let mend = format!("Keep one of the rows; the first is line {line}.");
            sink.error(span, "tuple-twice", message, mend);
            return None;
        }
        seen.insert(key.clone(), span);
        Some(key)
    };
    rows.iter().map(|row| key(row)).collect()
}

/// A table without numbers: a set, or a set of tuples with the name of its title.
fn tuples(
    section: &Section,
    (names, keys): (&[String], &[Option<Vec<String>>]),
    draft: &mut Draft,
    sink: &mut Complaints,
) {
    if names.len() == 1 {
        return;
    }
    let Some(head) = section.rows.first() else { return };
    let Some((title, span)) = &section.title else {
        let span = head.cells[0].span.start..head.end;
        let message = "this table holds no numbers and has no title to name it";
        let mend = "Put a line with its name above it, or add a column of numbers.";
        return sink.error(span, "no-title", message, mend);
    };
    if let Some(name) = draft.name_at(title, span.clone(), sink) {
        draft.note(format!("{name} is a set of tuples of {}.", names.join(", ")));
        let rows = keys.iter().flatten().cloned().collect();
        draft.datum(&name, &head.cells[0], Datum::Tuples { arity: names.len(), rows }, sink);
    }
}
