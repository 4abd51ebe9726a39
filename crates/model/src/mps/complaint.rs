//! Complaints about an MPS text: what is wrong, where, and how to mend it.

use std::ops::Range;

/// How bad it is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Read, but other programs may read it otherwise.
    Warning,
    /// Could not be read; no model comes out.
    Error,
}

/// One complaint.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Complaint {
    /// How bad it is.
    pub severity: Severity,
    /// A stable code, e.g. `not-a-number`.
    pub code: &'static str,
    /// The line, from 1.
    pub line: u32,
    /// The column in characters, from 1.
    pub column: u32,
    /// The place in bytes; both ends are on character boundaries.
    pub span: Range<usize>,
    /// What is wrong.
    pub message: String,
    /// How to mend it.
    pub mend: String,
}

/// No more errors than this are kept; the rest is counted.
const KEPT: usize = 200;

/// What a complaint says: a code, what is wrong, how to mend it.
pub(super) type Words = (&'static str, String, String);

/// Gathers the complaints about one text.
pub(super) struct Complaints<'a> {
    text: &'a str,
    list: Vec<Complaint>,
    errors: usize,
}

impl<'a> Complaints<'a> {
    pub(super) fn new(text: &'a str) -> Self {
        Self { text, list: Vec::new(), errors: 0 }
    }

    /// Adds an error. The words are made only when they are kept.
    pub(super) fn error(&mut self, span: Range<usize>, words: impl FnOnce() -> Words) {
        self.errors += 1;
        if self.errors <= KEPT {
            self.add(Severity::Error, span, words());
        }
    }

    pub(super) fn warn(&mut self, span: Range<usize>, words: Words) {
        self.add(Severity::Warning, span, words);
    }

    pub(super) fn errors(&self) -> usize {
        self.errors
    }

    fn add(&mut self, severity: Severity, span: Range<usize>, (code, message, mend): Words) {
        let (line, column) = (0, 0);
        self.list.push(Complaint { severity, code, line, column, span, message, mend });
    }

    /// The complaints in the order of the text, and a closing one when some were only counted.
    pub(super) fn finish(mut self) -> Vec<Complaint> {
        self.list.sort_by_key(|complaint| (complaint.span.start, complaint.span.end));
        if self.errors > KEPT {
            let (end, more) = (self.text.len(), self.errors - KEPT);
            let message =
                format!("{} could not be read", plural(more, "further place", "further places"));
            let mend = "Mend the first ones; many of a kind often have one cause.".to_owned();
            self.add(Severity::Error, end..end, ("further-complaints", message, mend));
        }
        place(self.text, &mut self.list);
        self.list
    }
}

/// Gives complaints in the order of the text their lines and columns, in one pass.
fn place(text: &str, list: &mut [Complaint]) {
    let (mut line, mut start, mut seen) = (1_u32, 0, 0);
    for complaint in list {
        let at = complaint.span.start;
        for (end, _) in text.get(seen..at).unwrap_or("").match_indices('\n') {
            line = line.saturating_add(1);
            start = seen + end + 1;
        }
        seen = at;
        let before = text.get(start..at).unwrap_or("").chars().count();
        (complaint.line, complaint.column) = (line, count(before).saturating_add(1));
    }
}

/// A count as `u32`.
fn count(value: usize) -> u32 {
    u32::try_from(value).unwrap_or(u32::MAX)
}

/// A count with its thousands separated.
pub(crate) fn grouped(value: usize) -> String {
    let digits = value.to_string();
    let mut grouped = String::new();
    for (place, digit) in digits.chars().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            grouped.push(',');
        }
        grouped.push(digit);
    }
    grouped
}

/// "1 row", "4,896 rows".
pub(crate) fn plural(value: usize, one: &str, many: &str) -> String {
    format!("{} {}", grouped(value), if value == 1 { one } else { many })
}

/// A piece of the text to quote: at most 40 characters, control characters as blanks.
pub(crate) fn excerpt(text: &str) -> String {
    let mut out: String =
        text.chars().take(40).map(|c| if c.is_control() { ' ' } else { c }).collect();
    if text.chars().nth(40).is_some() {
        out.push('…');
    }
    out
}
