//! The primal simplex method for bounded variables, from a feasible basis.
//!
//! It cleans up after the dual method's shifts and perturbations, solves again after costs changed,
//! and finds the rays of unbounded problems. Pricing by Devex reference weights; Harris ratio test;
//! when it stalls, working bounds of basic variables are relaxed a little (the dual method mends
//! that afterwards); as a last resort the smallest index enters (Bland 1977). Steepest-edge weights of
//! the dual method, where it has left any, are kept up: the next solve begins with them.
//!
//! Source: Harris 1973; Forrest, Goldfarb 1992; Maros 2003.

mod perturb;
mod pricing;
mod ratio;

use crate::basis::Status;
use crate::state::Core;
use crate::tolerances::STALL;
pub(crate) use pricing::list_all;
use ratio::Block;

/// How one step of the method went.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum PrimalStep {
    /// A pivot or flip was made, or a reduced cost mended.
    Moved,
    /// No reduced cost has the wrong sign.
    Optimal,
    /// Nothing stops `entering` from moving in `direction` (1 up, −1 down); its column is in
    /// `scratch.column`.
    Ray { entering: u32, direction: f64 },
    /// The pivot on this entering variable cannot be trusted.
    Unsound { entering: u32 },
    /// Every variable that could enter has been set aside.
    Exhausted,
}

/// What the method remembers between steps.
#[derive(Clone, Debug, Default)]
pub(crate) struct PrimalState {
    /// Variables set aside because their pivots could not be trusted.
    pub(crate) aside: Vec<u32>,
    /// Steps in a row of length zero.
    pub(crate) stall: u32,
    /// True once bounds are relaxed.
    pub(crate) perturbed: bool,
    /// False when relaxing is not allowed.
    pub(crate) may_perturb: bool,
    /// True when the dual method's weights are more than ones and worth a solve a pivot.
    pub(crate) keeps_weights: bool,
}

/// Resets reference weights and memory.
pub(crate) fn begin(core: &mut Core, state: &mut PrimalState) {
    core.devex.fill(1.0);
    pricing::list_all(core);
    state.keeps_weights = core.weight.iter().any(|&weight| weight != 1.0);
    state.aside.clear();
    state.stall = 0;
    state.perturbed = false;
}

/// One step.
pub(crate) fn step(core: &mut Core, state: &mut PrimalState) -> PrimalStep {
    let tolerance = core.room.dual;
    if state.may_perturb && !state.perturbed && state.stall >= STALL {
        perturb::relax_bounds(core);
        state.perturbed = true;
        state.stall = 0;
    }
    let smallest_index = state.stall >= 4 * STALL;
    let Some(entering) = pricing::entering(core, &state.aside, smallest_index, tolerance) else {
        return if state.aside.is_empty() { PrimalStep::Optimal } else { PrimalStep::Exhausted };
    };
    core.compute_column(entering);
    let direction = if core.reduced[entering as usize] < 0.0 { 1.0 } else { -1.0 };
    core.reduced[entering as usize] = core.reduced_by_column(entering);
    if core.reduced[entering as usize] * direction > -0.5 * tolerance {
        return PrimalStep::Moved;
    }
    match ratio::block(core, entering, direction) {
        Block::None => PrimalStep::Ray { entering, direction },
        Block::Flip { length } => flip(core, state, entering, direction * length),
        Block::Leave { position, length } => {
            pivot(core, state, (position, entering), direction * length)
        }
    }
}

/// Moves the entering variable to its other bound.
fn flip(core: &mut Core, state: &mut PrimalState, entering: u32, step: f64) -> PrimalStep {
    core.move_basic(step);
    let status = &mut core.status[entering as usize];
    *status = if *status == Status::Lower { Status::Upper } else { Status::Lower };
    core.iterations += 1;
    state.stall = 0;
    PrimalStep::Moved
}

/// Moves the entering variable by `step` (signed) into the basis.
fn pivot(
    core: &mut Core,
    state: &mut PrimalState,
    (position, entering): (u32, u32),
    step: f64,
) -> PrimalStep {
    core.compute_row(position);
    if !core.pivot_is_sound(position, entering) {
        return PrimalStep::Unsound { entering };
    }
    let falls = step.is_sign_positive() == (core.scratch.column.get(position) > 0.0);
    let leaving = core.head[position as usize] as usize;
    pricing::update(core, leaving, entering);
    if state.keeps_weights {
        core.weight[position as usize] = core.scratch.rho.norm_squared();
        core.update_weights(position);
    }
    let value = core.nonbasic_value(entering as usize) + step;
    core.move_basic(step);
    core.exchange(position, entering, value, if falls { Status::Lower } else { Status::Upper });
    state.stall = if step.abs() > 1e-12 { 0 } else { state.stall + 1 };
    PrimalStep::Moved
}

impl Core {
    /// c_q − c_Bᵀα for the column in `scratch.column`.
    fn reduced_by_column(&self, entering: u32) -> f64 {
        let basic: f64 = self
            .scratch
            .column
            .iter()
            .map(|(i, alpha)| self.work_cost[self.head[i as usize] as usize] * alpha)
            .sum();
        self.work_cost[entering as usize] - basic
    }
}
