//! What an instance holds, in counts and numbers: what the stated sizes of rivals are told in.

use std::collections::BTreeMap;

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

    /// The sum of those that have the same label at a place.
    pub(crate) fn sums(&self, name: &str, place: usize) -> BTreeMap<&str, usize> {
        self.by(name, place, |sum, value| sum + value)
    }

    /// The largest of those.
    pub(crate) fn most(&self, name: &str, place: usize) -> BTreeMap<&str, usize> {
        self.by(name, place, usize::max)
    }

    fn by(
        &self,
        name: &str,
        place: usize,
        join: fn(usize, usize) -> usize,
    ) -> BTreeMap<&str, usize> {
        let mut out = BTreeMap::new();
        if let Some(Datum::Table { cells, .. }) = self.0.get(name) {
            for (key, value) in cells {
                let held = out.entry(key[place].as_str()).or_default();
                *held = join(*held, nearest_f64(value) as usize);
            }
        }
        out
    }

    /// Their sum.
    pub(crate) fn total(&self, name: &str) -> usize {
        self.cells(name).iter().sum()
    }
}
