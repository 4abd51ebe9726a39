//! Pivots that need no elimination: a column with one row left, a row with one column left.
//! They peel most of a basis.

use super::factor::Pivot;
use super::field::{inverse, product};
use super::square::Square;

/// A matrix without its singletons.
#[derive(Debug)]
pub(super) struct Peel<'a> {
    matrix: &'a Square,
    /// Rows with their place in the row, by column; column `c` at `starts[c]..starts[c + 1]`.
    holders: Vec<(u32, u32)>,
    starts: Vec<u32>,
    /// Rows left of a column, columns left of a row.
    counts: Vec<u32>,
    lengths: Vec<u32>,
    pub(super) row_done: Vec<bool>,
    pub(super) column_done: Vec<bool>,
    pub(super) pivots: Vec<Pivot>,
}

impl<'a> Peel<'a> {
    /// Peels all singletons. `O(non-zeros)`.
    pub(super) fn new(matrix: &'a Square) -> Self {
        let size = matrix.size();
        let mut peel = Self {
            matrix,
            holders: vec![(0, 0); matrix.nonzeros()],
            starts: vec![0; size + 1],
            counts: vec![0; size],
            lengths: vec![0; size],
            row_done: vec![false; size],
            column_done: vec![false; size],
            pivots: Vec::with_capacity(size),
        };
        peel.transpose();
        peel.columns();
        peel.rows();
        peel
    }

    fn transpose(&mut self) {
        let matrix = self.matrix;
        for row in 0..matrix.size() {
            self.lengths[row] = matrix.row(row).len() as u32;
            matrix.row(row).iter().for_each(|&column| self.counts[column as usize] += 1);
        }
        for column in 0..matrix.size() {
            self.starts[column + 1] = self.starts[column] + self.counts[column];
        }
        let mut next = self.starts.clone();
        for row in 0..matrix.size() {
            for (place, &column) in matrix.row(row).iter().enumerate() {
                self.holders[next[column as usize] as usize] = (row as u32, place as u32);
                next[column as usize] += 1;
            }
        }
    }

    fn holders(&self, column: u32) -> std::ops::Range<usize> {
        self.starts[column as usize] as usize..self.starts[column as usize + 1] as usize
    }

    /// Columns with one row, and those that their rows leave with one.
    fn columns(&mut self) {
        let single = |&column: &u32| self.counts[column as usize] == 1;
        let mut stack: Vec<u32> = (0..self.counts.len() as u32).filter(single).collect();
        while let Some(column) = stack.pop() {
            let held = self.holders[self.holders(column)].iter();
            let Some(&(row, place)) = held.clone().find(|(row, _)| !self.row_done[*row as usize])
            else {
                continue;
            };
            let value = self.matrix.in_field(row as usize, place as usize);
            if value == 0 {
                continue;
            }
            let mut upper = Vec::with_capacity(self.lengths[row as usize] as usize - 1);
            for (k, &other) in self.matrix.row(row as usize).iter().enumerate() {
                self.counts[other as usize] -= 1;
                if other != column {
                    upper.push((other, self.matrix.in_field(row as usize, k)));
                    if self.counts[other as usize] == 1 {
                        stack.push(other);
                    }
                }
            }
            self.row_done[row as usize] = true;
            self.column_done[column as usize] = true;
            let inverse = inverse_of(value);
            self.pivots.push(Pivot { row, column, inverse, upper, lower: Vec::new() });
        }
    }

    /// Rows with one column left, and those that their columns leave with one.
    fn rows(&mut self) {
        for row in (0..self.matrix.size()).filter(|&row| !self.row_done[row]) {
            let left = self.matrix.row(row).iter().filter(|&&c| !self.column_done[c as usize]);
            self.lengths[row] = left.count() as u32;
        }
        let single = |&row: &u32| !self.row_done[row as usize] && self.lengths[row as usize] == 1;
        let mut stack: Vec<u32> = (0..self.lengths.len() as u32).filter(single).collect();
        while let Some(row) = stack.pop() {
            let columns = self.matrix.row(row as usize).iter().enumerate();
            let mut left = columns.filter(|&(_, &c)| !self.column_done[c as usize]);
            let Some((place, &column)) = left.next() else { continue };
            let value = self.matrix.in_field(row as usize, place);
            if value == 0 {
                continue;
            }
            let inverse = inverse_of(value);
            self.row_done[row as usize] = true;
            self.column_done[column as usize] = true;
            let mut lower = Vec::new();
            for k in self.holders(column) {
                let (other, place) = self.holders[k];
                if !self.row_done[other as usize] {
                    let entry = self.matrix.in_field(other as usize, place as usize);
                    lower.push((other, product(entry, inverse)));
                    self.lengths[other as usize] -= 1;
                    if self.lengths[other as usize] == 1 {
                        stack.push(other);
                    }
                }
            }
            self.pivots.push(Pivot { row, column, inverse, upper: Vec::new(), lower });
        }
    }
}

/// The inverse; quick for 1 and −1, which most pivots are.
fn inverse_of(value: u64) -> u64 {
    if value == 1 || value == super::field::PRIME - 1 { value } else { inverse(value) }
}
