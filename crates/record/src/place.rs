//! Places in a text: from a byte span to line, column and UTF-16 units.
//!
//! A text area of the page counts UTF-16 units, a person counts lines and characters, a
//! parser counts bytes; a [`Complaint`] holds the first two.

use std::ops::Range;

use crate::message::Complaint;

/// What is wrong with a text, before its place is worked out.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Finding {
    /// Whether it is an error (`true`) or a warning.
    pub error: bool,
    /// A stable code.
    pub code: String,
    /// The bytes it is about.
    pub span: Range<usize>,
    /// What is wrong.
    pub message: String,
    /// How to mend it; may be empty.
    pub mend: String,
}

/// The finding with its place in `text`. Spans past the end, or within a character, are moved
/// back to the nearest boundary. `O(length of the text)`.
#[must_use]
pub fn complaint(text: &str, finding: Finding) -> Complaint {
    let start = boundary(text, finding.span.start);
    let end = boundary(text, finding.span.end.max(start));
    let (line, column) = line_column(text, start);
    let units = |upto: usize| small(text[..upto].encode_utf16().count());
    Complaint {
        error: finding.error,
        code: finding.code,
        line,
        column,
        start: units(start),
        end: units(end),
        message: finding.message,
        mend: finding.mend,
    }
}

/// The line and the column, in characters, of a byte of the text; both from 1.
#[must_use]
pub fn line_column(text: &str, byte: usize) -> (u32, u32) {
    let before = &text[..boundary(text, byte)];
    let line_start = before.rfind('\n').map_or(0, |at| at + 1);
    let line = before.bytes().filter(|&b| b == b'\n').count() + 1;
    (small(line), small(before[line_start..].chars().count() + 1))
}

/// The nearest character boundary at or before `byte`.
fn boundary(text: &str, byte: usize) -> usize {
    let mut at = byte.min(text.len());
    while !text.is_char_boundary(at) {
        at -= 1;
    }
    at
}

fn small(count: usize) -> u32 {
    u32::try_from(count).unwrap_or(u32::MAX)
}

#[cfg(test)]
mod tests {
    use super::*;

    fn finding(span: Range<usize>) -> Finding {
        Finding { error: true, code: "c".into(), span, message: "m".into(), mend: String::new() }
    }

    #[test]
    fn counts_characters_for_people_and_units_for_the_page() {
        let text = "aé\n𝑥𝑥=1";
        let at = text.find('=').unwrap_or(0);
        let placed = complaint(text, finding(at..at + 1));
        assert_eq!((placed.line, placed.column), (2, 3));
        assert_eq!((placed.start, placed.end), (7, 8));
    }

    #[test]
    fn a_span_out_of_range_or_inside_a_character_stays_in_the_text() {
        let placed = complaint("é", finding(1..99));
        assert_eq!((placed.line, placed.column, placed.start, placed.end), (1, 1, 0, 1));
        assert_eq!(line_column("", 5), (1, 1));
    }
}
