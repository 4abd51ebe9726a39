//! The update of the factors after one column of the basis is exchanged.
//!
//! Let R…L⁻¹B = U, upper triangular in the order of slots, and let the column at slot s be replaced
//! by a with spike v = R…L⁻¹a. The unknown of slot s moves to a new last slot t: its column becomes
//! v, and its row is eliminated with the rows below it,
//!
//! ```text
//! m_c = (u_sc − Σ_{s<k<c} m_k u_kc) / u_cc       (the row of slot s, c > s)
//! u_tt = v_s − Σ_c m_c v_c
//! ```
//!
//! so that one row transformation x_t ← x_s − Σ_c m_c x_c (transposed: x_s ← y_t, y_c ← y_c − m_c
//! y_t) joins R and nothing else of U changes: entries of the old row and column vanish, those of v
//! are added. Slots are never renamed, so the order of slots is the order of elimination.
//!
//! Stability: with α = B⁻¹a, u_tt = α_r u_ss holds exactly (r the position of slot s); the relative
//! difference of the two says how far the factors can be trusted.
//!
//! Source: Forrest, Tomlin 1972; Suhl, Suhl 1993.

use super::Factor;
use super::triangle::Direction;
use super::work::Work;
use crate::tolerances::UPDATE_AGREEMENT;

/// The row transformations since the last factorisation, in order.
#[derive(Clone, Debug, Default)]
pub(crate) struct RowFile {
    from: Vec<u32>,
    end: Vec<u32>,
    index: Vec<u32>,
    value: Vec<f64>,
}

impl RowFile {
    /// Forgets them all.
    pub(crate) fn clear(&mut self) {
        self.from.clear();
        self.end.clear();
        self.index.clear();
        self.value.clear();
    }

    /// Number of transformations.
    pub(crate) fn count(&self) -> usize {
        self.from.len()
    }

    /// Number of multipliers.
    pub(crate) fn nonzeros(&self) -> usize {
        self.index.len()
    }

    fn range(&self, k: usize) -> std::ops::Range<usize> {
        let start = if k == 0 { 0 } else { self.end[k - 1] as usize };
        start..self.end[k] as usize
    }

    /// Applies them, oldest first; transformation k makes slot `first` + k.
    pub(crate) fn forward(&self, first: usize, x: &mut Work) -> u64 {
        for k in 0..self.count() {
            let mut sum = x.take(self.from[k]);
            let range = self.range(k);
            for (&c, &m) in self.index[range.clone()].iter().zip(&self.value[range]) {
                sum -= m * x.get(c);
            }
            if sum != 0.0 {
                x.set((first + k) as u32, sum);
            }
        }
        (self.count() + self.nonzeros()) as u64
    }

    /// Applies the transposed ones, newest first.
    pub(crate) fn backward(&self, first: usize, x: &mut Work) -> u64 {
        let mut ticks = self.count() as u64;
        for k in (0..self.count()).rev() {
            let held = x.take((first + k) as u32);
            if held != 0.0 {
                let range = self.range(k);
                ticks += range.len() as u64;
                for (&c, &m) in self.index[range.clone()].iter().zip(&self.value[range]) {
                    x.subtract(c, m * held);
                }
                x.set(self.from[k], held);
            }
        }
        ticks
    }
}

impl Factor {
    /// Replaces the column at a position by the one last solved for with
    /// [`ftran_entering`](Factor::ftran_entering), whose value at the position was `pivot`.
    /// Work: the entries of the old row and column, of the spike, and a solve with the old row.
    pub(crate) fn update(&mut self, position: u32, pivot: f64) {
        let from = self.slot_of_position[position as usize];
        let to = self.position_of_slot.len() as u32;
        let diagonal = self.eliminate_row(from);
        let expected = pivot * self.diagonal[from as usize];
        let agrees = (diagonal - expected).abs() <= UPDATE_AGREEMENT * expected.abs();
        self.is_doubtful |= !agrees;
        self.drop_slot(from);
        self.upper_rows.push_slot();
        self.upper_columns.push_slot();
        self.diagonal.push(if diagonal == 0.0 { expected } else { diagonal });
        for &(slot, value) in &self.spike {
            if slot != from {
                self.upper_columns.insert(to, slot, value);
                self.upper_rows.insert(slot, to, value);
            }
        }
        self.slot_of_position[position as usize] = to;
        self.position_of_slot.push(position);
    }

    /// Eliminates the row of a slot: its multipliers join the file, the new diagonal is returned.
    fn eliminate_row(&mut self, slot: u32) -> f64 {
        for (column, value) in self.upper_rows.list(slot) {
            self.work.set(column, value);
        }
        self.work.drop = 0.0;
        self.upper_rows.solve(Some(&self.diagonal), &mut self.work, Direction::Forward);
        let mut diagonal = 0.0;
        for &(at, value) in &self.spike {
            diagonal += if at == slot { value } else { -self.work.get(at) * value };
        }
        let file = &mut self.file;
        self.work.drain(|column, multiplier| {
            file.index.push(column);
            file.value.push(multiplier);
        });
        file.from.push(slot);
        file.end.push(file.index.len() as u32);
        diagonal
    }

    /// Takes the entries of a slot's row and column out of both copies of U.
    fn drop_slot(&mut self, slot: u32) {
        for (row, _) in self.upper_columns.list(slot) {
            self.upper_rows.remove(row, slot);
        }
        for (column, _) in self.upper_rows.list(slot) {
            self.upper_columns.remove(column, slot);
        }
        self.upper_columns.clear(slot);
        self.upper_rows.clear(slot);
    }
}
