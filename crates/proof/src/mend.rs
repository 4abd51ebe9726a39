//! Mending multipliers: a column without a finite bound must not have a reduced cost of the
//! wrong sign. The multiplier of one row that holds the column is moved just as far as the
//! reduced cost needs, the sum is taken anew, and so on for a few rounds.

use std::cmp::Ordering;
use std::collections::BTreeMap;

use dashu_int::{IBig, ops::Abs};
use model::Number;

use crate::kernel::{Objective, Open, Sides, Sum, sum};
use crate::multipliers::{Multipliers, has_side};
use crate::rows::{Bounds, ExactRows, common_denominator};

/// Rounds of mending.
const ROUNDS: usize = 4;

/// The sum after mending; `None` when some column stays open.
/// `O(non-zeros)` a round.
pub(crate) fn mended(
    rows: &ExactRows,
    objective: Objective,
    bounds: &[Bounds],
    (mut multipliers, mut open): (Multipliers, Vec<Open>),
) -> Option<Number> {
    for _ in 0..ROUNDS {
        let changes = Choice::new(rows, bounds, &multipliers, &open).changes()?;
        apply(&mut multipliers, &changes);
        match sum(rows, objective, Sides { given: bounds, implied: None }, &multipliers) {
            Sum::Bound(value) => return Some(value),
            Sum::Open(next) => open = next,
        }
    }
    None
}

/// Adds the changes, over a larger common denominator where they need one.
fn apply(multipliers: &mut Multipliers, changes: &BTreeMap<usize, Number>) {
    let factor = common_denominator(changes.values());
    if !factor.is_one() {
        let times = IBig::from(factor.clone());
        multipliers.values.iter_mut().for_each(|value| *value *= &times);
        multipliers.denominator *= &factor;
    }
    for (&row, change) in changes {
        let whole = change.numerator() * IBig::from(&factor / change.denominator());
        multipliers.values[row] += whole;
    }
}

/// A way to close one column: a change of the multiplier of one row.
struct Correction {
    row: usize,
    change: Number,
    /// How many columns it may open, and how far it moves the multiplier.
    cost: (usize, Number),
}

/// The search for the best correction of each open column.
struct Choice<'a> {
    rows: &'a ExactRows,
    bounds: &'a [Bounds],
    multipliers: &'a Multipliers,
    open: BTreeMap<usize, &'a Open>,
    chosen: BTreeMap<usize, Correction>,
}

impl<'a> Choice<'a> {
    fn new(
        rows: &'a ExactRows,
        bounds: &'a [Bounds],
        multipliers: &'a Multipliers,
        open: &'a [Open],
    ) -> Self {
        let open = open.iter().map(|open| (open.column, open)).collect();
        Self { rows, bounds, multipliers, open, chosen: BTreeMap::new() }
    }

    /// The changes by row; `None` when a column has no correction. Of two changes of
    /// one row the larger is taken.
    fn changes(mut self) -> Option<BTreeMap<usize, Number>> {
        for row in 0..self.rows.row_count() {
            self.look_at(row);
        }
        if self.open.is_empty() || self.chosen.len() < self.open.len() {
            return None;
        }
        let mut changes: BTreeMap<usize, Number> = BTreeMap::new();
        for correction in self.chosen.into_values() {
            let change = changes.entry(correction.row).or_insert(Number::ZERO);
            if correction.change.clone().abs() > change.clone().abs() {
                *change = correction.change;
            }
        }
        Some(changes)
    }

    /// Compares the corrections that a row offers with those found before.
    fn look_at(&mut self, row: usize) {
        let (columns, coefficients) = self.rows.entries(row);
        let mut opened: Option<(usize, usize)> = None;
        for (k, &column) in columns.iter().enumerate() {
            let Some(open) = self.open.get(&(column as usize)) else { continue };
            let change = needed(open, &coefficients.at(k), &self.bounds[open.column]);
            let value = Number::from(self.multipliers.values[row].clone()) + &change;
            if !has_side(self.rows, row, value.cmp(&Number::ZERO)) {
                continue;
            }
            let (up, down) = *opened.get_or_insert_with(|| self.opened(row));
            let opened = if change > Number::ZERO { up } else { down };
            let cost = (opened, change.clone().abs());
            if self.chosen.get(&open.column).is_none_or(|old| cost < old.cost) {
                self.chosen.insert(open.column, Correction { row, change, cost });
            }
        }
    }

    /// How many columns a higher and a lower multiplier of a row may open.
    fn opened(&self, row: usize) -> (usize, usize) {
        let (columns, coefficients) = self.rows.entries(row);
        let (mut up, mut down) = (0, 0);
        for (k, &column) in columns.iter().enumerate() {
            let (lower, upper) = &self.bounds[column as usize];
            let (low, high) = (usize::from(lower.is_none()), usize::from(upper.is_none()));
            let positive = coefficients.at(k) > IBig::ZERO;
            up += if positive { high } else { low };
            down += if positive { low } else { high };
        }
        (up, down)
    }
}

/// The least change of a multiplier with coefficient `a` that takes the reduced cost to 0,
/// or, where the column is not free, to the next whole number of steps over it.
fn needed(open: &Open, a: &IBig, bounds: &Bounds) -> Number {
    let change = Number::from(open.reduced.clone()) / Number::from(a.clone());
    if bounds.0.is_none() && bounds.1.is_none() {
        return change;
    }
    match change.cmp(&Number::ZERO) {
        Ordering::Less => Number::from(change.floor()),
        _ => Number::from(change.ceil()),
    }
}
