//! Iterative refinement (Gleixner, Steffy, Wolter 2016): a basis that is not optimal in exact
//! arithmetic, by less than a floating-point kernel sees, is optimal for a problem in which the
//! kernel does see it. With the exact x and y of the basis, d = c − A'y, and the scales P and D,
//!
//! ```text
//! min  D d'z,   P (L − Ax) ≤ A z ≤ P (U − Ax),   P (l − x) ≤ z ≤ P (u − x)
//! ```
//!
//! has the same optimal bases as the problem itself where all rows are equations, and what was
//! broken by 1/P is broken by 1. A row with two different sides would need a cost for its slack:
//! its multiplier stays in the costs instead, or, when it is large, the row is frozen at its side,
//! as columns of large reduced cost are. What is frozen may be wrong; the basis that comes back is
//! only a proposal, and is checked.

use dashu_int::{
    IBig, UBig,
    ops::{Abs, BitTest},
};
use model::{Number, nearest_f64};

use crate::basis::{Standing, Standings, Vertex, activity, reduced_costs};
use crate::kernel::Objective;
use crate::multipliers::Multipliers;
use crate::rows::{Bounds, ExactRows};
use crate::vertex::Excess;

/// Sides further away than this count as missing: they are not what the basis is about.
const FAR: f64 = 1e15;

/// Scaled reduced costs and multipliers over this freeze what they belong to.
const DEAR: f64 = 1e6;

/// The largest binary exponent of a scale.
const MOST_BITS: usize = 400;

/// A linear program with the rows and columns of the relaxation and other costs, bounds and
/// sides; to be minimised, from the basis in hand.
#[derive(Debug, Clone, PartialEq)]
pub struct Residual {
    /// One cost a column.
    pub costs: Vec<f64>,
    /// The bounds of each column.
    pub bounds: Vec<(f64, f64)>,
    /// The sides of each row of the relaxation.
    pub sides: Vec<(f64, f64)>,
    /// Columns and rows that are frozen where they stand.
    pub(crate) frozen_columns: Vec<bool>,
    pub(crate) frozen_rows: Vec<bool>,
}

/// What a basis gives exactly.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Exact<'a> {
    pub(crate) bounds: &'a [Bounds],
    pub(crate) basis: &'a Standings,
    pub(crate) vertex: &'a Vertex,
    pub(crate) multipliers: &'a Multipliers,
}

/// The problem that shows what is broken, `O(non-zeros)`; `None` where nothing is.
pub(crate) fn residual(
    rows: &ExactRows,
    exact: Exact<'_>,
    excesses: &[Excess],
) -> Option<Residual> {
    let reduced = prices(rows, exact.multipliers);
    let primal = excesses.iter().map(|excess| &excess.amount).max();
    let wrong = wrong_sign(rows, exact, &reduced);
    if primal.is_none() && wrong.is_none() {
        return None;
    }
    let (primal, dual) = (power(primal), power(wrong.as_ref()));
    let is_dear = |y: &Number| dual > Number::ONE && nearest_f64(&(y * &dual)).abs() > DEAR;
    let frozen_rows = frozen_rows(rows, exact, is_dear);
    let mut kept = exact.multipliers.clone();
    for (row, value) in kept.values.iter_mut().enumerate() {
        let scaled = &rows.rows[row];
        let fixed = scaled.lower.is_some() && scaled.lower == scaled.upper;
        if !fixed && !frozen_rows.get(row).is_some_and(|&frozen| frozen) {
            *value = IBig::ZERO;
        }
    }
    let costs = prices(rows, &kept);
    let standings = exact.basis.columns.iter().zip(&reduced);
    let frozen_columns: Vec<bool> =
        standings.map(|(&standing, d)| standing != Standing::Basic && is_dear(d)).collect();
    Some(Residual {
        bounds: moved_bounds(exact, &primal, &frozen_columns),
        sides: moved_sides(rows, exact, &primal, &frozen_rows),
        costs: costs.into_iter().map(|d| nearest_f64(&(d * &dual))).collect(),
        frozen_columns,
        frozen_rows,
    })
}

impl Residual {
    /// The basis that an optimal one of this problem stands for: what was frozen is where it was.
    pub(crate) fn read(&self, before: &Standings, mut after: Standings) -> Standings {
        let thaw = |frozen: &[bool], before: &[Standing], after: &mut [Standing]| {
            for ((&frozen, &before), after) in frozen.iter().zip(before).zip(after) {
                if frozen && *after != Standing::Basic {
                    *after = before;
                }
            }
        };
        thaw(&self.frozen_columns, &before.columns, &mut after.columns);
        thaw(&self.frozen_rows, &before.rows, &mut after.rows);
        after
    }
}

/// The reduced costs in the units of the model, for a minimisation.
fn prices(rows: &ExactRows, multipliers: &Multipliers) -> Vec<Number> {
    let scale = &multipliers.denominator * &rows.cost_scale;
    let reduced = reduced_costs(rows, Objective::Costs, multipliers).into_iter();
    let price = |d: IBig| match d.is_zero() {
        true => Number::ZERO,
        false => Number::from_parts(d, scale.clone()),
    };
    reduced.map(price).collect()
}

/// The multiplier of a row in the units of the model.
fn multiplier(rows: &ExactRows, multipliers: &Multipliers, row: usize) -> Number {
    let scale = &multipliers.denominator * &rows.cost_scale;
    let value = &multipliers.values[row] * IBig::from(rows.rows[row].scale.clone());
    Number::from_parts(value, scale)
}

fn frozen_rows(rows: &ExactRows, exact: Exact<'_>, is_dear: impl Fn(&Number) -> bool) -> Vec<bool> {
    let frozen = |(row, &standing): (usize, &Standing)| {
        standing != Standing::Basic
            && !exact.multipliers.values[row].is_zero()
            && is_dear(&multiplier(rows, exact.multipliers, row))
    };
    exact.basis.rows.iter().enumerate().map(frozen).collect()
}

fn moved_bounds(exact: Exact<'_>, primal: &Number, frozen: &[bool]) -> Vec<(f64, f64)> {
    let values = exact.vertex.values.iter().zip(exact.bounds).zip(frozen);
    let pair = |((value, (lower, upper)), &frozen): ((&IBig, &Bounds), &bool)| {
        if frozen {
            return (0.0, 0.0);
        }
        let value = Number::from_parts(value.clone(), exact.vertex.denominator.clone());
        let moved = |bound: &Number| nearest_f64(&((bound - &value) * primal));
        (below(lower.as_ref().map(moved)), above(upper.as_ref().map(moved)))
    };
    values.map(pair).collect()
}

fn moved_sides(
    rows: &ExactRows,
    exact: Exact<'_>,
    primal: &Number,
    frozen: &[bool],
) -> Vec<(f64, f64)> {
    let denominator = &exact.vertex.denominator;
    let times = IBig::from(denominator.clone());
    let pair = |(row, &frozen): (usize, &bool)| {
        if frozen {
            return (0.0, 0.0);
        }
        let scaled = &rows.rows[row];
        let value = activity(rows, row, &exact.vertex.values);
        let moved = |side: &IBig| {
            let rest = side * &times - &value;
            nearest_f64(&(Number::from_parts(rest, denominator * &scaled.scale) * primal))
        };
        (below(scaled.lower.as_ref().map(moved)), above(scaled.upper.as_ref().map(moved)))
    };
    frozen.iter().enumerate().map(pair).collect()
}

/// The largest reduced cost or multiplier whose sign does not go with where it stands.
fn wrong_sign(rows: &ExactRows, exact: Exact<'_>, reduced: &[Number]) -> Option<Number> {
    let columns = exact.basis.columns.iter().zip(exact.bounds).zip(reduced);
    let columns = columns.filter_map(|((&standing, (lower, upper)), d)| {
        let fixed = lower.is_some() && lower == upper;
        let at = Held::new(standing, lower.is_some(), upper.is_some());
        (!fixed && at.is_wrong(d)).then(|| d.clone().abs())
    });
    let standings = exact.basis.rows.iter().enumerate();
    let multipliers = standings.filter_map(|(row, &standing)| {
        let scaled = &rows.rows[row];
        let fixed = scaled.lower.is_some() && scaled.lower == scaled.upper;
        if fixed || exact.multipliers.values[row].is_zero() {
            return None;
        }
        let y = multiplier(rows, exact.multipliers, row);
        let at = Held::new(standing, scaled.lower.is_some(), scaled.upper.is_some());
        at.is_wrong(&y).then(|| y.abs())
    });
    columns.chain(multipliers).max()
}

/// What holds a variable that is not basic.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Held {
    Basic,
    Below,
    Above,
    Not,
}

impl Held {
    fn new(standing: Standing, has_lower: bool, has_upper: bool) -> Self {
        match (standing, has_lower, has_upper) {
            (Standing::Basic, _, _) => Self::Basic,
            (Standing::Upper, _, true) | (Standing::Lower, false, true) => Self::Above,
            (_, true, _) => Self::Below,
            (_, false, false) => Self::Not,
        }
    }

    /// Whether a reduced cost of this sign says that the variable is to move.
    fn is_wrong(self, d: &Number) -> bool {
        match self {
            Self::Basic => false,
            Self::Below => *d < Number::ZERO,
            Self::Above => *d > Number::ZERO,
            Self::Not => !d.is_zero(),
        }
    }
}

/// The power of two next to 1/amount; 1 where nothing is broken.
fn power(amount: Option<&Number>) -> Number {
    let Some(amount) = amount else { return Number::ONE };
    let inverse = Number::ONE / amount;
    let (top, bottom) = (inverse.numerator().bit_len(), inverse.denominator().bit_len());
    let power = |bits: usize| Number::from(UBig::ONE << bits.min(MOST_BITS));
    if top >= bottom { power(top - bottom) } else { Number::ONE / power(bottom - top) }
}

fn below(side: Option<f64>) -> f64 {
    side.filter(|side| side.abs() < FAR).unwrap_or(f64::NEG_INFINITY)
}

fn above(side: Option<f64>) -> f64 {
    side.filter(|side| side.abs() < FAR).unwrap_or(f64::INFINITY)
}
