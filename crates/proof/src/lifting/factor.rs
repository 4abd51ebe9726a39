//! Sparse elimination modulo p: singletons first, then by the count of Markowitz. There is no
//! rounding to guard against, so a pivot is chosen for sparsity alone.

use std::collections::BTreeSet;

use super::field::{inverse, less_product, product};
use super::singletons::Peel;
use super::square::Square;

/// Rows and columns that are looked at for the next pivot.
const CANDIDATES: usize = 3;

/// One pivot: the row's other entries, and the multiples of the row that were taken from others.
#[derive(Debug, Clone)]
pub(super) struct Pivot {
    pub(super) row: u32,
    pub(super) column: u32,
    /// The inverse of the pivot's value.
    pub(super) inverse: u64,
    pub(super) upper: Vec<(u32, u64)>,
    pub(super) lower: Vec<(u32, u64)>,
}

/// The factors of a square matrix modulo p.
#[derive(Debug, Clone)]
pub(crate) struct Factor {
    pivots: Vec<Pivot>,
    nonzeros: u64,
}

impl Factor {
    /// Entries of both factors.
    pub(crate) fn nonzeros(&self) -> u64 {
        self.nonzeros
    }

    /// x with M x = b modulo p; `b` by row, x by column.
    pub(crate) fn solve(&self, mut b: Vec<u64>) -> Vec<u64> {
        for pivot in &self.pivots {
            let value = b[pivot.row as usize];
            if value != 0 {
                for &(row, factor) in &pivot.lower {
                    b[row as usize] = less_product(b[row as usize], factor, value);
                }
            }
        }
        let mut x = vec![0; b.len()];
        for pivot in self.pivots.iter().rev() {
            let mut value = b[pivot.row as usize];
            for &(column, entry) in &pivot.upper {
                if x[column as usize] != 0 {
                    value = less_product(value, entry, x[column as usize]);
                }
            }
            x[pivot.column as usize] = product(value, pivot.inverse);
        }
        x
    }

    /// y with M'y = c modulo p; `c` by column, y by row.
    pub(crate) fn solve_transposed(&self, mut c: Vec<u64>) -> Vec<u64> {
        let mut y = vec![0; c.len()];
        for pivot in &self.pivots {
            let value = product(c[pivot.column as usize], pivot.inverse);
            y[pivot.row as usize] = value;
            if value != 0 {
                for &(column, entry) in &pivot.upper {
                    c[column as usize] = less_product(c[column as usize], entry, value);
                }
            }
        }
        for pivot in self.pivots.iter().rev() {
            let mut value = y[pivot.row as usize];
            for &(row, factor) in &pivot.lower {
                if y[row as usize] != 0 {
                    value = less_product(value, factor, y[row as usize]);
                }
            }
            y[pivot.row as usize] = value;
        }
        y
    }
}

/// How an elimination stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Elimination {
    Working,
    Done,
    /// Modulo p the matrix is singular.
    Singular,
}

/// An elimination under way.
#[derive(Debug, Clone)]
pub(crate) struct Eliminator {
    /// Entries in columns without a pivot, by row, columns in order.
    rows: Vec<Vec<(u32, u64)>>,
    /// Rows that may have an entry, by column.
    holders: Vec<Vec<u32>>,
    counts: Vec<u32>,
    done: Vec<bool>,
    /// Columns and rows without a pivot, by count.
    by_count: BTreeSet<(u32, u32)>,
    rows_by_count: BTreeSet<(u32, u32)>,
    /// Rows and columns in which no entry is left to be a pivot.
    empty: (Vec<u32>, Vec<u32>),
    pivots: Vec<Pivot>,
    work: u64,
}

impl Eliminator {
    /// The elimination after its singletons. `O(non-zeros)`, and for the nucleus `log size`.
    pub(crate) fn new(matrix: &Square) -> Self {
        let size = matrix.size();
        let peel = Peel::new(matrix);
        let pivots = peel.pivots;
        let mut rows = vec![Vec::new(); size];
        let mut holders = vec![Vec::new(); size];
        let mut counts = vec![0; size];
        let (mut by_count, mut rows_by_count) = (BTreeSet::new(), BTreeSet::new());
        for row in (0..size).filter(|&row| !peel.row_done[row]) {
            let mut entries = matrix.row_in_field(row);
            entries.retain(|&(column, _)| !peel.column_done[column as usize]);
            for &(column, _) in &entries {
                holders[column as usize].push(row as u32);
                counts[column as usize] += 1;
            }
            rows_by_count.insert((entries.len() as u32, row as u32));
            rows[row] = entries;
        }
        for column in (0..size).filter(|&column| !peel.column_done[column]) {
            by_count.insert((counts[column], column as u32));
        }
        let work = (2 * matrix.nonzeros() + size) as u64;
        let done = peel.row_done;
        let empty = (Vec::new(), Vec::new());
        Self { rows, holders, counts, done, by_count, rows_by_count, empty, pivots, work }
    }

    /// Entries touched so far.
    pub(crate) fn work(&self) -> u64 {
        self.work
    }

    /// One pivot.
    pub(crate) fn step(&mut self) -> Elimination {
        if self.pivots.len() == self.rows.len() {
            return Elimination::Done;
        }
        while let Some(&(0, column)) = self.by_count.first() {
            self.by_count.pop_first();
            self.empty.1.push(column);
        }
        while let Some(&(0, row)) = self.rows_by_count.first() {
            self.rows_by_count.pop_first();
            self.empty.0.push(row);
        }
        let Some((row, column)) = self.choose() else { return Elimination::Singular };
        self.eliminate(row, column);
        Elimination::Working
    }

    /// When the matrix is singular: rows that depend on the others, and as many columns.
    pub(crate) fn into_dependent(self) -> (Vec<u32>, Vec<u32>) {
        self.empty
    }

    /// The factors of an elimination that is done.
    pub(crate) fn finish(self) -> Factor {
        let entries = self.pivots.iter().map(|p| (1 + p.upper.len() + p.lower.len()) as u64).sum();
        Factor { pivots: self.pivots, nonzeros: entries }
    }

    /// The pivot of least fill among the shortest columns and rows; `None` when none is left.
    fn choose(&mut self) -> Option<(u32, u32)> {
        let (count, column) = *self.by_count.first()?;
        let (length, row) = *self.rows_by_count.first()?;
        match (count, length) {
            (1, _) => return Some((self.holder(column)?, column)),
            (_, 1) => return Some((row, self.rows[row as usize].first()?.0)),
            _ => {}
        }
        let mut best: Option<(u64, u32, u32)> = None;
        for &(count, column) in self.by_count.iter().take(CANDIDATES) {
            for &row in &self.holders[column as usize] {
                if !self.done[row as usize] && self.entry(row, column).is_some() {
                    let length = self.rows[row as usize].len();
                    offer(&mut best, (u64::from(count), length as u64), (row, column));
                }
            }
        }
        for &(length, row) in self.rows_by_count.iter().take(CANDIDATES) {
            for &(column, _) in &self.rows[row as usize] {
                let count = u64::from(self.counts[column as usize]);
                offer(&mut best, (count, u64::from(length)), (row, column));
            }
        }
        best.map(|(_, row, column)| (row, column))
    }

    /// A row without a pivot that has an entry in this column.
    fn holder(&self, column: u32) -> Option<u32> {
        let mut rows = self.holders[column as usize].iter().copied();
        rows.find(|&row| !self.done[row as usize] && self.entry(row, column).is_some())
    }

    fn entry(&self, row: u32, column: u32) -> Option<usize> {
        self.rows[row as usize].binary_search_by_key(&column, |&(c, _)| c).ok()
    }

    fn eliminate(&mut self, row: u32, column: u32) {
        self.rows_by_count.remove(&(self.rows[row as usize].len() as u32, row));
        self.by_count.remove(&(self.counts[column as usize], column));
        let mut upper = std::mem::take(&mut self.rows[row as usize]);
        self.done[row as usize] = true;
        let Ok(at) = upper.binary_search_by_key(&column, |&(c, _)| c) else { return };
        let inverse = inverse(upper.remove(at).1);
        for &(other, _) in &upper {
            self.recount(other, -1);
        }
        let mut lower = Vec::new();
        if self.counts[column as usize] > 1 {
            for other in std::mem::take(&mut self.holders[column as usize]) {
                if self.done[other as usize] {
                    continue;
                }
                if let Some(at) = self.entry(other, column) {
                    let factor = product(self.rows[other as usize][at].1, inverse);
                    lower.push((other, factor));
                    self.subtract(other, at, &upper, factor);
                }
            }
        }
        self.work += (upper.len() + lower.len() + 1) as u64;
        self.pivots.push(Pivot { row, column, inverse, upper, lower });
    }

    /// Takes the entry at `at` out of a row, and `factor` times the pivot's row from it.
    fn subtract(&mut self, row: u32, at: usize, upper: &[(u32, u64)], factor: u64) {
        let mut old = std::mem::take(&mut self.rows[row as usize]);
        self.rows_by_count.remove(&(old.len() as u32, row));
        old.remove(at);
        self.work += (old.len() + upper.len()) as u64;
        let merged = if upper.is_empty() { old } else { self.merged(row, &old, upper, factor) };
        self.rows_by_count.insert((merged.len() as u32, row));
        self.rows[row as usize] = merged;
    }

    fn merged(
        &mut self,
        row: u32,
        old: &[(u32, u64)],
        upper: &[(u32, u64)],
        factor: u64,
    ) -> Vec<(u32, u64)> {
        let mut out = Vec::with_capacity(old.len() + upper.len());
        let (mut a, mut b) = (old.iter().peekable(), upper.iter().peekable());
        loop {
            let (column, own, taken) = match (a.peek(), b.peek()) {
                (None, None) => return out,
                (Some(&&(c, v)), other) if other.is_none_or(|&&(d, _)| c < d) => (c, v, None),
                (Some(&&(c, v)), Some(&&(d, w))) if c == d => (c, v, Some(w)),
                (_, Some(&&(d, w))) => (d, 0, Some(w)),
                (Some(_), None) => return out,
            };
            let value = taken.map_or(own, |taken| less_product(own, factor, taken));
            if own != 0 {
                a.next();
            }
            if taken.is_some() {
                b.next();
            }
            if value != 0 {
                out.push((column, value));
            }
            match (own, value) {
                (0, v) if v != 0 => {
                    self.holders[column as usize].push(row);
                    self.recount(column, 1);
                }
                (own, 0) if own != 0 => self.recount(column, -1),
                _ => {}
            }
        }
    }

    fn recount(&mut self, column: u32, change: i32) {
        let count = self.counts[column as usize];
        self.by_count.remove(&(count, column));
        let count = count.saturating_add_signed(change);
        self.counts[column as usize] = count;
        self.by_count.insert((count, column));
    }
}

/// Keeps the pivot of least Markowitz count, ties by row and column.
fn offer(best: &mut Option<(u64, u32, u32)>, (count, length): (u64, u64), at: (u32, u32)) {
    let offered = ((count - 1) * (length - 1), at.0, at.1);
    if best.is_none_or(|best| offered < best) {
        *best = Some(offered);
    }
}
