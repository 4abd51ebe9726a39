//! A paste cut into tables: at blank lines, and at lines that are titles.

use std::ops::Range;

use crate::cells::{Cell, Separator, Style, is_blank, is_word, split, style};
use crate::matrix::Row;
use crate::number::parse;
use crate::pace::Pace;
use crate::text::{Line, lines};

/// One table as it was written, with the title above it.
pub(crate) struct Section<'a> {
    pub(crate) title: Option<(String, Range<usize>)>,
    pub(crate) style: Style,
    pub(crate) rows: Vec<Row<'a>>,
}

impl Section<'_> {
    pub(crate) fn is_number(&self, cell: &Cell) -> bool {
        parse(&cell.text, self.style.decimal_comma).is_ok()
    }

    pub(crate) fn is_word(&self, cell: &Cell) -> bool {
        is_word(&cell.text, self.style.decimal_comma)
    }

    /// Whether most of a column's cells below the heading that are not blank are words.
    pub(crate) fn is_word_column(&self, place: usize) -> bool {
        let filled: Vec<&Cell> = self
            .rows
            .iter()
            .skip(1)
            .filter_map(|row| row.cells.get(place))
            .filter(|cell| !is_blank(&cell.text))
            .collect();
        filled.iter().filter(|cell| self.is_word(cell)).count() * 2 > filled.len()
    }

    fn has_number(&self, row: usize) -> bool {
        self.rows.get(row).is_some_and(|row| row.cells.iter().any(|cell| self.is_number(cell)))
    }

    /// Whether a row is the title of the table that follows: one cell above wider rows, or words
    /// above a heading.
    fn is_title(&self, row: usize) -> bool {
        let filled = |row: &Row| row.cells.iter().filter(|cell| !cell.text.is_empty()).count();
        let Some(next) = self.rows.get(row + 1) else { return false };
        if self.has_number(row) || (row > 0 && !self.has_number(row - 1)) {
            return false;
        }
        let heads = !self.has_number(row + 1);
        let alone = filled(&self.rows[row]) == 1 && filled(next) > 1 && (row == 0 || heads);
        let words = next.cells.iter().skip(1).all(|cell| self.is_word(cell));
        let spaced = self.style.separator == Separator::Space && words;
        alone || (spaced && heads && self.has_number(row + 2))
    }
}

/// The tables of a text. O(length).
pub(crate) async fn sections<'a>(text: &'a str, pace: &Pace) -> Vec<Section<'a>> {
    let mut found: Vec<Section> = Vec::new();
    let mut title = None;
    let all: Vec<Line> = lines(text).into_iter().filter(|line| !line.is_remark()).collect();
    for chunk in all.split(is_gap).filter(|chunk| !chunk.is_empty()) {
        let section = cells(chunk, pace).await;
        if let ([line], false) = (chunk, section.has_number(0)) {
            title = Some(title_of(line));
            continue;
        }
        cut(section, chunk, title.take(), &mut found);
    }
    found
}

/// Whether a line separates tables: blank, or nothing but separators.
fn is_gap(line: &Line) -> bool {
    line.text.chars().all(|c| c.is_whitespace() || c == ',' || c == ';')
}

fn title_of(line: &Line) -> (String, Range<usize>) {
    let text = line.text.trim_matches(|c: char| c.is_whitespace() || ",;:\"".contains(c));
    (text.chars().take(120).collect(), line.span())
}

/// Splits lines into cells; lines with digits say what separates them. Empty cells at the end
/// that the heading lacks are dropped.
async fn cells<'a>(chunk: &[Line<'a>], pace: &Pace) -> Section<'a> {
    let telling: Vec<Line> = chunk
        .iter()
        .filter(|line| line.text.contains(|c: char| c.is_ascii_digit()))
        .copied()
        .collect();
    let style = style(if telling.is_empty() { chunk } else { &telling });
    let mut rows = Vec::with_capacity(chunk.len());
    for line in chunk {
        pace.spend(line.text.len()).await;
        rows.push(Row { cells: split(line, style.separator), end: line.end() });
    }
    Section { title: None, style, rows }
}

/// Cuts a chunk at its titles.
fn cut<'a>(
    mut section: Section<'a>,
    chunk: &[Line<'a>],
    title: Option<(String, Range<usize>)>,
    found: &mut Vec<Section<'a>>,
) {
    let titles: Vec<usize> = (0..chunk.len()).filter(|&row| section.is_title(row)).collect();
    let mut below = Vec::new();
    for &at in titles.iter().rev() {
        let rows = section.rows.split_off(at + 1);
        section.rows.pop();
        let title = Some(title_of(&chunk[at]));
        below.push(trimmed(Section { title, style: section.style, rows }));
    }
    if !section.rows.is_empty() {
        section.title = title;
        found.push(trimmed(section));
    }
    found.extend(below.into_iter().rev());
}

/// Drops empty cells at the ends of rows beyond the heading.
fn trimmed(mut section: Section) -> Section {
    if section.style.separator == Separator::Space {
        return section;
    }
    let mut width = 0;
    for (number, row) in section.rows.iter_mut().enumerate() {
        while row.cells.len() > width && row.cells.last().is_some_and(|c| c.text.is_empty()) {
            row.cells.pop();
        }
        if number == 0 {
            width = row.cells.len();
        }
    }
    section
}
