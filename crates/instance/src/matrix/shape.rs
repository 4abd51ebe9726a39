//! Which part of the square the rows of a table hold.
//!
//! Each shape says how many values row i of n holds; the shape that most rows fit is taken, and
//! the others are complained of against it.

use super::Value;

/// The part of the square that is written, and how.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Part {
    /// n rows of n values.
    Full,
    /// n rows of n − 1 values.
    WithoutDiagonal,
    /// Row i holds columns 1 to i.
    Lower,
    /// Row i holds columns 1 to i − 1; the first row, which is empty, may be left out.
    StrictLower { first_left_out: bool },
    /// Row i holds columns i to n.
    Upper,
    /// Row i holds columns i + 1 to n; the last row, which is empty, may be left out.
    StrictUpper { last_left_out: bool },
}

/// A part of a square of a size.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Shape {
    pub(crate) part: Part,
    pub(crate) n: usize,
}

impl Shape {
    /// How many rows are written.
    pub(crate) fn rows(&self) -> usize {
        match self.part {
            Part::StrictLower { first_left_out: true }
            | Part::StrictUpper { last_left_out: true } => self.n.saturating_sub(1),
            _ => self.n,
        }
    }

    /// The stop that a written row starts from.
    pub(crate) fn stop(&self, row: usize) -> usize {
        row + usize::from(self.part == Part::StrictLower { first_left_out: true })
    }

    /// How many values a written row holds.
    pub(crate) fn width(&self, row: usize) -> usize {
        let i = self.stop(row);
        match self.part {
            Part::Full => self.n,
            Part::WithoutDiagonal => self.n.saturating_sub(1),
            Part::Lower => (i + 1).min(self.n),
            Part::StrictLower { .. } => i.min(self.n),
            Part::Upper => self.n.saturating_sub(i),
            Part::StrictUpper { .. } => self.n.saturating_sub(i + 1),
        }
    }

    /// The stop that the value at `place` of a written row leads to.
    pub(crate) fn column(&self, row: usize, place: usize) -> usize {
        let i = self.stop(row);
        match self.part {
            Part::Full | Part::Lower | Part::StrictLower { .. } => place,
            Part::WithoutDiagonal => place + usize::from(place >= i),
            Part::Upper => i + place,
            Part::StrictUpper { .. } => i + 1 + place,
        }
    }

    /// Whether each value holds for both directions.
    pub(crate) fn is_half(&self) -> bool {
        !matches!(self.part, Part::Full | Part::WithoutDiagonal)
    }

    /// What is to be said of the shape, if anything.
    pub(crate) fn note(&self) -> Option<String> {
        let part = match self.part {
            Part::Full => return None,
            Part::WithoutDiagonal => return Some("The diagonal is left out.".to_owned()),
            Part::Lower => "lower half with its diagonal",
            Part::StrictLower { .. } => "lower half without its diagonal",
            Part::Upper => "upper half with its diagonal",
            Part::StrictUpper { .. } => "upper half without its diagonal",
        };
        Some(format!("Only the {part} is written: each distance was taken for both directions."))
    }
}

/// The shape that most rows fit; `header` is the number of column labels. O(cells).
pub(crate) fn find(values: &[Vec<Value>], header: Option<usize>) -> Shape {
    let m = values.len();
    let common = most_common(values);
    let mut best = (i64::MIN, Shape { part: Part::Full, n: m });
    let zero_ends = ends_are_empty(values, true);
    let zero_starts = ends_are_empty(values, false);
    let mut halves = [
        Part::Lower,
        Part::StrictLower { first_left_out: true },
        Part::Upper,
        Part::StrictUpper { last_left_out: true },
    ];
    if !zero_ends {
        halves.swap(0, 1);
    }
    if !zero_starts {
        halves.swap(2, 3);
    }
    let whole = [Part::Full, Part::WithoutDiagonal];
    let strict =
        [Part::StrictLower { first_left_out: false }, Part::StrictUpper { last_left_out: false }];
    for part in whole.into_iter().chain(halves).chain(strict) {
        let left_out = m - Shape { part, n: m }.rows();
        let from_width = match part {
            Part::Full => Some(common),
            Part::WithoutDiagonal => Some(common + 1),
            _ => None,
        };
        for n in [from_width, header, Some(m + left_out)].into_iter().flatten() {
            let shape = Shape { part, n };
            let score = score(&shape, values, header);
            if score > best.0 {
                best = (score, shape);
            }
        }
    }
    best.1
}

/// Rows that fit, less rows that lack or are too many; a header counts as a row.
fn score(shape: &Shape, values: &[Vec<Value>], header: Option<usize>) -> i64 {
    let fits = values.iter().enumerate().filter(|(i, row)| row.len() == shape.width(*i)).count();
    let fits = fits + usize::from(header == Some(shape.n));
    let off = shape.rows().abs_diff(values.len());
    i64::try_from(fits).unwrap_or(0) - i64::try_from(off).unwrap_or(i64::MAX)
}

/// The most common length of a row; the longer of two equally common ones.
fn most_common(values: &[Vec<Value>]) -> usize {
    let mut lengths: Vec<usize> = values.iter().map(Vec::len).collect();
    lengths.sort_unstable();
    let (mut best, mut run) = ((0, 0), 0);
    for (place, &length) in lengths.iter().enumerate() {
        run = if place > 0 && lengths[place - 1] == length { run + 1 } else { 1 };
        if run >= best.0 {
            best = (run, length);
        }
    }
    best.1
}

/// Whether most rows end (or start) with a zero or a blank, as a diagonal does.
fn ends_are_empty(values: &[Vec<Value>], last: bool) -> bool {
    let empty = |row: &&Vec<Value>| match if last { row.last() } else { row.first() } {
        Some(Value::Number(number)) => number.is_zero(),
        Some(Value::Blank) | None => true,
        Some(Value::Broken) => false,
    };
    values.iter().filter(empty).count() * 2 > values.len()
}
