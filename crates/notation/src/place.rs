//! Places in a text: byte spans, and lines, columns and UTF-16 units made from them.

use std::ops::Range;

/// A half-open range of bytes. Any two spans are equal, so that two trees are equal when
/// they say the same thing, wherever it stands.
#[derive(Debug, Clone, Copy, Default, Eq)]
pub struct Span {
    /// First byte.
    pub start: u32,
    /// One past the last byte.
    pub end: u32,
}

impl PartialEq for Span {
    fn eq(&self, _: &Self) -> bool {
        true
    }
}

impl Span {
    /// The span from `start` to `end`; what lies beyond 2³² − 1 saturates.
    #[must_use]
    pub fn new(start: usize, end: usize) -> Self {
        let narrow = |n: usize| u32::try_from(n).unwrap_or(u32::MAX);
        Self { start: narrow(start), end: narrow(end) }
    }

    /// The smallest span that covers both.
    #[must_use]
    pub fn to(self, other: Self) -> Self {
        Self { start: self.start.min(other.start), end: self.end.max(other.end) }
    }

    /// The span as a range of bytes.
    #[must_use]
    pub fn range(self) -> Range<usize> {
        self.start as usize..self.end as usize
    }

    /// The piece of `text` at this span; empty when it does not fit the text.
    #[must_use]
    pub fn of(self, text: &str) -> &str {
        text.get(self.range()).unwrap_or("")
    }
}

/// Line and column of a byte, both from 1, the column in characters. A byte beyond the end
/// or inside a character counts as the end or the start of that character. `O(byte)`.
#[must_use]
pub fn line_column(text: &str, byte: usize) -> (u32, u32) {
    let before = &text[..floor_boundary(text, byte)];
    let start = before.rfind('\n').map_or(0, |at| at + 1);
    let line = before.bytes().filter(|&b| b == b'\n').count() + 1;
    let column = before[start..].chars().count() + 1;
    (u32::try_from(line).unwrap_or(u32::MAX), u32::try_from(column).unwrap_or(u32::MAX))
}

/// The number of UTF-16 units before a byte: what a text area in a browser counts. `O(byte)`.
#[must_use]
pub fn utf16_offset(text: &str, byte: usize) -> u32 {
    let before = &text[..floor_boundary(text, byte)];
    u32::try_from(before.encode_utf16().count()).unwrap_or(u32::MAX)
}

/// A range of bytes as a range of UTF-16 units.
#[must_use]
pub fn utf16_range(text: &str, span: &Range<usize>) -> Range<u32> {
    utf16_offset(text, span.start)..utf16_offset(text, span.end)
}

fn floor_boundary(text: &str, byte: usize) -> usize {
    let mut at = byte.min(text.len());
    while !text.is_char_boundary(at) {
        at -= 1;
    }
    at
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_count_characters_and_units_count_surrogates() {
        let text = "Σ x\n𝔹∈";
        assert_eq!(line_column(text, 0), (1, 1));
        assert_eq!(line_column(text, "Σ ".len()), (1, 3));
        assert_eq!(line_column(text, "Σ x\n𝔹".len()), (2, 2));
        assert_eq!(utf16_offset(text, "Σ x\n𝔹".len()), 6);
        assert_eq!(line_column(text, 1), (1, 1), "inside a character: its start");
        assert_eq!(line_column(text, 999), (2, 3), "beyond the end: the end");
    }
}
