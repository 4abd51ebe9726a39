//! A last row of totals, as spreadsheets end: it is no label of its set, and is left out where the
//! numbers above it show that it is their sum. A last row headed as what the columns need or hold, as
//! a plan of shipments ends, is told.

use crate::cells::is_blank;
use crate::complaint::excerpt;
use crate::number::{Number, parse};

use super::section::Section;

/// Words that head such a row, in the languages that tables mostly come in.
const WORDS: [&str; 12] = [
    "total",
    "totals",
    "sum",
    "sums",
    "grand total",
    "all",
    "summe",
    "gesamt",
    "somme",
    "totale",
    "suma",
    "totaal",
];

/// Words that head a last row which belongs to the columns: what each of them needs, or holds.
const MARGINS: [&str; 12] = [
    "demand",
    "demands",
    "requirement",
    "requirements",
    "supply",
    "capacity",
    "bedarf",
    "nachfrage",
    "kapazität",
    "angebot",
    "demande",
    "capacité",
];

/// The fewest rows below the heading, the last one among them.
const FEWEST: usize = 3;

/// What is to be said of a last row that is headed as one of totals; where it is one, it is taken
/// off. A section of fewer than two other rows is left as it is. `O(cells)`.
pub(super) fn take_off(section: &mut Section) -> Option<String> {
    let last = section.rows.last()?;
    let label = last.cells.first()?.text.to_string();
    // without a unit in brackets
    let plain = label.split(['(', '[']).next().unwrap_or_default().trim();
    let plain = plain.trim_end_matches([':', '.']).to_lowercase();
    if section.rows.len() <= FEWEST {
        return None;
    }
    let label = excerpt(&label);
    if MARGINS.contains(&plain.as_str()) {
        return Some(format!(
            "The last row is headed `{label}` and was read like the others: if it holds a number for each \
             column, make it a table of its own."
        ));
    }
    if !WORDS.contains(&plain.as_str()) {
        return None;
    }
    if !is_sum(section) {
        return Some(format!(
            "The last row is headed `{label}` but is not the sum of those above: it was read like the \
             others; take it out if it holds totals."
        ));
    }
    section.rows.pop();
    Some(format!("The last row, `{label}`, was left out: it holds the sums of those above."))
}

/// Whether each number of the last row is the sum of those above it, and there is one.
fn is_sum(section: &Section) -> bool {
    let Some((last, above)) = section.rows.split_last() else { return false };
    let number = |text: &str| parse(text, section.style.decimal_comma).ok();
    let mut sums = 0;
    for (place, cell) in last.cells.iter().enumerate().skip(1) {
        if is_blank(&cell.text) {
            continue;
        }
        let column = above.iter().skip(1).filter_map(|row| row.cells.get(place));
        let values = column.filter(|cell| !is_blank(&cell.text)).map(|cell| number(&cell.text));
        let all: Option<Vec<Number>> = values.collect();
        let Some(sum) = all.map(|all| all.into_iter().fold(Number::ZERO, |sum, one| sum + one))
        else {
            return false;
        };
        if number(&cell.text) != Some(sum) {
            return false;
        }
        sums += 1;
    }
    sums > 0
}
