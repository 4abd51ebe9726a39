//! What an instance holds, in counts and numbers: what the stated sizes of rivals are told in.

use instance::{Datum, Instance};
use model::nearest_f64;

/// Columns, rows and families over subsets.
pub(crate) type Size = (usize, usize, usize);

/// An instance, to be asked.
pub(crate) struct Data<'i>(pub(crate) &'i Instance);

#[allow(
    clippy::cast_possible_truncation,
    clippy::cast_sign_loss,
    reason = "generated numbers are small, whole and 0 or more"
)]
impl Data<'_> {
    /// Members of a set, or cells of a table.
    pub(crate) fn count(&self, name: &str) -> usize {
        match self.0.get(name) {
            Some(Datum::Labels(labels)) => labels.len(),
            Some(Datum::Integers(values)) => values.len(),
            Some(Datum::Tuples { rows, .. }) => rows.len(),
            Some(Datum::Table { cells, .. }) => cells.len(),
            _ => 0,
        }
    }

    /// A single number.
    pub(crate) fn number(&self, name: &str) -> usize {
        match self.0.get(name) {
            Some(Datum::Number(value)) => nearest_f64(value) as usize,
            _ => 0,
        }
    }

    /// The numbers of a table.
    pub(crate) fn cells(&self, name: &str) -> Vec<usize> {
        match self.0.get(name) {
            Some(Datum::Table { cells, .. }) => {
                cells.values().map(|value| nearest_f64(value) as usize).collect()
            }
            _ => Vec::new(),
        }
    }

    /// Their sum.
    pub(crate) fn total(&self, name: &str) -> usize {
        self.cells(name).iter().sum()
    }
}
