//! The basis to be factorised, and the pivots found so far.
//!
//! A pivot is a row and a position. It leaves multipliers for the rows below it (a column
//! of L, unit diagonal) and the rest of its row over positions still active (a row of U).

use super::Replaced;
use super::triangle::Triangle;

/// Not pivoted.
pub(crate) const OPEN: u32 = u32::MAX;

/// The columns of a basis, one a position, and the same entries by row.
#[derive(Debug)]
pub(crate) struct BasisColumns {
    start: Vec<usize>,
    entry: Vec<(u32, f64)>,
    row_start: Vec<usize>,
    row_entry: Vec<(u32, f64)>,
}

impl BasisColumns {
    /// Gathers `size` columns; `start` has one more entry than there are columns.
    pub(crate) fn new(start: Vec<usize>, entry: Vec<(u32, f64)>) -> Self {
        let size = start.len() - 1;
        let mut row_start = vec![0usize; size + 1];
        for &(row, _) in &entry {
            row_start[row as usize + 1] += 1;
        }
        for row in 0..size {
            row_start[row + 1] += row_start[row];
        }
        let mut next = row_start.clone();
        let mut row_entry = vec![(0u32, 0.0); entry.len()];
        for position in 0..size {
            for &(row, value) in &entry[start[position]..start[position + 1]] {
                row_entry[next[row as usize]] = (position as u32, value);
                next[row as usize] += 1;
            }
        }
        Self { start, entry, row_start, row_entry }
    }

    /// Number of rows and of positions.
    pub(crate) fn size(&self) -> usize {
        self.start.len() - 1
    }

    /// Number of nonzeros.
    pub(crate) fn nonzeros(&self) -> usize {
        self.entry.len()
    }

    /// The entries (row, value) at a position.
    pub(crate) fn column(&self, position: u32) -> &[(u32, f64)] {
        &self.entry[self.start[position as usize]..self.start[position as usize + 1]]
    }

    /// The entries (position, value) of a row.
    pub(crate) fn row(&self, row: u32) -> &[(u32, f64)] {
        &self.row_entry[self.row_start[row as usize]..self.row_start[row as usize + 1]]
    }
}

/// Pivots in order, with what they leave.
#[derive(Debug)]
pub(crate) struct Pivots {
    pub(crate) step_of_row: Vec<u32>,
    pub(crate) step_of_position: Vec<u32>,
    pub(crate) row_of_step: Vec<u32>,
    pub(crate) position_of_step: Vec<u32>,
    pub(crate) diagonal: Vec<f64>,
    lower: Vec<(u32, f64)>,
    lower_end: Vec<usize>,
    upper: Vec<(u32, f64)>,
    upper_end: Vec<usize>,
    dropped: Vec<bool>,
    work: u64,
}

impl Pivots {
    /// No pivots yet, for a basis of this size.
    pub(crate) fn new(size: usize) -> Self {
        Self {
            step_of_row: vec![OPEN; size],
            step_of_position: vec![OPEN; size],
            row_of_step: Vec::with_capacity(size),
            position_of_step: Vec::with_capacity(size),
            diagonal: Vec::with_capacity(size),
            lower: Vec::new(),
            lower_end: Vec::with_capacity(size),
            upper: Vec::new(),
            upper_end: Vec::with_capacity(size),
            dropped: vec![false; size],
            work: 0,
        }
    }

    /// Nonzeros touched so far.
    pub(crate) fn work(&self) -> u64 {
        self.work
    }

    /// Counts nonzeros touched.
    pub(crate) fn count_work(&mut self, nonzeros: usize) {
        self.work += nonzeros as u64;
    }

    /// True while a row has no pivot.
    pub(crate) fn row_is_open(&self, row: u32) -> bool {
        self.step_of_row[row as usize] == OPEN
    }

    /// True while a position has no pivot.
    pub(crate) fn position_is_open(&self, position: u32) -> bool {
        self.step_of_position[position as usize] == OPEN
    }

    /// Adds a multiplier (row, a/pivot) of the pivot to be closed next.
    pub(crate) fn push_lower(&mut self, row: u32, multiplier: f64) {
        self.lower.push((row, multiplier));
    }

    /// Adds an entry (position, value) of the row of the pivot to be closed next.
    pub(crate) fn push_upper(&mut self, position: u32, value: f64) {
        self.upper.push((position, value));
    }

    /// Closes a pivot.
    pub(crate) fn close(&mut self, row: u32, position: u32, value: f64) {
        let step = self.diagonal.len() as u32;
        self.step_of_row[row as usize] = step;
        self.step_of_position[position as usize] = step;
        self.row_of_step.push(row);
        self.position_of_step.push(position);
        self.diagonal.push(value);
        self.lower_end.push(self.lower.len());
        self.upper_end.push(self.upper.len());
    }

    /// Pairs what is left of rows and positions in ascending order, logicals for the dependent
    /// columns.
    pub(crate) fn complete(&mut self) -> Vec<Replaced> {
        let size = self.step_of_row.len() as u32;
        let rows: Vec<u32> = (0..size).filter(|&row| self.row_is_open(row)).collect();
        let positions: Vec<u32> =
            (0..size).filter(|&position| self.position_is_open(position)).collect();
        let mut replaced = Vec::with_capacity(rows.len());
        for (row, position) in rows.into_iter().zip(positions) {
            self.dropped[position as usize] = true;
            self.close(row, position, -1.0);
            replaced.push(Replaced { position, row });
        }
        replaced
    }

    /// L by column, in steps.
    pub(crate) fn lower_columns(&self) -> Triangle {
        let end = self.lower_end.iter().map(|&end| end as u32).collect();
        let index = self.lower.iter().map(|&(row, _)| self.step_of_row[row as usize]).collect();
        Triangle::new(end, index, self.lower.iter().map(|&(_, value)| value).collect())
    }

    /// U by row, in steps, without the columns that were replaced.
    pub(crate) fn upper_rows(&self) -> Triangle {
        let mut ends = Vec::with_capacity(self.upper_end.len());
        let mut index = Vec::with_capacity(self.upper.len());
        let mut value = Vec::with_capacity(self.upper.len());
        let mut first = 0;
        for &end in &self.upper_end {
            for &(position, entry) in &self.upper[first..end] {
                if !self.dropped[position as usize] {
                    index.push(self.step_of_position[position as usize]);
                    value.push(entry);
                }
            }
            ends.push(index.len() as u32);
            first = end;
        }
        Triangle::new(ends, index, value)
    }
}
