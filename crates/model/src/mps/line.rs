//! Lines and their fields: words between blanks, or the columns of a card.

use std::ops::Range;

/// How lines are cut into fields.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Layout {
    /// Words between blanks.
    Free,
    /// The columns of a card.
    Fixed,
}

/// A piece of a line and where it begins in the text.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) struct Field<'a> {
    pub(super) text: &'a str,
    pub(super) start: usize,
}

impl Field<'_> {
    pub(super) fn span(&self) -> Range<usize> {
        self.start..self.start + self.text.len()
    }
}

/// The lines of a text with their starts, without their ends; a mark of byte order at the
/// beginning is passed over.
pub(super) fn lines(text: &str) -> impl Iterator<Item = Field<'_>> {
    let mut start = if text.starts_with('\u{feff}') { 3 } else { 0 };
    text[start..].split('\n').map(move |line| {
        let field = Field { text: line.strip_suffix('\r').unwrap_or(line), start };
        start += line.len() + 1;
        field
    })
}

/// The words of a line.
pub(super) fn words<'a>(line: &Field<'a>) -> Vec<Field<'a>> {
    let base = line.text.as_ptr().addr();
    let place = |word: &str| line.start + (word.as_ptr().addr() - base);
    line.text.split_whitespace().map(|word| Field { text: word, start: place(word) }).collect()
}

/// A line of COLUMNS, RHS or RANGES: a name (of a column or a set) and pairs of a row and a
/// number.
pub(super) struct Pairs<'a> {
    pub(super) head: Option<Field<'a>>,
    pub(super) pairs: Vec<(Field<'a>, Field<'a>)>,
}

/// Cuts a line of COLUMNS, RHS or RANGES. `None` when it has no such shape.
pub(super) fn pairs<'a>(line: &Field<'a>, layout: Layout) -> Option<Pairs<'a>> {
    match layout {
        Layout::Free => {
            let words = words(line);
            let (head, rest) = words.split_at(words.len() % 2);
            let pairs: Vec<_> = rest.chunks_exact(2).map(|pair| (pair[0], pair[1])).collect();
            (!pairs.is_empty()).then(|| Pairs { head: head.first().copied(), pairs })
        }
        Layout::Fixed => {
            let [_, head, row, number, second_row, second_number] = card(line)?;
            let mut pairs = vec![(row?, number?)];
            match (second_row, second_number) {
                (Some(row), Some(number)) => pairs.push((row, number)),
                (None, None) => {}
                _ => return None,
            }
            Some(Pairs { head, pairs })
        }
    }
}

/// Cuts a line of ROWS into kind and name. `None` when it has no such shape.
pub(super) fn row<'a>(line: &Field<'a>, layout: Layout) -> Option<(Field<'a>, Field<'a>)> {
    match layout {
        Layout::Free => match words(line).as_slice() {
            &[kind, name] => Some((kind, name)),
            _ => None,
        },
        Layout::Fixed => match card(line)? {
            [Some(kind), Some(name), None, None, None, None] => Some((kind, name)),
            _ => None,
        },
    }
}

/// The fields of a card, from its columns 2-3, 5-12, 15-22, 25-36, 40-47 and 50-61, without
/// blanks around them. `None` when something stands between them. What stands behind column
/// 61 is a card number.
pub(super) fn card<'a>(line: &Field<'a>) -> Option<[Option<Field<'a>>; 6]> {
    const FIELDS: [(usize, usize); 6] = [(1, 3), (4, 12), (14, 22), (24, 36), (39, 47), (49, 61)];
    let mut out = [None; 6];
    let mut last = 0;
    for (slot, (from, to)) in out.iter_mut().zip(FIELDS) {
        if !columns(line, last, from).text.trim().is_empty() {
            return None;
        }
        let field = columns(line, from, to);
        let text = field.text.trim();
        let before = field.text.len() - field.text.trim_start().len();
        *slot = (!text.is_empty()).then(|| Field { text, start: field.start + before });
        last = to;
    }
    Some(out)
}

/// The characters of a line from column `from` to column `to`, counted from 0.
fn columns<'a>(line: &Field<'a>, from: usize, to: usize) -> Field<'a> {
    let text = line.text;
    let byte = |column: usize| {
        if text.is_ascii() {
            column.min(text.len())
        } else {
            text.char_indices().nth(column).map_or(text.len(), |(at, _)| at)
        }
    };
    let (from, to) = (byte(from), byte(to));
    Field { text: &text[from..to], start: line.start + from }
}
