//! Whether a point is a solution: exactly, against every row and every family.
//!
//! Whole columns are rounded to the nearest whole number and everything is evaluated in rationals.
//! Where that breaks a row of a model with continuous columns, these are solved anew with the
//! whole columns fixed, exactly where floats would still break a row. Families over subsets are asked by their exact membership check.

use std::rc::Rc;

use lp::{Col, Limits, Outcome, Progress, Simplex};
use model::{ColumnId, Model, Number, RowId, nearest_f64};
use proof::{Budget, ExactRows, Point, Wish};
use separate::{Membership, Separator, Violated};

use crate::proving::Proving;
use crate::relaxation::{
    float_bounds, float_entries, is_meant, model_bounds, problem, residual_problem,
};

/// By how much a row may be broken in a solution with continuous columns; absolute, in the
/// units of the row. Such a solution counts as unchecked.
const FEASIBILITY: f64 = 1e-6;

/// What the exact solution of a continuous part may cost.
const EXACT: Budget = Budget { ticks: 40_000_000, bits: 8_000 };

/// A point that is a solution.
#[derive(Debug, Clone)]
pub(crate) struct Solution {
    /// One value a column, the nearest floats.
    pub(crate) x: Vec<f64>,
    /// Its exact objective value, in the direction of the objective.
    pub(crate) value: Number,
    /// Whether it meets every row and family in exact arithmetic.
    pub(crate) exact: bool,
    /// Whether every family over subsets could say that it meets it.
    pub(crate) member: bool,
}

/// What the check of a point found.
#[derive(Debug)]
pub(crate) enum Verdict {
    /// It is a solution.
    Solution(Solution),
    /// It violates a member of a family over subsets.
    Violates(Violated),
    /// It breaks a row or a bound.
    Broken,
}

/// What the continuous part gave: floats, with the point that they stand for where it breaks nothing,
/// or an exact point.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Completed {
    Float(Vec<f64>),
    Sound(Vec<f64>, Point),
    Exact(Vec<Number>),
}

impl Completed {
    /// The nearest floats.
    pub(crate) fn near(&self) -> Vec<f64> {
        match self {
            Self::Float(x) | Self::Sound(x, _) => x.clone(),
            Self::Exact(x) => x.iter().map(nearest_f64).collect(),
        }
    }
}

/// Checks points of one model.
#[derive(Debug)]
pub(crate) struct Checker {
    model: Rc<Model>,
    /// The continuous part, made when it is first needed.
    simplex: Option<Simplex>,
    /// Its rows in exact arithmetic, made when they are first needed.
    rows: Option<ExactRows>,
    /// Its exact solution under way.
    proving: Option<Box<Proving>>,
    fixed: Vec<ColumnId>,
    continuous: bool,
    /// Rows without continuous columns.
    whole_rows: Vec<RowId>,
    /// Whether every column with a cost is whole.
    whole_costs: bool,
    ticks: u64,
    iterations: u64,
}

impl Checker {
    pub(crate) fn new(model: &Rc<Model>) -> Self {
        let columns = model.columns();
        let whole =
            |row: &RowId| model.row_entries(*row).iter().all(|(c, _)| columns[c.index()].integer);
        let rows =
            (0..model.row_count()).map(RowId::from_index).filter(|&row| is_meant(model, row));
        Self {
            model: Rc::clone(model),
            simplex: None,
            rows: None,
            proving: None,
            fixed: Vec::new(),
            continuous: columns.iter().any(|c| !c.integer),
            whole_rows: rows.filter(whole).collect(),
            whole_costs: columns
                .iter()
                .all(|c| c.integer || model.numbers().exact(c.cost).is_zero()),
            ticks: 0,
            iterations: 0,
        }
    }

    /// Whether the model has continuous columns, so that a broken point may be mended.
    pub(crate) fn has_continuous(&self) -> bool {
        self.continuous
    }

    /// The point with its whole columns rounded.
    pub(crate) fn rounded(&self, x: &[f64]) -> Vec<f64> {
        let columns = self.model.columns().iter().zip(x);
        columns.map(|(column, &v)| if column.integer { v.round() + 0.0 } else { v }).collect()
    }

    /// Checks a point exactly. `O(non-zeros)` and what the membership checks cost.
    pub(crate) fn check(&self, separators: &[Separator], x: &[f64]) -> Verdict {
        let rounded = self.rounded(x);
        match members(separators, &rounded) {
            Ok(member) => self.judged(Point::new(&self.model, &rounded), member),
            Err(violated) => Verdict::Violates(*violated),
        }
    }

    /// Checks what the continuous part gave.
    pub(crate) fn check_completed(&self, separators: &[Separator], x: Completed) -> Verdict {
        let near = match &x {
            Completed::Float(x) => self.rounded(x),
            _ => x.near(),
        };
        let member = match members(separators, &near) {
            Ok(member) => member,
            Err(violated) => return Verdict::Violates(*violated),
        };
        let point = match x {
            Completed::Float(_) => Point::new(&self.model, &near),
            Completed::Sound(_, point) => point,
            Completed::Exact(x) => Point::of_exact(&self.model, x),
        };
        self.judged(point, member)
    }

    fn judged(&self, point: Point, member: bool) -> Verdict {
        let exact = point.violations.is_empty();
        if !exact && (!self.continuous || nearest_f64(&point.worst()) > FEASIBILITY) {
            return Verdict::Broken;
        }
        let x = point.x.iter().map(nearest_f64).collect();
        Verdict::Solution(Solution { x, value: point.objective, exact: exact && member, member })
    }

    /// Whether a rounded point is worth an exact check: no row over whole columns alone is
    /// broken and the value, where it is known, `improves`. `O(non-zeros of those rows)`.
    pub(crate) fn promising(&mut self, rounded: &[f64], improves: impl Fn(f64) -> bool) -> bool {
        let numbers = self.model.numbers();
        if self.whole_costs {
            let terms = self.model.columns().iter().zip(rounded);
            let value = terms.fold(nearest_f64(self.model.offset()), |sum, (c, x)| {
                sum + numbers.float(c.cost) * x
            });
            if !improves(value) {
                return false;
            }
        }
        for &row in &self.whole_rows {
            self.ticks += self.model.row_entries(row).len() as u64;
            if outside(&self.model, row, rounded) > FEASIBILITY {
                return false;
            }
        }
        true
    }

    /// Begins to solve the rest of the columns with some fixed. False when the kernel refuses.
    pub(crate) fn begin(&mut self, fixes: &[(ColumnId, f64)]) -> bool {
        if self.simplex.is_none() {
            let all = problem(&self.model, |row| is_meant(&self.model, row));
            self.simplex = all.ok().map(Simplex::new);
        }
        let Some(simplex) = &mut self.simplex else { return false };
        for column in self.fixed.drain(..) {
            let (lower, upper) = float_bounds(&self.model, column);
            simplex.set_bounds(Col(column.0), lower, upper);
        }
        for &(column, value) in fixes {
            simplex.set_bounds(Col(column.0), value, value);
            self.fixed.push(column);
        }
        simplex.start(Limits::default());
        self.proving = None;
        true
    }

    /// Works on for about `ticks`: `None` while there is more to do, then the point, if any.
    pub(crate) fn advance(&mut self, ticks: u64) -> Option<Option<Completed>> {
        if self.proving.is_some() {
            return self.advance_proof(ticks).then(|| self.proved());
        }
        let simplex = self.simplex.as_mut()?;
        let before = simplex.stats();
        let progress = simplex.advance(ticks);
        let after = simplex.stats();
        self.ticks += after.ticks - before.ticks;
        self.iterations += after.iterations - before.iterations;
        if progress == Progress::Working {
            return None;
        }
        let Some(Outcome::Optimal(solution)) = simplex.outcome() else { return Some(None) };
        let x = solution.x.clone();
        let x = self.rounded(&x);
        self.ticks += x.len() as u64;
        let point = Point::new(&self.model, &x);
        if point.violations.is_empty() {
            return Some(Some(Completed::Sound(x, point)));
        }
        self.begin_proof();
        None
    }

    /// Begins to solve the continuous part exactly, from its final basis.
    fn begin_proof(&mut self) {
        let Some(simplex) = &self.simplex else { return };
        let model = &self.model;
        if self.rows.is_none() {
            self.rows = Some(ExactRows::of(model, |row| is_meant(model, row)));
        }
        let mut bounds: Vec<proof::Bounds> = (0..model.columns().len())
            .map(|j| model_bounds(model, ColumnId::from_index(j)))
            .collect();
        for &column in &self.fixed {
            let value = Number::try_from(simplex.bounds(Col(column.0)).0).ok();
            bounds[column.index()] = (value.clone(), value);
        }
        let proving = Proving::new(bounds, simplex.basis(), Wish::Optimum(None), EXACT);
        self.proving = Some(Box::new(proving));
    }

    fn advance_proof(&mut self, ticks: u64) -> bool {
        let (Some(proving), Some(rows)) = (&mut self.proving, &self.rows) else { return true };
        let model = &self.model;
        let written = || (0..model.row_count()).map(RowId::from_index);
        let entries = || written().filter(|&row| is_meant(model, row));
        let problem = |residual: &proof::Residual| {
            residual_problem(residual, entries().map(|row| float_entries(model, row))).ok()
        };
        let before = proving.ticks();
        let done = proving.advance(rows, problem, ticks);
        self.ticks += proving.ticks() - before;
        done
    }

    /// The exact point, or the floats where there is none.
    fn proved(&mut self) -> Option<Completed> {
        let exact = self.proving.take().and_then(|proving| proving.certifier.point());
        match (exact, self.simplex.as_ref()?.outcome()) {
            (Some(x), _) => Some(Completed::Exact(x)),
            (None, Some(Outcome::Optimal(solution))) => Some(Completed::Float(solution.x.clone())),
            (None, _) => None,
        }
    }

    /// Non-zeros touched so far.
    pub(crate) fn ticks(&self) -> u64 {
        self.ticks
    }

    /// Simplex iterations so far.
    pub(crate) fn iterations(&self) -> u64 {
        self.iterations
    }
}

/// Whether every family could say that it meets a point, or a member that the point violates.
fn members(separators: &[Separator], x: &[f64]) -> Result<bool, Box<Violated>> {
    let mut member = true;
    for separator in separators {
        match separator.membership(x) {
            Membership::Satisfied => {}
            Membership::Violated(violated) => return Err(Box::new(violated)),
            Membership::Unknown => member = false,
        }
    }
    Ok(member)
}

/// By how much a point is outside the sides of a written row; at most 0 when it is not.
fn outside(model: &Model, row: RowId, x: &[f64]) -> f64 {
    let numbers = model.numbers();
    let terms = model.row_entries(row).iter();
    let activity = terms.fold(0.0, |sum, &(c, a)| sum + numbers.float(a) * x[c.index()]);
    let (lower, upper) = model.row_sides(row);
    let under = lower.map_or(f64::NEG_INFINITY, |n| numbers.float(n) - activity);
    let over = upper.map_or(f64::NEG_INFINITY, |n| activity - numbers.float(n));
    if under > over { under } else { over }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::tests::support::{row, spec};
    use model::{ModelBuilder, Sense};

    /// min y, 3y ≥ x, x whole: at x = 1 the best y is 1/3.
    fn thirds() -> Rc<Model> {
        let mut builder = ModelBuilder::new("thirds", Sense::Minimise);
        let x = builder.column(&[], &spec((0, 4), 0, true)).unwrap();
        let y = builder.column(&[], &spec((0, 4), 1, false)).unwrap();
        builder.row(&[], row(&[(x, -1), (y, 3)], Some(0), None)).unwrap();
        Rc::new(builder.build())
    }

    #[test]
    fn simple_fractions_are_recognised() {
        let checker = Checker::new(&thirds());
        let Verdict::Solution(solution) = checker.check(&[], &[1.0 + 1e-8, 1.0 / 3.0]) else {
            panic!("1/3 is enough")
        };
        assert_eq!(solution.value, Number::from(1) / Number::from(3));
        assert!(solution.exact && solution.member);
        assert_eq!(solution.x[0], 1.0);
    }

    #[test]
    fn what_breaks_a_row_is_no_solution_until_it_is_completed() {
        let model = thirds();
        let mut checker = Checker::new(&model);
        assert!(matches!(checker.check(&[], &[1.0, 0.2]), Verdict::Broken));
        assert!(checker.begin(&[(ColumnId(0), 1.0)]));
        let point = loop {
            if let Some(point) = checker.advance(1) {
                break point.unwrap();
            }
        };
        assert!(matches!(checker.check_completed(&[], point), Verdict::Solution(s) if s.exact));
        assert!(checker.begin(&[(ColumnId(0), 9.0)]));
        let point = loop {
            if let Some(point) = checker.advance(1) {
                break point;
            }
        };
        let outside =
            point.is_none_or(|x| matches!(checker.check_completed(&[], x), Verdict::Broken));
        assert!(outside, "9 is outside the bounds of x");
    }

    /// min y, 9973 y = 13 x + 5, x whole: no simple fraction is near y at x = 1, and no float is
    /// 18/9973, so that floats break the equation.
    #[test]
    fn a_continuous_part_that_floats_cannot_hold_is_exact() {
        let mut builder = ModelBuilder::new("primes", Sense::Minimise);
        let x = builder.column(&[], &spec((0, 4), 0, true)).unwrap();
        let y = builder.column(&[], &spec((0, 4), 1, false)).unwrap();
        builder.row(&[], row(&[(x, -13), (y, 9_973)], Some(5), Some(5))).unwrap();
        let mut checker = Checker::new(&Rc::new(builder.build()));
        let Verdict::Solution(near) = checker.check(&[], &[1.0, 18.0 / 9_973.0]) else {
            panic!("within the tolerance")
        };
        assert!(!near.exact);
        assert!(checker.begin(&[(ColumnId(0), 1.0)]));
        let point = loop {
            if let Some(point) = checker.advance(1) {
                break point.unwrap();
            }
        };
        let Verdict::Solution(solution) = checker.check_completed(&[], point) else {
            panic!("a solution")
        };
        assert_eq!(solution.value, Number::from(18) / Number::from(9_973));
        assert!(solution.exact);
    }

    #[test]
    fn only_points_that_could_be_better_are_promising() {
        let mut builder = ModelBuilder::new("two", Sense::Maximise);
        let x = builder.column(&[], &spec((0, 4), 3, true)).unwrap();
        let y = builder.column(&[], &spec((0, 4), 1, true)).unwrap();
        builder.row(&[], row(&[(x, 1), (y, 1)], None, Some(4))).unwrap();
        let mut checker = Checker::new(&Rc::new(builder.build()));
        assert!(checker.promising(&[2.0, 2.0], |value| value > 7.0));
        assert!(!checker.promising(&[2.0, 2.0], |value| value > 8.0));
        assert!(!checker.promising(&[3.0, 2.0], |_| true));
    }
}
