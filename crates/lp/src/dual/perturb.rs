//! Perturbation of costs against stalling: each nonbasic reduced cost moves a little way into its
//! feasible side, by an amount that is fixed by the variable's index.
//!
//! It waits for a stall, but for less long where one is to be expected. With many reduced costs of
//! zero (flows and assignments without cost of their own), ties would be walked through by chance:
//! from a start with many violated rows at two to three times the pivots on packing. From a basis that
//! an earlier solve has left, such ties are few and a perturbation makes the way longer: two to four
//! times the pivots on multi-commodity flows after one bound has changed. There it waits until the
//! steps without progress are a share of the rows.
//!
//! Source: Koberstein 2005, section 6.3.

use crate::basis::Status;
use crate::random::{detoured, half_to_one};
use crate::state::Core;
use crate::tolerances::{DUAL, PERTURB_COST, STALL};

/// Share of reduced costs that are zero from which a stall is to be expected.
const ZERO_SHARE: f64 = 0.25;

/// Violated rows from which it is sure to come.
const MANY_VIOLATED: usize = 10;

/// Steps without progress that are enough where a stall is to be expected.
const SHORT_STALL: u32 = 3;

/// Steps without progress a row, on top of the usual ones, that are waited for from a basis that an
/// earlier solve has left.
const WARM_STALL: f64 = 0.25;

/// How many steps without progress are waited for from the start that the state is in.
pub(super) fn patience(core: &Core) -> u32 {
    if core.head.iter().any(|&j| (j as usize) < core.columns()) {
        return STALL + (WARM_STALL * core.rows() as f64) as u32;
    }
    let (mut zero, mut all) = (0u32, 0u32);
    for j in (0..core.variables()).filter(|&j| core.status[j] != Status::Basic) {
        if !core.is_fixed(j) {
            all += 1;
            zero += u32::from(core.reduced[j].abs() <= DUAL);
        }
    }
    let violated = |&&position: &&u32| core.violation[position as usize] > 0.0;
    if f64::from(zero) < ZERO_SHARE * f64::from(all) {
        STALL
    } else if core.violated.iter().filter(violated).count() < MANY_VIOLATED {
        SHORT_STALL
    } else {
        0
    }
}

/// Perturbs the working costs of nonbasic variables; reduced costs keep their signs. On a detour the
/// change is as large as the costs: the method shall end at another vertex.
pub(crate) fn perturb_costs(core: &mut Core, detour: u32) {
    let share = if detour == 0 { PERTURB_COST } else { 1.0 };
    for j in 0..core.variables() {
        let size = share * (1.0 + core.cost[j].abs()) * half_to_one(detoured(j, detour));
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
