//! Wide tables: row labels and column labels, and the name in the corner.

use std::collections::BTreeSet;

use crate::cells::{Cell, is_blank};
use crate::complaint::{Complaints, excerpt, plural};
use crate::facts::is_unit;
use crate::matrix::Row;
use crate::names;

use super::corner::{self, Corner};
use super::draft::{Cells, Draft, said, whole};
use super::section::Section;

/// Words that name a table and no set.
const QUANTITIES: [&str; 16] = [
    "cost",
    "costs",
    "distance",
    "distances",
    "time",
    "times",
    "price",
    "prices",
    "demand",
    "demands",
    "weight",
    "profit",
    "duration",
    "length",
    "capacity",
    "value",
];

/// Letters that papers use for tables; the others are mostly indices.
const LETTERS: &str = "abcdefhqrwuQCD";

/// Whether a section is wide: no column but the first holds words, and the corner is blank or
/// names two sets or a quantity, or the columns are numbered, or they are labels elsewhere.
pub(super) fn is_wide(section: &Section, known: &BTreeSet<&str>) -> bool {
    let Some((head, body)) = section.rows.split_first() else { return false };
    let width = head.cells.len();
    if width < 2 || body.is_empty() || (1..width).any(|place| section.is_word_column(place)) {
        return false;
    }
    let corner = &head.cells[0].text;
    is_blank(corner)
        || corner::of(section).sets.is_some()
        || has_counting_head(section)
        || is_series(&head.cells[1..])
        || head.cells[1..].iter().all(|cell| known.contains(&*cell.text))
        || (width > 2 && section.is_word_column(0) && is_quantity(corner))
}

fn is_quantity(corner: &str) -> bool {
    let Some(name) = names::name(corner) else { return false };
    let letter = name.text.chars().count() == 1 && LETTERS.contains(&name.text);
    let known = QUANTITIES.contains(&name.text.to_lowercase().as_str());
    letter || known || is_unit(&name.text) || !name.unit.is_empty()
}

/// Whether growing whole numbers head the columns.
pub(super) fn has_counting_head(section: &Section) -> bool {
    let Some(head) = section.rows.first() else { return false };
    let labels = head.cells.get(1..).unwrap_or(&[]);
    let numbers: Option<Vec<i64>> = labels.iter().map(|cell| whole(&cell.text)).collect();
    let is_word = head.cells.first().is_some_and(|cell| !section.is_number(cell));
    is_word && numbers.is_some_and(|n| n.len() > 1 && n.windows(2).all(|pair| pair[0] < pair[1]))
}

/// Whether headings count one stem: `D1 D2 D3`.
fn is_series(cells: &[Cell]) -> bool {
    let part = |cell: &Cell| {
        let stem = cell.text.trim_end_matches(|c: char| c.is_ascii_digit()).to_owned();
        let number = cell.text[stem.len()..].parse::<u32>().ok()?;
        Some((stem, number))
    };
    let parts: Option<Vec<_>> = cells.iter().map(part).collect();
    parts.is_some_and(|parts| {
        let next = |pair: &[(String, u32)]| {
            pair[0].0 == pair[1].0 && pair[0].1.checked_add(1) == Some(pair[1].1)
        };
        parts.len() > 1 && parts.windows(2).all(next)
    })
}

/// Reads a wide table.
pub(super) async fn read(section: &Section<'_>, draft: &mut Draft, sink: &mut Complaints<'_>) {
    let Some((head, body)) = section.rows.split_first() else { return };
    let corner = corner::of(section);
    let columns = &head.cells[1..];
    let rows: Vec<&Row> = body.iter().filter(|row| fits(row, head.cells.len(), sink)).collect();
    let labels: Vec<&Cell> = rows.iter().map(|row| &row.cells[0]).collect();
    let columns_ok = are_distinct(columns.iter(), sink);
    if !are_distinct(labels.iter().copied(), sink) || !columns_ok {
        return;
    }
    let Some(name) = table_name(section, &corner, draft, sink) else { return };
    let texts = |cells: &mut dyn Iterator<Item = &Cell>| -> Vec<String> {
        cells.map(|cell| cell.text.to_string()).collect()
    };
    let sides = (texts(&mut labels.iter().copied()), texts(&mut columns.iter()));
    let Some(sets) = set_names(&corner, (&sides.0, &sides.1), head, (draft, sink)) else { return };
    draft.extend(&sets.0, sides.0.iter().map(String::as_str));
    draft.extend(&sets.1, sides.1.iter().map(String::as_str));
    let mut cells = Cells::new();
    for (row, label) in rows.iter().zip(&sides.0) {
        sink.spend(2 * row.cells.len()).await;
        for (cell, column) in row.cells[1..].iter().zip(&sides.1) {
            cells.put(vec![label.clone(), column.clone()], cell, section.style, sink);
        }
    }
    let datum = cells.finish(&name, 2, draft);
    draft.note(said(&name, &datum, &format!("{}, {}", sets.0, sets.1)));
    draft.datum(&name, &head.cells[0], datum, sink);
}

/// The name: that of the corner, else of the title, else `c`.
fn table_name(
    section: &Section,
    corner: &Corner,
    draft: &mut Draft,
    sink: &mut Complaints,
) -> Option<String> {
    let cell = section.rows.first()?.cells.first()?;
    if let Some(name) = &corner.table {
        return draft.name_at(name, cell.span.clone(), sink);
    }
    match &section.title {
        Some((title, span)) => draft.name_at(title, span.clone(), sink),
        None => {
            draft.note("A wide table that nothing names is c.".to_owned());
            Some("c".to_owned())
        }
    }
}

/// The names of the sets at the sides: those of the corner, else the set that holds the labels
/// already, else new ones.
fn set_names(
    corner: &Corner,
    (rows, columns): (&[String], &[String]),
    head: &Row,
    (draft, sink): (&mut Draft, &mut Complaints),
) -> Option<(String, String)> {
    if let Some((above, beside)) = &corner.sets {
        let span = || head.cells[0].span.clone();
        return Some((draft.name_at(above, span(), sink)?, draft.name_at(beside, span(), sink)?));
    }
    let same = rows.iter().collect::<BTreeSet<_>>() == columns.iter().collect::<BTreeSet<_>>();
    let mut name = |labels: &[String]| {
        let texts: Vec<&str> = labels.iter().map(String::as_str).collect();
        draft.set_of(&texts).unwrap_or_else(|| {
            let free = draft.free_set(same);
            draft.extend(&free, texts.into_iter());
            draft.note(format!("The set {free} is named by habit: no heading names it."));
            free
        })
    };
    Some((name(rows), name(columns)))
}

fn fits(row: &Row, width: usize, sink: &mut Complaints) -> bool {
    let found = row.cells.len();
    if found == width {
        return true;
    }
    if sink.is_full() {
        sink.count_error();
        return false;
    }
    let values = plural(found.saturating_sub(1), "value", "values");
    let message = format!("{values}, where there are {} columns", width - 1);
    let start = row.cells.get(width).map_or(row.end, |cell| cell.span.start);
    let mend = "Write a value or a dash for each column.";
    sink.error(start..row.end, "row-length", message, mend);
    false
}

/// Whether labels are given and tell apart; complains if not.
fn are_distinct<'c, 'a: 'c>(
    cells: impl Iterator<Item = &'c Cell<'a>>,
    sink: &mut Complaints,
) -> bool {
    let mut seen = BTreeSet::new();
    let mut fit = true;
    for cell in cells {
        if is_blank(&cell.text) {
            let mend = "Give every row and every column its label.";
            sink.error(cell.span.clone(), "label-missing", "a label is missing here", mend);
            fit = false;
        } else if !seen.insert(&*cell.text) {
            let message = format!("the label `{}` is given twice", excerpt(&cell.text));
            let mend = "The labels of a side must tell apart.";
            sink.error(cell.span.clone(), "label-twice", message, mend);
            fit = false;
        }
    }
    fit
}
