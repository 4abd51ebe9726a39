//! Sparse LU factors of a basis with Forrest-Tomlin updates.
//!
//! P B Q = L U by singletons and a Markowitz search; B is the basis with one column a
//! position. `ftran` solves B x = b (b by row, x by position), `btran` solves Bᵀy = c
//! (c by position, y by row). The unknowns of U are numbered by *slot*: the step of elimination at
//! first, a new last slot after an update (see `forrest_tomlin`).
//!
//! Source: Suhl, Suhl 1990, 1993; Maros 2003; Koberstein 2005.

mod buckets;
mod forrest_tomlin;
mod nucleus;
mod pivots;
mod singletons;
mod triangle;
mod work;

pub(crate) use pivots::BasisColumns;

use crate::sparse::SparseVector;
use crate::tolerances::{most_updates, solve_drop};
use forrest_tomlin::RowFile;
use pivots::Pivots;
use triangle::{Direction, Triangle};
use work::Work;

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
    slot_of_position: Vec<u32>,
    position_of_slot: Vec<u32>,
    diagonal: Vec<f64>,
    lower_columns: Triangle,
    lower_rows: Triangle,
    upper_rows: Triangle,
    upper_columns: Triangle,
    file: RowFile,
    spike: Vec<(u32, f64)>,
    is_doubtful: bool,
    fresh: usize,
    work: Work,
}

impl Factor {
    /// Factorises the basis with these columns. Dependent columns are replaced by logicals
    /// (−1 in a row), which are returned; the factors are those of the mended basis.
    /// Work: the nonzeros touched, returned second.
    pub(crate) fn factorise(
        columns: &BasisColumns,
        threshold: f64,
        singular: f64,
    ) -> (Self, Vec<Replaced>, u64) {
        let size = columns.size();
        let mut pivots = Pivots::new(size);
        let active = singletons::eliminate(columns, singular, &mut pivots);
        if active {
            nucleus::eliminate(columns, (threshold, singular), &mut pivots);
        }
        let replaced = pivots.complete();
        let ticks = pivots.work() + columns.nonzeros() as u64 + size as u64;
        let mut factor = Self {
            lower_columns: pivots.lower_columns(),
            upper_rows: pivots.upper_rows(),
            diagonal: pivots.diagonal,
            row_of_step: pivots.row_of_step,
            position_of_slot: pivots.position_of_step,
            step_of_row: pivots.step_of_row,
            slot_of_position: pivots.step_of_position,
            work: Work::new(size + most_updates(size)),
            ..Self::default()
        };
        factor.lower_rows = factor.lower_columns.transposed();
        factor.upper_columns = factor.upper_rows.transposed();
        factor.fresh = factor.upper_rows.nonzeros() + factor.lower_rows.nonzeros() + size;
        (factor, replaced, ticks)
    }

    /// Solves B x = b in place: rows in, positions out. Returns the nonzeros touched.
    pub(crate) fn ftran(&mut self, vector: &mut SparseVector) -> u64 {
        self.solve_lower(vector) + self.solve_upper(vector)
    }

    /// As [`ftran`](Factor::ftran) for the column that will enter the basis by the next
    /// [`update`](Factor::update).
    pub(crate) fn ftran_entering(&mut self, vector: &mut SparseVector) -> u64 {
        let ticks = self.solve_lower(vector);
        self.spike.clear();
        for &slot in &self.work.index {
            let value = self.work.get(slot);
            if value != 0.0 {
                self.spike.push((slot, value));
            }
        }
        ticks + self.solve_upper(vector)
    }

    /// Rows in, the right side of U left in the work vector.
    fn solve_lower(&mut self, vector: &mut SparseVector) -> u64 {
        let ticks = vector.count() as u64;
        self.work.drop = solve_drop(vector.largest());
        vector.drain(|row, value| self.work.set(self.step_of_row[row as usize], value));
        let lower = self.lower_columns.solve(None, &mut self.work, Direction::Forward);
        ticks + lower + self.file.forward(self.row_of_step.len(), &mut self.work)
    }

    /// Solves with U what stands in the work vector, positions out.
    fn solve_upper(&mut self, vector: &mut SparseVector) -> u64 {
        let ticks =
            self.upper_columns.solve(Some(&self.diagonal), &mut self.work, Direction::Backward);
        let positions = &self.position_of_slot;
        self.work.drain(|slot, value| vector.set(positions[slot as usize], value));
        ticks
    }

    /// Solves Bᵀy = c in place: positions in, rows out. Returns the nonzeros touched.
    pub(crate) fn btran(&mut self, vector: &mut SparseVector) -> u64 {
        let mut ticks = vector.count() as u64;
        self.work.drop = solve_drop(vector.largest());
        vector.drain(|position, value| {
            self.work.set(self.slot_of_position[position as usize], value);
        });
        ticks += self.upper_rows.solve(Some(&self.diagonal), &mut self.work, Direction::Forward);
        ticks += self.file.backward(self.row_of_step.len(), &mut self.work);
        ticks += self.lower_rows.solve(None, &mut self.work, Direction::Backward);
        let rows = &self.row_of_step;
        self.work.drain(|step, value| vector.set(rows[step as usize], value));
        ticks
    }

    /// Number of updates since the factors were made.
    pub(crate) fn updates(&self) -> usize {
        self.file.count()
    }

    /// True when the updates have outgrown the factors, or one of them did not fit.
    pub(crate) fn is_worn(&self) -> bool {
        let now = self.upper_rows.nonzeros() + self.file.nonzeros();
        self.is_doubtful
            || self.updates() >= most_updates(self.row_of_step.len())
            || now > 3 * self.fresh + 1000
    }
}

#[cfg(test)]
mod tests;
