//! Product-form updates: B_k = B_0 E_1 … E_k, E the identity with one column replaced by α.
//!
//! E⁻¹x: x_r ← x_r / α_r, x_i ← x_i − α_i x_r. E⁻ᵀy: y_r ← (y_r − Σ_{i≠r} α_i y_i) / α_r.
//!
//! Source: Dantzig, Orchard-Hays 1954.

use crate::sparse::SparseVector;

/// The updates since the last factorisation, in order.
#[derive(Clone, Debug, Default)]
pub(crate) struct EtaFile {
    position: Vec<u32>,
    pivot: Vec<f64>,
    end: Vec<usize>,
    index: Vec<u32>,
    value: Vec<f64>,
}

impl EtaFile {
    /// Number of updates.
    pub(crate) fn count(&self) -> usize {
        self.position.len()
    }

    /// Number of nonzeros beside the pivots.
    pub(crate) fn nonzeros(&self) -> usize {
        self.index.len()
    }

    /// Appends the update that puts the column with B⁻¹a = `column` at a position.
    pub(crate) fn push(&mut self, position: u32, column: &SparseVector) {
        for (i, value) in column.iter() {
            if i != position && value != 0.0 {
                self.index.push(i);
                self.value.push(value);
            }
        }
        self.position.push(position);
        self.pivot.push(column.get(position));
        self.end.push(self.index.len());
    }

    /// Applies the inverses, oldest first.
    pub(crate) fn forward(&self, x: &mut SparseVector) -> u64 {
        let mut ticks = self.count() as u64;
        for k in 0..self.count() {
            let held = x.get(self.position[k]);
            if held != 0.0 {
                let moved = held / self.pivot[k];
                x.set(self.position[k], moved);
                let range = self.range(k);
                ticks += range.len() as u64;
                for (&i, &alpha) in self.index[range.clone()].iter().zip(&self.value[range]) {
                    x.add(i, -alpha * moved);
                }
            }
        }
        ticks
    }

    /// Applies the transposed inverses, newest first.
    pub(crate) fn backward(&self, y: &mut SparseVector) -> u64 {
        for k in (0..self.count()).rev() {
            let mut sum = y.get(self.position[k]);
            let range = self.range(k);
            for (&i, &alpha) in self.index[range.clone()].iter().zip(&self.value[range]) {
                sum -= alpha * y.get(i);
            }
            if sum != 0.0 || y.get(self.position[k]) != 0.0 {
                y.set(self.position[k], sum / self.pivot[k]);
            }
        }
        (self.count() + self.nonzeros()) as u64
    }

    /// Where the entries of an update stand.
    fn range(&self, k: usize) -> std::ops::Range<usize> {
        let start = if k == 0 { 0 } else { self.end[k - 1] };
        start..self.end[k]
    }
}
