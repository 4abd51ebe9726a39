//! Sparse LU factors of a basis with product-form updates.
//!
//! P B Q = L U by singletons and a Markowitz search; B is the basis with one column a
//! position. `ftran` solves B x = b (b by row, x by position), `btran` solves Bᵀy = c
//! (c by position, y by row). After the column at position r is replaced by a with
//! α = B⁻¹a, the new basis is B E, E the identity with α in column r.
//!
//! Source: Suhl, Suhl 1990; Maros 2003; Koberstein 2005.

mod buckets;
mod eta;
mod nucleus;
mod pivots;
mod singletons;
mod triangle;

pub(crate) use pivots::BasisColumns;

use crate::sparse::SparseVector;
use crate::tolerances::solve_drop;
use eta::EtaFile;
use pivots::Pivots;
use triangle::{Direction, Reach, Triangle};

/// A position of the basis whose column depends on the others, and the row whose logical takes its
/// place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Replaced {
    pub(crate) position: u32,
    pub(crate) row: u32,
}

/// LU factors with the updates since.
#[derive(Clone, Debug, Default)]
pub(crate) struct Factor {
    step_of_row: Vec<u32>,
    row_of_step: Vec<u32>,
    step_of_position: Vec<u32>,
    position_of_step: Vec<u32>,
    diagonal: Vec<f64>,
    lower_columns: Triangle,
    lower_rows: Triangle,
    upper_rows: Triangle,
    upper_columns: Triangle,
    etas: EtaFile,
    work: SparseVector,
    reach: Reach,
}

impl Factor {
    /// Factorises the basis with these columns. Dependent columns are replaced by logicals
    /// (−1 in a row), which are returned; the factors are those of the mended basis.
    /// Work: the nonzeros touched, returned second.
    pub(crate) fn factorise(columns: &BasisColumns, threshold: f64) -> (Self, Vec<Replaced>, u64) {
        let size = columns.size();
        let mut pivots = Pivots::new(size);
        let active = singletons::eliminate(columns, &mut pivots);
        nucleus::eliminate(columns, active, threshold, &mut pivots);
        let replaced = pivots.complete();
        let ticks = pivots.work() + columns.nonzeros() as u64 + size as u64;
        let mut factor = Self {
            lower_columns: pivots.lower_columns(),
            upper_rows: pivots.upper_rows(),
            diagonal: pivots.diagonal,
            row_of_step: pivots.row_of_step,
            position_of_step: pivots.position_of_step,
            step_of_row: pivots.step_of_row,
            step_of_position: pivots.step_of_position,
            ..Self::default()
        };
        factor.lower_rows = factor.lower_columns.transposed();
        factor.upper_columns = factor.upper_rows.transposed();
        factor.work.reset(size);
        factor.reach = Reach::new(size);
        (factor, replaced, ticks)
    }

    /// Solves B x = b in place: rows in, positions out. Returns the nonzeros touched.
    pub(crate) fn ftran(&mut self, vector: &mut SparseVector) -> u64 {
        let mut ticks = vector.count() as u64;
        vector.drain_into(&self.step_of_row, 0.0, &mut self.work);
        ticks +=
            self.lower_columns.solve(None, &mut self.work, Direction::Forward, &mut self.reach);
        ticks += self.upper_columns.solve(
            Some(&self.diagonal),
            &mut self.work,
            Direction::Backward,
            &mut self.reach,
        );
        let drop = solve_drop(self.work.largest());
        self.work.drain_into(&self.position_of_step, drop, vector);
        ticks + self.etas.forward(vector)
    }

    /// Solves Bᵀy = c in place: positions in, rows out. Returns the nonzeros touched.
    pub(crate) fn btran(&mut self, vector: &mut SparseVector) -> u64 {
        let mut ticks = vector.count() as u64 + self.etas.backward(vector);
        vector.drain_into(&self.step_of_position, 0.0, &mut self.work);
        ticks += self.upper_rows.solve(
            Some(&self.diagonal),
            &mut self.work,
            Direction::Forward,
            &mut self.reach,
        );
        ticks += self.lower_rows.solve(None, &mut self.work, Direction::Backward, &mut self.reach);
        let drop = solve_drop(self.work.largest());
        self.work.drain_into(&self.row_of_step, drop, vector);
        ticks
    }

    /// Replaces the column at a position; `column` is B⁻¹ times the new one.
    pub(crate) fn update(&mut self, position: u32, column: &SparseVector) {
        self.etas.push(position, column);
    }

    /// Number of updates since the factors were made.
    pub(crate) fn updates(&self) -> usize {
        self.etas.count()
    }

    /// True when the updates have outgrown the factors.
    pub(crate) fn is_worn(&self) -> bool {
        let fresh =
            self.lower_columns.nonzeros() + self.upper_rows.nonzeros() + self.diagonal.len();
        self.etas.count() >= crate::tolerances::UPDATES || self.etas.nonzeros() > 3 * fresh + 1000
    }
}

#[cfg(test)]
mod tests;
