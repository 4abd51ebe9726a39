//! What is released is checked against the caller's rows, bounds and costs, not against the
//! kernel's own books.
//!
//! For multipliers y and g = c − Aᵀy the dual bound is b(y) = Σ_i min(y_i L_i, y_i U_i) + Σ_j
//! min(g_j l_j, g_j u_j). It bounds cᵀx from below; with c = 0, b(y) > 0 proves that there is no
//! feasible point.

use crate::basis::Status;
use crate::outcome::{Ray, Solution};
use crate::sparse::largest;
use crate::state::{Core, excess};
use crate::tolerances::{
    VERIFY_DUAL, VERIFY_FARKAS, VERIFY_FARKAS_WHOLE, VERIFY_GAP, VERIFY_RAY, VERIFY_ROW,
};

/// Largest factor tried to make a ray whole: exact checks lose nothing then.
const WHOLE_FACTOR: u32 = 64;

/// What rounding can add to a sum of terms, relative to the sum of their sizes.
const ROUNDING: f64 = 1e-14;

/// A dual bound: its value and the sum of its terms' sizes.
#[derive(Clone, Copy, Debug)]
struct DualBound {
    value: f64,
    size: f64,
    /// The same with what each d is the difference of in the place of d: what rounding is relative to.
    rounded: f64,
    /// False when a term that is −∞ was taken for noise.
    is_whole: bool,
}

/// A reduced cost or a multiplier, the sum of the sizes that it is the difference of, and what of it is
/// noise.
#[derive(Clone, Copy, Debug)]
struct Price {
    value: f64,
    size: f64,
    noise: f64,
}

impl DualBound {
    /// Adds min(d l, d u); false when that is −∞ and d is more than noise.
    fn add(&mut self, price: Price, (lower, upper): (f64, f64)) -> bool {
        let d = price.value;
        let bound = if d > 0.0 { lower } else { upper };
        if bound.is_finite() {
            self.value += d * bound;
            self.size += (d * bound).abs();
            self.rounded += price.size * bound.abs();
            return true;
        }
        if d == 0.0 {
            return true;
        }
        self.is_whole = false;
        d.abs() <= price.noise
    }
}

/// Scales multipliers so that the largest is 1, or all are whole where a small factor does that.
pub(crate) fn make_whole(multipliers: &mut [f64]) {
    let largest = largest(multipliers.iter().copied());
    if largest == 0.0 {
        return;
    }
    multipliers.iter_mut().for_each(|y| *y /= largest);
    let is_whole = |factor: f64| {
        multipliers.iter().all(|y| (y * factor - (y * factor).round()).abs() <= VERIFY_RAY)
    };
    if let Some(factor) = (1..=WHOLE_FACTOR).map(f64::from).find(|&factor| is_whole(factor)) {
        multipliers.iter_mut().for_each(|y| *y = (*y * factor).round() + 0.0);
    }
}

/// Values in other units, without negative zeros.
fn released(values: &[f64], units: &[f64], convert: fn(f64, f64) -> f64) -> Vec<f64> {
    values.iter().zip(units).map(|(&value, &unit)| convert(value, unit) + 0.0).collect()
}

impl Core {
    /// b(y), or none when a term is −∞ by more than `noise` times the size of its column.
    fn dual_value(&self, y: &[f64], with_costs: bool, noise: f64) -> Option<DualBound> {
        let n = self.columns();
        let mut bound = DualBound { value: 0.0, size: 0.0, rounded: 0.0, is_whole: true };
        for (i, &value) in y.iter().enumerate() {
            let price = Price { value, size: value.abs(), noise };
            if !bound.add(price, (self.lower[n + i], self.upper[n + i])) {
                return None;
            }
        }
        for j in 0..n {
            let mut d = if with_costs { self.cost[j] } else { 0.0 };
            let mut size = d.abs();
            for (row, value) in self.matrix.column(j) {
                let term = value * y[row as usize];
                d -= term;
                size += term.abs();
            }
            let noise = if with_costs { noise * (1.0 + size) } else { noise * size };
            if !bound.add(Price { value: d, size, noise }, (self.lower[j], self.upper[j])) {
                return None;
            }
        }
        Some(bound)
    }

    /// The bound that multipliers give on the optimal value, less what rounding may have added; noise
    /// against missing bounds is forgiven.
    pub(crate) fn dual_bound(&self, y: &[f64]) -> Option<f64> {
        self.dual_value(y, true, VERIFY_DUAL).map(|bound| bound.value - ROUNDING * bound.rounded)
    }

    /// The multipliers `sign` · `scratch.rho` as a ray in the caller's units, if they prove
    /// infeasibility.
    pub(crate) fn farkas_ray(&self, sign: f64) -> Option<Ray> {
        let rho = &self.scratch.rho;
        self.checked_farkas(rho.largest(), rho.iter().map(|(row, value)| (row, sign * value)))
    }

    /// Multipliers by row, the largest of this size, as a ray in the caller's units, if they prove
    /// infeasibility.
    pub(crate) fn checked_farkas(
        &self,
        largest: f64,
        multipliers: impl Iterator<Item = (u32, f64)>,
    ) -> Option<Ray> {
        let n = self.columns();
        let noise = VERIFY_RAY * largest;
        let mut whole = vec![0.0; self.rows()];
        for (row, y) in multipliers {
            let i = row as usize;
            let side = if y > 0.0 { self.lower[n + i] } else { self.upper[n + i] };
            if y.abs() > if side.is_infinite() { noise } else { 1e-3 * noise } {
                whole[i] = y / self.unit[n + i];
            }
        }
        make_whole(&mut whole);
        let scaled: Vec<f64> =
            whole.iter().zip(&self.unit[n..]).map(|(y, unit)| y * unit).collect();
        self.proves_infeasible(&scaled).then_some(Ray { multipliers: whole })
    }

    /// True when the multipliers prove that there is no feasible point.
    fn proves_infeasible(&self, multipliers: &[f64]) -> bool {
        self.dual_value(multipliers, false, VERIFY_RAY).is_some_and(|bound| {
            let room = if bound.is_whole { VERIFY_FARKAS_WHOLE } else { VERIFY_FARKAS };
            bound.value > room * bound.size
        })
    }

    /// The values of the columns, basic ones clipped to their bounds (by no more than the
    /// tolerance, when feasible).
    fn point(&self) -> Vec<f64> {
        let n = self.columns();
        let mut x: Vec<f64> = (0..n)
            .map(|j| if self.status[j] == Status::Basic { 0.0 } else { self.nonbasic_value(j) })
            .collect();
        for (&j, &value) in self.head.iter().zip(&self.basic) {
            let j = j as usize;
            if j < n {
                let above = if value < self.lower[j] { self.lower[j] } else { value };
                x[j] = if above > self.upper[j] { self.upper[j] } else { above };
            }
        }
        x
    }

    /// Row activities at a point, and the size of the largest term of each.
    fn activities(&self, x: &[f64]) -> Vec<(f64, f64)> {
        let row = |i: usize| {
            self.matrix.row(i).fold((0.0, 0.0), |(sum, size): (f64, f64), (j, value)| {
                let term = value * x[j as usize];
                (sum + term, if term.abs() > size { term.abs() } else { size })
            })
        };
        (0..self.rows()).map(row).collect()
    }

    /// Checks that a point is within its bounds and rows; gives the activities.
    fn check_point(&self, x: &[f64]) -> Result<Vec<f64>, String> {
        let n = self.columns();
        if let Some(j) = (0..n)
            .find(|&j| !x[j].is_finite() || excess(x[j], self.lower[j], self.upper[j], 0.0) != 0.0)
        {
            return Err(format!("column {j} is out of its bounds"));
        }
        let activities = self.activities(x);
        for (i, &(activity, size)) in activities.iter().enumerate() {
            let room = VERIFY_ROW * (self.row_one(i) + size);
            if activity.is_nan()
                || activity < self.lower[n + i] - room
                || activity > self.upper[n + i] + room
            {
                return Err(format!("row {i} is violated"));
            }
        }
        Ok(activities.into_iter().map(|(activity, _)| activity).collect())
    }

    /// The solution of the current basis (given costs and bounds), checked, in the caller's units.
    pub(crate) fn solution(&self) -> Result<Solution, String> {
        let x = self.point();
        let released = self.released_solution(&x, &self.reduced)?;
        let Some(bound) = self.dual_value(&self.reduced[self.columns()..], true, VERIFY_DUAL)
        else {
            return Err("a reduced cost has the wrong sign".to_owned());
        };
        let size: f64 = x.iter().zip(&self.cost).map(|(x, cost)| (x * cost).abs()).sum();
        // What rounding of the multipliers explains is let be where there is no last resort.
        let rounding = if self.is_small() { 0.0 } else { ROUNDING * bound.rounded };
        let gap = released.objective - bound.value;
        if gap.is_nan() || gap.abs() > VERIFY_GAP * (1.0 + size) + rounding {
            return Err("primal and dual objective differ".to_owned());
        }
        Ok(released)
    }

    /// A point, checked against its bounds and rows, and reduced costs (the duals last) as a solution in
    /// the caller's units. The objective is the same in both.
    pub(crate) fn released_solution(&self, x: &[f64], reduced: &[f64]) -> Result<Solution, String> {
        let (reduced, duals) = reduced.split_at(self.columns());
        let activity = self.check_point(x)?;
        let objective: f64 = x.iter().zip(&self.cost).map(|(x, cost)| x * cost).sum();
        let rows = &self.unit[self.columns()..];
        Ok(Solution {
            objective: objective + 0.0,
            activity: released(&activity, rows, |activity, unit| activity * unit),
            duals: self.released_duals(duals),
            reduced_costs: released(reduced, &self.unit, |d, unit| d / unit),
            x: self.released_point(x),
        })
    }

    /// The solution when the basis is optimal, or why it may not be released. Where solves are
    /// refined, violations that the check of the rows does not see are noise of the basis.
    pub(crate) fn released_optimum(&self) -> Option<Result<Solution, String>> {
        let feasible = self.is_primal_feasible();
        let optimal = (feasible || self.care.refines) && self.worst_reduced() <= self.room.dual;
        let released = optimal.then(|| self.solution())?;
        (feasible || released.is_ok()).then_some(released)
    }

    /// Multipliers in the caller's units.
    pub(crate) fn released_duals(&self, duals: &[f64]) -> Vec<f64> {
        released(duals, &self.unit[self.columns()..], |y, unit| y / unit)
    }

    /// Values of the columns in the caller's units.
    fn released_point(&self, x: &[f64]) -> Vec<f64> {
        released(x, &self.unit, |x, unit| x * unit)
    }

    /// How the columns move while `entering` does, scaled so that the fastest moves by 1.
    fn direction(&self, entering: u32, direction: f64) -> Vec<f64> {
        let n = self.columns();
        let mut ray = vec![0.0; n];
        if (entering as usize) < n {
            ray[entering as usize] = direction;
        }
        for (position, alpha) in self.scratch.column.iter() {
            let j = self.head[position as usize] as usize;
            if j < n && alpha != 0.0 {
                ray[j] = -direction * alpha;
            }
        }
        ray
    }

    /// A feasible point and the direction in which `entering` moves, both checked.
    pub(crate) fn unbounded_ray(
        &self,
        entering: u32,
        direction: f64,
    ) -> Result<(Vec<f64>, Vec<f64>), String> {
        self.checked_unbounded(&self.point(), self.direction(entering, direction), 0.0)
    }

    /// A feasible point and a direction, which is scaled so that the fastest column moves by 1, checked
    /// and in the caller's units. A row may be left by the rounding of its own terms, and by `room`.
    pub(crate) fn checked_unbounded(
        &self,
        point: &[f64],
        mut ray: Vec<f64>,
        room: f64,
    ) -> Result<(Vec<f64>, Vec<f64>), String> {
        let n = self.columns();
        self.check_point(point)?;
        let largest = largest(ray.iter().copied());
        if largest > 0.0 {
            ray.iter_mut().for_each(|value| *value /= largest);
        }
        let recedes = |value: f64, room: f64, j: usize| {
            (value >= -room || self.lower[j].is_infinite())
                && (value <= room || self.upper[j].is_infinite())
        };
        let columns = (0..n).all(|j| recedes(ray[j], VERIFY_RAY, j));
        let rows = self.activities(&ray).iter().enumerate().all(|(i, &(value, size))| {
            recedes(value, 10.0 * VERIFY_RAY * size + room * self.row_one(i), n + i)
        });
        let slope: f64 = ray.iter().zip(&self.cost).map(|(ray, cost)| ray * cost).sum();
        if columns && rows && slope < 0.0 {
            Ok((self.released_point(point), self.released_point(&ray)))
        } else {
            Err("the unbounded ray leaves the feasible set".to_owned())
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::problem::Problem;

    /// min x + 2y, x + y ≥ 3, x ≤ 2: optimal at (2, 1), y basic.
    fn optimal() -> Core {
        let mut problem = Problem::new();
        let x = problem.add_column(1.0, 0.0, 2.0).unwrap();
        let y = problem.add_column(2.0, 0.0, f64::INFINITY).unwrap();
        problem.add_row(&[(x, 1.0), (y, 1.0)], 3.0, f64::INFINITY).unwrap();
        let mut core = Core::new(problem);
        core.status = vec![Status::Upper, Status::Basic, Status::Lower];
        core.refactor_canonical();
        core.compute_basic();
        core.compute_reduced();
        core
    }

    #[test]
    fn a_right_solution_passes() {
        let solution = optimal().solution().unwrap();
        assert_eq!(
            (solution.objective, solution.x, solution.duals),
            (4.0, vec![2.0, 1.0], vec![2.0])
        );
    }

    #[test]
    fn wrong_books_do_not_pass() {
        let mut moved = optimal();
        moved.basic[0] = 0.9;
        assert_eq!(moved.solution(), Err("row 0 is violated".to_owned()));
        let mut not_a_number = optimal();
        not_a_number.basic[0] = f64::NAN;
        assert!(not_a_number.solution().is_err());
        let mut weak = optimal();
        weak.reduced[2] = 1.5;
        assert_eq!(weak.solution(), Err("primal and dual objective differ".to_owned()));
        let mut wrong = optimal();
        wrong.reduced[2] = 2.5;
        assert_eq!(wrong.solution(), Err("a reduced cost has the wrong sign".to_owned()));
    }

    #[test]
    fn rays_that_prove_nothing_do_not_pass() {
        let mut core = optimal();
        core.scratch.rho.reset(1);
        core.scratch.rho.set(0, 1.0);
        assert_eq!(core.farkas_ray(1.0), None);
        core.upper[1] = 0.5;
        assert_eq!(core.farkas_ray(1.0), Some(Ray { multipliers: vec![1.0] }));
        assert_eq!(core.farkas_ray(-1.0), None);
        core.compute_column(2);
        assert!(core.unbounded_ray(2, 1.0).is_err());
    }
}
