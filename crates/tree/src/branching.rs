//! Which column to branch on, and what has been learnt of each.
//!
//! Pseudocosts (Bénichou et al. 1971): the gain of the bound for each unit that a column is
//! moved down or up, as a mean over the branchings seen.

use model::{ColumnId, Model};

use crate::event::{Branch, Side};
use crate::settings::Branching;

/// How far from a whole number a value counts as fractional.
pub(crate) const INTEGRALITY: f64 = 1e-6;

/// Scores that differ by less are ties.
const TIE: f64 = 1e-9;

/// The least score of a side, so that a side without gain does not hide the other
/// (Achterberg, Koch, Martin 2005).
const LEAST_GAIN: f64 = 1e-6;

/// A column to branch on: `column ≤ floor` and `column ≥ floor + 1`.
#[derive(Debug, Clone, Copy, PartialEq)]
pub(crate) struct Choice {
    pub(crate) column: ColumnId,
    /// Its value in the relaxation.
    pub(crate) value: f64,
    /// The largest value of the lower side.
    pub(crate) floor: f64,
}

impl Choice {
    /// Split at a fractional value.
    fn new(column: ColumnId, value: f64) -> Self {
        Self { column, value, floor: value.floor() }
    }

    /// The two branchings with how far each moves the column.
    pub(crate) fn sides(&self) -> [(Branch, f64); 2] {
        let ceiling = self.floor + 1.0;
        let down = Branch { column: self.column, side: Side::AtMost, bound: self.floor + 0.0 };
        let up = Branch { column: self.column, side: Side::AtLeast, bound: ceiling + 0.0 };
        [(down, (self.value - self.floor).abs()), (up, (ceiling - self.value).abs())]
    }
}

/// Gains seen on one side of one column.
#[derive(Debug, Clone, Copy, Default)]
struct Gain {
    sum: f64,
    count: u32,
}

impl Gain {
    fn note(&mut self, gain: f64) {
        self.sum += gain;
        self.count += 1;
    }

    fn mean(self) -> Option<f64> {
        (self.count > 0).then(|| self.sum / f64::from(self.count))
    }
}

/// What has been learnt, and the whole columns.
#[derive(Debug)]
pub(crate) struct Chooser {
    whole: Vec<ColumnId>,
    /// The place of each column's variable in the list of priorities; low goes first.
    rank: Vec<usize>,
    down: Vec<Gain>,
    up: Vec<Gain>,
    all_down: Gain,
    all_up: Gain,
}

impl Chooser {
    /// `priority` names variables, first those to be branched on first.
    pub(crate) fn new(model: &Model, priority: &[String]) -> Self {
        let columns = model.columns();
        let whole =
            (0..columns.len()).filter(|&j| columns[j].integer).map(ColumnId::from_index).collect();
        let none = vec![Gain::default(); columns.len()];
        let mut chooser = Self {
            whole,
            rank: Vec::new(),
            down: none.clone(),
            up: none,
            all_down: Gain::default(),
            all_up: Gain::default(),
        };
        chooser.prefer(model, priority);
        chooser
    }

    /// Has these variables branched on before all others, in this order. `O(columns)`.
    pub(crate) fn prefer(&mut self, model: &Model, priority: &[String]) {
        let place = |name: &String| priority.iter().position(|wanted| wanted == name);
        let rank = |variable: model::VariableId| {
            let variable = model.variables().get(variable.index());
            variable.and_then(|v| place(&v.name)).unwrap_or(priority.len())
        };
        self.rank = model.columns().iter().map(|column| rank(column.variable)).collect();
    }

    /// Notes that a branching that moved a column by `distance` raised the bound by `gain`.
    pub(crate) fn learn(&mut self, branch: &Branch, distance: f64, gain: f64) {
        if distance < INTEGRALITY || !gain.is_finite() {
            return;
        }
        let unit = if gain > 0.0 { gain / distance } else { 0.0 };
        let (one, all) = match branch.side {
            Side::AtMost => (&mut self.down, &mut self.all_down),
            Side::AtLeast => (&mut self.up, &mut self.all_up),
        };
        one[branch.column.index()].note(unit);
        all.note(unit);
    }

    /// How many whole columns have a fractional value.
    pub(crate) fn fractional(&self, x: &[f64]) -> u32 {
        let count = self.whole.iter().filter(|j| is_fractional(x[j.index()])).count();
        u32::try_from(count).unwrap_or(u32::MAX)
    }

    /// The fractional column that `rule` prefers; ties go to the lower column.
    pub(crate) fn choose(&self, rule: Branching, x: &[f64]) -> Option<Choice> {
        let mut best: Option<(f64, Choice)> = None;
        for choice in self.candidates(x) {
            let score = match rule {
                Branching::MostFractional | Branching::ByHand => {
                    smaller(choice.value - choice.floor, choice.floor + 1.0 - choice.value)
                }
                Branching::Pseudocost | Branching::Strong | Branching::Reliability => {
                    self.score(&choice)
                }
            };
            if best.is_none_or(|(top, _)| is_better(score, top)) {
                best = Some((score, choice));
            }
        }
        best.map(|(_, choice)| choice)
    }

    /// The fractional columns of the first variable that has one, in order.
    pub(crate) fn candidates(&self, x: &[f64]) -> Vec<Choice> {
        let fractional = self.whole.iter().filter(|j| is_fractional(x[j.index()]));
        let first = fractional.clone().map(|j| self.rank[j.index()]).min();
        let first = fractional.filter(|j| Some(self.rank[j.index()]) == first);
        first.map(|&column| Choice::new(column, x[column.index()])).collect()
    }

    /// The product of the expected gains of both sides.
    pub(crate) fn score(&self, choice: &Choice) -> f64 {
        let [down, up] = self.expected(choice);
        product(down, up)
    }

    /// The expected gains of both sides.
    fn expected(&self, choice: &Choice) -> [f64; 2] {
        let fraction = choice.value - choice.floor;
        let j = choice.column.index();
        let expected = |one: Gain, all: Gain| one.mean().or(all.mean()).unwrap_or(1.0);
        let down = expected(self.down[j], self.all_down) * fraction;
        let up = expected(self.up[j], self.all_up) * (1.0 - fraction);
        [down, up]
    }

    /// The expected gains of both sides of every fractional column, in order; empty before a gain
    /// was seen on both sides.
    pub(crate) fn expectations(&self, x: &[f64]) -> Vec<(ColumnId, [f64; 2])> {
        if self.all_down.count == 0 || self.all_up.count == 0 {
            return Vec::new();
        }
        let fractional = self.whole.iter().filter(|j| is_fractional(x[j.index()]));
        let expected =
            |&column: &ColumnId| (column, self.expected(&Choice::new(column, x[column.index()])));
        fractional.map(expected).collect()
    }

    /// Whether so many gains are known on both sides of a column.
    pub(crate) fn is_reliable(&self, column: ColumnId, least: u32) -> bool {
        let j = column.index();
        self.down[j].count >= least && self.up[j].count >= least
    }

    /// What the best solution under each child is estimated to cost over the bound: the less
    /// dear rounding of every fractional column but the one branched on.
    pub(crate) fn estimates(&self, x: &[f64], branched: &Choice) -> [f64; 2] {
        let mut rest = 0.0;
        for &column in self.whole.iter().filter(|&&j| j != branched.column) {
            if is_fractional(x[column.index()]) {
                let [down, up] = self.expected(&Choice::new(column, x[column.index()]));
                rest += smaller(down, up);
            }
        }
        self.expected(branched).map(|side| side + rest)
    }

    /// A column to branch on where no value is fractional and still the point is no
    /// solution: the first whole column that is not fixed, split next to its value.
    pub(crate) fn any(&self, x: &[f64], bounds: impl Fn(ColumnId) -> (f64, f64)) -> Option<Choice> {
        self.whole.iter().find_map(|&column| split(column, x[column.index()], bounds(column)))
    }

    /// The whole columns in order.
    pub(crate) fn whole(&self) -> &[ColumnId] {
        &self.whole
    }
}

/// A whole column split at its value: between the whole numbers beside a fractional one, else
/// next to it, so that both sides are smaller. `None` when its bounds leave one value.
pub(crate) fn split(column: ColumnId, value: f64, (lower, upper): (f64, f64)) -> Option<Choice> {
    if lower >= upper {
        return None;
    }
    if is_fractional(value) {
        return Some(Choice::new(column, value));
    }
    let near = value.round();
    let floor = if near >= upper { near - 1.0 } else { near };
    Some(Choice { column, value, floor })
}

/// The product score of the gains of both sides.
pub(crate) fn product(down: f64, up: f64) -> f64 {
    larger(down, LEAST_GAIN) * larger(up, LEAST_GAIN)
}

/// Whether a score is better than another, and not only by rounding.
pub(crate) fn is_better(score: f64, top: f64) -> bool {
    score > top + TIE * (1.0 + top)
}

/// Added to a number and taken off again it leaves the nearest whole one: the sum has no room for a
/// fraction. For numbers below 2⁵¹ (Hacker's Delight, 2nd ed., section 17-3, from memory).
const SHIFT: f64 = 6_755_399_441_055_744.0;

/// Whether a value of a whole column is fractional. Every node asks it of every whole column several
/// times, and processors without an instruction for it round by a call.
pub(crate) fn is_fractional(value: f64) -> bool {
    let near = if value.abs() < 1e15 { (value + SHIFT) - SHIFT } else { value.round() };
    (value - near).abs() > INTEGRALITY
}

fn smaller(a: f64, b: f64) -> f64 {
    if a < b { a } else { b }
}

fn larger(a: f64, b: f64) -> f64 {
    if a > b { a } else { b }
}

#[cfg(test)]
mod tests {
    use super::*;
    use model::{ColumnSpec, ModelBuilder, Number, Sense};

    /// What a call of `round` says, at ties, at the tolerance, and where nothing is left to add to.
    #[test]
    fn fractions_are_those_that_rounding_leaves() {
        let by_rounding = |value: f64| (value - value.round()).abs() > INTEGRALITY;
        let near = [0.0, 0.5, -0.5, 1.0 / 3.0, INTEGRALITY, -INTEGRALITY, 1e-12, 0.999, 0.4999];
        let far = [0.0, 1.0, -1.0, 2.5e9, -7e14, 9.99e14, 1.5e15, -4.5e15, 1e18, -1e300];
        for value in far.iter().flat_map(|far| near.map(|near| far + near)) {
            assert_eq!(is_fractional(value), by_rounding(value), "{value}");
        }
        assert!(is_fractional(7e8 + 0.5) && !is_fractional(-3.0) && !is_fractional(f64::INFINITY));
    }

    fn chooser(columns: usize) -> Chooser {
        let mut builder = ModelBuilder::new("t", Sense::Minimise);
        let spec = ColumnSpec {
            lower: Some(Number::ZERO),
            upper: None,
            cost: Number::ZERO,
            integer: true,
        };
        for _ in 0..columns {
            builder.column(&[], &spec).unwrap();
        }
        Chooser::new(&builder.build(), &[])
    }

    #[test]
    fn most_fractional_breaks_ties_by_the_column() {
        let x = [1.0, 2.25, 0.4, 3.6, 0.4 + 1e-12];
        let choice = chooser(5).choose(Branching::MostFractional, &x).unwrap();
        assert_eq!((choice.column, choice.floor), (ColumnId(2), 0.0));
        assert_eq!(chooser(2).choose(Branching::MostFractional, &[1.0, 2.0 + 1e-8]), None);
    }

    #[test]
    fn pseudocosts_start_as_most_fractional_and_then_learn() {
        let mut chooser = chooser(3);
        let x = [0.3, 0.5, 0.3];
        assert_eq!(chooser.choose(Branching::Pseudocost, &x).unwrap().column, ColumnId(1));
        for side in [Side::AtMost, Side::AtLeast] {
            chooser.learn(&Branch { column: ColumnId(1), side, bound: 0.0 }, 0.5, 0.5);
            chooser.learn(&Branch { column: ColumnId(2), side, bound: 0.0 }, 0.5, 10.0);
        }
        assert_eq!(chooser.choose(Branching::Pseudocost, &x).unwrap().column, ColumnId(2));
        let expected = chooser.expectations(&x);
        assert_eq!(expected.len(), 3);
        assert_eq!(expected[2], (ColumnId(2), chooser.expected(&Choice::new(ColumnId(2), x[2]))));
    }

    #[test]
    fn any_splits_the_range_so_that_both_sides_are_smaller() {
        let chooser = chooser(3);
        let bounds = [(1.0, 1.0), (0.0, 3.0), (0.0, 1.0)];
        let of = |c: ColumnId| bounds[c.index()];
        assert_eq!(chooser.any(&[1.0, 2.0, 0.0], of).unwrap().floor, 2.0);
        assert_eq!(chooser.any(&[1.0, 3.0, 0.0], of).unwrap().floor, 2.0);
        assert_eq!(chooser.any(&[1.0, 3.0, 0.0], |_| (1.0, 1.0)), None);
    }
}
