//! The layouts of EDGE_WEIGHT_SECTION. Numbers run on over lines; the diagonal is not looked at.

use crate::cells::{Cell, Separator, number, split};
use crate::complaint::{Complaints, grouped};
use crate::square::Square;
use crate::text::Line;

/// Which cells of the square are listed, and in which order.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Format {
    /// All, by rows.
    Full,
    /// Row i lists columns from i + 1 (or i, with the diagonal); the lower half by columns is the same list.
    Upper { diagonal: bool },
    /// Row i lists columns to i − 1 (or i, with the diagonal); the upper half by columns is the same list.
    Lower { diagonal: bool },
}

const FORMATS: [(&str, Format); 9] = [
    ("FULL_MATRIX", Format::Full),
    ("UPPER_ROW", Format::Upper { diagonal: false }),
    ("LOWER_ROW", Format::Lower { diagonal: false }),
    ("UPPER_DIAG_ROW", Format::Upper { diagonal: true }),
    ("LOWER_DIAG_ROW", Format::Lower { diagonal: true }),
    ("UPPER_COL", Format::Lower { diagonal: false }),
    ("LOWER_COL", Format::Upper { diagonal: false }),
    ("UPPER_DIAG_COL", Format::Lower { diagonal: true }),
    ("LOWER_DIAG_COL", Format::Upper { diagonal: true }),
];

impl Format {
    pub(crate) fn from_name(name: &str) -> Option<Self> {
        FORMATS.iter().find(|(known, _)| *known == name).map(|(_, format)| *format)
    }

    /// How its list is called: the name by rows.
    pub(crate) fn name(self) -> &'static str {
        FORMATS.iter().find(|(_, format)| *format == self).map_or("", |(name, _)| name)
    }

    pub(crate) fn names() -> String {
        FORMATS.map(|(name, _)| name).join(", ")
    }

    /// The columns that row `i` of `n` lists.
    fn columns(self, i: usize, n: usize) -> std::ops::Range<usize> {
        match self {
            Self::Full => 0..n,
            Self::Upper { diagonal } => (i + usize::from(!diagonal)).min(n)..n,
            Self::Lower { diagonal } => 0..i + usize::from(diagonal),
        }
    }
}

/// Reads the section. O(n²).
pub(crate) async fn square(
    rows: &[Line<'_>],
    format: Format,
    labels: Vec<String>,
    sink: &mut Complaints<'_>,
) -> Option<Square> {
    let n = labels.len();
    let mut cells: Vec<Cell> = Vec::new();
    for line in rows {
        let known = cells.len();
        cells.extend(split(line, Separator::Space));
        sink.spend(cells.len() - known).await;
    }
    let wanted: usize = (0..n).map(|i| format.columns(i, n).len()).sum();
    let before = sink.errors();
    if cells.len() != wanted {
        let end = rows.last().map_or(0, Line::end);
        let span = cells.get(wanted).map_or(end..end, |extra| extra.span.clone());
        let message = format!(
            "the section has {} numbers, where {} of {n} stops needs {}",
            grouped(cells.len()),
            format.name(),
            grouped(wanted)
        );
        let mend = "Mend DIMENSION or EDGE_WEIGHT_FORMAT, or the list.";
        sink.error(span, "row-count", message, mend);
    }
    let mut square = Square::empty(labels);
    let mut listed = cells.iter();
    for i in 0..n {
        sink.spend(2 * format.columns(i, n).len()).await;
        for j in format.columns(i, n) {
            let Some(cell) = listed.next() else { continue };
            let Some(value) = number(cell, false, sink) else { continue };
            if format != Format::Full {
                square.put(j, i, Some(value.clone()));
            }
            square.put(i, j, Some(value));
        }
    }
    (sink.errors() == before).then_some(square)
}
