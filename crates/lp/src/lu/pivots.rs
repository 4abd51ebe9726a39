//! The basis to be factorised, and the pivots found so far.
//!
//! A pivot is a row and a position. It leaves multipliers for the rows below it (a column
//! of L, unit diagonal) and the rest of its row over positions still active (a row of U).

use super::Replaced;
use super::triangle::Triangle;

/// Not pivoted.
pub(crate) const OPEN: u32 = u32::MAX;

/// The columns of a basis, one a position, and the same entries by row.
#[derive(Clone, Debug, Default)]
pub(crate) struct BasisColumns {
    end: Vec<usize>,
    entry: Vec<(u32, f64)>,
    row_end: Vec<usize>,
    row_entry: Vec<(u32, f64)>,
}

impl BasisColumns {
    /// Takes the columns away.
    pub(crate) fn clear(&mut self) {
        self.end.clear();
        self.entry.clear();
    }

    /// Adds an entry to the column that is being gathered.
    pub(crate) fn push(&mut self, row: u32, value: f64) {
        self.entry.push((row, value));
    }

    /// Ends the column that is being gathered.
    pub(crate) fn close_column(&mut self) {
        self.end.push(self.entry.len());
    }

    /// Lists the entries by row as well, once there is a column for each.
    pub(crate) fn list_rows(&mut self) {
        self.row_end.clear();
        self.row_end.resize(self.size(), 0);
        for &(row, _) in &self.entry {
            self.row_end[row as usize] += 1;
        }
        // The end of each row stands at its beginning while it is filled.
        let mut sum = 0;
        for end in &mut self.row_end {
            sum += *end;
            *end = sum - *end;
        }
        self.row_entry.clear();
        self.row_entry.resize(self.entry.len(), (0, 0.0));
        let mut first = 0;
        for (position, &end) in (0u32..).zip(&self.end) {
            for &(row, value) in &self.entry[first..end] {
                let place = &mut self.row_end[row as usize];
                self.row_entry[*place] = (position, value);
                *place += 1;
            }
            first = end;
        }
    }

    /// Number of rows and of positions.
    pub(crate) fn size(&self) -> usize {
        self.end.len()
    }

    /// Number of nonzeros.
    pub(crate) fn nonzeros(&self) -> usize {
        self.entry.len()
    }

    /// The entries (row, value) at a position.
    pub(crate) fn column(&self, position: u32) -> &[(u32, f64)] {
        &self.entry[list(&self.end, position)]
    }

    /// The entries (position, value) of a row.
    pub(crate) fn row(&self, row: u32) -> &[(u32, f64)] {
        &self.row_entry[list(&self.row_end, row)]
    }
}

/// Where a list stands, from the ends of all.
fn list(ends: &[usize], number: u32) -> std::ops::Range<usize> {
    let at = number as usize;
    let start = if at == 0 { 0 } else { ends[at - 1] };
    start..ends[at]
}

/// Pivots in order, with what they leave.
#[derive(Clone, Debug, Default)]
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
    pub(crate) fn reset(&mut self, size: usize) {
        for steps in [&mut self.step_of_row, &mut self.step_of_position] {
            steps.clear();
            steps.resize(size, OPEN);
        }
        self.row_of_step.clear();
        self.position_of_step.clear();
        self.diagonal.clear();
        self.lower.clear();
        self.lower_end.clear();
        self.upper.clear();
        self.upper_end.clear();
        self.dropped.clear();
        self.dropped.resize(size, false);
        self.work = 0;
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
    pub(crate) fn lower_columns(&self, out: &mut Triangle) {
        out.begin();
        let mut first = 0;
        for &end in &self.lower_end {
            for &(row, value) in &self.lower[first..end] {
                out.push(self.step_of_row[row as usize], value);
            }
            out.close_list();
            first = end;
        }
        out.finish();
    }

    /// U by row, in steps, without the columns that were replaced.
    pub(crate) fn upper_rows(&self, out: &mut Triangle) {
        out.begin();
        let mut first = 0;
        for &end in &self.upper_end {
            for &(position, value) in &self.upper[first..end] {
                if !self.dropped[position as usize] {
                    out.push(self.step_of_position[position as usize], value);
                }
            }
            out.close_list();
            first = end;
        }
        out.finish();
    }
}
