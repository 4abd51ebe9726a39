//! The machine behind a solve, one step at a time.
//!
//! *Evaluate* makes fresh factors of the basis in canonical order, with the given costs and bounds,
//! and decides: optimal, primal feasible only (primal method) or not feasible (dual method,
//! wrong-signed reduced costs shifted away first). Each method ends in another evaluation, so every
//! outcome comes from the same place and its values depend on rows, bounds and basis alone. When
//! numbers cannot be trusted: fresh factors, then the row or column is set aside, then the solve
//! begins again with more care, at last it stops and says why.

use crate::care::{ATTEMPTS, begins_from_slack};
use crate::dual::{self, DualState, DualStep};
use crate::extended::{Extended, ExtendedStep};
use crate::outcome::{Outcome, Ray, StopReason};
use crate::primal::{self, PrimalState, PrimalStep};
use crate::simplex::Limits;
use crate::sparse::largest;
use crate::state::{Core, Room};
use crate::tolerances::{DUAL, PRIMAL, PRIMAL_RELATIVE};

/// Evaluations before a solve is begun again with more care.
const ROUNDS: u32 = 20;

/// Evaluations during which costs and bounds may be perturbed.
const PERTURBED_ROUNDS: u32 = 4;

/// Evaluations after which rows that no pivot mends end an attempt.
const TOLERANT_ROUNDS: u32 = 7;

/// Iterations between two looks at the cutoff.
const CUTOFF_INTERVAL: u64 = 5;

/// What the next step does.
#[derive(Clone, Copy, Debug, PartialEq, Eq, Default)]
enum Phase {
    Evaluate,
    Dual,
    Primal,
    Extended,
    #[default]
    Finished,
}

/// Where a solve stands.
#[derive(Clone, Debug, Default)]
pub(crate) struct Machine {
    phase: Phase,
    /// Where the limit on iterations has stopped it.
    left: Phase,
    limits: Limits,
    dual: DualState,
    primal: PrimalState,
    extended: Option<Box<Extended>>,
    /// Why the last attempt ended.
    distrust: String,
    /// What the last solve ended with.
    pub(crate) outcome: Option<Outcome>,
    round: u32,
    attempt: usize,
    began: u64,
    attempt_began: u64,
    next_cutoff_check: u64,
}

impl Machine {
    /// Begins a solve from the current basis.
    pub(crate) fn start(&mut self, core: &mut Core, limits: Limits) {
        self.forget();
        self.limits = limits;
        self.attempt = 0;
        self.began = core.iterations;
        self.next_cutoff_check = core.iterations;
        self.begin_attempt(core);
    }

    /// Goes on with a solve that its limit on iterations has stopped, with another limit; false where
    /// there is none.
    pub(crate) fn resume(&mut self, iterations: Option<u64>) -> bool {
        let left = std::mem::take(&mut self.left);
        if left == Phase::Finished {
            return false;
        }
        self.outcome = None;
        self.phase = left;
        self.limits.iterations = iterations;
        true
    }

    /// True until there is an outcome.
    pub(crate) fn is_working(&self) -> bool {
        self.phase != Phase::Finished
    }

    /// Drops the outcome, and a solve under way.
    pub(crate) fn forget(&mut self) {
        self.outcome = None;
        self.extended = None;
        self.phase = Phase::Finished;
        self.left = Phase::Finished;
    }

    fn finish(&mut self, outcome: Outcome) {
        self.extended = None;
        self.outcome = Some(outcome);
        self.phase = Phase::Finished;
    }

    /// One step; always at least one tick.
    pub(crate) fn step(&mut self, core: &mut Core) {
        core.ticks += 1;
        match self.phase {
            Phase::Evaluate => self.evaluate(core),
            Phase::Dual => self.step_dual(core),
            Phase::Primal => self.step_primal(core),
            Phase::Extended => self.step_extended(core),
            Phase::Finished => {}
        }
    }

    /// Sets how much violation counts as none.
    fn set_room(core: &mut Core) {
        let largest = largest(core.cost.iter().copied());
        let factor = core.care.room;
        // What costs of another size let be in the column with the longest range is a gap in the
        // objective: where tolerances are tight, this one is as well.
        let rounding = if factor < 1.0 { factor } else { 1.0 } * PRIMAL_RELATIVE * largest;
        core.room = Room { primal: factor * PRIMAL, dual: factor * DUAL + rounding };
    }

    /// Sets the care for an attempt.
    fn begin_attempt(&mut self, core: &mut Core) {
        self.round = 0;
        self.attempt_began = core.iterations;
        core.care = ATTEMPTS[self.attempt];
        core.canonical &= self.attempt == 0;
        Self::set_room(core);
        self.phase = Phase::Evaluate;
    }

    /// Begins again with more care (see `care`); gives up after the last attempt.
    fn fall_back(&mut self, core: &mut Core, reason: String) {
        self.attempt += 1;
        if self.attempt >= ATTEMPTS.len() {
            self.begin_extended(core, reason);
            return;
        }
        if begins_from_slack(self.attempt) {
            core.care = ATTEMPTS[self.attempt];
            core.restore_given();
            core.reset_to_slack_basis(ATTEMPTS[self.attempt].detour);
        }
        self.begin_attempt(core);
    }

    /// The last resort, where the problem is small enough; `reason` is why nothing else is left.
    fn begin_extended(&mut self, core: &mut Core, reason: String) {
        core.kept.forget();
        self.extended = Extended::begin(core);
        if self.extended.is_none() {
            self.stop(core, StopReason::Numerical(reason));
            return;
        }
        self.distrust = reason;
        self.phase = Phase::Extended;
    }

    fn step_extended(&mut self, core: &mut Core) {
        if self.is_at_limit(core) {
            return;
        }
        let step = self.extended.as_mut().map(|extended| extended.step(core));
        match step {
            Some(ExtendedStep::Moved) => {}
            Some(ExtendedStep::Released(outcome)) => self.finish(outcome),
            Some(ExtendedStep::Exhausted) | None => {
                let reason = std::mem::take(&mut self.distrust);
                self.stop(core, StopReason::Numerical(reason));
            }
        }
    }

    /// Fresh factors, given costs and bounds: decides what the basis is and what comes next.
    fn evaluate(&mut self, core: &mut Core) {
        self.round += 1;
        core.restore_given();
        core.settle_statuses();
        if (0..core.variables()).any(|j| core.has_empty_range(j)) {
            let multipliers = vec![0.0; core.rows()];
            self.finish(Outcome::Infeasible(Ray { multipliers }));
            return;
        }
        core.refactor_canonical();
        debug_assert_eq!(core.check(), Ok(()));
        core.evaluate_basic();
        core.evaluate_reduced();
        let tolerance = core.room.dual;
        if !core.is_primal_feasible() && core.flip_to_right_side(tolerance) {
            core.evaluate_basic();
        }
        let mut released = core.released_optimum();
        if core.care.refines && !matches!(released, Some(Ok(_))) {
            core.refine_basic();
            released = core.released_optimum();
        }
        let feasible = core.is_primal_feasible();
        if let Some(solution) = released {
            match solution {
                Ok(solution) => self.finish(Outcome::Optimal(solution)),
                Err(reason) => self.fall_back(core, reason),
            }
        } else if self.round > ROUNDS {
            self.fall_back(core, "the two methods undo each other's work".to_owned());
        } else {
            self.begin_method(core, feasible);
        }
    }

    fn begin_method(&mut self, core: &mut Core, feasible: bool) {
        let may_perturb = self.attempt == 0 && self.round <= PERTURBED_ROUNDS;
        core.kept.forget();
        if feasible {
            self.primal.may_perturb = may_perturb;
            primal::begin(core, &mut self.primal);
            self.phase = Phase::Primal;
        } else {
            self.dual.may_perturb = may_perturb;
            self.dual.perturbed = false;
            self.dual.detour = if self.round == 1 { core.care.detour } else { 0 };
            dual::begin(core, &mut self.dual);
            self.phase = Phase::Dual;
        }
    }

    /// Stops at the limit on iterations; true when it did.
    fn is_at_limit(&mut self, core: &mut Core) -> bool {
        let done = core.iterations - self.began;
        let is_over = self.limits.iterations.is_some_and(|limit| done >= limit);
        if is_over {
            self.leave(core);
        }
        is_over
    }

    /// Stops at the limit on iterations. All that the next step needs is kept, and neither this step
    /// nor its look at the bound counts as work: going on is as if there had been no limit.
    fn leave(&mut self, core: &mut Core) {
        let (phase, extended, ticks) = (self.phase, self.extended.take(), core.ticks - 1);
        self.stop(core, StopReason::Iterations);
        (self.left, self.extended, core.ticks) = (phase, extended, ticks);
    }

    /// Stops at the limit on iterations, or ends an attempt that takes too many; true when it did.
    fn stops(&mut self, core: &mut Core) -> bool {
        let iterations = core.iterations;
        if self.is_at_limit(core) {
            return true;
        }
        let size = core.variables() as u64;
        if iterations - self.attempt_began > 50 * size + 10_000 {
            self.fall_back(core, "the iterations do not end".to_owned());
            return true;
        }
        false
    }

    /// Stops when the dual bound of the given costs exceeds the cutoff; true when it did.
    fn is_cut_off(&mut self, core: &mut Core) -> bool {
        let Some(cutoff) = self.limits.cutoff else { return false };
        if core.iterations < self.next_cutoff_check {
            return false;
        }
        self.next_cutoff_check = core.iterations + CUTOFF_INTERVAL;
        if core.working_objective() <= cutoff {
            return false;
        }
        let duals = core.given_duals();
        let bound = core.dual_bound(&duals);
        if bound.is_some_and(|bound| bound > cutoff) {
            self.finish(Outcome::Stopped {
                reason: StopReason::Cutoff,
                bound,
                duals: core.released_duals(&duals),
            });
            return true;
        }
        self.next_cutoff_check = core.iterations + 4 * CUTOFF_INTERVAL;
        false
    }

    /// Ends the solve with the bound of the given costs at the current basis.
    fn stop(&mut self, core: &mut Core, reason: StopReason) {
        let duals = core.given_duals();
        let bound = core.dual_bound(&duals);
        self.finish(Outcome::Stopped { reason, bound, duals: core.released_duals(&duals) });
    }

    fn step_dual(&mut self, core: &mut Core) {
        if core.factor.is_worn() {
            self.refresh_dual(core);
            return;
        }
        if self.stops(core) || self.is_cut_off(core) {
            return;
        }
        match dual::step(core, &mut self.dual) {
            DualStep::Moved => {}
            DualStep::Feasible => self.phase = Phase::Evaluate,
            DualStep::Ray { position, sign } => match core.farkas_ray(sign) {
                Some(ray) => self.finish(Outcome::Infeasible(ray)),
                None => self.distrust_position(core, position),
            },
            DualStep::Unsound { position } => self.distrust_position(core, position),
            DualStep::Exhausted if core.care.refines && self.round < 3 => {
                self.phase = Phase::Evaluate;
            }
            DualStep::Exhausted if core.care.refines && self.round < TOLERANT_ROUNDS => {
                self.tolerate(core);
            }
            DualStep::Exhausted => {
                self.fall_back(core, "no violated row has a pivot that can be trusted".to_owned());
            }
        }
    }

    /// Goes on with the primal method, and with bounds that the violations left are within: rows that
    /// depend on others are violated by what the sides of those were rounded by, and no pivot mends
    /// that. The check of the outcome says whether it was no more than rounding.
    fn tolerate(&mut self, core: &mut Core) {
        core.work_cost.clone_from(&core.cost);
        core.compute_reduced();
        core.admit_violations();
        self.primal.may_perturb = false;
        primal::begin(core, &mut self.primal);
        self.phase = Phase::Primal;
    }

    /// Makes fresh factors, or sets the row aside when they are fresh.
    fn distrust_position(&mut self, core: &mut Core, position: u32) {
        if core.factor.updates() > 0 {
            self.refresh_dual(core);
        } else {
            self.dual.aside.push(position);
        }
    }

    /// Fresh factors and values in the middle of the dual method.
    fn refresh_dual(&mut self, core: &mut Core) {
        core.refactor();
        core.compute_basic();
        core.compute_reduced();
        for j in 0..core.variables() {
            core.shift_if_wrong(j);
        }
        self.dual.aside.clear();
    }

    fn step_primal(&mut self, core: &mut Core) {
        if core.factor.is_worn() {
            self.refresh_primal(core);
            return;
        }
        if self.stops(core) {
            return;
        }
        match primal::step(core, &mut self.primal) {
            PrimalStep::Moved => {}
            PrimalStep::Optimal => self.phase = Phase::Evaluate,
            PrimalStep::Ray { entering, direction } => self.end_on_ray(core, entering, direction),
            PrimalStep::Unsound { entering } => self.distrust_entering(core, entering),
            PrimalStep::Exhausted => {
                self.fall_back(core, "no column has a pivot that can be trusted".to_owned());
            }
        }
    }

    /// Releases an unbounded ray when it stands with the given bounds.
    fn end_on_ray(&mut self, core: &mut Core, entering: u32, direction: f64) {
        if self.primal.perturbed {
            self.round = PERTURBED_ROUNDS;
            self.phase = Phase::Evaluate;
            return;
        }
        match core.unbounded_ray(entering, direction) {
            Ok((point, ray)) => self.finish(Outcome::Unbounded { point, ray }),
            Err(_) if core.factor.updates() > 0 => self.refresh_primal(core),
            Err(_) => self.primal.aside.push(entering),
        }
    }

    /// Makes fresh factors, or sets the column aside when they are fresh.
    fn distrust_entering(&mut self, core: &mut Core, entering: u32) {
        if core.factor.updates() > 0 {
            self.refresh_primal(core);
        } else {
            self.primal.aside.push(entering);
        }
    }

    /// Fresh factors and values in the middle of the primal method; back to the evaluation when
    /// feasibility was lost.
    fn refresh_primal(&mut self, core: &mut Core) {
        core.refactor();
        core.compute_basic();
        core.compute_reduced();
        primal::list_all(core);
        self.primal.aside.clear();
        if !core.is_primal_feasible() {
            self.phase = Phase::Evaluate;
        }
    }
}
