//! Devex pricing: the entering variable has the largest d_j² / w_j, w_j reference weights.
//!
//! After a pivot with row α_r: w_j ← max(w_j, (α_rj/α_rq)² w_q), and the leaving variable gets
//! max(w_q / α_rq², 1).
//!
//! Source: Harris 1973; Forrest, Goldfarb 1992.

use crate::basis::Status;
use crate::state::Core;

/// The variable to enter, or the first wrong-signed one when `smallest_index` is asked.
pub(crate) fn entering(
    core: &mut Core,
    aside: &[u32],
    smallest_index: bool,
    tolerance: f64,
) -> Option<u32> {
    core.ticks += core.variables() as u64 / 8;
    let mut best = None;
    let mut best_merit = 0.0;
    for j in 0..core.variables() {
        let wrong = core.wrong_sign(j);
        if wrong > tolerance && !aside.contains(&(j as u32)) {
            if smallest_index {
                return Some(j as u32);
            }
            let merit = wrong * wrong / core.devex[j];
            if merit > best_merit {
                best_merit = merit;
                best = Some(j as u32);
            }
        }
    }
    best
}

/// Reduced costs and weights after the pivot whose row is in `scratch.row`.
pub(crate) fn update(core: &mut Core, leaving: usize, entering: u32) {
    let pivot = core.scratch.row.get(entering);
    let step = core.reduced[entering as usize] / pivot;
    let entering_weight = core.devex[entering as usize];
    for k in 0..core.scratch.row.count() {
        let variable = core.scratch.row.indices()[k];
        let j = variable as usize;
        if core.status[j] != Status::Basic {
            let alpha = core.scratch.row.get(variable);
            core.reduced[j] -= step * alpha;
            let candidate = (alpha / pivot) * (alpha / pivot) * entering_weight;
            if candidate > core.devex[j] {
                core.devex[j] = candidate;
            }
        }
    }
    core.ticks += core.scratch.row.count() as u64;
    core.reduced[leaving] = -step;
    core.reduced[entering as usize] = 0.0;
    let weight = entering_weight / (pivot * pivot);
    core.devex[leaving] = if weight > 1.0 { weight } else { 1.0 };
}
