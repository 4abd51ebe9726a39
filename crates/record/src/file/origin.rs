//! Where a text within a file begins, so that a place in the text becomes a place in the file.

use std::ops::Range;

use crate::message::Complaint;
use crate::place::line_column;

/// Where a text stands in its file.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Origin {
    /// The line of its first character, from 1.
    pub line: u32,
    /// The column of its first character, from 1.
    pub column: u32,
    /// Whether the text stands there as it is; escapes shift what comes after them.
    pub verbatim: bool,
}

impl Origin {
    /// The origin of the string at `span` (quotes included) of `file`.
    #[must_use]
    pub fn of_string(file: &str, span: &Range<usize>) -> Self {
        let token = file.get(span.clone()).unwrap_or("");
        let long = token.starts_with("'''") || token.starts_with("\"\"\"");
        let quotes = if long { 3 } else { 1 };
        let mut skipped = quotes.min(token.len());
        if long {
            let rest = &token[skipped..];
            skipped +=
                ["\r\n", "\n"].iter().find(|end| rest.starts_with(**end)).map_or(0, |e| e.len());
        }
        let (line, column) = line_column(file, span.start + skipped);
        let verbatim = token.starts_with('\'') || !token.contains('\\');
        Self { line, column, verbatim }
    }

    /// The line and column in the file of a complaint about the text. The first character of
    /// the text when it does not stand verbatim in the file.
    #[must_use]
    pub fn place(&self, complaint: &Complaint) -> (u32, u32) {
        if !self.verbatim {
            return (self.line, self.column);
        }
        let line = self.line.saturating_add(complaint.line.max(1) - 1);
        if complaint.line <= 1 {
            (line, self.column.saturating_add(complaint.column.max(1) - 1))
        } else {
            (line, complaint.column)
        }
    }
}
