//! Distances over stops as a square, on the way from a reader to an instance.

use crate::number::Number;
use crate::pace::Pace;

/// A square of distances: `cells` by rows, `None` on the diagonal and where there is no drive.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Square {
    pub(crate) labels: Vec<String>,
    pub(crate) cells: Vec<Option<Number>>,
}

impl Square {
    /// A square without any drive.
    pub(crate) fn empty(labels: Vec<String>) -> Self {
        let cells = vec![None; labels.len() * labels.len()];
        Self { labels, cells }
    }

    /// The square of a function of two stops.
    pub(crate) async fn of(
        labels: Vec<String>,
        mut value: impl FnMut(usize, usize) -> Number,
        pace: &Pace,
    ) -> Self {
        let mut square = Self::empty(labels);
        for i in 0..square.len() {
            pace.spend(8 * square.len()).await;
            for j in 0..square.len() {
                if i != j {
                    square.put(i, j, Some(value(i, j)));
                }
            }
        }
        square
    }

    pub(crate) fn len(&self) -> usize {
        self.labels.len()
    }

    pub(crate) fn at(&self, i: usize, j: usize) -> Option<&Number> {
        self.cells[i * self.len() + j].as_ref()
    }

    /// Sets a distance; the diagonal stays empty.
    pub(crate) fn put(&mut self, i: usize, j: usize, value: Option<Number>) {
        if i != j {
            let n = self.len();
            self.cells[i * n + j] = value;
        }
    }

    /// "Ash → Birch"
    pub(crate) fn drive(&self, i: usize, j: usize) -> String {
        format!("{} → {}", self.labels[i], self.labels[j])
    }
}

/// The labels `1` to `n`.
pub(crate) fn counted(n: usize) -> Vec<String> {
    (1..=n).map(|label| label.to_string()).collect()
}
