//! A family with its labels resolved to places in the ground set and its numbers to floats,
//! so that the violation at a point is quick to evaluate for any set.

use std::collections::BTreeMap;

use dashu_int::{UBig, ops::Gcd};
use model::{LabelId, Model, Number, Relation, Scope, SubsetFamily, nearest_f64};

use crate::rounding::Rounding;

/// When a term counts, by places in the ground set; scopes that never hold are left out.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Kind {
    Always,
    Element(usize),
    Outside(usize),
    Inside(usize, usize),
    Leaving(usize, usize),
    Crossing(usize, usize),
}

/// One term; its coefficient is scaled and has the sign that violation gives it.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Term {
    /// Its place among the terms of the family.
    pub(crate) place: usize,
    pub(crate) column: usize,
    pub(crate) coefficient: f64,
    pub(crate) kind: Kind,
}

/// `scale · violation(S) = constant + Σ_{i∈S} weights_i + Σ_{terms that count} coefficient·x`
/// and the rounded sum (its absolute value, for an equation). The scale makes every number whole, and even.
#[derive(Debug, Clone)]
pub(crate) struct Compiled {
    pub(crate) size: usize,
    pub(crate) scale: f64,
    pub(crate) constant: f64,
    pub(crate) weights: Vec<f64>,
    pub(crate) terms: Vec<Term>,
    pub(crate) equation: bool,
    pub(crate) rounding: Option<Rounding>,
    /// Whether the numbers of the rounded sum fit into whole arithmetic.
    pub(crate) readable: bool,
    /// Whether all scaled numbers are whole and small and all columns integer, so that sums at
    /// integer points are exact in floating point.
    pub(crate) whole: bool,
    /// Whether each column is integer, by column.
    integer: Vec<bool>,
}

/// Scaled numbers up to this keep all sums of a family exact.
const LARGEST_WHOLE: f64 = 1_099_511_627_776.0;

impl Compiled {
    /// Resolves a family. `O(terms · log n)`.
    pub(crate) fn new(model: &Model, family: &SubsetFamily) -> Self {
        let places: BTreeMap<LabelId, usize> =
            family.ground.iter().enumerate().map(|(place, &label)| (label, place)).collect();
        let scale = Number::from(common_denominator(family) * UBig::from(2u8));
        let sign = if family.relation == Relation::AtLeast { -1 } else { 1 };
        let factor = &scale * Number::from(sign);
        let mut scaled = Scaled { factor, last: (Number::ZERO, 0.0) };
        let terms = family.terms.iter().enumerate().filter_map(|(place, term)| {
            let kind = resolved(term.scope, &places)?;
            let (column, coefficient) = (term.column.index(), scaled.value(&term.coefficient));
            Some(Term { place, column, coefficient, kind })
        });
        let terms = terms.collect();
        let rounded = family.rounded.as_ref();
        let rounding = rounded.and_then(|r| Rounding::new(r, scaled.value(&r.factor)));
        let mut compiled = Self {
            size: family.ground.len(),
            scale: nearest_f64(&scale),
            constant: scaled.value(&family.constant),
            weights: family.weights.iter().map(|weight| scaled.value(weight)).collect(),
            terms,
            equation: family.relation == Relation::Equal,
            readable: rounded.is_none() || rounding.is_some(),
            rounding,
            whole: false,
            integer: model.columns().iter().map(|column| column.integer).collect(),
        };
        compiled.weights.resize(compiled.size, 0.0);
        compiled.whole = compiled.is_whole();
        compiled
    }

    fn is_whole(&self) -> bool {
        let small = |value: f64| value.abs() <= LARGEST_WHOLE;
        small(self.constant)
            && self.rounding.as_ref().is_none_or(|rounding| small(rounding.size()))
            && self.weights.iter().all(|&weight| small(weight))
            && self.terms.iter().all(|t| small(t.coefficient) && self.integer[t.column])
    }

    /// The scaled violation of the member for `set` at `x`. `O(terms)`.
    pub(crate) fn violation(&self, set: &[bool], x: &[f64]) -> f64 {
        let mut sum = self.constant;
        for (weight, _) in self.weights.iter().zip(set).filter(|(_, inside)| **inside) {
            sum += weight;
        }
        for term in self.terms.iter().filter(|term| term.kind.holds(set)) {
            sum += term.coefficient * x[term.column];
        }
        sum += self.rounding.as_ref().map_or(0.0, |rounding| rounding.value(set));
        if self.equation { sum.abs() } else { sum }
    }

    /// Whether at `x` the violations of all sets but for the rounded sum are multiples of its
    /// factor, so that rounding makes no member violated that was not. `O(terms)`.
    pub(crate) fn is_granular(&self, x: &[f64]) -> bool {
        let Some(rounding) = &self.rounding else { return true };
        let step = rounding.step();
        let mut crossing = vec![0.0; self.size];
        let mut whole = is_multiple(self.constant, step)
            && self.weights.iter().all(|&weight| is_multiple(weight, step));
        for term in &self.terms {
            let value = term.coefficient * x[term.column];
            if let Kind::Crossing(i, j) = term.kind {
                crossing[i] += value;
                crossing[j] += value;
                whole &= is_multiple(2.0 * value, step);
            } else {
                whole &= is_multiple(value, step);
            }
        }
        whole && crossing.iter().all(|&value| is_multiple(value, step))
    }

    /// `x` with its integer columns rounded.
    pub(crate) fn rounded(&self, x: &[f64]) -> Vec<f64> {
        let round = |(&value, &integer): (&f64, &bool)| if integer { value.round() } else { value };
        x.iter().zip(&self.integer).map(round).collect()
    }

    /// Whether a column is integer.
    pub(crate) fn is_integer(&self, column: usize) -> bool {
        self.integer[column]
    }
}

/// Whether a whole number is a multiple of another.
fn is_multiple(value: f64, step: f64) -> bool {
    value % step == 0.0
}

/// Exact numbers times a factor as floats; the last one is kept, for most are the same.
struct Scaled {
    factor: Number,
    last: (Number, f64),
}

impl Scaled {
    fn value(&mut self, number: &Number) -> f64 {
        if *number != self.last.0 {
            self.last = (number.clone(), nearest_f64(&(number * &self.factor)));
        }
        self.last.1
    }
}

impl Kind {
    /// Whether the term counts in the member for `set`.
    pub(crate) fn holds(self, set: &[bool]) -> bool {
        match self {
            Self::Always => true,
            Self::Element(i) => set[i],
            Self::Outside(i) => !set[i],
            Self::Inside(i, j) => set[i] && set[j],
            Self::Leaving(i, j) => set[i] && !set[j],
            Self::Crossing(i, j) => set[i] != set[j],
        }
    }
}

/// The scope by places; `None` when it never holds. Labels outside the ground set are never
/// in a set.
fn resolved(scope: Scope, places: &BTreeMap<LabelId, usize>) -> Option<Kind> {
    let place = |label: LabelId| places.get(&label).copied();
    match scope {
        Scope::Always => Some(Kind::Always),
        Scope::Element(i) => place(i).map(Kind::Element),
        Scope::Outside(i) => Some(place(i).map_or(Kind::Always, Kind::Outside)),
        Scope::Inside(i, j) if i == j => place(i).map(Kind::Element),
        Scope::Inside(i, j) => Some(Kind::Inside(place(i)?, place(j)?)),
        Scope::Leaving(i, j) | Scope::Crossing(i, j) if i == j => None,
        Scope::Leaving(i, j) => match (place(i)?, place(j)) {
            (i, Some(j)) => Some(Kind::Leaving(i, j)),
            (i, None) => Some(Kind::Element(i)),
        },
        Scope::Crossing(i, j) => match (place(i), place(j)) {
            (Some(i), Some(j)) => Some(Kind::Crossing(i, j)),
            (Some(i), None) | (None, Some(i)) => Some(Kind::Element(i)),
            (None, None) => None,
        },
    }
}

fn common_denominator(family: &SubsetFamily) -> UBig {
    let coefficients = family.terms.iter().map(|term| &term.coefficient);
    let numbers = coefficients.chain(&family.weights).chain([&family.constant]);
    let rounded = family.rounded.iter().flat_map(|rounded| {
        let sums = rounded.weights.iter().chain([&rounded.constant]);
        let sums = sums.map(|number| number * &rounded.factor);
        sums.chain([rounded.factor.clone()]).collect::<Vec<_>>()
    });
    let plain = numbers.fold(UBig::ONE, common);
    rounded.fold(plain, |multiple, number| common(multiple, &number))
}

/// The least common multiple with a denominator.
fn common(multiple: UBig, number: &Number) -> UBig {
    let bottom = number.denominator();
    if bottom.is_one() {
        return multiple;
    }
    let divisor = (&multiple).gcd(bottom);
    multiple / divisor * bottom
}
