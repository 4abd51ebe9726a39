//! The way back: the stack of reductions undone in reverse.

use crate::basis::{Basis, Status};
use crate::outcome::Solution;
use crate::problem::{Col, Problem};

use super::work::{Work, put};
use super::{
    doubleton, duplicate_columns, duplicate_rows, fixed, forcing, implied_free, singleton_row,
    slack,
};

/// A column fixed by a forcing row.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Forced {
    pub(crate) column: u32,
    pub(crate) entry: f64,
    pub(crate) value: f64,
    pub(crate) status: Status,
    pub(crate) cost: f64,
}

/// One reduction, with what its undoing needs.
#[derive(Clone, Debug)]
pub(crate) enum Step {
    Redundant { row: u32 },
    Forcing { row: u32, from_above: bool, columns: Vec<Forced> },
    SingletonRow(singleton_row::Given),
    Fixed { column: u32, value: f64, cost: f64, status: Status },
    ImpliedFree(implied_free::Pair),
    Slack(slack::Slack),
    Doubleton(doubleton::Pair),
    DuplicateRow(duplicate_rows::Merged),
    DuplicateColumn(duplicate_columns::Merged),
}

/// A basic solution of the problem as given.
#[derive(Clone, Debug, PartialEq)]
pub struct Restored {
    /// One value a column.
    pub x: Vec<f64>,
    /// One a row; signs as in [`Solution::duals`].
    pub duals: Vec<f64>,
    /// One a column; zero where it is basic.
    pub reduced_costs: Vec<f64>,
    /// Columns before rows.
    pub(crate) status: Vec<Status>,
}

impl Restored {
    /// The basis, to be loaded into a solver of the problem as given.
    #[must_use]
    pub fn basis(&self) -> Basis {
        Basis::pack(&self.status, self.x.len())
    }

    /// Sets dual and status of a row.
    pub(crate) fn set_row(&mut self, post: &Postsolve, row: u32, dual: f64, status: Status) {
        self.duals[row as usize] = dual + 0.0;
        self.status[post.logical(row)] = status;
    }
}

/// Takes a solution of the reduced problem back to the one as given.
#[derive(Clone, Debug)]
pub struct Postsolve {
    /// The matrix as the last step left it, with the entries of what was taken out.
    rows: Vec<Vec<(u32, f64)>>,
    columns: Vec<Vec<(u32, f64)>>,
    kept_rows: Vec<u32>,
    kept_columns: Vec<u32>,
    steps: Vec<Step>,
}

/// The reduced problem and the way back.
pub(crate) fn finish(work: Work) -> (Problem, Postsolve) {
    let (kept_rows, kept_columns) = (work.rows_in(), work.columns_in());
    let mut place = vec![0; work.cost.len()];
    let mut problem = Problem::new();
    // What is added was part of a problem: it is not refused.
    for (new, &j) in (0u32..).zip(&kept_columns) {
        place[j as usize] = new;
        let (lower, upper) = work.bounds(j);
        let _ = problem.add_column(work.cost[j as usize], lower, upper);
    }
    for &i in &kept_rows {
        let entries: Vec<(Col, f64)> =
            work.row(i).map(|(j, value)| (Col(place[j as usize]), value)).collect();
        let (lower, upper) = work.sides(i);
        let _ = problem.add_row(&entries, lower, upper);
    }
    let (rows, columns, steps) = work.into_parts();
    (problem, Postsolve { rows, columns, kept_rows, kept_columns, steps })
}

impl Postsolve {
    /// Values, duals, reduced costs and basis of the problem as given, from those of the reduced
    /// one.
    #[must_use]
    pub fn restore(&self, solution: &Solution, basis: &Basis) -> Restored {
        let (n, m) = (self.columns.len(), self.rows.len());
        let mut restored = Restored {
            x: vec![0.0; n],
            duals: vec![0.0; m],
            reduced_costs: vec![0.0; n],
            status: vec![Status::Basic; n + m],
        };
        for (new, &j) in self.kept_columns.iter().enumerate() {
            restored.x[j as usize] = solution.x[new];
            restored.reduced_costs[j as usize] = solution.reduced_costs[new];
            restored.status[j as usize] = basis.status(new);
        }
        for (new, &i) in self.kept_rows.iter().enumerate() {
            let status = basis.status(self.kept_columns.len() + new);
            restored.set_row(self, i, solution.duals[new], status);
        }
        let mut matrix = self.clone();
        for step in self.steps.iter().rev() {
            matrix.undo(step, &mut restored);
        }
        restored
    }

    /// Reductions made.
    #[must_use]
    pub fn reduction_count(&self) -> usize {
        self.steps.len()
    }

    fn undo(&mut self, step: &Step, restored: &mut Restored) {
        match step {
            Step::Redundant { row } => restored.set_row(self, *row, 0.0, Status::Basic),
            Step::Forcing { row, from_above, columns } => {
                forcing::undo(self, restored, (*row, *from_above), columns);
            }
            Step::SingletonRow(given) => singleton_row::undo(self, restored, *given),
            Step::Fixed { column, value, cost, status } => {
                fixed::undo(self, restored, (*column, *cost), (*value, *status));
            }
            Step::ImpliedFree(pair) => implied_free::undo(self, restored, *pair),
            Step::Slack(slack) => slack::undo(self, restored, *slack),
            Step::Doubleton(pair) => doubleton::undo(self, restored, pair),
            Step::DuplicateRow(merged) => duplicate_rows::undo(self, restored, *merged),
            Step::DuplicateColumn(merged) => duplicate_columns::undo(self, restored, *merged),
        }
    }

    /// Sets an entry of the matrix.
    pub(crate) fn set_entry(&mut self, i: u32, j: u32, value: f64) {
        put(&mut self.rows[i as usize], j, value);
        put(&mut self.columns[j as usize], i, value);
    }

    /// The place of a row's logical among the statuses.
    pub(crate) fn logical(&self, row: u32) -> usize {
        self.columns.len() + row as usize
    }

    /// c − Σ a y over the rows put back so far; the others have dual zero.
    pub(crate) fn reduced_cost(&self, restored: &Restored, j: u32, cost: f64) -> f64 {
        let column = &self.columns[j as usize];
        column.iter().fold(cost, |d, &(i, a)| d - a * restored.duals[i as usize])
    }

    /// Σ a x over the columns put back so far; the others are zero.
    pub(crate) fn activity(&self, restored: &Restored, i: u32) -> f64 {
        self.rows[i as usize].iter().map(|&(j, a)| a * restored.x[j as usize]).sum()
    }
}
