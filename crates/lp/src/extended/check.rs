//! The check of an optimum before its multipliers are rounded.
//!
//! Multipliers of 10¹¹ on coefficients of 10⁴ are off by a tenth a column once they are floats, and the
//! bound that they give with them. So the bound b(y) (see `verify`) is taken in extended numbers from
//! the rows as given; the point is the one that is released.

use super::double::Double;
use crate::sparse::largest;
use crate::state::Core;
use crate::tolerances::{VERIFY_DUAL, VERIFY_GAP};

/// What the arithmetic leaves of a reduced cost that is zero; relative to the sum of the sizes that it
/// is the difference of.
const NOISE: f64 = 1e-24;

/// A bound in extended numbers; none when a term is −∞.
#[derive(Clone, Copy, Debug)]
struct Bound(Option<Double>);

impl Bound {
    /// Adds min(d l, d u); a d up to `noise` against a missing bound is left out.
    fn add(&mut self, d: Double, noise: f64, (lower, upper): (f64, f64)) {
        let side = if d.float() > 0.0 { lower } else { upper };
        if side.is_finite() {
            self.0 = self.0.map(|value| value + d * Double::from(side));
        } else if d.float().abs() > noise {
            self.0 = None;
        }
    }
}

/// b(y) for the reduced costs of the logicals.
fn bound(core: &Core, duals: &[Double], noise: f64) -> Option<Double> {
    let n = core.columns();
    let mut bound = Bound(Some(Double::ZERO));
    let noise = if noise > NOISE { noise } else { NOISE };
    let largest = largest(duals.iter().map(|y| y.float()));
    for (i, &y) in duals.iter().enumerate() {
        bound.add(y, VERIFY_DUAL + noise * largest, (core.lower[n + i], core.upper[n + i]));
    }
    for j in 0..n {
        let mut d = Double::from(core.cost[j]);
        let mut size = d.float().abs();
        for (row, value) in core.matrix.column(j) {
            let term = Double::from(value) * duals[row as usize];
            d = d - term;
            size += term.float().abs();
        }
        bound.add(d, VERIFY_DUAL + noise * size, (core.lower[j], core.upper[j]));
    }
    bound.0
}

/// What the objective changes by when each number of the problem changes by its own size and each value
/// by about 1, to first order: Σ_j |c_j x_j| + Σ_i |y_i| (|side of the row| + its size + Σ_j |a_ij x_j|).
fn sensitivity(core: &Core, x: &[f64], duals: &[Double]) -> f64 {
    let n = core.columns();
    let mut sum: f64 = x.iter().zip(&core.cost).map(|(x, cost)| (x * cost).abs()).sum();
    for (i, y) in duals.iter().enumerate() {
        let y = y.float();
        let side = if y > 0.0 { core.lower[n + i] } else { core.upper[n + i] };
        let terms: f64 = core.matrix.row(i).map(|(j, value)| (value * x[j as usize]).abs()).sum();
        sum +=
            y.abs() * (terms + core.row_size(i) + if side.is_finite() { side.abs() } else { 0.0 });
    }
    sum
}

/// Whether the multipliers bound the objective from below by its value at the point: to the tolerance,
/// and to some units in the last place of the numbers of the problem.
pub(super) fn closes(core: &Core, x: &[f64], duals: &[Double], units: f64) -> bool {
    let rounding = units * f64::EPSILON;
    let terms = || x.iter().zip(&core.cost).map(|(x, cost)| x * cost);
    let size: f64 = terms().map(f64::abs).sum();
    bound(core, duals, rounding).is_some_and(|bound| {
        let gap = terms().sum::<f64>() - bound.float();
        gap.abs() <= VERIFY_GAP * (1.0 + size) + rounding * sensitivity(core, x, duals)
    })
}
