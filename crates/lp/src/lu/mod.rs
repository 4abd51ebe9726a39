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

use nucleus::Active;

use crate::sparse::SparseVector;
use crate::tolerances::{most_updates, solve_drop};
use forrest_tomlin::RowFile;
use pivots::{BasisColumns, Pivots};
use triangle::{Direction, Triangle};
use work::Work;

/// A position of the basis whose column depends on the others, and the row whose logical takes its
/// place.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) struct Replaced {
    pub(crate) position: u32,
    pub(crate) row: u32,
}

/// What a factorisation works with: the basis, and room that is kept from one to the next.
#[derive(Clone, Debug, Default)]
pub(crate) struct Workspace {
    pub(crate) columns: BasisColumns,
    pivots: Pivots,
    active: Active,
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
    /// Factorises the basis whose columns stand in the workspace. Dependent columns are replaced by
    /// logicals (−1 in a row), which are returned; the factors are those of the mended basis.
    /// Work: the nonzeros touched, returned second.
    pub(crate) fn factorise(
        &mut self,
        space: &mut Workspace,
        threshold: f64,
        singular: f64,
    ) -> (Vec<Replaced>, u64) {
        let Workspace { columns, pivots, active } = space;
        columns.list_rows();
        let size = columns.size();
        pivots.reset(size);
        if singletons::eliminate(columns, singular, pivots) {
            nucleus::eliminate(active, columns, (threshold, singular), pivots);
        }
        let replaced = pivots.complete();
        let ticks = pivots.work() + columns.nonzeros() as u64 + size as u64;
        pivots.lower_columns(&mut self.lower_columns);
        pivots.upper_rows(&mut self.upper_rows);
        std::mem::swap(&mut self.diagonal, &mut pivots.diagonal);
        std::mem::swap(&mut self.row_of_step, &mut pivots.row_of_step);
        std::mem::swap(&mut self.position_of_slot, &mut pivots.position_of_step);
        std::mem::swap(&mut self.step_of_row, &mut pivots.step_of_row);
        std::mem::swap(&mut self.slot_of_position, &mut pivots.step_of_position);
        self.lower_rows.transpose(&self.lower_columns);
        self.upper_columns.transpose(&self.upper_rows);
        self.file.clear();
        self.spike.clear();
        self.is_doubtful = false;
        self.work.reset(size + most_updates(size));
        self.fresh = self.upper_rows.nonzeros() + self.lower_rows.nonzeros() + size;
        (replaced, ticks)
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
