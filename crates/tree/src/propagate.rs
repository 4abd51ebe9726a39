//! Propagation of bounds over written rows (Savelsbergh 1994): what the other columns leave of a
//! row's side bounds a whole column.
//!
//! Floating-point activities say where a bound may tighten; the bound itself, and that a row cannot
//! be met, are worked out in exact arithmetic from the exact bounds.

use std::collections::VecDeque;

use model::{ColumnId, Model, Number, RowId, nearest_f64};
use proof::Bounds;

use crate::event::{Branch, Side};
use crate::relaxation::is_meant;

/// Entries looked at in one run at most; what is tightened until then stands.
const MOST_WORK: u64 = 500_000;
/// How far over its side a row's least activity must be to be looked at exactly, relative.
const OVER: f64 = 1e-9;
/// How near under a whole number a bound may be that floats see.
const NEAR: f64 = 1e-6;
/// Larger bounds are not floats of whole numbers.
const LARGEST: f64 = 9e15;

/// One side of a row as `Σ a x ≤ side`.
#[derive(Debug)]
struct Half {
    row: RowId,
    /// 1 for the upper side, −1 for the lower side turned round.
    sign: f64,
    entries: Vec<(usize, f64)>,
    side: f64,
}

/// The rows of a model, ready for propagation.
#[derive(Debug)]
pub(crate) struct Propagator {
    halves: Vec<Half>,
    /// The halves in which each column has an entry.
    of_column: Vec<Vec<usize>>,
    integer: Vec<bool>,
}

/// What a run came to.
#[derive(Debug, Default)]
pub(crate) struct Propagated {
    /// Bounds in the order in which they were tightened.
    pub(crate) tightened: Vec<Branch>,
    /// Whether no point can meet the rows.
    pub(crate) infeasible: bool,
    /// Entries looked at.
    pub(crate) work: u64,
}

impl Propagator {
    /// Reads the rows that the model means. `O(non-zeros)`.
    pub(crate) fn new(model: &Model) -> Self {
        let numbers = model.numbers();
        let mut halves = Vec::new();
        let rows = (0..model.row_count()).map(RowId::from_index);
        for row in rows.filter(|&row| is_meant(model, row)) {
            let (lower, upper) = model.row_sides(row);
            for (side, sign) in [(upper, 1.0), (lower, -1.0)] {
                let Some(side) = side else { continue };
                let entries = model.row_entries(row).iter();
                let entries = entries.map(|&(c, a)| (c.index(), sign * numbers.float(a)));
                let side = sign * numbers.float(side);
                halves.push(Half { row, sign, entries: entries.collect(), side });
            }
        }
        let mut of_column = vec![Vec::new(); model.columns().len()];
        for (index, half) in halves.iter().enumerate() {
            half.entries.iter().for_each(|&(column, _)| of_column[column].push(index));
        }
        let integer = model.columns().iter().map(|column| column.integer).collect();
        Self { halves, of_column, integer }
    }

    /// Tightens `bounds` from the rows of the `changed` columns on; all rows where it is `None`.
    pub(crate) fn run(
        &self,
        model: &Model,
        bounds: &mut [Bounds],
        changed: Option<&[ColumnId]>,
    ) -> Propagated {
        let mut run = Run {
            model,
            near: bounds.iter().map(near).collect(),
            bounds,
            queue: VecDeque::new(),
            queued: vec![false; self.halves.len()],
            done: Propagated::default(),
        };
        match changed {
            None => (0..self.halves.len()).for_each(|half| run.enqueue(half)),
            Some(columns) => {
                let halves = columns.iter().flat_map(|c| &self.of_column[c.index()]);
                halves.for_each(|&half| run.enqueue(half));
            }
        }
        while let Some(index) = run.queue.pop_front() {
            run.queued[index] = false;
            run.visit(self, &self.halves[index]);
            if run.done.infeasible || run.done.work > MOST_WORK {
                break;
            }
        }
        run.done
    }
}

/// A run under way.
struct Run<'a> {
    model: &'a Model,
    bounds: &'a mut [Bounds],
    /// The bounds as floats.
    near: Vec<(f64, f64)>,
    queue: VecDeque<usize>,
    queued: Vec<bool>,
    done: Propagated,
}

impl Run<'_> {
    fn enqueue(&mut self, half: usize) {
        if !std::mem::replace(&mut self.queued[half], true) {
            self.queue.push_back(half);
        }
    }

    /// What an entry adds to the least activity; −∞ without the bound it needs.
    fn least(&self, (column, a): (usize, f64)) -> f64 {
        let (lower, upper) = self.near[column];
        if a > 0.0 { a * lower } else { a * upper }
    }

    fn visit(&mut self, propagator: &Propagator, half: &Half) {
        self.done.work += half.entries.len() as u64;
        let (mut sum, mut infinite) = (0.0, 0);
        for &entry in &half.entries {
            let least = self.least(entry);
            if least.is_finite() {
                sum += least;
            } else {
                infinite += 1;
            }
        }
        if infinite == 0 && sum > half.side + OVER * (1.0 + half.side.abs()) {
            self.done.infeasible = self.is_broken(half);
            return;
        }
        for &(column, a) in &half.entries {
            let least = self.least((column, a));
            let others = if least.is_finite() { infinite } else { infinite - 1 };
            if !propagator.integer[column] || others > 0 {
                continue;
            }
            let rest = half.side - if least.is_finite() { sum - least } else { sum };
            let (lower, upper) = self.near[column];
            let promises = if a > 0.0 {
                (rest / a + NEAR).floor() < upper
            } else {
                (rest / a - NEAR).ceil() > lower
            };
            if promises {
                self.tighten(propagator, half, (column, a > 0.0));
            }
            if self.done.infeasible {
                return;
            }
        }
    }

    /// `side − Σ` of the least activity of all columns but one, exactly; `None` where a bound
    /// lacks.
    fn rest(&self, half: &Half, left_out: Option<usize>) -> Option<(Number, Number)> {
        let numbers = self.model.numbers();
        let positive = half.sign > 0.0;
        let (lower, upper) = self.model.row_sides(half.row);
        let side = numbers.exact(if positive { upper? } else { lower? }).clone();
        let mut rest = if positive { side } else { -side };
        let mut own = Number::ZERO;
        for &(column, a) in self.model.row_entries(half.row) {
            let a = numbers.exact(a);
            let a = if positive { a.clone() } else { -a.clone() };
            if Some(column.index()) == left_out {
                own = a;
                continue;
            }
            let (lower, upper) = &self.bounds[column.index()];
            let bound = if a > Number::ZERO { lower.as_ref() } else { upper.as_ref() };
            rest -= a * bound?;
        }
        Some((rest, own))
    }

    fn is_broken(&self, half: &Half) -> bool {
        self.rest(half, None).is_some_and(|(rest, _)| rest < Number::ZERO)
    }

    fn tighten(&mut self, propagator: &Propagator, half: &Half, (column, at_most): (usize, bool)) {
        let Some((rest, a)) = self.rest(half, Some(column)) else { return };
        if a == Number::ZERO {
            return;
        }
        let bound = rest / a;
        let bound = Number::from(if at_most { bound.floor() } else { bound.ceil() });
        let float = nearest_f64(&bound);
        let (lower, upper) = &mut self.bounds[column];
        let (own, other) = if at_most { (upper, &*lower) } else { (lower, &*upper) };
        let tighter = |own: &Number| if at_most { bound < *own } else { bound > *own };
        if float.abs() > LARGEST || !own.as_ref().is_none_or(tighter) {
            return;
        }
        let crosses = |other: &Number| if at_most { bound < *other } else { bound > *other };
        self.done.infeasible = other.as_ref().is_some_and(crosses);
        *own = Some(bound);
        self.near[column] = near(&self.bounds[column]);
        let side = if at_most { Side::AtMost } else { Side::AtLeast };
        let branch = Branch { column: ColumnId::from_index(column), side, bound: float + 0.0 };
        self.done.tightened.push(branch);
        for &other in &propagator.of_column[column] {
            self.enqueue(other);
        }
    }
}

fn near((lower, upper): &Bounds) -> (f64, f64) {
    let lower = lower.as_ref().map_or(f64::NEG_INFINITY, nearest_f64);
    (lower, upper.as_ref().map_or(f64::INFINITY, nearest_f64))
}

#[cfg(test)]
mod tests {
    use model::{ModelBuilder, Sense};

    use super::*;
    use crate::tests::support::{row, spec};

    /// 3x + 5y ≥ 14 and x + y ≤ 3 over 0 … 3: y ≥ 1, so x ≤ 2, so y ≥ 2, so x ≤ 1, so y ≥ 3, so
    /// x ≤ 0; x + y ≥ 7 cannot be met.
    #[test]
    fn rows_bound_their_columns() {
        let model = |third: i64| {
            let mut b = ModelBuilder::new("t", Sense::Minimise);
            let x = b.column(&[], &spec((0, 3), 1, true)).unwrap();
            let y = b.column(&[], &spec((0, 3), 1, true)).unwrap();
            b.row(&[], row(&[(x, 3), (y, 5)], Some(14), None)).unwrap();
            b.row(&[], row(&[(x, 1), (y, 1)], None, Some(3))).unwrap();
            b.row(&[], row(&[(x, 1), (y, 1)], Some(third), None)).unwrap();
            b.build()
        };
        let run = |third| {
            let model = model(third);
            let three = || (Some(Number::ZERO), Some(Number::from(3)));
            let mut bounds = vec![three(), three()];
            let done = Propagator::new(&model).run(&model, &mut bounds, None);
            (done.infeasible, bounds)
        };
        let bounds = |low: i32, high: i32| (Some(Number::from(low)), Some(Number::from(high)));
        assert_eq!(run(0), (false, vec![bounds(0, 0), bounds(3, 3)]));
        assert!(run(7).0);
    }
}
