//! Iterative refinement: one more solve with the residual of the last.
//!
//! For B x = b with computed x: r = b − B x, B δ = r, x ← x + δ; transposed alike. In working
//! precision this brings the residual of each row down to the rounding of its own terms, which a
//! basis with coefficients of very different size does not have at once.
//!
//! Source: Skeel 1980; Higham 2002, chapter 12.

use crate::sparse::SparseVector;
use crate::state::{Core, for_column};

impl Core {
    /// Adds to `x` (by position) the correction of B x = `side` (by row); `side` is emptied.
    pub(crate) fn refine_forward(&mut self, side: &mut SparseVector, x: &mut SparseVector) {
        for (position, value) in x.iter() {
            if value != 0.0 {
                let j = self.head[position as usize];
                self.ticks +=
                    for_column(&self.matrix, j, |row, entry| side.add(row, -entry * value));
            }
        }
        self.ticks += self.factor.ftran(side);
        side.drain(|position, change| x.add(position, change));
    }

    /// Adds to `y` (by row) the correction of Bᵀy = `side` (by position); `side` is emptied.
    pub(crate) fn refine_backward(&mut self, side: &mut SparseVector, y: &mut SparseVector) {
        for (position, &j) in (0u32..).zip(&self.head) {
            let mut product = 0.0;
            self.ticks += for_column(&self.matrix, j, |row, entry| product += entry * y.get(row));
            if product != 0.0 {
                side.add(position, -product);
            }
        }
        self.ticks += self.factor.btran(side);
        side.drain(|row, change| y.add(row, change));
    }

    /// Refines the basic values.
    pub(crate) fn refine_basic(&mut self) {
        let mut side = std::mem::take(&mut self.scratch.flips);
        let mut x = std::mem::take(&mut self.scratch.tau);
        side.clear();
        self.add_nonbasic(&mut side);
        x.clear();
        (0u32..).zip(&self.basic).for_each(|(position, &value)| x.set(position, value));
        self.refine_forward(&mut side, &mut x);
        for position in 0..self.rows() {
            self.basic[position] = x.get(position as u32);
        }
        x.clear();
        self.scratch.tau = x;
        self.scratch.flips = side;
        self.kept.forget();
        self.note_violations();
    }
}

#[cfg(test)]
mod tests {
    use crate::problem::{Col, Problem};
    use crate::state::Core;

    /// A basis of the Hilbert matrix of order 7 (condition about 5·10⁸): what is wrong after an
    /// inexact solve is mended to the last digits the rows can show.
    #[test]
    fn refinement_mends_an_inexact_solve() {
        let mut problem = Problem::new();
        let size = 7u32;
        let columns: Vec<Col> =
            (0..size).map(|_| problem.add_column(1.0, 0.0, f64::INFINITY).unwrap()).collect();
        for i in 0..size {
            let row: Vec<(Col, f64)> =
                columns.iter().map(|&j| (j, 1.0 / f64::from(i + j.0 + 1))).collect();
            let side: f64 = row.iter().map(|entry| entry.1).sum();
            problem.add_row(&row, side, side).unwrap();
        }
        let mut core = Core::new(problem);
        for j in 0..14 {
            core.status[j] =
                if j < 7 { crate::basis::Status::Basic } else { crate::basis::Status::Lower };
        }
        core.refactor_canonical();
        core.compute_basic();
        core.basic.iter_mut().zip(1..).for_each(|(value, k)| *value += 1e-5 * f64::from(k));
        for _ in 0..2 {
            core.refine_basic();
        }
        for i in 0..7 {
            let activity: f64 =
                core.matrix.row(i).map(|(j, value)| value * core.basic[j as usize]).sum();
            assert!((activity - core.lower[7 + i]).abs() < 1e-14, "row {i}: {activity}");
        }
    }
}
