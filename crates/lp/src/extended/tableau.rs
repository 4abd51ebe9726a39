//! A dense tableau of extended numbers: B⁻¹[A, −I] by row, and below it the reduced costs.
//!
//! With x_B + T x_N = 0 for the slack basis, where B = −I, T is [−A, I]. A pivot in row r and column q
//! divides row r by T_rq and takes T_iq times it from every other row (Gauss, Jordan). A basis is built
//! from the slack basis by one pivot for each basic column, each time at the largest entry left, so that
//! what rounding did to an earlier tableau is gone.

use super::double::Double;
use crate::state::Core;

/// What is left of a difference below this is taken for rounding; relative to what was subtracted.
const CANCELLED: f64 = 1e-29;

/// Rows, the row of reduced costs last.
#[derive(Clone, Debug, Default)]
pub(super) struct Tableau {
    width: usize,
    cells: Vec<Double>,
    /// The basic variable of each row.
    pub(super) head: Vec<u32>,
    /// Places of the row of a pivot that are not zero.
    places: Vec<u32>,
}

impl Tableau {
    /// The tableau of the slack basis.
    pub(super) fn of_slacks(core: &Core) -> Self {
        let (n, m, width) = (core.columns(), core.rows(), core.variables());
        let mut cells = vec![Double::ZERO; (m + 1) * width];
        for i in 0..m {
            for (j, value) in core.matrix.row(i) {
                cells[i * width + j as usize] = Double::from(-value);
            }
            cells[i * width + n + i] = Double::ONE;
        }
        for (cell, &cost) in cells[m * width..].iter_mut().zip(&core.cost) {
            *cell = Double::from(cost);
        }
        Self { width, cells, head: (n as u32..width as u32).collect(), places: Vec::new() }
    }

    /// Number of rows without that of the reduced costs.
    pub(super) fn rows(&self) -> usize {
        self.head.len()
    }

    /// A row; that of the reduced costs after the others.
    pub(super) fn row(&self, i: usize) -> &[Double] {
        &self.cells[i * self.width..(i + 1) * self.width]
    }

    /// The reduced costs.
    pub(super) fn reduced(&self) -> &[Double] {
        self.row(self.rows())
    }

    /// An entry.
    pub(super) fn at(&self, row: usize, column: usize) -> Double {
        self.cells[row * self.width + column]
    }

    /// Makes `column` basic in `row`. Returns the cells that were touched.
    pub(super) fn pivot(&mut self, row: usize, column: usize) -> u64 {
        let (width, first) = (self.width, row * self.width);
        let pivot = self.at(row, column);
        self.places.clear();
        for k in 0..width {
            if !self.cells[first + k].is_zero() {
                self.places.push(k as u32);
                self.cells[first + k] = self.cells[first + k] / pivot;
            }
        }
        self.cells[first + column] = Double::ONE;
        let mut touched = width as u64;
        for i in (0..=self.rows()).filter(|&i| i != row) {
            let factor = self.at(i, column);
            if factor.is_zero() {
                continue;
            }
            for &k in &self.places {
                let taken = factor * self.cells[first + k as usize];
                let cell = &mut self.cells[i * width + k as usize];
                let rest = *cell - taken;
                let is_noise = rest.float().abs() < CANCELLED * taken.float().abs();
                *cell = if is_noise { Double::ZERO } else { rest };
            }
            self.cells[i * width + column] = Double::ZERO;
            touched += self.places.len() as u64;
        }
        self.head[row] = column as u32;
        touched
    }

    /// The largest entry in the columns of `wanted` and in rows whose slack is basic and not `kept`: its
    /// row and its place in `wanted`.
    pub(super) fn largest(
        &self,
        wanted: &[u32],
        kept: impl Fn(u32) -> bool,
    ) -> Option<(usize, usize)> {
        let mut best = (0.0, None);
        for (i, _) in self.head.iter().enumerate().filter(|&(_, &j)| !kept(j)) {
            for (k, &j) in wanted.iter().enumerate() {
                let size = self.at(i, j as usize).float().abs();
                if size > best.0 {
                    best = (size, Some((i, k)));
                }
            }
        }
        best.1
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::problem::{Col, Problem};

    /// The Hilbert matrix of order 9 (condition about 5·10¹¹), whose inverse has known whole entries: in
    /// floats five digits would be left of them.
    #[test]
    fn a_bad_basis_keeps_its_digits() {
        let (size, mut problem) = (9u32, Problem::new());
        let columns: Vec<Col> =
            (0..size).map(|_| problem.add_column(1.0, 0.0, 9.0).unwrap()).collect();
        // Times 12252240, the least common multiple of 1 to 17, every entry is a whole number.
        let entry = |i: u32, j: u32| f64::from(12_252_240 / (i + j + 1));
        for i in 0..size {
            let row: Vec<(Col, f64)> = columns.iter().map(|&j| (j, entry(i, j.0))).collect();
            problem.add_row(&row, 0.0, 1.0).unwrap();
        }
        let core = Core::new(problem);
        let mut tableau = Tableau::of_slacks(&core);
        let mut wanted: Vec<u32> = (0..size).collect();
        while let Some((row, k)) = tableau.largest(&wanted, |j| j < size) {
            tableau.pivot(row, wanted.swap_remove(k) as usize);
        }
        assert!(wanted.is_empty());
        // Entry (1, 1) of the inverse is 81 (Choi 1983); the column of a slack is −B⁻¹e_i in the units
        // of the row.
        let row = (0..9).find(|&i| tableau.head[i] == 0).unwrap();
        let unit = core.unit[9] / core.unit[0];
        let found = tableau.at(row, 9) * Double::from(-12_252_240.0 / unit);
        assert!((found - Double::from(81.0)).abs().float() < 1e-18, "{found:?}");
    }
}
