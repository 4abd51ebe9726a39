//! The solver as its callers see it: a machine that takes one step at a time.
//!
//! *Evaluate* makes fresh factors of the basis in canonical order, with the given costs and bounds, and decides:
//! optimal, primal feasible only (primal method) or not feasible (dual method, wrong-signed reduced costs shifted
//! away first). Each method ends in another evaluation, so every outcome comes from the same place and
//! its values depend on rows, bounds and basis alone. A slice ends between two steps.

use crate::basis::{Basis, Repair, Status};
use crate::dual::{self, DualState, DualStep};
use crate::outcome::{Outcome, Ray, StopReason};
use crate::primal::{self, PrimalState, PrimalStep};
use crate::problem::{Col, NewRow, Problem, ProblemError, RowId, clean_row, index_below_limit};
use crate::state::{Core, Room};
use crate::tolerances::{
    DUAL, LAST_ATTEMPT, MARKOWITZ, MARKOWITZ_CAREFUL, PRIMAL, PRIMAL_RELATIVE,
};
use std::ops::Range;

/// The last attempt.
const LAST: u32 = 3;

/// Evaluations before a solve is begun again with more care.
const ROUNDS: u32 = 20;

/// Evaluations during which costs and bounds may be perturbed.
const PERTURBED_ROUNDS: u32 = 4;

/// Iterations between two looks at the cutoff.
const CUTOFF_INTERVAL: u64 = 5;

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

/// What the next step does.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
enum Phase {
    Evaluate,
    Dual,
    Primal,
    Finished,
}

/// A bounded simplex solver that keeps its basis between solves.
#[derive(Clone, Debug)]
pub struct Simplex {
    core: Core,
    phase: Phase,
    limits: Limits,
    dual: DualState,
    primal: PrimalState,
    outcome: Option<Outcome>,
    round: u32,
    attempt: u32,
    began: u64,
    attempt_began: u64,
    next_cutoff_check: u64,
}

impl Simplex {
    /// The problem with its slack basis.
    #[must_use]
    pub fn new(problem: Problem) -> Self {
        Self {
            core: Core::new(problem),
            phase: Phase::Finished,
            limits: Limits::default(),
            dual: DualState::default(),
            primal: PrimalState::default(),
            outcome: None,
            round: 0,
            attempt: 0,
            began: 0,
            attempt_began: 0,
            next_cutoff_check: 0,
        }
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

    /// Sets a column's cost. An infinite cost, one that is not a number or an unknown column changes nothing.
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

    /// Makes a basis current, mended where it does not fit. What follows depends on it alone, not on earlier solves.
    pub fn load_basis(&mut self, basis: &Basis) -> Repair {
        self.forget();
        self.core.load(basis)
    }

    /// Begins a solve from the current basis.
    pub fn start(&mut self, limits: Limits) {
        self.forget();
        self.limits = limits;
        self.phase = Phase::Evaluate;
        self.attempt = 0;
        self.began = self.core.iterations;
        self.next_cutoff_check = self.core.iterations;
        self.begin_attempt();
    }

    /// Goes on with the solve for about this many nonzeros touched (at least one step).
    pub fn advance(&mut self, ticks: u64) -> Progress {
        let end = self.core.ticks.saturating_add(ticks);
        while self.phase != Phase::Finished {
            self.step();
            if self.core.ticks >= end {
                break;
            }
        }
        if self.phase == Phase::Finished { Progress::Finished } else { Progress::Working }
    }

    /// What the last solve ended with, while nothing has changed since.
    #[must_use]
    pub fn outcome(&self) -> Option<&Outcome> {
        self.outcome.as_ref()
    }

    /// Begins a solve and goes on to its end.
    pub fn solve(&mut self, limits: Limits) -> &Outcome {
        self.start(limits);
        while self.phase != Phase::Finished {
            self.step();
        }
        self.outcome.get_or_insert_with(|| {
            stopped_without_bound(StopReason::Numerical("no outcome".to_owned()))
        })
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
        self.outcome = None;
        self.phase = Phase::Finished;
    }

    fn finish(&mut self, outcome: Outcome) {
        self.outcome = Some(outcome);
        self.phase = Phase::Finished;
    }

    /// One step; always at least one tick.
    fn step(&mut self) {
        self.core.ticks += 1;
        match self.phase {
            Phase::Evaluate => self.evaluate(),
            Phase::Dual => self.step_dual(),
            Phase::Primal => self.step_primal(),
            Phase::Finished => {}
        }
    }

    /// Sets how much violation counts as none.
    fn set_room(&mut self) {
        let largest = self.core.cost.iter().fold(0.0, |largest: f64, cost| {
            if cost.abs() > largest { cost.abs() } else { largest }
        });
        let factor = if self.attempt < LAST { 1.0 } else { LAST_ATTEMPT };
        self.core.room =
            Room { primal: factor * PRIMAL, dual: factor * DUAL + PRIMAL_RELATIVE * largest };
    }

    /// Sets the care for an attempt.
    fn begin_attempt(&mut self) {
        self.round = 0;
        self.attempt_began = self.core.iterations;
        self.core.threshold = if self.attempt == 0 { MARKOWITZ } else { MARKOWITZ_CAREFUL };
        self.set_room();
        self.phase = Phase::Evaluate;
    }

    /// Begins again with more care: from the current basis, from the slack basis, with looser tolerances; then gives up.
    fn fall_back(&mut self, reason: String) {
        self.attempt += 1;
        if self.attempt > LAST {
            self.stop(StopReason::Numerical(reason));
            return;
        }
        if self.attempt == 2 {
            self.core.restore_given();
            self.core.reset_to_slack_basis();
        }
        self.begin_attempt();
    }

    /// Fresh factors, given costs and bounds: decides what the basis is and what comes next.
    fn evaluate(&mut self) {
        self.round += 1;
        self.core.restore_given();
        self.core.settle_statuses();
        if (0..self.core.variables()).any(|j| self.core.has_empty_range(j)) {
            let multipliers = vec![0.0; self.core.rows()];
            self.finish(Outcome::Infeasible(Ray { multipliers }));
            return;
        }
        self.core.refactor_canonical();
        debug_assert_eq!(self.core.check(), Ok(()));
        self.core.compute_basic();
        self.core.compute_reduced();
        let tolerance = self.core.room.dual;
        if !self.core.is_primal_feasible() && self.core.flip_to_right_side(tolerance) {
            self.core.compute_basic();
        }
        let feasible = self.core.is_primal_feasible();
        if feasible && self.core.worst_reduced() <= tolerance {
            match self.core.solution() {
                Ok(solution) => self.finish(Outcome::Optimal(solution)),
                Err(reason) => self.fall_back(reason),
            }
        } else if self.round > ROUNDS {
            self.fall_back("the two methods undo each other's work".to_owned());
        } else {
            self.begin_method(feasible);
        }
    }

    fn begin_method(&mut self, feasible: bool) {
        let may_perturb = self.attempt == 0 && self.round <= PERTURBED_ROUNDS;
        if feasible {
            self.primal.may_perturb = may_perturb;
            primal::begin(&mut self.core, &mut self.primal);
            self.phase = Phase::Primal;
        } else {
            self.dual.may_perturb = may_perturb;
            self.dual.perturbed = false;
            dual::begin(&mut self.core, &mut self.dual);
            self.phase = Phase::Dual;
        }
    }

    /// Stops at a limit; true when it did.
    fn stops(&mut self) -> bool {
        let iterations = self.core.iterations;
        if self.limits.iterations.is_some_and(|limit| iterations - self.began >= limit) {
            self.stop(StopReason::Iterations);
            return true;
        }
        let size = self.core.variables() as u64;
        if iterations - self.attempt_began > 50 * size + 10_000 {
            self.fall_back("the iterations do not end".to_owned());
            return true;
        }
        false
    }

    /// Stops when the dual bound of the given costs exceeds the cutoff; true when it did.
    fn is_cut_off(&mut self) -> bool {
        let Some(cutoff) = self.limits.cutoff else { return false };
        if self.core.iterations < self.next_cutoff_check {
            return false;
        }
        self.next_cutoff_check = self.core.iterations + CUTOFF_INTERVAL;
        if self.core.working_objective() <= cutoff {
            return false;
        }
        let duals = self.core.given_duals();
        let bound = self.core.dual_bound(&duals);
        if bound.is_some_and(|bound| bound > cutoff) {
            self.finish(Outcome::Stopped {
                reason: StopReason::Cutoff,
                bound,
                duals: self.core.released_duals(&duals),
            });
            return true;
        }
        self.next_cutoff_check = self.core.iterations + 4 * CUTOFF_INTERVAL;
        false
    }

    /// Ends the solve with the bound of the given costs at the current basis.
    fn stop(&mut self, reason: StopReason) {
        let duals = self.core.given_duals();
        let bound = self.core.dual_bound(&duals);
        self.finish(Outcome::Stopped { reason, bound, duals: self.core.released_duals(&duals) });
    }

    fn step_dual(&mut self) {
        if self.core.factor.is_worn() {
            self.refresh_dual();
            return;
        }
        if self.stops() || self.is_cut_off() {
            return;
        }
        match dual::step(&mut self.core, &mut self.dual) {
            DualStep::Moved => {}
            DualStep::Feasible => self.phase = Phase::Evaluate,
            DualStep::Ray { position, sign } => match self.core.farkas_ray(sign) {
                Some(ray) => self.finish(Outcome::Infeasible(ray)),
                None => self.distrust_position(position),
            },
            DualStep::Unsound { position } => self.distrust_position(position),
            DualStep::Exhausted => {
                self.fall_back("no violated row has a pivot that can be trusted".to_owned());
            }
        }
    }

    /// Makes fresh factors, or sets the row aside when they are fresh.
    fn distrust_position(&mut self, position: u32) {
        if self.core.factor.updates() > 0 {
            self.refresh_dual();
        } else {
            self.dual.aside.push(position);
        }
    }

    /// Fresh factors and values in the middle of the dual method.
    fn refresh_dual(&mut self) {
        self.core.refactor();
        self.core.compute_basic();
        self.core.compute_reduced();
        for j in 0..self.core.variables() {
            self.core.shift_if_wrong(j);
        }
        self.dual.aside.clear();
    }

    fn step_primal(&mut self) {
        if self.core.factor.is_worn() {
            self.refresh_primal();
            return;
        }
        if self.stops() {
            return;
        }
        match primal::step(&mut self.core, &mut self.primal) {
            PrimalStep::Moved => {}
            PrimalStep::Optimal => self.phase = Phase::Evaluate,
            PrimalStep::Ray { entering, direction } => self.end_on_ray(entering, direction),
            PrimalStep::Unsound { entering } => self.distrust_entering(entering),
            PrimalStep::Exhausted => {
                self.fall_back("no column has a pivot that can be trusted".to_owned());
            }
        }
    }

    /// Releases an unbounded ray when it stands with the given bounds.
    fn end_on_ray(&mut self, entering: u32, direction: f64) {
        if self.primal.perturbed {
            self.round = PERTURBED_ROUNDS;
            self.phase = Phase::Evaluate;
            return;
        }
        match self.core.unbounded_ray(entering, direction) {
            Ok((point, ray)) => self.finish(Outcome::Unbounded { point, ray }),
            Err(_) if self.core.factor.updates() > 0 => self.refresh_primal(),
            Err(_) => self.primal.aside.push(entering),
        }
    }

    /// Makes fresh factors, or sets the column aside when they are fresh.
    fn distrust_entering(&mut self, entering: u32) {
        if self.core.factor.updates() > 0 {
            self.refresh_primal();
        } else {
            self.primal.aside.push(entering);
        }
    }

    /// Fresh factors and values in the middle of the primal method; back to the evaluation when feasibility was lost.
    fn refresh_primal(&mut self) {
        self.core.refactor();
        self.core.compute_basic();
        self.core.compute_reduced();
        self.primal.aside.clear();
        if !self.core.is_primal_feasible() {
            self.phase = Phase::Evaluate;
        }
    }
}

/// The outcome of a solve that could not even begin.
fn stopped_without_bound(reason: StopReason) -> Outcome {
    Outcome::Stopped { reason, bound: None, duals: Vec::new() }
}
