//! Dual steepest-edge weights w_i = ‖B⁻ᵀe_i‖².
//!
//! After a pivot at r with column α and τ = B⁻¹ρ:
//! w_i ← w_i − 2 (α_i/α_r) τ_i + (α_i/α_r)² w_r, w_r ← w_r / α_r².
//!
//! Source: Forrest, Goldfarb 1992.

use crate::state::Core;
use crate::tolerances::WEIGHT_FLOOR;

impl Core {
    /// Updates the weights for a pivot at a position; w_r is exact beforehand.
    pub(crate) fn update_weights(&mut self, position: u32) {
        let mut tau = std::mem::take(&mut self.scratch.tau);
        tau.copy_from(&self.scratch.rho);
        self.ticks += self.factor.ftran(&mut tau);
        let pivot = self.scratch.column.get(position);
        let pivot_weight = self.weight[position as usize];
        for (i, alpha) in self.scratch.column.iter() {
            if i != position && alpha != 0.0 {
                let ratio = alpha / pivot;
                let weight =
                    self.weight[i as usize] + ratio * (ratio * pivot_weight - 2.0 * tau.get(i));
                self.weight[i as usize] = if weight > WEIGHT_FLOOR { weight } else { WEIGHT_FLOOR };
            }
        }
        let weight = pivot_weight / (pivot * pivot);
        self.weight[position as usize] = if weight > WEIGHT_FLOOR { weight } else { WEIGHT_FLOOR };
        self.ticks += self.scratch.column.count() as u64;
        tau.clear();
        self.scratch.tau = tau;
    }
}
