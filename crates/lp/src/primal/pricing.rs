//! Devex pricing: the entering variable has the largest d_j² / w_j, w_j reference weights.
//!
//! After a pivot with row α_r: w_j ← max(w_j, (α_rj/α_rq)² w_q), and the leaving variable gets
//! max(w_q / α_rq², 1).
//!
//! Only variables that may have the wrong sign are looked at: they are listed when reduced costs are
//! computed anew, and when a pivot changes theirs.
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
    let mut listed = std::mem::take(&mut core.attractive);
    core.ticks += listed.len() as u64 / 4;
    let (mut best, mut best_merit) = (None, 0.0);
    listed.retain(|&variable| {
        let j = variable as usize;
        let wrong = core.wrong_sign(j);
        core.is_attractive[j] = wrong > tolerance;
        if wrong > tolerance && !aside.contains(&variable) {
            let merit = if smallest_index { 1.0 } else { wrong * wrong / core.devex[j] };
            let wins = merit > best_merit || (merit == best_merit && best > Some(variable));
            if wins {
                (best, best_merit) = (Some(variable), merit);
            }
        }
        wrong > tolerance
    });
    core.attractive = listed;
    best
}

/// Lists every variable whose reduced cost has the wrong sign.
pub(crate) fn list_all(core: &mut Core) {
    core.attractive.clear();
    core.is_attractive.clear();
    core.is_attractive.resize(core.variables(), false);
    for j in 0..core.variables() {
        core.note_attractive(j);
    }
    core.ticks += core.variables() as u64 / 8;
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
            core.note_attractive(j);
            let candidate = (alpha / pivot) * (alpha / pivot) * entering_weight;
            if candidate > core.devex[j] {
                core.devex[j] = candidate;
            }
        }
    }
    core.ticks += core.scratch.row.count() as u64;
    core.reduced[leaving] = -step;
    core.note_attractive(leaving);
    core.reduced[entering as usize] = 0.0;
    let weight = entering_weight / (pivot * pivot);
    core.devex[leaving] = if weight > 1.0 { weight } else { 1.0 };
}

impl Core {
    /// Lists a variable whose reduced cost has the wrong sign, if it is not listed yet.
    fn note_attractive(&mut self, j: usize) {
        if !self.is_attractive[j] && self.wrong_sign(j) > 0.0 {
            self.is_attractive[j] = true;
            self.attractive.push(j as u32);
        }
    }
}
