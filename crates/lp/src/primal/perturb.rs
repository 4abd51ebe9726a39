//! Relaxation of bounds against stalling: the working bounds of basic variables move outwards by an
//! amount that is fixed by the variable's index.

use crate::random::half_to_one;
use crate::state::Core;
use crate::tolerances::PERTURB_BOUND;

/// Relaxes the working bounds of basic variables.
pub(crate) fn relax_bounds(core: &mut Core) {
    for position in 0..core.rows() {
        let j = core.head[position] as usize;
        let factor = PERTURB_BOUND * half_to_one(j);
        if core.work_lower[j] > f64::NEG_INFINITY {
            core.work_lower[j] -= factor * (1.0 + core.work_lower[j].abs());
        }
        if core.work_upper[j] < f64::INFINITY {
            core.work_upper[j] += factor * (1.0 + core.work_upper[j].abs());
        }
        core.note_violation(position);
    }
    core.ticks += core.rows() as u64;
}
