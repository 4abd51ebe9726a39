//! The solver as its callers see it: a problem with a basis, changed and solved in turns.

use crate::basis::{Basis, Repair, Status};
use crate::machine::Machine;
use crate::outcome::{Outcome, StopReason};
use crate::problem::{Col, NewRow, Problem, ProblemError, RowId, clean_row, index_below_limit};
use crate::state::Core;
use std::ops::Range;

/// When a solve is to stop early.
#[derive(Clone, Copy, Debug, PartialEq, Default)]
pub struct Limits {
    /// Most iterations of this solve.
    pub iterations: Option<u64>,
    /// Stop once the dual bound exceeds this value.
    pub cutoff: Option<f64>,
}

/// Whether a solve has ended.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub enum Progress {
    /// There is more to do.
    Working,
    /// There is an outcome, or nothing was begun.
    Finished,
}

/// Work done since the solver was made.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
pub struct Stats {
    /// Pivots and flips of both methods.
    pub iterations: u64,
    /// Nonzeros touched.
    pub ticks: u64,
    /// Factorisations.
    pub refactors: u32,
}

/// A bounded simplex solver that keeps its basis between solves.
#[derive(Clone, Debug)]
pub struct Simplex {
    pub(crate) core: Core,
    pub(crate) machine: Machine,
}

impl Simplex {
    /// The problem with its slack basis.
    #[must_use]
    pub fn new(problem: Problem) -> Self {
        Self { core: Core::new(problem), machine: Machine::default() }
    }

    /// Appends rows; their logicals enter the basis. Returns the indices of the new rows.
    ///
    /// # Errors
    /// As [`Problem::add_row`]; nothing is added then.
    pub fn add_rows(&mut self, rows: &[NewRow]) -> Result<Range<u32>, ProblemError> {
        let columns = self.core.columns();
        let mut clean = Vec::with_capacity(rows.len());
        for row in rows {
            clean.push(clean_row(&row.entries, (row.lower, row.upper), columns)?);
        }
        let added: usize = clean.iter().map(|row| row.entries.len()).sum();
        index_below_limit(self.core.matrix.nonzeros() + added)?;
        let first = index_below_limit(self.core.rows())?;
        let end = index_below_limit(self.core.rows() + rows.len())?;
        self.core.append_rows(&clean);
        self.forget();
        Ok(first..end)
    }

    /// Deletes rows whose logicals are basic; later rows move up.
    ///
    /// # Errors
    /// When a row does not exist or its logical is not basic; nothing is deleted then.
    pub fn delete_rows(&mut self, rows: &[RowId]) -> Result<(), ProblemError> {
        let mut keep = vec![true; self.core.rows()];
        for &row in rows {
            let at = row.0 as usize;
            if at >= keep.len() {
                return Err(ProblemError::UnknownRow(row));
            }
            if self.core.status[self.core.columns() + at] != Status::Basic {
                return Err(ProblemError::RowNotBasic(row));
            }
            keep[at] = false;
        }
        self.core.retain_rows(&keep);
        self.forget();
        Ok(())
    }

    /// Sets a column's bounds. Crossed bounds make the problem infeasible; a bound that is not a
    /// number counts as missing. An unknown column changes nothing.
    pub fn set_bounds(&mut self, column: Col, lower: f64, upper: f64) {
        let at = column.0 as usize;
        if at < self.core.columns() {
            let unit = self.core.unit[at];
            self.core.lower[at] = if lower.is_nan() { f64::NEG_INFINITY } else { lower / unit };
            self.core.upper[at] = if upper.is_nan() { f64::INFINITY } else { upper / unit };
            self.forget();
        }
    }

    /// A column's bounds; those of an unknown column are without limit.
    #[must_use]
    pub fn bounds(&self, column: Col) -> (f64, f64) {
        let at = column.0 as usize;
        if at < self.core.columns() {
            let unit = self.core.unit[at];
            (self.core.lower[at] * unit, self.core.upper[at] * unit)
        } else {
            (f64::NEG_INFINITY, f64::INFINITY)
        }
    }

    /// Sets a column's cost. An infinite cost, one that is not a number or an unknown column
    /// changes nothing.
    pub fn set_cost(&mut self, column: Col, cost: f64) {
        let at = column.0 as usize;
        if at < self.core.columns() && cost.is_finite() {
            self.core.cost[at] = cost * self.core.unit[at];
            self.forget();
        }
    }

    /// Number of rows.
    #[must_use]
    pub fn row_count(&self) -> u32 {
        self.core.rows() as u32
    }

    /// Number of columns.
    #[must_use]
    pub fn column_count(&self) -> u32 {
        self.core.columns() as u32
    }

    /// The current basis.
    #[must_use]
    pub fn basis(&self) -> Basis {
        Basis::pack(&self.core.status, self.core.columns())
    }

    /// Makes a basis current, mended where it does not fit. What follows depends on it alone, not
    /// on earlier solves.
    pub fn load_basis(&mut self, basis: &Basis) -> Repair {
        self.forget();
        self.core.load(basis)
    }

    /// Begins a solve from the current basis.
    pub fn start(&mut self, limits: Limits) {
        self.machine.start(&mut self.core, limits);
    }

    /// Goes on with a solve that its limit on iterations has stopped, as if that had been `iterations`
    /// from the start; false, and nothing done, where nothing was stopped so since the last change.
    pub fn resume(&mut self, iterations: Option<u64>) -> bool {
        self.machine.resume(iterations)
    }

    /// Goes on with the solve for about this many nonzeros touched (at least one step).
    pub fn advance(&mut self, ticks: u64) -> Progress {
        let end = self.core.ticks.saturating_add(ticks);
        while self.machine.is_working() {
            self.machine.step(&mut self.core);
            if self.core.ticks >= end {
                break;
            }
        }
        if self.machine.is_working() { Progress::Working } else { Progress::Finished }
    }

    /// What the last solve ended with, while nothing has changed since.
    #[must_use]
    pub fn outcome(&self) -> Option<&Outcome> {
        self.machine.outcome.as_ref()
    }

    /// Begins a solve and goes on to its end.
    pub fn solve(&mut self, limits: Limits) -> &Outcome {
        self.start(limits);
        while self.machine.is_working() {
            self.machine.step(&mut self.core);
        }
        self.machine.outcome.get_or_insert_with(nothing_released)
    }

    /// The bound on the optimal value that the duals of the current basis give with the costs as
    /// given, at any point of a solve; none when a column without the bound it needs prices out.
    /// Rounding is taken off; noise against missing bounds is forgiven. Work: a solve with the
    /// factors and the nonzeros.
    pub fn dual_bound(&mut self) -> Option<f64> {
        if !self.machine.is_working() {
            self.core.refactor_first();
        }
        let duals = self.core.given_duals();
        self.core.dual_bound(&duals)
    }

    /// Work done since the solver was made.
    #[must_use]
    pub fn stats(&self) -> Stats {
        Stats {
            iterations: self.core.iterations,
            ticks: self.core.ticks,
            refactors: self.core.refactors,
        }
    }

    /// Drops the outcome, and a solve under way.
    fn forget(&mut self) {
        self.machine.forget();
    }
}

/// The outcome of a solve that ended without one, which the machine does not do.
fn nothing_released() -> Outcome {
    let reason = StopReason::Numerical("the solve ended without an outcome".to_owned());
    Outcome::Stopped { reason, bound: None, duals: Vec::new() }
}
