//! The dual simplex method for bounded variables.
//!
//! It holds reduced costs of the right sign and removes violations of basic variables one at a
//! time: leaving row by steepest edge, entering column by the bound-flipping ratio test.
//! Wrong-signed reduced costs are never kept: the working cost is shifted instead, and the shifts
//! are undone by the primal method afterwards.
//!
//! Source: Koberstein 2005; Forrest, Goldfarb 1992; Maros 2003.

mod perturb;
mod ratio;
mod weights;

use crate::basis::Status;
use crate::state::{Core, for_column};
use crate::tolerances::WEIGHT_RATIO;
pub(crate) use ratio::Breakpoint;
use ratio::Choice;

/// How one step of the method went.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum DualStep {
    /// A pivot was made, or a weight or reduced cost mended.
    Moved,
    /// No basic variable violates its bounds.
    Feasible,
    /// The row in `scratch.rho` proves that there is no feasible point; the sign is that of the
    /// proof.
    Ray { position: u32, sign: f64 },
    /// The pivot at this position cannot be trusted.
    Unsound { position: u32 },
    /// Every violated row has been set aside.
    Exhausted,
}

/// What the method remembers between steps.
#[derive(Clone, Debug, Default)]
pub(crate) struct DualState {
    /// Positions set aside because their pivots could not be trusted.
    pub(crate) aside: Vec<u32>,
    /// Steps in a row without change of the dual objective.
    pub(crate) stall: u32,
    /// True once costs are perturbed.
    pub(crate) perturbed: bool,
    /// False when perturbation is not allowed.
    pub(crate) may_perturb: bool,
    /// Which detour is gone, with costs changed from the start; 0 for none.
    pub(crate) detour: u32,
    /// Steps without change of the dual objective after which costs are perturbed.
    pub(crate) patience: u32,
    /// The dual objective's gain since the method began (working costs).
    pub(crate) gain: f64,
}

/// Makes the start dual feasible by shifting the working costs of wrong-signed columns, and sees
/// how soon a stall is to be expected.
pub(crate) fn begin(core: &mut Core, state: &mut DualState) {
    for j in 0..core.variables() {
        core.shift_if_wrong(j);
    }
    state.aside.clear();
    state.stall = 0;
    state.gain = 0.0;
    state.patience = perturb::patience(core);
    if state.detour > 0 {
        perturb::perturb_costs(core, state.detour);
    }
}

/// One step.
pub(crate) fn step(core: &mut Core, state: &mut DualState) -> DualStep {
    let Some(position) = core.leaving_position(&state.aside) else {
        return if state.aside.is_empty() || core.is_primal_feasible() {
            DualStep::Feasible
        } else {
            DualStep::Exhausted
        };
    };
    core.compute_rho(position);
    if core.mend_weight(position) {
        return DualStep::Moved;
    }
    core.price();
    if state.may_perturb && !state.perturbed && state.stall >= state.patience {
        perturb::perturb_costs(core, 0);
        state.perturbed = true;
        state.stall = 0;
    }
    let sign = core.violation_sign(position);
    match ratio::choose(core, position, sign) {
        Choice::None => DualStep::Ray { position, sign },
        Choice::Enter { entering } => pivot(core, state, (position, entering)),
    }
}

/// Makes the pivot chosen, flips first.
fn pivot(core: &mut Core, state: &mut DualState, (position, entering): (u32, u32)) -> DualStep {
    core.compute_column(entering);
    if !core.pivot_is_sound(position, entering) {
        return DualStep::Unsound { position };
    }
    let sign = core.violation_sign(position);
    let leaving = core.head[position as usize] as usize;
    core.apply_flips();
    let step = core.reduced[entering as usize] / core.scratch.row.get(entering);
    core.move_reduced(leaving, entering, step);
    let bound = if sign < 0.0 { core.work_lower[leaving] } else { core.work_upper[leaving] };
    let distance = core.basic[position as usize] - bound;
    let primal_step = distance / core.scratch.column.get(position);
    core.update_weights(position);
    core.move_basic(primal_step);
    let value = core.nonbasic_value(entering as usize) + primal_step;
    let status = if sign < 0.0 { Status::Lower } else { Status::Upper };
    core.exchange(position, entering, value, status);
    let gain = (step * distance).abs();
    state.gain += gain;
    state.stall = if gain > 1e-12 * (1.0 + state.gain) { 0 } else { state.stall + 1 };
    DualStep::Moved
}

impl Core {
    /// The position with the largest squared violation by weight, lowest position on ties. Positions
    /// that are violated no longer leave the list.
    fn leaving_position(&mut self, aside: &[u32]) -> Option<u32> {
        let (mut best, mut best_ratio) = (None, 0.0);
        let (violation, weight) = (&self.violation, &self.weight);
        let listed = &mut self.is_listed;
        self.ticks += self.violated.len() as u64 / 4;
        self.violated.retain(|&position| {
            let squared = violation[position as usize];
            if squared == 0.0 {
                listed[position as usize] = false;
                return false;
            }
            let least = best_ratio * weight[position as usize];
            let wins = squared > least || (squared == least && best > Some(position));
            if wins && !aside.contains(&position) {
                best = Some(position);
                best_ratio = squared / weight[position as usize];
            }
            true
        });
        best
    }

    /// −1 when the basic variable is below its range, 1 when above.
    fn violation_sign(&self, position: u32) -> f64 {
        let j = self.head[position as usize] as usize;
        if self.basic[position as usize] < self.work_lower[j] { -1.0 } else { 1.0 }
    }

    /// Compares the stored weight with ‖ρ‖²; sets it and returns true when it was far too small.
    fn mend_weight(&mut self, position: u32) -> bool {
        let right = self.scratch.rho.norm_squared();
        let held = self.weight[position as usize];
        self.weight[position as usize] = right;
        right > WEIGHT_RATIO * held
    }

    /// Shifts the working cost of a nonbasic variable whose reduced cost has the wrong sign.
    pub(crate) fn shift_if_wrong(&mut self, j: usize) {
        if self.wrong_sign(j) > 0.0 {
            self.work_cost[j] -= self.reduced[j];
            self.reduced[j] = 0.0;
        }
    }

    /// Moves boxed variables to the bound their reduced cost asks for; true when any moved.
    pub(crate) fn flip_to_right_side(&mut self, tolerance: f64) -> bool {
        let mut moved = false;
        for j in 0..self.variables() {
            if self.wrong_sign(j) > tolerance {
                let to = match self.status[j] {
                    Status::Lower if self.work_upper[j] < f64::INFINITY => Status::Upper,
                    Status::Upper if self.work_lower[j] > f64::NEG_INFINITY => Status::Lower,
                    _ => continue,
                };
                self.status[j] = to;
                moved = true;
            }
        }
        moved
    }

    /// Moves the flipped variables to their other bound and the basic values along.
    fn apply_flips(&mut self) {
        if self.scratch.flipped.is_empty() {
            return;
        }
        let mut side = std::mem::take(&mut self.scratch.flips);
        side.clear();
        for &j in &self.scratch.flipped {
            let at = j as usize;
            let range = self.work_upper[at] - self.work_lower[at];
            let change = if self.status[at] == Status::Lower { range } else { -range };
            self.status[at] =
                if self.status[at] == Status::Lower { Status::Upper } else { Status::Lower };
            self.ticks += for_column(&self.matrix, j, |row, value| side.add(row, value * change));
        }
        self.ticks += self.factor.ftran(&mut side);
        side.drain(|position, change| {
            self.basic[position as usize] -= change;
            self.note_violation(position as usize);
        });
        self.scratch.flips = side;
    }

    /// d ← d − step · (row ρ[A, −I]); what gets the wrong sign is shifted.
    fn move_reduced(&mut self, leaving: usize, entering: u32, step: f64) {
        if step != 0.0 {
            for (variable, alpha) in self.scratch.row.iter() {
                let j = variable as usize;
                let d = self.reduced[j] - step * alpha;
                let is_wrong = match self.status[j] {
                    Status::Basic => continue,
                    Status::Lower => d < 0.0,
                    Status::Upper => d > 0.0,
                    Status::Free => d != 0.0,
                };
                self.reduced[j] = if is_wrong { 0.0 } else { d };
                if is_wrong {
                    self.work_cost[j] -= d;
                }
            }
            self.ticks += self.scratch.row.count() as u64;
        }
        self.reduced[leaving] = -step;
        self.reduced[entering as usize] = 0.0;
    }
}

#[cfg(test)]
mod tests;
