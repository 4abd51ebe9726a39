//! Ordinary families on demand: a scan of their written rows for violated ones.

use std::ops::Range;

use model::{FamilyId, Model, RowId};

use crate::separator::Progress;
use crate::tolerance;

/// The most rows that a round hands out.
const MOST_ROWS: usize = 100;

/// A violated written row.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct ViolatedRow {
    /// The row.
    pub row: RowId,
    /// By how much, in the units of the row.
    pub violation: f64,
}

/// Finds the violated rows of one ordinary family.
#[derive(Debug, Clone)]
pub struct RowSeparator {
    rows: Range<u32>,
    next: u32,
    x: Vec<f64>,
    found: Vec<ViolatedRow>,
    ticks: u64,
}

impl RowSeparator {
    /// A separator for the written rows of a family.
    #[must_use]
    pub fn new(model: &Model, family: FamilyId) -> Self {
        let rows = model.families()[family.index()].rows.clone();
        Self { next: rows.end, rows, x: Vec::new(), found: Vec::new(), ticks: 0 }
    }

    /// Begins a round at `x`, one value a column.
    pub fn start(&mut self, x: &[f64]) {
        self.x = x.to_vec();
        self.found.clear();
        self.next = self.rows.start;
    }

    /// Scans rows until `ticks` entries have been looked at. `model` is the one that the
    /// separator was made for.
    pub fn advance(&mut self, model: &Model, ticks: u64) -> Progress {
        let end = self.ticks.saturating_add(ticks);
        while self.next < self.rows.end {
            if self.ticks >= end {
                return Progress::Working;
            }
            let row = RowId(self.next);
            self.next += 1;
            let entries = model.row_entries(row);
            self.ticks += 1 + u64::try_from(entries.len()).unwrap_or(u64::MAX);
            let violation = violation(model, row, &self.x);
            if violation > tolerance::VIOLATION {
                self.found.push(ViolatedRow { row, violation });
            }
        }
        Progress::Finished
    }

    /// Entries looked at since the separator was made: the same for every slicing.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        self.ticks
    }

    /// The violated rows of the round, the most violated first, equal ones by row; at most 100.
    pub fn take(&mut self) -> Vec<ViolatedRow> {
        let mut found = std::mem::take(&mut self.found);
        found.sort_by(|a, b| b.violation.total_cmp(&a.violation).then(a.row.cmp(&b.row)));
        found.truncate(MOST_ROWS);
        found
    }
}

/// By how much a written row is violated at `x`; negative when it has slack.
fn violation(model: &Model, row: RowId, x: &[f64]) -> f64 {
    let numbers = model.numbers();
    let entries = model.row_entries(row).iter();
    let activity = entries.fold(0.0, |sum, &(c, a)| sum + numbers.float(a) * x[c.index()]);
    let (lower, upper) = model.row_sides(row);
    let under = lower.map_or(f64::NEG_INFINITY, |lower| numbers.float(lower) - activity);
    let over = upper.map_or(f64::NEG_INFINITY, |upper| activity - numbers.float(upper));
    if under > over { under } else { over }
}
