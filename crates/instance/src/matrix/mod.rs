//! Distance matrices: a table of numbers, whole or half, with or without labels.

mod labels;
mod place;
mod shape;
#[cfg(test)]
mod tests;

use crate::cells::{Cell, MAX_CELLS, Separator, Style, is_blank, is_word, split, style_in_slices};
use crate::complaint::{Complaints, count, excerpt, grouped};
use crate::finish::RoundTrip;
use crate::number::{Number, parse};
use crate::text::{Line, lines};
use crate::{MAX_STOPS, facts};

/// A row of the table as it was written: its cells and the place where it ends.
pub(crate) struct Row<'a> {
    pub(crate) cells: Vec<Cell<'a>>,
    pub(crate) end: usize,
}

/// What a cell holds.
#[derive(Debug, Clone, PartialEq)]
enum Value {
    Number(Number),
    Blank,
    /// Complained of.
    Broken,
}

/// A table split into title, cells and style; `None` when there is nothing to read, or too much.
pub(crate) struct Table<'a> {
    pub(crate) title: String,
    pub(crate) style: Style,
    pub(crate) rows: Vec<Row<'a>>,
}

const LABEL_MEND: &str = "Write a number or a dash. If it belongs to a label with blanks, put the \
    label in double quotes, or put tabs between the cells.";

/// Splits a text into a table. A first line of words that a blank line follows is its title.
pub(crate) async fn table<'a>(text: &'a str, sink: &mut Complaints<'_>) -> Option<Table<'a>> {
    let all = lines(text);
    let mut kept: Vec<Line> = Vec::new();
    let mut title = String::new();
    for (number, line) in all.iter().enumerate() {
        if line.is_blank() || line.is_remark() {
            continue;
        }
        if kept.is_empty() && title.is_empty() && is_title(&all[number..]) {
            title = line.text.trim().chars().take(120).collect();
            continue;
        }
        kept.push(*line);
    }
    if kept.is_empty() {
        let mend = "Paste a table, points, a TSPLIB file or blocks.";
        sink.error(0..0, "nothing-to-read", "there is nothing to read", mend);
        return None;
    }
    if kept.len() > MAX_STOPS + 1 {
        let message = format!("{} lines are more than a table may have", grouped(kept.len()));
        let mend = format!("Keep to {} stops.", grouped(MAX_STOPS));
        sink.error(kept[MAX_STOPS + 1].span(), "too-large", message, mend);
        return None;
    }
    let style = style_in_slices(&kept, &sink.pace()).await;
    let mut rows = Vec::with_capacity(kept.len());
    for line in &kept {
        rows.push(Row { cells: split(line, style.separator), end: line.end() });
        sink.spend(rows[rows.len() - 1].cells.len()).await;
    }
    Some(Table { title, style, rows })
}

pub(crate) fn is_title(rest: &[Line]) -> bool {
    let followed_by_blank = rest.get(1).is_some_and(Line::is_blank);
    let words = rest[0].text.split_whitespace().all(|word| parse(word, false).is_err());
    followed_by_blank && words && !rest[0].text.contains([';', '\t'])
}

/// Reads a distance matrix. O(n²).
pub(crate) async fn read(text: &str, sink: &mut Complaints<'_>) -> Option<RoundTrip> {
    let Table { title, style, mut rows } = table(text, sink).await?;
    if let Some(row) = rows.iter().find(|row| row.cells.len() >= MAX_CELLS) {
        let message = format!("a row with more than {} cells", grouped(MAX_STOPS));
        let mend = format!("Keep to {} stops.", grouped(MAX_STOPS));
        sink.error(row.end..row.end, "too-large", message, mend);
        return None;
    }
    if let Some(first) = drive_list(&rows, style) {
        let message = "this looks like a list of drives, a line each, and not like a table";
        let mend = "Read it with the reader `arcs`, or leave the reader to be guessed.";
        sink.error(first, "drive-list", message, mend);
        return None;
    }
    let headings = labels::take(&mut rows, style);
    drop_trailing(&mut rows, style);
    let mut values: Vec<Vec<Value>> = Vec::with_capacity(rows.len());
    for row in &rows {
        sink.spend(2 * row.cells.len()).await;
        values.push(row.cells.iter().map(|cell| value(cell, style, sink)).collect());
    }
    let shape = shape::find(&values, headings.columns.as_ref().map(Vec::len));
    let (square, mirrored) = place::square(&rows, values, &shape, &headings, sink).await?;
    let mut notes = Vec::new();
    let unit = headings.unit(&title, &mut notes);
    notes.extend(shape.note());
    if mirrored {
        notes.push("One half is blank: each distance was taken for both directions.".to_owned());
    }
    notes.extend(place::diagonal_note(&rows, &shape, style));
    let labelled = match (&headings.columns, &headings.rows) {
        (None, None) => "without labels",
        _ => "with labels",
    };
    let comma = if style.decimal_comma { ", with decimal commas" } else { "" };
    let how = format!("a matrix {labelled}, cells separated by {}{comma}", style.separator.name());
    Some(RoundTrip { title, unit, square, points: None, tables: Vec::new(), notes, how })
}

/// The place of the first row, if all rows are two words and a number.
fn drive_list(rows: &[Row], style: Style) -> Option<std::ops::Range<usize>> {
    let word = |cell: &Cell| is_word(&cell.text, style.decimal_comma);
    let drive = |row: &Row| match row.cells.as_slice() {
        [from, to, value] => {
            word(from) && word(to) && parse(&value.text, style.decimal_comma).is_ok()
        }
        _ => false,
    };
    let first = rows.first()?.cells.first()?.span.start..rows.first()?.end;
    rows.iter().all(drive).then_some(first)
}

/// Takes off an empty last cell of every row, as a separator at the end of lines leaves it.
fn drop_trailing(rows: &mut [Row], style: Style) {
    let n = rows.len();
    let trails = |row: &Row| {
        row.cells.len() == n + 1 && row.cells.last().is_some_and(|cell| cell.text.is_empty())
    };
    if style.separator != Separator::Space && rows.iter().all(trails) {
        for row in rows {
            row.cells.pop();
        }
    }
}

fn value(cell: &Cell, style: Style, sink: &mut Complaints) -> Value {
    if is_blank(&cell.text) {
        return Value::Blank;
    }
    match parse(&cell.text, style.decimal_comma) {
        Ok(number) => {
            sink.met(cell, style.decimal_comma, &number);
            Value::Number(number)
        }
        Err(_) if sink.is_full() => {
            sink.count_error();
            Value::Broken
        }
        Err(why) => {
            let message = format!("`{}` is not a number", excerpt(&cell.text));
            let spaced = style.separator == Separator::Space && is_word(&cell.text, false);
            let mend = if spaced { LABEL_MEND } else { why.mend() };
            sink.error(cell.span.clone(), "not-a-number", message, mend);
            Value::Broken
        }
    }
}

/// The line of a row, for messages: "row 3".
fn row_name(number: usize) -> String {
    format!("row {}", count(number + 1))
}

/// The unit named in a text, if one of its words is a unit.
fn unit_of(text: &str) -> Option<&str> {
    text.split(|c: char| !c.is_alphanumeric() && c != '€' && c != '£' && c != '$')
        .find(|word| facts::is_unit(word))
}
