//! Readings on which programs disagree: each is warned of once, with a count.

use std::collections::BTreeMap;
use std::ops::Range;

use super::complaint::{Complaints, plural};

/// One such reading.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(super) enum Trap {
    NegativeUpper,
    ZeroUpper,
    UnboundedInteger,
    MinusInfinity,
    ObjectiveConstant,
    RangeOnEquation,
    LargeIsInfinite,
    EntryAgain,
    ValueAgain,
    FurtherSet,
    FreeRow,
    FreeRowValue,
    NoObjective,
    CrossedBounds,
    AfterEnd,
}

/// The traps met: the place of the first of each kind, and how many there were.
#[derive(Debug, Default)]
pub(super) struct Traps {
    met: BTreeMap<Trap, (Range<usize>, usize)>,
}

impl Traps {
    pub(super) fn meet(&mut self, trap: Trap, span: Range<usize>) {
        self.met.entry(trap).or_insert((span, 0)).1 += 1;
    }

    pub(super) fn finish(self, sink: &mut Complaints<'_>) {
        for (trap, (span, count)) in self.met {
            let (code, message, mend) = trap.words(count);
            sink.warn(span, (code, message, mend.to_owned()));
        }
    }
}

impl Trap {
    /// Code, message and mend for `count` cases of which the first is marked.
    fn words(self, count: usize) -> (&'static str, String, &'static str) {
        let of = |one: &str, many: &str| plural(count, one, many);
        let columns = || of("column", "columns");
        match self {
            Self::NegativeUpper | Self::ZeroUpper | Self::UnboundedInteger | Self::MinusInfinity => {
                self.bound_words(&columns())
            }
            Self::ObjectiveConstant => (
                "objective-constant",
                "The RHS of the objective row was read as minus the constant of the objective; some programs take it with its own sign or leave it out".to_owned(),
                "Compare the value of one solution, or write the constant as a column fixed at 1.",
            ),
            Self::RangeOnEquation => (
                "range-on-equation",
                format!("{} of type E: by the sign of R from rhs to rhs + R, or from rhs − |R| to rhs; some programs read it otherwise", of("range on a row", "ranges on rows")),
                "Write an L or a G row with a range.",
            ),
            Self::LargeIsInfinite => (
                "large-is-infinite",
                format!("{} of 10^20 or more in magnitude: read as infinite, which some programs do from 10^30 only", of("bound or RHS", "bounds or RHS")),
                "Leave out the bound, or write a smaller one.",
            ),
            Self::EntryAgain => (
                "entry-again",
                format!("{}: added to the first, where some programs stop or keep one", of("further entry of a column in the same row", "further entries of a column in the same row")),
                "Write each column once in each row.",
            ),
            Self::ValueAgain => (
                "value-again",
                format!("{}: the later one is taken, where some programs stop or keep the first", of("bound, RHS or range is given twice", "bounds, RHS or ranges are given twice")),
                "Write each value once.",
            ),
            _ => self.left_out_words(count),
        }
    }

    fn bound_words(self, columns: &str) -> (&'static str, String, &'static str) {
        match self {
            Self::NegativeUpper => (
                "negative-upper",
                format!(
                    "{columns} with a negative upper bound and no lower bound: the lower bound was taken as −∞, where some programs keep 0"
                ),
                "Write the lower bound too: MI for −∞, LO otherwise.",
            ),
            Self::ZeroUpper => (
                "zero-upper",
                format!(
                    "{columns} with the upper bound 0 and no lower bound: the lower bound stays 0, where some programs take −∞"
                ),
                "Write the lower bound too: MI for −∞, FX 0 to fix the column.",
            ),
            Self::UnboundedInteger => (
                "unbounded-integer",
                format!(
                    "{columns} between integer markers without a bound line: taken as 0 to 1, where some programs have no upper bound"
                ),
                "Write the bounds: UP 1, or PL for no upper bound.",
            ),
            _ => (
                "minus-infinity",
                format!(
                    "{columns} with MI and no upper bound: the upper bound is +∞, where some programs take 0"
                ),
                "Write FR for a free column, or UP 0.",
            ),
        }
    }

    fn left_out_words(self, count: usize) -> (&'static str, String, &'static str) {
        let of = |one: &str, many: &str| plural(count, one, many);
        match self {
            Self::FurtherSet => (
                "further-set",
                format!(
                    "{} of a further set of RHS, RANGES or BOUNDS: left out, only the first set is read",
                    of("line", "lines")
                ),
                "Keep one set in the file.",
            ),
            Self::FreeRow => (
                "free-row",
                format!("{} after the objective: left out", of("further N row", "further N rows")),
                "Keep the objective as the first N row; a row without sides restricts nothing.",
            ),
            Self::FreeRowValue => (
                "free-row-value",
                format!("{} on N rows: left out", of("RHS or range", "RHS or ranges")),
                "Give such rows a type of L, G or E.",
            ),
            Self::NoObjective => (
                "no-objective",
                "There is no N row: every solution has the objective value 0".to_owned(),
                "Write an N row first in ROWS.",
            ),
            Self::CrossedBounds => (
                "crossed-bounds",
                format!(
                    "{} with a lower bound over the upper bound: there is no solution",
                    of("column", "columns")
                ),
                "Mend the bounds.",
            ),
            _ => (
                "after-end",
                "What stands after ENDATA was left out".to_owned(),
                "Move it before ENDATA if it belongs to the model.",
            ),
        }
    }
}
