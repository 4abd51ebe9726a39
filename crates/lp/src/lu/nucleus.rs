//! What the singletons leave: Markowitz pivoting with a threshold.
//!
//! Among entries of at least `threshold` times the largest of their row, one with a small product
//! (row count − 1)(column count − 1) is taken, found by looking through a few of the shortest
//! columns and rows. The bound on a_rj / a_rp keeps the growth of the active entries a_ij − a_ip
//! (a_rj / a_rp) in check.
//!
//! Source: Markowitz 1957; Suhl, Suhl 1990.

use super::buckets::{Buckets, NONE};
use super::pivots::{BasisColumns, Pivots};
use crate::sparse::largest;
use crate::tolerances::{FACTOR_DROP, MARKOWITZ_CANDIDATES};

/// A pivot that may be taken, with its Markowitz product.
#[derive(Clone, Copy, Debug)]
struct Candidate {
    row: u32,
    position: u32,
    value: f64,
    product: usize,
}

/// The active submatrix: values by row, pattern by column. Kept between factorisations.
#[derive(Clone, Debug, Default)]
pub(crate) struct Active {
    rows: Vec<Vec<(u32, f64)>>,
    columns: Vec<Vec<u32>>,
    largest: Vec<f64>,
    row_lists: Buckets,
    column_lists: Buckets,
    pivot_row: Vec<f64>,
    seen: Vec<u32>,
    stamp: u32,
    threshold: f64,
    singular: f64,
}

/// Eliminates until no entry is as large as `singular`.
pub(crate) fn eliminate(
    active: &mut Active,
    basis: &BasisColumns,
    (threshold, singular): (f64, f64),
    pivots: &mut Pivots,
) {
    (active.threshold, active.singular) = (threshold, singular);
    active.fill(basis, pivots);
    while let Some(pivot) = active.choose() {
        active.take(pivot, pivots);
    }
}

impl Active {
    /// Takes the open rows and positions of the basis.
    fn fill(&mut self, basis: &BasisColumns, pivots: &Pivots) {
        let size = basis.size();
        self.rows.iter_mut().for_each(Vec::clear);
        self.rows.resize(size, Vec::new());
        self.columns.iter_mut().for_each(Vec::clear);
        self.columns.resize(size, Vec::new());
        for values in [&mut self.largest, &mut self.pivot_row] {
            values.clear();
            values.resize(size, 0.0);
        }
        self.seen.clear();
        self.seen.resize(size, 0);
        self.stamp = 0;
        self.row_lists.reset(size);
        self.column_lists.reset(size);
        for row in (0..size as u32).rev().filter(|&row| pivots.row_is_open(row)) {
            let open =
                basis.row(row).iter().filter(|&&(position, _)| pivots.position_is_open(position));
            self.rows[row as usize].extend(open);
            self.refresh(row);
        }
        for position in (0..size as u32).rev().filter(|&position| pivots.position_is_open(position))
        {
            let open = basis.column(position).iter().filter(|&&(row, _)| pivots.row_is_open(row));
            self.columns[position as usize].extend(open.map(|&(row, _)| row));
            self.column_lists.insert(position, self.columns[position as usize].len());
        }
    }

    /// Sets the largest entry and the list of a row anew.
    fn refresh(&mut self, row: u32) {
        self.largest[row as usize] = largest(self.rows[row as usize].iter().map(|entry| entry.1));
        self.row_lists.relocate(row, self.rows[row as usize].len());
    }

    /// The next pivot, or none when all that is left is too small.
    fn choose(&self) -> Option<Candidate> {
        let mut best: Option<Candidate> = None;
        let mut examined = 0;
        for count in 1..=self.rows.len() {
            let mut position = self.column_lists.first(count);
            while position != NONE && examined < MARKOWITZ_CANDIDATES {
                examined += usize::from(self.try_column(position, &mut best));
                position = self.column_lists.next(position);
            }
            let mut row = self.row_lists.first(count);
            while row != NONE && (examined < MARKOWITZ_CANDIDATES || best.is_none()) {
                examined += usize::from(self.try_row(row, &mut best));
                row = self.row_lists.next(row);
            }
            if best.is_some_and(|found| {
                examined >= MARKOWITZ_CANDIDATES || found.product <= count * count
            }) {
                break;
            }
        }
        best
    }

    /// True when an entry may be a pivot.
    fn is_eligible(&self, row: u32, value: f64) -> bool {
        value.abs() >= self.singular && value.abs() >= self.threshold * self.largest[row as usize]
    }

    /// Looks through a column; true when it had a pivot.
    fn try_column(&self, position: u32, best: &mut Option<Candidate>) -> bool {
        let column = &self.columns[position as usize];
        let mut found = false;
        for &row in column {
            let entries = &self.rows[row as usize];
            let value =
                entries.iter().find(|entry| entry.0 == position).map_or(0.0, |entry| entry.1);
            if self.is_eligible(row, value) {
                found = true;
                let product = (entries.len() - 1) * (column.len() - 1);
                offer(best, Candidate { row, position, value, product });
            }
        }
        found
    }

    /// Looks through a row; true when it had a pivot.
    fn try_row(&self, row: u32, best: &mut Option<Candidate>) -> bool {
        let entries = &self.rows[row as usize];
        let mut found = false;
        for &(position, value) in entries {
            if self.is_eligible(row, value) {
                found = true;
                let product = (entries.len() - 1) * (self.columns[position as usize].len() - 1);
                offer(best, Candidate { row, position, value, product });
            }
        }
        found
    }

    /// Eliminates with a pivot.
    fn take(&mut self, pivot: Candidate, pivots: &mut Pivots) {
        let entries = std::mem::take(&mut self.rows[pivot.row as usize]);
        self.row_lists.remove(pivot.row);
        self.column_lists.remove(pivot.position);
        for &(position, value) in &entries {
            remove_from(&mut self.columns[position as usize], pivot.row);
            if position != pivot.position {
                self.pivot_row[position as usize] = value;
                pivots.push_upper(position, value);
            }
        }
        pivots.count_work(entries.len());
        for row in std::mem::take(&mut self.columns[pivot.position as usize]) {
            let multiplier = self.subtract(row, pivot, &entries);
            pivots.push_lower(row, multiplier);
            pivots.count_work(entries.len() + self.rows[row as usize].len());
        }
        for &(position, _) in entries.iter().filter(|entry| entry.0 != pivot.position) {
            self.pivot_row[position as usize] = 0.0;
            self.column_lists.relocate(position, self.columns[position as usize].len());
        }
        pivots.close(pivot.row, pivot.position, pivot.value);
    }

    /// Subtracts the pivot row from a row so that the pivot position vanishes; returns the
    /// multiplier.
    fn subtract(&mut self, row: u32, pivot: Candidate, pivot_entries: &[(u32, f64)]) -> f64 {
        let mut entries = std::mem::take(&mut self.rows[row as usize]);
        let at = entries.iter().position(|entry| entry.0 == pivot.position);
        let multiplier = at.map_or(0.0, |at| entries.swap_remove(at).1 / pivot.value);
        self.stamp += 1;
        let (stamp, columns) = (self.stamp, &mut self.columns);
        entries.retain_mut(|(position, value)| {
            self.seen[*position as usize] = stamp;
            let other = self.pivot_row[*position as usize];
            *value -= multiplier * other;
            let keep = other == 0.0 || value.abs() > FACTOR_DROP;
            if !keep {
                remove_from(&mut columns[*position as usize], row);
            }
            keep
        });
        for &(position, value) in pivot_entries {
            let fill = -multiplier * value;
            if position != pivot.position
                && self.seen[position as usize] != stamp
                && fill.abs() > FACTOR_DROP
            {
                entries.push((position, fill));
                columns[position as usize].push(row);
            }
        }
        self.rows[row as usize] = entries;
        self.refresh(row);
        multiplier
    }
}

/// Keeps the better pivot: smaller product, then larger size, then the first found.
fn offer(best: &mut Option<Candidate>, candidate: Candidate) {
    let better = best.is_none_or(|held| {
        candidate.product < held.product
            || (candidate.product == held.product && candidate.value.abs() > held.value.abs())
    });
    if better {
        *best = Some(candidate);
    }
}

/// Removes an item from a short list.
fn remove_from(list: &mut Vec<u32>, item: u32) {
    if let Some(at) = list.iter().position(|&held| held == item) {
        list.swap_remove(at);
    }
}
