//! A text as a stream of numbers: the line breaks of such files carry no meaning.

use std::borrow::Cow;
use std::ops::Range;

use crate::cells::Cell;
use crate::complaint::{Complaints, excerpt, grouped};
use crate::number::{Number, parse};
use crate::pace::Pace;
use crate::text::lines;

/// No set of such a file is larger.
pub(super) const MOST: usize = 20_000;
/// No table of such a file has more cells.
pub(super) const MOST_CELLS: usize = 4_000_000;

/// Whether a line is a remark, or begins with a letter where such lines are passed over.
pub(super) fn is_prose(line: &str, prose: bool) -> bool {
    let line = line.trim_start();
    line.starts_with(['#', '+']) || prose && line.starts_with(char::is_alphabetic)
}

/// The numbers of a text and where the reading is.
pub(super) struct Stream<'s, 'a> {
    pub(super) cells: Vec<Cell<'a>>,
    at: usize,
    end: usize,
    /// Names of instances that stand in the text, with the cell that they stand before.
    pub(super) names: Vec<(usize, String)>,
    sink: &'s mut Complaints<'a>,
}

impl<'s, 'a> Stream<'s, 'a> {
    /// The words of a text, remarks left out; where `prose`, lines that begin with a letter too,
    /// of which `instance NAME` names what follows.
    pub(super) async fn new(text: &'a str, prose: bool, sink: &'s mut Complaints<'a>) -> Self {
        let (mut cells, mut names) = (Vec::new(), Vec::new());
        for line in lines(text) {
            if is_prose(line.text, prose) {
                let remark = line.text.trim_start_matches(['#', ' ', '+']);
                if let Some(name) = remark.strip_prefix("instance ") {
                    names.push((cells.len(), excerpt(name.trim())));
                }
                continue;
            }
            let base = line.text.as_ptr().addr();
            let known = cells.len();
            cells.extend(line.text.split_whitespace().map(|word| {
                let start = line.start + (word.as_ptr().addr() - base);
                Cell { text: Cow::Borrowed(word), span: start..start + word.len() }
            }));
            sink.spend(cells.len() - known).await;
        }
        Self { cells, at: 0, end: text.trim_end().len(), names, sink }
    }

    /// The pace of the reading.
    pub(super) fn pace(&self) -> Pace {
        self.sink.pace()
    }

    /// Counts cells that were read.
    pub(super) async fn spend(&self, cells: usize) {
        self.sink.spend(cells).await;
    }

    pub(super) fn left(&self) -> usize {
        self.cells.len() - self.at
    }

    pub(super) fn at(&self) -> usize {
        self.at
    }

    /// Goes to a cell.
    pub(super) fn go(&mut self, at: usize) {
        self.at = at;
    }

    /// The place of the last number read.
    pub(super) fn last(&self) -> Range<usize> {
        let cell = self.at.checked_sub(1).and_then(|at| self.cells.get(at));
        cell.map_or(self.end..self.end, |cell| cell.span.clone())
    }

    pub(super) fn error(&mut self, span: Range<usize>, code: &'static str, words: [String; 2]) {
        let [message, mend] = words;
        if self.sink.is_full() {
            self.sink.count_error();
        } else {
            self.sink.error(span, code, message, mend);
        }
    }

    /// The next number; `what` says which one is expected.
    pub(super) fn number(&mut self, what: &str) -> Option<Number> {
        let Some(cell) = self.cells.get(self.at) else {
            let end = self.end;
            let message = format!("the text ends where {what} should stand");
            let mend = "Paste the whole file, or mend the counts before.".to_owned();
            self.error(end..end, "text-ends", [message, mend]);
            return None;
        };
        self.at += 1;
        match parse(&cell.text, false) {
            Ok(number) => Some(number),
            Err(why) => {
                let message =
                    format!("`{}` is not a number: {what} is expected", excerpt(&cell.text));
                let span = cell.span.clone();
                self.error(span, "not-a-number", [message, why.mend().to_owned()]);
                None
            }
        }
    }

    /// `count` numbers, all that can be read of them being read.
    pub(super) async fn numbers(&mut self, count: usize, what: &str) -> Option<Vec<Number>> {
        if self.left() < count || count > MOST_CELLS {
            let (end, left) = (self.end, grouped(self.left()));
            let count = grouped(count);
            let message = format!("{count} numbers are expected for {what}, {left} are left");
            let mend = "Paste the whole file, or mend the counts before.".to_owned();
            self.error(end..end, "text-ends", [message, mend]);
            return None;
        }
        let mut found = Vec::with_capacity(count);
        for _ in 0..count {
            self.spend(1).await;
            found.extend(self.number(what));
        }
        (found.len() == count).then_some(found)
    }

    /// A whole number from `least` to `most`.
    pub(super) fn whole(&mut self, what: &str, least: usize, most: usize) -> Option<usize> {
        let number = self.number(what)?;
        let value = number.is_int().then(|| usize::try_from(number.numerator().clone()).ok());
        let value = value.flatten().filter(|value| (least..=most).contains(value));
        if value.is_none() {
            let span = self.last();
            let words = excerpt(&self.cells[self.at - 1].text);
            let message = format!("`{words}` cannot be {what}");
            let mend = format!("Give a whole number from {least} to {}.", grouped(most));
            self.error(span, "out-of-range", [message, mend]);
        }
        value
    }

    /// A count: of jobs, of machines.
    pub(super) fn count(&mut self, what: &str) -> Option<usize> {
        self.whole(&format!("the number of {what}"), 1, MOST)
    }

    /// Complains of what is left over; whether all is well.
    pub(super) fn finish(&mut self) -> Option<()> {
        if let Some(cell) = self.cells.get(self.at) {
            let (left, span) = (self.left(), cell.span.clone());
            let message = format!("{} numbers stand behind the end of the data", grouped(left));
            let mend = "Take them out, or mend the counts before.".to_owned();
            self.error(span, "left-over", [message, mend]);
        }
        (self.sink.errors() == 0).then_some(())
    }
}
