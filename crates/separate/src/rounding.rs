//! The rounded sum of a family, `factor · ⌈Σ_{i∈S} w_i + constant⌉`, in whole arithmetic.
//!
//! Without the rounding it is linear in S, so that a minimum cut finds the most violated set of
//! this weaker (for a positive factor) form; rounding adds less than the factor to it.

use dashu_int::{IBig, UBig, ops::Gcd};
use model::{Number, RoundedUp};

/// Numerators and denominators up to this keep all sums in whole arithmetic.
const LARGEST: i128 = 1 << 90;

/// The rounded sum; its factor is scaled and has the sign that violation gives it.
#[derive(Debug, Clone)]
pub(crate) struct Rounding {
    factor: f64,
    weights: Vec<i128>,
    constant: i128,
    denominator: i128,
}

impl Rounding {
    /// Brings the weights to one denominator; `None` where they are too large.
    pub(crate) fn new(rounded: &RoundedUp, factor: f64) -> Option<Self> {
        let numbers = || rounded.weights.iter().chain([&rounded.constant]);
        let denominator = numbers().fold(UBig::ONE, |multiple, number| {
            let bottom = number.denominator();
            let divisor = (&multiple).gcd(bottom);
            multiple / divisor * bottom
        });
        let over = Number::from(denominator.clone());
        let whole = |number: &Number| bounded((number * &over).numerator());
        let weights: Option<Vec<i128>> = rounded.weights.iter().map(whole).collect();
        Some(Self {
            factor,
            weights: weights?,
            constant: whole(&rounded.constant)?,
            denominator: bounded(&IBig::from(denominator))?,
        })
    }

    fn sum(&self, set: &[bool]) -> i128 {
        let chosen = self.weights.iter().zip(set).filter(|(_, inside)| **inside);
        self.constant + chosen.map(|(weight, _)| weight).sum::<i128>()
    }

    /// What the rounded sum adds for a set. `O(n)`.
    pub(crate) fn value(&self, set: &[bool]) -> f64 {
        let (sum, under) = (self.sum(set), self.denominator);
        self.factor * float(sum.div_euclid(under) + i128::from(sum.rem_euclid(under) > 0))
    }

    /// What rounding adds for a set.
    pub(crate) fn gain(&self, set: &[bool]) -> f64 {
        let rest = self.sum(set).rem_euclid(self.denominator);
        let missing = if rest == 0 { 0 } else { self.denominator - rest };
        self.factor * float(missing) / float(self.denominator)
    }

    /// The most that rounding can add.
    pub(crate) fn most_gain(&self) -> f64 {
        let most = float(self.denominator - 1) / float(self.denominator);
        if self.factor > 0.0 { self.factor * most } else { 0.0 }
    }

    /// The sum without rounding: what always counts, and what an element adds.
    pub(crate) fn linear(&self) -> (f64, impl Iterator<Item = f64>) {
        let part = |number: i128| self.factor * float(number) / float(self.denominator);
        (part(self.constant), self.weights.iter().map(move |&weight| part(weight)))
    }

    /// The step of the values.
    pub(crate) fn step(&self) -> f64 {
        self.factor.abs()
    }

    /// A bound on every value and every partial sum.
    pub(crate) fn size(&self) -> f64 {
        let sum: i128 = self.weights.iter().map(|weight| weight.abs()).sum();
        self.factor.abs() * float(sum + self.constant.abs() + self.denominator)
    }
}

fn bounded(number: &IBig) -> Option<i128> {
    i128::try_from(number.clone()).ok().filter(|n| n.abs() <= LARGEST)
}

#[expect(clippy::cast_precision_loss, reason = "sums beyond 2^53 are rounded on purpose")]
fn float(number: i128) -> f64 {
    number as f64
}
