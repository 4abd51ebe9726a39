//! The problem while it shrinks: rows and columns that are still in, their sides, and the stack.

use crate::basis::Status;
use crate::problem::Problem;

use super::postsolve::Step;

/// Violation that counts as none; relative to 1 + the size of the terms.
pub(crate) const FEASIBILITY: f64 = 1e-9;

/// Why reducing ended early.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Halt {
    /// No point; the row that cannot hold and the sign of its multiplier, if it is one row.
    Infeasible(Option<(u32, f64)>),
    /// No point, or no limit to the objective.
    NoOptimum,
}

/// The least and the greatest value of a row within bounds.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Extent {
    /// Sum of the finite terms of the least value.
    low: f64,
    /// Sum of the finite terms of the greatest value.
    high: f64,
    /// Terms of the least value that are infinite.
    pub(crate) low_missing: u32,
    /// Terms of the greatest value that are infinite.
    pub(crate) high_missing: u32,
    /// Sum of the sizes of the finite terms.
    pub(crate) size: f64,
}

impl Extent {
    pub(crate) fn low(&self) -> f64 {
        if self.low_missing == 0 { self.low } else { f64::NEG_INFINITY }
    }

    pub(crate) fn high(&self) -> f64 {
        if self.high_missing == 0 { self.high } else { f64::INFINITY }
    }

    /// The extent of the row without one of its terms, given the bounds used for it.
    pub(crate) fn without(&self, a: f64, bounds: (f64, f64)) -> (f64, f64) {
        let (least, most) = term(a, bounds);
        let low = match (self.low_missing, least.is_finite()) {
            (0, true) => self.low - least,
            (1, false) => self.low,
            _ => f64::NEG_INFINITY,
        };
        let high = match (self.high_missing, most.is_finite()) {
            (0, true) => self.high - most,
            (1, false) => self.high,
            _ => f64::INFINITY,
        };
        (low, high)
    }
}

/// The least and the greatest value of a·x.
pub(crate) fn term(a: f64, (lower, upper): (f64, f64)) -> (f64, f64) {
    if a > 0.0 { (a * lower, a * upper) } else { (a * upper, a * lower) }
}

/// Entries (place, value), places ascending, list by list.
pub(crate) type Lists = Vec<Vec<(u32, f64)>>;

/// Sets the value at a place of a list, which is not there when it is zero.
pub(crate) fn put(list: &mut Vec<(u32, f64)>, place: u32, value: f64) {
    match (list.binary_search_by_key(&place, |entry| entry.0), value != 0.0) {
        (Ok(at), true) => list[at].1 = value,
        (Ok(at), false) => {
            list.remove(at);
        }
        (Err(at), true) => list.insert(at, (place, value)),
        (Err(_), false) => {}
    }
}

/// What is left of the problem.
#[derive(Clone, Debug)]
pub(crate) struct Work {
    rows: Lists,
    columns: Lists,
    pub(crate) cost: Vec<f64>,
    pub(crate) lower: Vec<f64>,
    pub(crate) upper: Vec<f64>,
    pub(crate) row_lower: Vec<f64>,
    pub(crate) row_upper: Vec<f64>,
    row_in: Vec<bool>,
    column_in: Vec<bool>,
    row_size: Vec<u32>,
    column_size: Vec<u32>,
    pub(crate) steps: Vec<Step>,
}

impl Work {
    pub(crate) fn new(problem: &Problem) -> Self {
        let rows: Vec<Vec<(u32, f64)>> = problem.rows.iter().map(|r| r.entries.clone()).collect();
        let mut columns = vec![Vec::new(); problem.cost.len()];
        for (i, row) in (0u32..).zip(&rows) {
            row.iter().for_each(|&(j, value)| columns[j as usize].push((i, value)));
        }
        Self {
            row_size: rows.iter().map(|row| row.len() as u32).collect(),
            column_size: columns.iter().map(|column| column.len() as u32).collect(),
            row_in: vec![true; rows.len()],
            column_in: vec![true; columns.len()],
            row_lower: problem.rows.iter().map(|row| row.lower).collect(),
            row_upper: problem.rows.iter().map(|row| row.upper).collect(),
            cost: problem.cost.clone(),
            lower: problem.lower.clone(),
            upper: problem.upper.clone(),
            steps: Vec::new(),
            rows,
            columns,
        }
    }

    /// Steps on the stack.
    pub(crate) fn step_count(&self) -> usize {
        self.steps.len()
    }

    /// The rows that are in, now.
    pub(crate) fn rows_in(&self) -> Vec<u32> {
        (0..self.rows.len() as u32).filter(|&i| self.has_row(i)).collect()
    }

    /// The columns that are in, now.
    pub(crate) fn columns_in(&self) -> Vec<u32> {
        (0..self.columns.len() as u32).filter(|&j| self.has_column(j)).collect()
    }

    pub(crate) fn has_row(&self, i: u32) -> bool {
        self.row_in[i as usize]
    }

    pub(crate) fn has_column(&self, j: u32) -> bool {
        self.column_in[j as usize]
    }

    /// Entries of a row whose columns are in.
    pub(crate) fn row(&self, i: u32) -> impl Iterator<Item = (u32, f64)> + '_ {
        self.rows[i as usize].iter().copied().filter(|&(j, _)| self.has_column(j))
    }

    /// Entries of a column whose rows are in.
    pub(crate) fn column(&self, j: u32) -> impl Iterator<Item = (u32, f64)> + '_ {
        self.columns[j as usize].iter().copied().filter(|&(i, _)| self.has_row(i))
    }

    /// Entries of a row.
    pub(crate) fn row_size(&self, i: u32) -> u32 {
        self.row_size[i as usize]
    }

    /// Entries of a column.
    pub(crate) fn column_size(&self, j: u32) -> u32 {
        self.column_size[j as usize]
    }

    /// The entry of a row that has one.
    pub(crate) fn only_in_row(&self, i: u32) -> Option<(u32, f64)> {
        if self.row_size(i) == 1 { self.row(i).next() } else { None }
    }

    /// The entry of a column that has one.
    pub(crate) fn only_in_column(&self, j: u32) -> Option<(u32, f64)> {
        if self.column_size(j) == 1 { self.column(j).next() } else { None }
    }

    /// Lower and upper side of a row.
    pub(crate) fn sides(&self, i: u32) -> (f64, f64) {
        (self.row_lower[i as usize], self.row_upper[i as usize])
    }

    /// Lower and upper bound of a column.
    pub(crate) fn bounds(&self, j: u32) -> (f64, f64) {
        (self.lower[j as usize], self.upper[j as usize])
    }

    /// An entry; zero where there is none.
    pub(crate) fn entry(&self, i: u32, j: u32) -> f64 {
        let column = &self.columns[j as usize];
        column.binary_search_by_key(&i, |entry| entry.0).map_or(0.0, |at| column[at].1)
    }

    /// Sets an entry whose row and column are in.
    pub(crate) fn set_entry(&mut self, i: u32, j: u32, value: f64) {
        let had = self.entry(i, j) != 0.0;
        put(&mut self.rows[i as usize], j, value);
        put(&mut self.columns[j as usize], i, value);
        let has = value != 0.0;
        for size in [&mut self.row_size[i as usize], &mut self.column_size[j as usize]] {
            *size = *size + u32::from(has) - u32::from(had);
        }
    }

    /// Rows, columns and the stack.
    pub(crate) fn into_parts(self) -> (Lists, Lists, Vec<Step>) {
        (self.rows, self.columns, self.steps)
    }

    /// Takes a row out.
    pub(crate) fn remove_row(&mut self, i: u32) {
        self.row_in[i as usize] = false;
        for &(j, _) in &self.rows[i as usize] {
            self.column_size[j as usize] -= 1;
        }
    }

    /// Takes a column out without a trace in the sides.
    pub(crate) fn remove_column(&mut self, j: u32) {
        self.column_in[j as usize] = false;
        for &(i, _) in &self.columns[j as usize] {
            self.row_size[i as usize] -= 1;
        }
    }

    /// Takes a column out at a value: the sides of its rows move.
    pub(crate) fn settle_column(&mut self, j: u32, value: f64) {
        for k in 0..self.columns[j as usize].len() {
            let (i, a) = self.columns[j as usize][k];
            if value != 0.0 && self.row_in[i as usize] {
                self.row_lower[i as usize] -= a * value;
                self.row_upper[i as usize] -= a * value;
            }
        }
        self.remove_column(j);
    }

    /// Fixes a column at a value, with its step.
    pub(crate) fn fix(&mut self, j: u32, value: f64, status: Status) {
        let cost = self.cost[j as usize];
        self.steps.push(Step::Fixed { column: j, value, cost, status });
        self.settle_column(j, value);
    }

    /// The extent of a row within bounds.
    pub(crate) fn extent(&self, i: u32, bounds: impl Fn(u32) -> (f64, f64)) -> Extent {
        let mut extent = Extent { low: 0.0, high: 0.0, low_missing: 0, high_missing: 0, size: 0.0 };
        for (j, a) in self.row(i) {
            let (least, most) = term(a, bounds(j));
            if least.is_finite() {
                extent.low += least;
                extent.size += least.abs();
            } else {
                extent.low_missing += 1;
            }
            if most.is_finite() {
                extent.high += most;
                extent.size += most.abs();
            } else {
                extent.high_missing += 1;
            }
        }
        extent
    }

    /// Substitutes a column of one row, x = (b − Σ a_k x_k) / a, in the objective: the costs of the
    /// row's other columns fall by `dual` times their entries.
    pub(crate) fn move_cost(&mut self, i: u32, column: u32, dual: f64) {
        if dual == 0.0 {
            return;
        }
        for k in 0..self.rows[i as usize].len() {
            let (j, a) = self.rows[i as usize][k];
            if j != column && self.has_column(j) {
                let (old, change) = (self.cost[j as usize], dual * a);
                let new = old - change;
                let noise = 1e-13 * (old.abs() + change.abs());
                self.cost[j as usize] = if new.abs() <= noise { 0.0 } else { new };
            }
        }
    }

    /// The largest entry of a row.
    pub(crate) fn largest_entry(&self, i: u32) -> f64 {
        crate::sparse::largest(self.row(i).map(|(_, a)| a))
    }

    /// Ends when a range is empty from the start.
    pub(crate) fn refuse_crossed_ranges(&self) -> Result<(), Halt> {
        let crossed = |lower: &[f64], upper: &[f64]| lower.iter().zip(upper).any(|(l, u)| l > u);
        if crossed(&self.lower, &self.upper) || crossed(&self.row_lower, &self.row_upper) {
            return Err(Halt::Infeasible(None));
        }
        Ok(())
    }
}
