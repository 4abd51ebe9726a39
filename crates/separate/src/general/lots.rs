//! (l,S) inequalities of a chain of stocks: `s_{k−1} + Σ_S x + Σ_{L∖S} D_tl y ≥ D_kl` for the periods
//! L = k … l, where `x ≤ M y` and D_tl is the demand of t … l (Barany, Van Roy, Wolsey 1984).
//!
//! A chain is recognised by its equations: a stock stands in two of them, with opposite signs, and
//! takes what is left of one into the next. Each x with such a bound goes to the side, S or not, on
//! which it counts less at the point, so the best (l,S) of a pair k, l is found.
//!
//! Why it holds: let t be the first period with a y outside S that is 1. Until t − 1 those x are 0, so
//! `s_{k−1} + Σ_S x ≥ D_{k,t−1}` by the sum of the equations, and y adds D_tl. The derivation has one
//! case for each such y.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Number, Row, nearest_f64};

use super::aggregate::Frame;
use super::derivation::{Combination, Derivation};
use super::flow_cover::VariableBounds;
use super::mir::{LEAST, efficacy};
use super::{Class, GeneralCut};

/// Periods of a chain at most.
const MOST_PERIODS: usize = 100;

/// What comes into a period while its binary is 1.
#[derive(Debug, Clone)]
struct Input {
    x: ColumnId,
    /// Its coefficient in the scaled equation.
    a: Number,
    y: ColumnId,
    /// The row `x ≤ M y` and the multiplier that gives x the coefficient 1.
    bound: (usize, Number),
}

/// An equation of a chain, scaled so that the stocks cancel.
#[derive(Debug, Clone)]
struct Period {
    row: usize,
    scale: Number,
    demand: Number,
    inputs: Vec<Input>,
    /// The stock that comes in from the period before.
    stock: Option<ColumnId>,
}

/// The chains of stocks among some rows.
#[derive(Debug, Clone, Default)]
pub struct Lots {
    chains: Vec<Vec<Period>>,
}

/// The equations with their signs, and where each column stands in them.
struct Equations<'a> {
    rows: &'a [Row],
    frame: &'a Frame,
    bounds: VariableBounds,
    sign: BTreeMap<usize, Number>,
    of: BTreeMap<ColumnId, Vec<(usize, Number)>>,
}

impl Lots {
    /// Finds the chains. `O(entries · log)`.
    #[must_use]
    pub fn new(rows: &[Row], frame: &Frame) -> Self {
        let equations = Equations::new(rows, frame);
        let next: BTreeMap<usize, (usize, ColumnId)> = equations.links();
        let later: BTreeSet<usize> = next.values().map(|(row, _)| *row).collect();
        let firsts = next.keys().filter(|row| !later.contains(row));
        let chains = firsts.map(|&first| equations.chain(first, &next)).collect();
        Self { chains }
    }

    /// In how many places a cut may begin: a chain and its first period.
    #[must_use]
    pub fn places(&self) -> usize {
        self.chains.iter().map(Vec::len).sum()
    }

    /// The most violated (l,S) that begins at a place. `O(periods²)`.
    #[must_use]
    pub fn cut(&self, place: usize, rows: &[Row], frame: &Frame, x: &[f64]) -> Option<GeneralCut> {
        let mut first = place;
        let chain = self.chains.iter().find(|chain| {
            let here = first < chain.len();
            first -= if here { 0 } else { chain.len() };
            here
        })?;
        let mut best: Option<(f64, usize)> = None;
        for last in first..chain.len() {
            let short = shortfall(&chain[first..=last], rows, x);
            if short > best.map_or(LEAST, |best| best.0) {
                best = Some((short, last));
            }
        }
        written(&chain[first..=best?.1], rows, frame, x)
    }
}

impl<'a> Equations<'a> {
    fn new(rows: &'a [Row], frame: &'a Frame) -> Self {
        let bounds = VariableBounds::new(rows, frame);
        let (mut sign, mut of) = (BTreeMap::new(), BTreeMap::<ColumnId, Vec<_>>::new());
        for (number, row) in rows.iter().enumerate() {
            let Some(side) = row.lower.as_ref().filter(|_| row.lower == row.upper) else {
                continue;
            };
            let input = row.entries.iter().find(|(c, _)| !bounds.of(*c).is_empty());
            let turned = input.map_or(*side < Number::ZERO, |(_, a)| *a < Number::ZERO);
            let turn = if turned { -Number::ONE } else { Number::ONE };
            for (column, a) in &row.entries {
                of.entry(*column).or_default().push((number, a * &turn));
            }
            sign.insert(number, turn);
        }
        Self { rows, frame, bounds, sign, of }
    }

    /// For each equation the next one of its chain, and the stock between them.
    fn links(&self) -> BTreeMap<usize, (usize, ColumnId)> {
        let mut next = BTreeMap::new();
        let mut taken = BTreeSet::new();
        for (&column, places) in &self.of {
            let &[(a, ref left), (b, ref right)] = places.as_slice() else { continue };
            let low = &self.frame.bounds[column.index()].0;
            let stock = low.as_ref().is_some_and(|low| *low >= Number::ZERO)
                && !self.frame.is_binary(column);
            let falls = (*left < Number::ZERO, *right < Number::ZERO);
            let (from, to) = match falls {
                (true, false) => (a, b),
                (false, true) => (b, a),
                _ => continue,
            };
            if stock && !next.contains_key(&from) && taken.insert(to) {
                next.insert(from, (to, column));
            }
        }
        next
    }

    fn chain(&self, first: usize, next: &BTreeMap<usize, (usize, ColumnId)>) -> Vec<Period> {
        let mut chain = vec![self.period(first, self.sign[&first].clone(), None)];
        let mut here = first;
        while let Some(&(row, stock)) = next.get(&here).filter(|_| chain.len() < MOST_PERIODS) {
            let of = |number: usize| self.of[&stock].iter().find(|(row, _)| *row == number);
            let (Some((_, left)), Some((_, right))) = (of(here), of(row)) else { break };
            let before = &chain[chain.len() - 1].scale * &self.sign[&here];
            let scale = -(before * left / right) * &self.sign[&row];
            chain.push(self.period(row, scale, Some(stock)));
            here = row;
        }
        chain
    }

    fn period(&self, row: usize, scale: Number, stock: Option<ColumnId>) -> Period {
        let entries = self.rows[row].entries.iter();
        let input = |(x, a): &(ColumnId, Number)| {
            let a = a * &scale;
            let single = self.of[x].len() == 1 && a > Number::ZERO;
            let mut bounds = self.bounds.of(*x).iter().filter(|_| single);
            let (bound, y) = bounds.find_map(|&bound| self.shut(*x, bound))?;
            Some(Input { x: *x, a, y, bound })
        };
        let inputs = entries.filter_map(input).collect();
        let demand = self.rows[row].upper.clone().unwrap_or_default() * &scale;
        Period { row, scale, demand, inputs, stock }
    }

    /// Whether a row says that x is at most 0 while its binary is 0: the row with its multiplier, and
    /// the binary.
    fn shut(&self, x: ColumnId, bound: usize) -> Option<((usize, Number), ColumnId)> {
        let row = &self.rows[bound];
        let (_, a) = row.entries.iter().find(|(c, _)| *c == x)?;
        let (y, m) = row.entries.iter().find(|(c, _)| *c != x)?;
        let side = if *a > Number::ZERO { &row.upper } else { &row.lower }.as_ref()?;
        let falls = (*a > Number::ZERO) != (*m > Number::ZERO);
        let one = Number::ONE / a;
        (side.is_zero() && falls).then_some(((bound, one), *y))
    }
}

/// How far a point is from the best (l,S) over these periods, roughly.
fn shortfall(periods: &[Period], rows: &[Row], x: &[f64]) -> f64 {
    let (mut left, mut met) = (0.0, 0.0);
    for (place, period) in periods.iter().enumerate().rev() {
        left += nearest_f64(&period.demand);
        for (column, a) in &rows[period.row].entries {
            let a = nearest_f64(a) * nearest_f64(&period.scale);
            let (own, inner) = (x[column.index()], place > 0 && period.stock == Some(*column));
            let amount = a * own;
            let input = period.inputs.iter().find(|input| input.x == *column);
            let other = input.map_or(f64::INFINITY, |input| left * x[input.y.index()]);
            if a > 0.0 && !inner {
                met += if other < amount { other } else { amount };
            }
        }
    }
    left - met
}

/// The (l,S) over these periods, with its cases.
fn written(periods: &[Period], rows: &[Row], frame: &Frame, x: &[f64]) -> Option<GeneralCut> {
    let mut sum: BTreeMap<ColumnId, Number> = BTreeMap::new();
    for period in periods {
        for (column, a) in &rows[period.row].entries {
            *sum.entry(*column).or_default() += a * &period.scale;
        }
    }
    let mut left: Number = periods.iter().fold(Number::ZERO, |all, period| all + &period.demand);
    let whole = left.clone();
    let mut extra: BTreeMap<ColumnId, Number> = BTreeMap::new();
    let (mut split, mut proofs) = (Vec::new(), Vec::<Combination>::new());
    let (mut before, mut shut): (Combination, Combination) = (Vec::new(), Vec::new());
    for period in periods {
        let out = period.inputs.iter().filter(|input| {
            let (amount, limit) = (nearest_f64(&input.a), nearest_f64(&left));
            let seen = split.contains(&input.y);
            !seen && amount * x[input.x.index()] > limit * x[input.y.index()]
        });
        let out: Vec<&Input> = out.collect();
        let mut closed = Combination::new();
        for input in out {
            if left < Number::ZERO || split.contains(&input.y) {
                return None;
            }
            sum.remove(&input.x);
            *extra.entry(input.y).or_default() += &left;
            split.push(input.y);
            proofs.push(before.iter().chain(&shut).cloned().collect());
            closed.push((input.bound.0, &input.a * &input.bound.1));
        }
        shut.extend(closed);
        before.push((period.row, -period.scale.clone()));
        left -= &period.demand;
    }
    proofs.push(before.into_iter().chain(shut).collect());
    sum.retain(|_, a| *a > Number::ZERO);
    for (column, a) in extra {
        *sum.entry(column).or_default() += a;
    }
    let at_least_0 = |column: &ColumnId| {
        frame.bounds[column.index()].0.as_ref().is_some_and(|low| *low >= Number::ZERO)
    };
    if !sum.keys().all(at_least_0) {
        return None;
    }
    let entries = sum.into_iter().filter(|(_, a)| !a.is_zero()).map(|(c, a)| (c, -a)).collect();
    let row = Row { entries, lower: None, upper: Some(-whole) };
    let efficacy = efficacy(&row, x);
    let derivation = Derivation::Cases { split, proofs };
    (efficacy > LEAST).then_some(GeneralCut { class: Class::LotSizing, row, efficacy, derivation })
}
