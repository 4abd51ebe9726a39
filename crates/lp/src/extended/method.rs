//! The primal method on the tableau.
//!
//! Phase one lowers F = Σ_i (violation of the basic variable in row i): with σ_i = −1 below its range,
//! 1 above and 0 within, F changes by g_k = −Σ_i σ_i T_ik a unit of variable k. Phase two takes the
//! reduced costs in the place of g. The entering variable is the steepest: largest g_k² / (1 + Σ_i T_ik²);
//! after pivots in a row that moved nothing the first one (Bland 1977), with the first of the rows that
//! tie. A violated variable holds the step up where it comes to its nearer bound.

use super::double::Double;
use super::{Extended, LEVELS, Level};
use crate::basis::Status;
use crate::sparse::largest;
use crate::state::settled;

/// Pivots in a row that move nothing before the first variable enters in place of the steepest.
const MOST_IDLE: u32 = 40;

/// What a look at the tableau found.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) enum Found {
    /// `entering` becomes basic in `row`; values and statuses have moved already.
    Pivot { row: usize, entering: usize },
    /// A variable went from one of its bounds to the other.
    Flip,
    /// Feasible, and no variable improves.
    Optimum,
    /// Violations that no variable lowers.
    NoPoint,
    /// The objective falls without end as `entering` moves.
    Ray { entering: usize, direction: f64 },
    /// A step without end in phase one, which rounding alone makes.
    Nothing,
}

/// A row that holds a step up.
#[derive(Clone, Copy, Debug)]
struct Blocker {
    row: usize,
    /// Size of the entry of the entering column.
    size: f64,
    /// The step at which it does, and the one at which it is beyond by the tolerance.
    step: f64,
    far: f64,
    at: Status,
}

impl Extended {
    fn settings(&self) -> Level {
        LEVELS[self.level]
    }

    /// −1 below its range, 1 above, 0 within.
    fn side(&self, j: usize) -> f64 {
        let room = |bound: f64| self.settings().room * (1.0 + bound.abs());
        let value = self.value[j];
        if (value - Double::from(self.lower[j])).float() < -room(self.lower[j]) {
            -1.0
        } else if (value - Double::from(self.upper[j])).float() > room(self.upper[j]) {
            1.0
        } else {
            0.0
        }
    }

    /// What is lowered by variable, and whether it is the violations.
    pub(super) fn gradient(&self) -> (Vec<Double>, bool) {
        let mut gradient = vec![Double::ZERO; self.value.len()];
        let mut violated = false;
        for (i, &j) in self.tableau.head.iter().enumerate() {
            let side = self.side(j as usize);
            if side == 0.0 {
                continue;
            }
            violated = true;
            for (g, &cell) in gradient.iter_mut().zip(self.tableau.row(i)) {
                *g = if side > 0.0 { *g - cell } else { *g + cell };
            }
        }
        if violated { (gradient, true) } else { (self.tableau.reduced().to_vec(), false) }
    }

    /// Chooses the next step and takes it, but for the tableau.
    pub(super) fn look(&mut self) -> Found {
        let (gradient, violated) = self.gradient();
        let Some((entering, direction)) = self.entering(&gradient, violated) else {
            return if violated { Found::NoPoint } else { Found::Optimum };
        };
        let range = self.upper[entering] - self.lower[entering];
        match self.blocker(entering, direction) {
            Some(blocker) if blocker.step <= range => self.take(entering, direction, blocker),
            _ if range.is_finite() => self.flip(entering, direction, range),
            _ if violated => Found::Nothing,
            _ => Found::Ray { entering, direction },
        }
    }

    /// The variable that enters and its direction.
    fn entering(&self, gradient: &[Double], violated: bool) -> Option<(usize, f64)> {
        let size = if violated { 0.0 } else { self.largest_cost };
        let room = self.settings().room * (1.0 + size);
        let length = self.lengths();
        let noise = f64::EPSILON * self.settings().units * (1.0 + size);
        let direction = |j: usize| {
            let g = gradient[j].float();
            let room = if g * g < noise * noise * length[j] { f64::INFINITY } else { room };
            let improves = match self.status[j] {
                Status::Basic => false,
                Status::Lower => g < -room,
                Status::Upper => g > room,
                Status::Free => g.abs() > room,
            };
            (improves && self.lower[j] < self.upper[j]).then_some(if g < 0.0 { 1.0 } else { -1.0 })
        };
        let mut candidates =
            (0..self.value.len()).filter_map(|j| direction(j).map(|direction| (j, direction)));
        if self.idle > MOST_IDLE {
            return candidates.next();
        }
        let mut best = None;
        let mut steepest = 0.0;
        for (j, direction) in candidates {
            let g = gradient[j].float();
            let slope = g / length[j] * g;
            if slope > steepest {
                steepest = slope;
                best = Some((j, direction));
            }
        }
        best
    }

    /// 1 + Σ_i T_ik² by variable.
    fn lengths(&self) -> Vec<f64> {
        let mut lengths = vec![1.0; self.value.len()];
        for i in 0..self.tableau.rows() {
            for (length, cell) in lengths.iter_mut().zip(self.tableau.row(i)) {
                *length += cell.float() * cell.float();
            }
        }
        lengths
    }

    /// What counts as zero in a column.
    pub(super) fn least_pivot(&self, column: usize) -> f64 {
        let entries = (0..self.tableau.rows()).map(|i| self.tableau.at(i, column).float());
        let size = largest(entries);
        self.settings().pivot * if size < 1.0 { size } else { 1.0 }
    }

    /// The row that holds the step up first: of those that do before the first is beyond by the
    /// tolerance (Harris 1973) the one with the largest entry.
    fn blocker(&self, entering: usize, direction: f64) -> Option<Blocker> {
        let rows = 0..self.tableau.rows();
        let entry = |i: usize| self.tableau.at(i, entering).float();
        let least = self.least_pivot(entering);
        let blockers: Vec<Blocker> = rows
            .filter(|&i| entry(i).abs() > least)
            .filter_map(|i| self.blocks(i, entry(i), direction))
            .collect();
        let first = |pick: fn(&Blocker) -> f64| {
            blockers.iter().map(pick).fold(f64::INFINITY, |a, b| if b < a { b } else { a })
        };
        if self.idle > MOST_IDLE {
            let step = first(|blocker| blocker.step);
            let tied = blockers.into_iter().filter(|blocker| blocker.step <= step);
            return tied.min_by_key(|blocker| self.tableau.head[blocker.row]);
        }
        let far = first(|blocker| blocker.far);
        let mut best: Option<Blocker> = None;
        for blocker in blockers.into_iter().filter(|blocker| blocker.step <= far) {
            if best.is_none_or(|best| blocker.size > best.size) {
                best = Some(blocker);
            }
        }
        best
    }

    /// Where a row holds the step up.
    fn blocks(&self, row: usize, entry: f64, direction: f64) -> Option<Blocker> {
        let j = self.tableau.head[row] as usize;
        let (rises, side) = (entry * direction < 0.0, self.side(j));
        let at = match (side < 0.0, side > 0.0) {
            (true, _) if rises => Status::Lower,
            (_, true) if !rises => Status::Upper,
            (false, false) if rises => Status::Upper,
            (false, false) => Status::Lower,
            _ => return None,
        };
        let bound = if at == Status::Lower { self.lower[j] } else { self.upper[j] };
        if bound.is_infinite() {
            return None;
        }
        let way = (self.value[j] - Double::from(bound)).abs().float();
        let ahead = (self.value[j] - Double::from(bound)).float() * if rises { -1.0 } else { 1.0 };
        let way = if ahead < 0.0 { -way } else { way };
        let room = self.settings().room * (1.0 + bound.abs());
        let size = entry.abs();
        Some(Blocker { row, size, step: way / size, far: (way + room) / size, at })
    }

    /// Moves the entering variable and the basic ones by a step.
    fn advance_values(&mut self, entering: usize, step: Double) {
        for i in 0..self.tableau.rows() {
            let cell = self.tableau.at(i, entering);
            if !cell.is_zero() {
                let j = self.tableau.head[i] as usize;
                self.value[j] = self.value[j] - cell * step;
            }
        }
        self.value[entering] = self.value[entering] + step;
    }

    fn take(&mut self, entering: usize, direction: f64, blocker: Blocker) -> Found {
        let leaving = self.tableau.head[blocker.row] as usize;
        let bound =
            if blocker.at == Status::Lower { self.lower[leaving] } else { self.upper[leaving] };
        let way = self.value[leaving] - Double::from(bound);
        self.advance_values(entering, way / self.tableau.at(blocker.row, entering));
        self.value[leaving] = Double::from(bound);
        self.status[leaving] = settled(blocker.at, self.lower[leaving], self.upper[leaving]);
        self.status[entering] = Status::Basic;
        let moves = blocker.step * direction.abs() > 1e-15;
        self.idle = if moves { 0 } else { self.idle + 1 };
        Found::Pivot { row: blocker.row, entering }
    }

    fn flip(&mut self, entering: usize, direction: f64, range: f64) -> Found {
        self.advance_values(entering, Double::from(direction * range));
        self.status[entering] = if direction > 0.0 { Status::Upper } else { Status::Lower };
        self.value[entering] = Double::from(self.bound(entering));
        self.idle = 0;
        Found::Flip
    }
}
