//! Perturbation of costs against stalling: each nonbasic reduced cost moves a little way into its
//! feasible side, by an amount that is fixed by the variable's index.
//!
//! Source: Koberstein 2005, section 6.3.

use crate::basis::Status;
use crate::random::half_to_one;
use crate::state::Core;
use crate::tolerances::PERTURB_COST;

/// Perturbs the working costs of nonbasic variables; reduced costs keep their signs.
pub(crate) fn perturb_costs(core: &mut Core) {
    for j in 0..core.variables() {
        let size = PERTURB_COST * (1.0 + core.cost[j].abs()) * half_to_one(j);
        let change = match core.status[j] {
            Status::Lower => size,
            Status::Upper => -size,
            Status::Basic | Status::Free => continue,
        };
        if !core.is_fixed(j) {
            core.work_cost[j] += change;
            core.reduced[j] += change;
        }
    }
    core.ticks += core.variables() as u64;
}
