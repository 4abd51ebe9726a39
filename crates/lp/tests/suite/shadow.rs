//! A copy of the problem that the solver never sees, and checks of outcomes against it.

use hullward_lp::{Col, NewRow, Outcome, Problem, Ray, Simplex, Solution};

/// Entries (column, value), lower and upper side.
pub(crate) type Row = (Vec<(usize, f64)>, f64, f64);

/// min cᵀx, L ≤ Ax ≤ U, l ≤ x ≤ u.
#[derive(Clone, Debug, Default)]
pub(crate) struct Shadow {
    pub(crate) cost: Vec<f64>,
    pub(crate) lower: Vec<f64>,
    pub(crate) upper: Vec<f64>,
    pub(crate) rows: Vec<Row>,
}

/// How an outcome is compared: its kind, and the optimal value.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) enum Verdict {
    Optimal(f64),
    Infeasible,
    Unbounded,
}

impl Verdict {
    /// Same kind, and values equal up to `tolerance`, relative to 1 + |value|.
    pub(crate) fn agrees(self, other: Self, tolerance: f64) -> bool {
        match (self, other) {
            (Self::Optimal(a), Self::Optimal(b)) => (a - b).abs() <= tolerance * (1.0 + a.abs()),
            (a, b) => a == b,
        }
    }
}

/// A row for the solver.
pub(crate) fn new_row(row: &Row) -> NewRow {
    NewRow {
        entries: row.0.iter().map(|&(j, value)| (Col(j as u32), value)).collect(),
        lower: row.1,
        upper: row.2,
    }
}

impl Shadow {
    pub(crate) fn column(&mut self, cost: f64, lower: f64, upper: f64) -> usize {
        self.cost.push(cost);
        self.lower.push(lower);
        self.upper.push(upper);
        self.cost.len() - 1
    }

    pub(crate) fn row(&mut self, entries: Vec<(usize, f64)>, lower: f64, upper: f64) {
        self.rows.push((entries, lower, upper));
    }

    pub(crate) fn problem(&self) -> Problem {
        let mut problem = Problem::new();
        for j in 0..self.cost.len() {
            problem.add_column(self.cost[j], self.lower[j], self.upper[j]).unwrap();
        }
        for row in &self.rows {
            let row = new_row(row);
            problem.add_row(&row.entries, row.lower, row.upper).unwrap();
        }
        problem
    }

    pub(crate) fn simplex(&self) -> Simplex {
        Simplex::new(self.problem())
    }

    fn activity(&self, row: &Row, x: &[f64]) -> f64 {
        row.0.iter().map(|&(j, value)| value * x[j]).sum()
    }

    /// Checks certificate and numbers of an outcome; panics with `name` when one is wrong.
    pub(crate) fn verdict(&self, outcome: &Outcome, name: &str) -> Verdict {
        match outcome {
            Outcome::Optimal(solution) => {
                self.check_point(&solution.x, name);
                self.check_solution(solution, name);
                Verdict::Optimal(solution.objective)
            }
            Outcome::Infeasible(ray) => {
                self.check_farkas(ray, name);
                Verdict::Infeasible
            }
            Outcome::Unbounded { point, ray } => {
                self.check_point(point, name);
                self.check_ray(ray, name);
                Verdict::Unbounded
            }
            Outcome::Stopped { reason, .. } => panic!("{name}: stopped, {reason:?}"),
        }
    }

    fn check_point(&self, x: &[f64], name: &str) {
        assert_eq!(x.len(), self.cost.len(), "{name}");
        for (j, &value) in x.iter().enumerate() {
            assert!(
                value >= self.lower[j] - 1e-9 && value <= self.upper[j] + 1e-9,
                "{name}: column {j} = {value}"
            );
        }
        for (i, row) in self.rows.iter().enumerate() {
            let size = row.0.iter().map(|&(j, value)| (value * x[j]).abs()).sum::<f64>();
            let (activity, room) = (self.activity(row, x), 1e-8 * (1.0 + size));
            assert!(
                activity >= row.1 - room && activity <= row.2 + room,
                "{name}: row {i} = {activity}, {} to {}",
                row.1,
                row.2
            );
        }
    }

    /// Σ min(y L, y U) + Σ min(g l, g u), g = c − Aᵀy, with g and missing sides up to `noise`
    /// forgiven.
    pub(crate) fn dual_bound(&self, y: &[f64], with_costs: bool, noise: f64) -> f64 {
        let term = |d: f64, lower: f64, upper: f64, size: f64| {
            let side = if d > 0.0 { lower } else { upper };
            if d == 0.0 || (side.is_infinite() && d.abs() <= noise * (1.0 + size)) {
                0.0
            } else {
                d * side
            }
        };
        let mut reduced = if with_costs { self.cost.clone() } else { vec![0.0; self.cost.len()] };
        let mut size: Vec<f64> = reduced.iter().map(|value| value.abs()).collect();
        let mut bound = 0.0;
        for (row, &y) in self.rows.iter().zip(y) {
            bound += term(y, row.1, row.2, 0.0);
            for &(j, value) in &row.0 {
                reduced[j] -= y * value;
                size[j] += (y * value).abs();
            }
        }
        bound
            + (0..reduced.len())
                .map(|j| term(reduced[j], self.lower[j], self.upper[j], size[j]))
                .sum::<f64>()
    }

    fn check_solution(&self, solution: &Solution, name: &str) {
        let value: f64 = self.cost.iter().zip(&solution.x).map(|(c, x)| c * x).sum();
        let size: f64 = self.cost.iter().zip(&solution.x).map(|(c, x)| (c * x).abs()).sum();
        assert!((value - solution.objective).abs() <= 1e-9 * (1.0 + size), "{name}: objective");
        for (row, activity) in self.rows.iter().zip(&solution.activity) {
            let size = row.0.iter().map(|&(j, value)| (value * solution.x[j]).abs()).sum::<f64>();
            assert!(
                (self.activity(row, &solution.x) - activity).abs() <= 1e-9 * (1.0 + size),
                "{name}: activity"
            );
        }
        let bound = self.dual_bound(&solution.duals, true, 1e-8);
        assert!(
            (bound - value).abs() <= 1e-7 * (1.0 + size),
            "{name}: dual bound {bound}, objective {value}"
        );
        let mut reduced = self.cost.clone();
        for (row, &y) in self.rows.iter().zip(&solution.duals) {
            row.0.iter().for_each(|&(j, value)| reduced[j] -= y * value);
        }
        for (j, (computed, released)) in reduced.iter().zip(&solution.reduced_costs).enumerate() {
            assert!(
                (computed - released).abs() <= 1e-7 * (1.0 + self.cost[j].abs()),
                "{name}: reduced cost {j}"
            );
        }
    }

    fn check_farkas(&self, ray: &Ray, name: &str) {
        let crossed = |lower: f64, upper: f64| lower > upper;
        let columns = (0..self.cost.len()).any(|j| crossed(self.lower[j], self.upper[j]));
        let rows = self.rows.iter().any(|row| crossed(row.1, row.2));
        if columns || rows {
            assert!(
                ray.multipliers.iter().all(|&y| y == 0.0),
                "{name}: crossed bounds need no ray"
            );
        } else {
            let proof = self.dual_bound(&ray.multipliers, false, 1e-9);
            assert!(proof > 0.0, "{name}: the ray proves nothing ({proof})");
        }
    }

    fn check_ray(&self, ray: &[f64], name: &str) {
        let slope: f64 = ray.iter().zip(&self.cost).map(|(r, c)| r * c).sum();
        assert!(slope < 0.0, "{name}: the objective does not fall");
        let recedes = |value: f64, lower: f64, upper: f64, room: f64| {
            (value >= -room || lower == f64::NEG_INFINITY)
                && (value <= room || upper == f64::INFINITY)
        };
        for (j, &value) in ray.iter().enumerate() {
            assert!(
                recedes(value, self.lower[j], self.upper[j], 1e-9),
                "{name}: the ray leaves column {j}"
            );
        }
        for (i, row) in self.rows.iter().enumerate() {
            let size = row.0.iter().map(|&(j, value)| (value * ray[j]).abs()).sum::<f64>();
            assert!(
                recedes(self.activity(row, ray), row.1, row.2, 1e-8 * size),
                "{name}: the ray leaves row {i}"
            );
        }
    }
}
