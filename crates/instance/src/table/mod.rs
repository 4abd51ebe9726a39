//! Tables copied from a spreadsheet, one or several in a paste.
//!
//! A *long* table has a heading over each column: columns of labels are indices, columns of
//! numbers tables over them. A *wide* table has labels at both sides, and in the corner its name
//! or the names of both sets, `client \ depot`. Rows of a name and a number are numbers. The sets
//! are the labels in the order of listing, named by the headings of their columns.

mod corner;
mod draft;
mod long;
mod section;
#[cfg(test)]
mod tests;
mod totals;
mod wide;

use std::collections::BTreeSet;

use crate::MAX_STOPS;
use crate::blocks;
use crate::cells::{Cell, MAX_CELLS, is_blank};
use crate::complaint::{Complaints, excerpt, grouped};
use crate::instance::{Datum, Instance, Reader};
use crate::names;
use crate::pace::Pace;

use draft::Draft;
use section::Section;
pub(crate) use section::sections;

/// More cells than this are refused.
const MAX_ENTRIES: usize = 4_000_000;

/// More tables in a paste, or columns of numbers in them, are refused.
const MAX_TABLES: usize = 1_000;

/// How a table is laid out.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Kind {
    Numbers,
    Long,
    Wide,
}

/// Reads tables. O(length · log).
pub(crate) async fn read(text: &str, sink: &mut Complaints<'_>) -> Option<(Instance, Vec<String>)> {
    let mut found = sections(text, &sink.pace()).await;
    let entries: usize = found.iter().flat_map(|s| &s.rows).map(|row| row.cells.len()).sum();
    let longest = found.iter().flat_map(|s| &s.rows).find(|row| row.cells.len() >= MAX_CELLS);
    if entries > MAX_ENTRIES || found.len() > MAX_TABLES || longest.is_some() {
        let message = format!(
            "there are more than {} cells, more than {} tables or more than {} cells in a row",
            grouped(MAX_ENTRIES),
            grouped(MAX_TABLES),
            grouped(MAX_STOPS)
        );
        let at = longest.map_or(0, |row| row.end);
        sink.error(at..at, "too-large", message, "Paste a smaller instance.");
        return None;
    }
    if found.is_empty() {
        let mend = "Paste a table with its headings.";
        sink.error(0..0, "nothing-to-read", "there is no table", mend);
        return None;
    }
    let mut draft = Draft::new();
    for section in &mut found {
        sink.spend(section.rows.len()).await;
        if let Some(note) = totals::take_off(section) {
            draft.note(note);
        }
    }
    // Wide tables that name no sets take those of the others, which therefore come first.
    let mut later = Vec::new();
    let rows = found.iter().flat_map(|section| section.rows.iter().skip(1));
    let known: BTreeSet<&str> =
        rows.filter_map(|row| row.cells.first()).map(|cell| &*cell.text).collect();
    for section in &found {
        match kind(section, &known) {
            Kind::Numbers => numbers(section, &mut draft, sink),
            Kind::Long => long::read(section, &mut draft, sink).await,
            Kind::Wide if corner::of(section).sets.is_none() => later.push(section),
            Kind::Wide => wide::read(section, &mut draft, sink).await,
        }
    }
    for section in later {
        wide::read(section, &mut draft, sink).await;
    }
    if sink.errors() > 0 {
        return None;
    }
    let title = found.iter().find_map(|section| section.title.as_ref());
    finish(draft, title.map(|title| title.0.as_str()), sink).await
}

async fn finish(
    draft: Draft,
    title: Option<&str>,
    sink: &mut Complaints<'_>,
) -> Option<(Instance, Vec<String>)> {
    let mut instance = Instance::new(Reader::Table);
    instance.title = title.unwrap_or("").to_owned();
    let notes = draft.fill(&mut instance, sink);
    for (name, datum) in instance.data() {
        let size = match datum {
            Datum::Labels(labels) => labels.len(),
            Datum::Integers(values) => values.len(),
            _ => 0,
        };
        if size > MAX_STOPS {
            let message = format!("the set {name} has {} labels", grouped(size));
            let mend = format!("Keep to {}.", grouped(MAX_STOPS));
            sink.error(0..0, "too-large", message, mend);
            return None;
        }
    }
    let mut sentences = blocks::describe_all(&mut instance, false, &sink.pace()).await;
    sentences.extend(notes);
    sentences.push("Read as tables with headings; every line was read.".to_owned());
    Some((instance, sentences))
}

/// How a section is laid out, the labels of the first columns being known: see
/// [`wide::is_wide`].
fn kind(section: &Section, known: &BTreeSet<&str>) -> Kind {
    let pair = |row: &crate::matrix::Row| match row.cells.as_slice() {
        [name, value] => section.is_word(name) && section.is_number(value),
        _ => false,
    };
    if section.rows.first().is_some_and(pair) {
        Kind::Numbers
    } else if wide::is_wide(section, known) {
        Kind::Wide
    } else {
        Kind::Long
    }
}

/// Rows of a name and a number.
fn numbers(section: &Section, draft: &mut Draft, sink: &mut Complaints) {
    for row in &section.rows {
        let [heading, value] = row.cells.as_slice() else {
            let start = row.cells.first().map_or(row.end, |cell| cell.span.start);
            let mend = "Write a name and its number, or put a heading above the table.";
            sink.error(start..row.end, "row-length", "a name and a number are expected", mend);
            continue;
        };
        if let (Some(name), Some(number)) =
            (draft.name(heading, sink), draft::number(value, section.style, sink))
        {
            draft.datum(&name, heading, Datum::Number(number), sink);
        }
    }
}

/// Whether a text looks like tables of this kind and not like a matrix of distances.
pub(crate) async fn is_likely(text: &str, pace: &Pace) -> bool {
    let found = sections(text, pace).await;
    let headed = found.iter().filter(|section| is_headed(section)).count();
    headed > 1 || (found.len() == 1 || headed > 0) && found.iter().any(is_sheet)
}

/// Whether words head columns, some of which hold numbers.
fn is_headed(section: &Section) -> bool {
    let Some((head, body)) = section.rows.split_first() else { return false };
    let width = head.cells.len();
    let words = head.cells.iter().skip(1).all(|cell| section.is_word(cell));
    let fit = body.iter().filter(|row| row.cells.len() == width).count();
    width > 1
        && words
        && !head.cells.first().is_some_and(|cell| section.is_number(cell))
        && fit * 5 > body.len() * 4
        && (1..width).any(|place| !section.is_word_column(place))
}

/// Whether one table is surely no square of distances: its sides have no label in common, and
/// no diagonal of equal or blank cells is to be seen.
fn is_sheet(section: &Section) -> bool {
    let Some((head, body)) = section.rows.split_first() else { return false };
    let labels = &head.cells[1.min(head.cells.len())..];
    let common = body
        .iter()
        .filter_map(|row| row.cells.first())
        .any(|cell| labels.iter().any(|label| label.text == cell.text));
    if common || body.is_empty() || labels.is_empty() {
        return false;
    }
    if is_headed(section) && section.is_word_column(0) {
        return true;
    }
    if wide::has_counting_head(section) && section.is_word_column(0) {
        let blank = head.cells[0].text.is_empty();
        return blank || corner::of(section).sets.is_some() || counts_above(section);
    }
    is_headed(section) && is_counted(section) && !has_diagonal(section)
}

/// Whether 1, 2, 3, … stand above rows that are as wide and make no square with the first one.
fn counts_above(section: &Section) -> bool {
    let width = section.rows[0].cells.len();
    let counts = |(place, cell): (usize, &Cell)| cell.text == (place + 1).to_string();
    width > 3
        && section.rows.len() + 1 != width
        && section.rows.iter().all(|row| row.cells.len() == width)
        && section.rows[0].cells[1..].iter().enumerate().all(counts)
}

/// Whether the first column is headed by a word and holds whole numbers.
fn is_counted(section: &Section) -> bool {
    let Some((head, body)) = section.rows.split_first() else { return false };
    let whole = |row: &crate::matrix::Row| {
        row.cells.first().is_some_and(|cell| draft::whole(&cell.text).is_some())
    };
    body.len() > 1 && body.iter().all(whole) && section.is_word(&head.cells[0])
}

/// Whether the cells on the diagonal are all blank or all alike.
fn has_diagonal(section: &Section) -> bool {
    let cells = section.rows.iter().skip(1).enumerate();
    let mut diagonal =
        cells.filter_map(|(place, row)| row.cells.get(place)).map(|cell| &*cell.text);
    let first = diagonal.next().unwrap_or("");
    diagonal.all(|text| text == first || (is_blank(text) && is_blank(first)))
}

/// The name that a heading makes, or a complaint.
fn named(
    heading: &str,
    span: std::ops::Range<usize>,
    sink: &mut Complaints,
) -> Option<names::Name> {
    let name = names::name(heading);
    if name.is_none() {
        let message = match heading {
            "" => "a heading is missing here".to_owned(),
            _ => format!("`{}` makes no name", excerpt(heading)),
        };
        let mend = "Head each column with letters and digits, a letter first.";
        sink.error(span, "no-name", message, mend);
    }
    name
}
