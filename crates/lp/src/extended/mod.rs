//! The last resort: the problem once more with numbers of 32 digits.
//!
//! Where coefficients lie eight powers of ten apart, rows that repeat each other up to rounding make
//! bases whose condition is beyond what 16 digits can tell from a singular one. With twice as many,
//! what is rounding (10⁻¹⁶ of its terms) and what is noise of the arithmetic (10⁻³²) are apart. So a
//! problem that no attempt settled, when it is small, is solved from the slack basis by the primal
//! method on a dense tableau. Its outcome passes the same check as any other.
//!
//! Phase one lowers the sum of violations, phase two the objective (`method`); the levels in turn let
//! more count as rounding. One pivot a step. Work: cells of the tableau times pivots.

mod check;
mod double;
mod method;
mod tableau;

use crate::basis::Status;
use crate::outcome::Outcome;
use crate::sparse::largest;
use crate::state::{Core, settled};
use double::Double;
use method::Found;
use tableau::Tableau;

/// Cells of the largest tableau that is tried.
const MOST_CELLS: usize = 60_000;

/// Pivots before a tableau is built anew.
const MOST_PIVOTS: u32 = 60;

/// What counts as rounding.
#[derive(Clone, Copy, Debug)]
struct Level {
    /// Smallest pivot; relative to the largest entry of its column, and to 1 where that is larger.
    pivot: f64,
    /// Violation of a bound that counts as none, relative to 1 + the bound; wrong-signed reduced cost
    /// that counts as none, relative to 1 + the largest cost.
    room: f64,
    /// What the sides of a row are moved apart by, relative to 1 + the side and, where that is said, to
    /// the largest coefficient of the row.
    width: f64,
    with_entries: bool,
    /// How many units in the last place of each number of the problem may explain a gap, or a reduced
    /// cost beside the others of its column; with 0 the gap is closed by itself.
    units: f64,
}

/// As if rows that repeat each other up to rounding did so exactly.
const AS_MEANT: Level =
    Level { pivot: 1e-12, room: 1e-13, width: 0.0, with_entries: false, units: 0.0 };

/// With each digit as it stands.
const AS_GIVEN: Level = Level { pivot: 1e-20, room: 1e-18, ..AS_MEANT };

/// With the last digits as rounding.
const ROUNDED: Level = Level { pivot: 1e-18, room: 1e-16, width: 1e-15, units: 50.0, ..AS_MEANT };

/// The same by a digit more.
const COARSE: Level = Level { pivot: 1e-15, room: 1e-15, width: 1e-14, units: 500.0, ..AS_MEANT };

/// The levels in turn. The first five close the gap by themselves; the others are for problems whose
/// value a change in the last places moves by more than the gap.
const LEVELS: [Level; 13] = [
    AS_MEANT,
    AS_GIVEN,
    Level { room: 1e-12, ..AS_MEANT },
    Level { pivot: 1e-11, room: 1e-11, ..AS_MEANT },
    Level { pivot: 1e-10, room: 1e-10, ..AS_MEANT },
    Level { width: 1e-13, units: 50.0, ..AS_MEANT },
    Level { width: 1e-14, units: 50.0, ..AS_MEANT },
    ROUNDED,
    Level { with_entries: true, ..ROUNDED },
    COARSE,
    Level { with_entries: true, ..COARSE },
    Level { width: 1e-13, with_entries: true, units: 5e3, ..AS_MEANT },
    Level { room: 1e-12, width: 1e-12, with_entries: true, units: 5e4, ..AS_MEANT },
];

/// Entries of a ray that are tried as noise; relative to the largest.
const RAY_NOISE: [f64; 6] = [0.0, 1e-18, 1e-16, 1e-14, 1e-12, 1e-10];

impl Level {
    /// The bounds of each variable, sides of rows moved apart.
    fn ranges(&self, core: &Core) -> (Vec<f64>, Vec<f64>) {
        let (mut lower, mut upper) = (core.lower.clone(), core.upper.clone());
        for i in 0..core.rows() {
            let size = if self.with_entries { core.row_size(i) } else { core.row_one(i) };
            let width =
                |side: f64| self.width * (size + if side.is_finite() { side.abs() } else { 0.0 });
            let j = core.columns() + i;
            lower[j] -= width(lower[j]);
            upper[j] += width(upper[j]);
        }
        (lower, upper)
    }

    /// What a ray may leave a row by; relative to the fastest column.
    fn ray_room(&self) -> f64 {
        if self.units > 0.0 { 10.0 * self.pivot } else { 0.0 }
    }
}

/// What the next step does.
#[derive(Clone, Debug)]
enum Task {
    /// Makes one of these columns basic.
    Build(Vec<u32>),
    /// Looks for a pivot.
    Pivot,
}

/// What a step came to.
#[derive(Debug)]
pub(crate) enum ExtendedStep {
    Moved,
    Released(Outcome),
    /// No level gave an outcome that passes its check.
    Exhausted,
}

/// A solve of this kind under way.
#[derive(Clone, Debug)]
pub(crate) struct Extended {
    level: usize,
    task: Task,
    tableau: Tableau,
    status: Vec<Status>,
    lower: Vec<f64>,
    upper: Vec<f64>,
    largest_cost: f64,
    /// Value by variable.
    value: Vec<Double>,
    /// Pivots since the tableau was built.
    updates: u32,
    /// Pivots of this level.
    pivots: usize,
    /// Pivots in a row that moved nothing.
    idle: u32,
}

impl Core {
    /// True when the last resort can be asked.
    pub(crate) fn is_small(&self) -> bool {
        self.variables().saturating_mul(self.rows() + 1) <= MOST_CELLS
    }
}

impl Extended {
    /// A solve from the slack basis, where the problem is small enough.
    pub(crate) fn begin(core: &Core) -> Option<Box<Self>> {
        core.is_small().then(|| Box::new(Self::at_level(core, 0)))
    }

    fn at_level(core: &Core, level: usize) -> Self {
        let (lower, upper) = LEVELS[level].ranges(core);
        let status = (0..core.variables()).map(|j| match j < core.columns() {
            true => settled(Status::Lower, lower[j], upper[j]),
            false => Status::Basic,
        });
        let mut extended = Self {
            level,
            task: Task::Pivot,
            tableau: Tableau::of_slacks(core),
            status: status.collect(),
            lower,
            upper,
            largest_cost: largest(core.cost.iter().copied()),
            value: vec![Double::ZERO; core.variables()],
            updates: 0,
            pivots: 0,
            idle: 0,
        };
        extended.compute_values();
        extended
    }

    /// The bound that a nonbasic variable is at.
    fn bound(&self, j: usize) -> f64 {
        match self.status[j] {
            Status::Lower => self.lower[j],
            Status::Upper => self.upper[j],
            Status::Basic | Status::Free => 0.0,
        }
    }

    /// x_B = −T x_N.
    fn compute_values(&mut self) {
        for j in 0..self.value.len() {
            self.value[j] = Double::from(self.bound(j));
        }
        for i in 0..self.tableau.rows() {
            let mut sum = Double::ZERO;
            for (j, &cell) in self.tableau.row(i).iter().enumerate() {
                if self.status[j] != Status::Basic && !cell.is_zero() {
                    sum = sum - cell * self.value[j];
                }
            }
            self.value[self.tableau.head[i] as usize] = sum;
        }
    }

    /// One step.
    pub(crate) fn step(&mut self, core: &mut Core) -> ExtendedStep {
        if matches!(self.task, Task::Build(_)) {
            return self.build(core);
        }
        if self.updates >= MOST_PIVOTS {
            self.rebuild(core);
            return ExtendedStep::Moved;
        }
        if self.pivots > 50 * self.value.len() + 1_000 {
            return self.next_level(core);
        }
        core.ticks += (self.tableau.rows() * self.value.len()) as u64;
        match self.look() {
            Found::Pivot { row, entering } => {
                core.ticks += self.tableau.pivot(row, entering);
                core.iterations += 1;
                self.updates += 1;
                self.pivots += 1;
            }
            Found::Flip => {
                core.iterations += 1;
                self.pivots += 1;
            }
            _ if self.updates > 0 => self.rebuild(core),
            found => match self.outcome(core, found) {
                Some(outcome) => {
                    core.status.clone_from(&self.status);
                    core.adopt_statuses();
                    return ExtendedStep::Released(outcome);
                }
                None => return self.next_level(core),
            },
        }
        ExtendedStep::Moved
    }

    /// Begins to build the tableau of the basis anew.
    fn rebuild(&mut self, core: &Core) {
        let n = core.columns() as u32;
        let basic = (0..n).filter(|&j| self.status[j as usize] == Status::Basic);
        self.task = Task::Build(basic.collect());
        self.tableau = Tableau::of_slacks(core);
    }

    /// One pivot of the tableau that is built; values when it is whole.
    fn build(&mut self, core: &mut Core) -> ExtendedStep {
        let Task::Build(wanted) = &mut self.task else { return ExtendedStep::Moved };
        let status = &self.status;
        core.ticks += (wanted.len() * self.tableau.rows()) as u64;
        if wanted.is_empty() {
            self.task = Task::Pivot;
            self.updates = 0;
            self.compute_values();
            return ExtendedStep::Moved;
        }
        let is_kept = |j: u32| status[j as usize] == Status::Basic;
        match self.tableau.largest(wanted, is_kept) {
            Some((row, k)) => {
                core.ticks += self.tableau.pivot(row, wanted.swap_remove(k) as usize);
                ExtendedStep::Moved
            }
            None => self.next_level(core),
        }
    }

    fn next_level(&mut self, core: &Core) -> ExtendedStep {
        if self.level + 1 >= LEVELS.len() {
            return ExtendedStep::Exhausted;
        }
        *self = Self::at_level(core, self.level + 1);
        ExtendedStep::Moved
    }

    /// What was found as an outcome, if it passes the check of every outcome.
    fn outcome(&self, core: &Core, found: Found) -> Option<Outcome> {
        let n = core.columns();
        match found {
            Found::Optimum => {
                let (x, reduced) = (self.point(core), self.tableau.reduced());
                let closes = check::closes(core, &x, &reduced[n..], LEVELS[self.level].units);
                let rounded: Vec<f64> = reduced.iter().map(|d| d.float()).collect();
                let solution = core.released_solution(&x, &rounded).ok();
                solution.filter(|_| closes).map(Outcome::Optimal)
            }
            Found::NoPoint => {
                let (gradient, _) = self.gradient();
                let ray: Vec<f64> = gradient[n..].iter().map(|d| d.float()).collect();
                let size = largest(ray.iter().copied());
                core.checked_farkas(size, (0..).zip(ray)).map(Outcome::Infeasible)
            }
            Found::Ray { entering, direction } => {
                let point = self.point(core);
                let checked = RAY_NOISE.iter().find_map(|&noise| {
                    let ray = self.direction(n, (entering, direction), noise);
                    core.checked_unbounded(&point, ray, LEVELS[self.level].ray_room()).ok()
                });
                checked.map(|(point, ray)| Outcome::Unbounded { point, ray })
            }
            Found::Pivot { .. } | Found::Flip | Found::Nothing => None,
        }
    }

    /// The values of the columns, within their bounds.
    fn point(&self, core: &Core) -> Vec<f64> {
        let within = |j: usize| {
            let value = self.value[j].float();
            let above = if value < core.lower[j] { core.lower[j] } else { value };
            if above > core.upper[j] { core.upper[j] } else { above }
        };
        (0..core.columns()).map(within).collect()
    }

    /// How the columns move when `entering` does; entries up to `noise` are left out, relative to the
    /// largest.
    fn direction(&self, n: usize, (entering, direction): (usize, f64), noise: f64) -> Vec<f64> {
        let mut ray = vec![0.0; n];
        if entering < n {
            ray[entering] = direction;
        }
        for (i, &j) in self.tableau.head.iter().enumerate() {
            if (j as usize) < n {
                ray[j as usize] = -direction * self.tableau.at(i, entering).float();
            }
        }
        let least = noise * largest(ray.iter().copied());
        ray.iter_mut().filter(|value| value.abs() <= least).for_each(|value| *value = 0.0);
        ray
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::problem::{Col, Problem};
    use crate::simplex::{Limits, Simplex};

    /// A problem of small whole numbers: boxed, one-sided and free columns, rows of each kind.
    fn drawn(seed: u32) -> Problem {
        let mut state = seed.wrapping_mul(2_654_435_761) | 1;
        let mut whole = |low: i32, high: i32| {
            state = state.wrapping_mul(1_664_525).wrapping_add(1_013_904_223);
            f64::from(low + ((state >> 16) % (high - low + 1) as u32) as i32)
        };
        let mut problem = Problem::new();
        let columns: Vec<Col> = (0..8)
            .map(|_| {
                let (cost, low, kind) = (whole(-5, 9), whole(-3, 3), whole(0, 7));
                let lower = if kind == 0.0 { f64::NEG_INFINITY } else { low };
                let upper = if kind < 3.0 { f64::INFINITY } else { low + 4.0 };
                problem.add_column(cost, lower, upper).unwrap()
            })
            .collect();
        for _ in 0..6 {
            let row: Vec<(Col, f64)> = columns.iter().map(|&j| (j, whole(-4, 4))).collect();
            let (side, kind) = (whole(-9, 9), whole(0, 2));
            let lower = if kind == 0.0 { f64::NEG_INFINITY } else { side };
            let upper = if kind == 1.0 { f64::INFINITY } else { side };
            problem.add_row(&row, lower, upper).unwrap();
        }
        problem
    }

    /// The outcome of the last resort asked first.
    fn alone(problem: Problem) -> Outcome {
        let mut core = Core::new(problem);
        let mut extended = Extended::begin(&core).unwrap();
        loop {
            match extended.step(&mut core) {
                ExtendedStep::Moved => {}
                ExtendedStep::Released(outcome) => {
                    assert_eq!(core.check(), Ok(()));
                    return outcome;
                }
                ExtendedStep::Exhausted => panic!("no outcome"),
            }
        }
    }

    #[test]
    fn it_comes_to_what_the_usual_methods_come_to() {
        let mut seen = [0; 3];
        for seed in 0..400 {
            let mut usual = Simplex::new(drawn(seed));
            match (usual.solve(Limits::default()), &alone(drawn(seed))) {
                (Outcome::Optimal(a), Outcome::Optimal(b)) => {
                    seen[0] += 1;
                    let close =
                        (a.objective - b.objective).abs() < 1e-9 * (1.0 + a.objective.abs());
                    assert!(close, "seed {seed}: {} and {}", a.objective, b.objective);
                }
                (Outcome::Infeasible(_), Outcome::Infeasible(_)) => seen[1] += 1,
                (Outcome::Unbounded { .. }, Outcome::Unbounded { .. }) => seen[2] += 1,
                (a, b) => panic!("seed {seed}: {a:?} and {b:?}"),
            }
        }
        assert!(seen.iter().all(|&count| count > 20), "{seen:?}");
    }

    #[test]
    fn a_large_problem_is_not_tried() {
        let mut problem = Problem::new();
        let columns: Vec<Col> =
            (0..300).map(|_| problem.add_column(1.0, 0.0, 1.0).unwrap()).collect();
        for &column in columns.iter().take(130) {
            problem.add_row(&[(column, 1.0)], 0.0, 1.0).unwrap();
        }
        assert!(Extended::begin(&Core::new(problem.clone())).is_some());
        problem.add_row(&[(columns[0], 1.0)], 0.0, 1.0).unwrap();
        for &column in columns.iter().take(30) {
            problem.add_row(&[(column, 1.0)], 0.0, 1.0).unwrap();
        }
        assert!(Extended::begin(&Core::new(problem)).is_none());
    }
}
