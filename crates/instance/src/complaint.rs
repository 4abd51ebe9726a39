//! Complaints about a text: what is wrong, where, and how to mend it.

use std::ops::Range;

use crate::cells::Cell;
use crate::number::{Habit, Number, habit, number_text};
use crate::pace::Pace;

/// How bad it is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Severity {
    /// Read, but perhaps not as meant.
    Warning,
    /// Could not be read; no instance comes out.
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
    /// How to mend it; may be empty.
    pub mend: String,
}

/// No more complaints than this are kept; the rest is counted.
const KEPT: usize = 200;
/// No more warnings than this are kept, so that they never hide errors; the rest is left out.
const KEPT_WARNINGS: usize = 50;

/// What it takes to read a cell, in ticks.
const TICKS_OF_A_CELL: usize = 16;

/// Gathers complaints about one text.
pub(crate) struct Complaints<'a> {
    text: &'a str,
    line_starts: Vec<usize>,
    list: Vec<Complaint>,
    errors: usize,
    warnings: usize,
    dropped: usize,
    /// A clock time and a number with marks between thousands, the first of each, as read.
    habits: [Option<String>; 2],
    /// The first number with a decimal comma.
    doubtful: Option<(Range<usize>, String)>,
    /// Whether some comma cannot stand between thousands.
    comma_is_sure: bool,
    pace: Pace,
}

impl<'a> Complaints<'a> {
    pub(crate) fn new(text: &'a str, pace: &Pace) -> Self {
        let line_starts = crate::text::lines(text).iter().map(|line| line.start).collect();
        Self {
            text,
            line_starts,
            list: Vec::new(),
            errors: 0,
            warnings: 0,
            dropped: 0,
            habits: [None, None],
            doubtful: None,
            comma_is_sure: false,
            pace: pace.clone(),
        }
    }

    /// The pace of the work that complains.
    pub(crate) fn pace(&self) -> Pace {
        self.pace.clone()
    }

    /// Counts cells that were read, each of them some ticks.
    pub(crate) async fn spend(&self, cells: usize) {
        self.pace.spend(cells * TICKS_OF_A_CELL).await;
    }

    pub(crate) fn error(
        &mut self,
        span: Range<usize>,
        code: &'static str,
        message: impl Into<String>,
        mend: impl Into<String>,
    ) {
        self.errors += 1;
        self.add((Severity::Error, code), span, message.into(), mend.into());
    }

    pub(crate) fn warn(
        &mut self,
        span: Range<usize>,
        code: &'static str,
        message: impl Into<String>,
        mend: impl Into<String>,
    ) {
        self.warnings += 1;
        if self.warnings <= KEPT_WARNINGS && !self.is_full() {
            self.add((Severity::Warning, code), span, message.into(), mend.into());
        }
    }

    /// Remembers a number that was read by habit, or whose comma is in doubt.
    pub(crate) fn met(&mut self, cell: &Cell, decimal_comma: bool, number: &Number) {
        let text = &*cell.text;
        match (habit(text, decimal_comma), text.split_once(',')) {
            (Some(habit), _) => {
                let first = &mut self.habits[usize::from(habit == Habit::Thousands)];
                if first.is_none() {
                    *first = Some(format!("`{}` is {}", excerpt(text), number_text(number)));
                }
            }
            (None, Some((whole, part))) => {
                let doubtful = part.len() == 3 && !whole.trim_start_matches('-').starts_with('0');
                self.comma_is_sure |= !doubtful;
                self.doubtful.get_or_insert_with(|| (cell.span.clone(), excerpt(text)));
            }
            _ => {}
        }
    }

    /// Warns when every decimal comma might be a mark between thousands.
    pub(crate) fn doubt_thousands(&mut self) {
        if let Some((span, text)) = self.doubtful.take().filter(|_| !self.comma_is_sure) {
            let message = format!("the comma in `{text}` was read as a decimal comma");
            let mend = "If it marks thousands, leave it out.";
            self.warn(span, "perhaps-thousands", message, mend);
        }
    }

    /// What was read by habit, a sentence each.
    pub(crate) fn habits(&self) -> Vec<String> {
        let [clock, thousands] = &self.habits;
        let clock = clock.iter().map(|one| format!("Clock times count in minutes: {one}."));
        let thousands =
            thousands.iter().map(|one| format!("Marks between thousands were read: {one}."));
        clock.chain(thousands).collect()
    }

    /// Whether further complaints would only be counted. Callers that meet many of a kind ask
    /// first, so that the words are not made in vain.
    pub(crate) fn is_full(&self) -> bool {
        self.list.len() >= KEPT
    }

    /// Counts an error whose words were not made.
    pub(crate) fn count_error(&mut self) {
        self.errors += 1;
        self.dropped += 1;
    }

    pub(crate) fn errors(&self) -> usize {
        self.errors
    }

    /// The line and column (in characters), both from 1, of a byte of the text.
    pub(crate) fn place(&self, byte: usize) -> (u32, u32) {
        let line = self.line_starts.partition_point(|&start| start <= byte);
        let start = if line == 0 { 0 } else { self.line_starts[line - 1] };
        let before = self.text.get(start..byte).unwrap_or("");
        (count(line).max(1), count(before.chars().count()).saturating_add(1))
    }

    fn add(
        &mut self,
        (severity, code): (Severity, &'static str),
        span: Range<usize>,
        message: String,
        mend: String,
    ) {
        if self.is_full() {
            self.dropped += 1;
            return;
        }
        let (line, column) = self.place(span.start);
        self.list.push(Complaint { severity, code, line, column, span, message, mend });
    }

    /// The complaints in the order of the text, and a closing one when some were only counted.
    pub(crate) fn finish(mut self) -> Vec<Complaint> {
        self.list.sort_by_key(|complaint| (complaint.span.start, complaint.span.end));
        if self.dropped > 0 {
            let (end, dropped) = (self.text.len(), self.dropped);
            let (line, column) = self.place(end);
            self.list.push(Complaint {
                severity: Severity::Error,
                code: "further-complaints",
                line,
                column,
                span: end..end,
                message: format!("{} further places could not be read", grouped(dropped)),
                mend: "Mend the first ones; many of a kind often have one cause.".to_owned(),
            });
        }
        self.list
    }
}

/// A count as `u32`.
pub(crate) fn count(value: usize) -> u32 {
    u32::try_from(value).unwrap_or(u32::MAX)
}

/// A count with its thousands separated: 4896 is "4,896".
pub(crate) fn grouped(value: usize) -> String {
    let digits = value.to_string();
    let mut out = String::new();
    for (place, digit) in digits.chars().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            out.push(',');
        }
        out.push(digit);
    }
    out
}

/// "1 drive", "306 drives".
pub(crate) fn plural(value: usize, one: &str, many: &str) -> String {
    format!("{} {}", grouped(value), if value == 1 { one } else { many })
}

/// A piece of the text to quote: at most 30 characters, control characters as blanks.
pub(crate) fn excerpt(text: &str) -> String {
    let mut out: String =
        text.chars().take(30).map(|c| if c.is_control() { ' ' } else { c }).collect();
    if text.chars().nth(30).is_some() {
        out.push('…');
    }
    out
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn places_count_lines_and_characters() {
        let sink = Complaints::new("äb\ncd\r\ne", &Pace::default());
        assert_eq!(sink.place(0), (1, 1));
        assert_eq!(sink.place(2), (1, 2));
        assert_eq!(sink.place(4), (2, 1));
        assert_eq!(sink.place(8), (3, 1));
        assert_eq!(Complaints::new("", &Pace::default()).place(0), (1, 1));
    }

    #[test]
    fn only_the_first_are_kept() {
        let mut sink = Complaints::new("text", &Pace::default());
        for _ in 0..KEPT + 5 {
            sink.error(0..1, "x", "m", "");
        }
        sink.count_error();
        assert_eq!(sink.errors(), KEPT + 6);
        let list = sink.finish();
        assert_eq!(list.len(), KEPT + 1);
        assert_eq!(list[KEPT].message, "6 further places could not be read");
    }

    #[test]
    fn warnings_hide_no_errors() {
        let mut sink = Complaints::new("text", &Pace::default());
        for _ in 0..2 * KEPT {
            sink.warn(0..1, "w", "m", "");
        }
        sink.error(0..1, "x", "m", "");
        let list = sink.finish();
        assert_eq!(list.len(), KEPT_WARNINGS + 1);
        assert_eq!(list.iter().filter(|c| c.severity == Severity::Error).count(), 1);
    }

    #[test]
    fn counts_are_grouped() {
        assert_eq!(grouped(0), "0");
        assert_eq!(grouped(999), "999");
        assert_eq!(grouped(4896), "4,896");
        assert_eq!(grouped(1_234_567), "1,234,567");
        assert_eq!(plural(1, "drive", "drives"), "1 drive");
    }
}
