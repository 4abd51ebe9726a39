//! The exact sum behind every bound, over whole numbers of two kinds: 128 bits where they
//! suffice (they nearly always do), and big ones otherwise.
//!
//! With costs C (scaled by K), rows scaled to whole numbers and multipliers Y/Q,
//!
//! ```text
//! D = Q·C − A'Y,     Q·K·bound = Σ_i Y_i·side_i + Σ_j D_j·bound_j
//! ```

use std::cmp::Ordering;

use dashu_int::IBig;
use model::Number;

use crate::multipliers::Multipliers;
use crate::rows::{Bounds, Coefficients, ExactRows};

/// What the sum is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Objective {
    /// The costs of the model.
    Costs,
    /// No costs: a sum over 0 proves that there is no point (Farkas).
    Nothing,
}

/// The bounds of the columns: those given, and, where they are infinite, those implied.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Sides<'a> {
    pub(crate) given: &'a [Bounds],
    pub(crate) implied: Option<&'a [Bounds]>,
}

impl<'a> Sides<'a> {
    /// The bound that goes with a reduced cost of this sign.
    fn side(&self, column: usize, sign: Ordering) -> Option<&'a Number> {
        let pick = |bounds: &'a Bounds| match sign {
            Ordering::Greater => bounds.0.as_ref(),
            _ => bounds.1.as_ref(),
        };
        let implied = || self.implied.and_then(|implied| pick(&implied[column]));
        pick(&self.given[column]).or_else(implied)
    }
}

/// A column whose reduced cost meets an infinite bound.
#[derive(Debug, Clone)]
pub(crate) struct Open {
    pub(crate) column: usize,
    /// Its reduced cost, times the common denominator.
    pub(crate) reduced: IBig,
}

/// The outcome of one exact sum, in the direction of minimising, without the offset.
#[derive(Debug, Clone)]
pub(crate) enum Sum {
    /// The bound.
    Bound(Number),
    /// −∞, for these columns.
    Open(Vec<Open>),
}

/// The exact sum for these multipliers. Each must have a side to go with its sign.
/// `O(non-zeros of the rows with a multiplier + columns)`.
pub(crate) fn sum(
    rows: &ExactRows,
    objective: Objective,
    bounds: Sides<'_>,
    multipliers: &Multipliers,
) -> Sum {
    let job = Job { rows, objective, bounds, multipliers };
    // Big numbers never overflow, so the last fallback is never taken.
    job.run::<i128>().or_else(|| job.run::<IBig>()).unwrap_or(Sum::Open(Vec::new()))
}

/// As [`sum`], where machine words suffice.
pub(crate) fn sum_in_words(
    rows: &ExactRows,
    objective: Objective,
    bounds: Sides<'_>,
    multipliers: &Multipliers,
) -> Option<Sum> {
    Job { rows, objective, bounds, multipliers }.run::<i128>()
}

struct Job<'a> {
    rows: &'a ExactRows,
    objective: Objective,
    bounds: Sides<'a>,
    multipliers: &'a Multipliers,
}

impl Job<'_> {
    /// The sum; `None` when the numbers do not fit.
    fn run<W: Whole>(&self) -> Option<Sum> {
        let mut reduced = self.costs::<W>()?;
        let mut total = W::read(&IBig::ZERO)?;
        for (index, value) in self.multipliers.values.iter().enumerate() {
            if value.is_zero() {
                continue;
            }
            let row = &self.rows.rows[index];
            let side = if *value > IBig::ZERO { &row.lower } else { &row.upper };
            total.add_product(&W::read(value)?, &W::read(side.as_ref()?)?)?;
            self.subtract(index, &W::read(&-value)?, &mut reduced)?;
        }
        self.close(total, &reduced)
    }

    /// `Q·C`.
    fn costs<W: Whole>(&self) -> Option<Vec<W>> {
        let zero = W::read(&IBig::ZERO)?;
        let mut out = vec![zero; self.rows.column_count()];
        if self.objective == Objective::Costs {
            let q = W::read(&IBig::from(self.multipliers.denominator.clone()))?;
            for (value, cost) in out.iter_mut().zip(&self.rows.costs) {
                value.add_product(&q, &W::read(cost)?)?;
            }
        }
        Some(out)
    }

    fn subtract<W: Whole>(&self, row: usize, factor: &W, reduced: &mut [W]) -> Option<()> {
        let (columns, coefficients) = self.rows.entries(row);
        match coefficients {
            Coefficients::Small(values) => {
                for (&column, &a) in columns.iter().zip(values) {
                    reduced[column as usize].add_small(factor, a)?;
                }
            }
            Coefficients::Wide(values) => {
                for (&column, a) in columns.iter().zip(values) {
                    reduced[column as usize].add_product(factor, &W::read(a)?)?;
                }
            }
        }
        Some(())
    }

    /// Adds the bound terms.
    fn close<W: Whole>(&self, mut total: W, reduced: &[W]) -> Option<Sum> {
        let mut broken = Number::ZERO;
        let mut open = Vec::new();
        for (column, value) in reduced.iter().enumerate() {
            let sign = value.sign();
            if sign == Ordering::Equal {
                continue;
            }
            match self.bounds.side(column, sign) {
                None => open.push(Open { column, reduced: value.big() }),
                Some(bound) if bound.is_int() => {
                    total.add_product(value, &W::read(bound.numerator())?)?;
                }
                Some(bound) => broken += Number::from(value.big()) * bound,
            }
        }
        if !open.is_empty() {
            return Some(Sum::Open(open));
        }
        let scale = match self.objective {
            Objective::Costs => &self.multipliers.denominator * &self.rows.cost_scale,
            Objective::Nothing => self.multipliers.denominator.clone(),
        };
        Some(Sum::Bound((Number::from(total.big()) + broken) / Number::from(scale)))
    }
}

/// Whole numbers whose sums and products are exact or refused.
trait Whole: Clone {
    fn read(value: &IBig) -> Option<Self>;
    fn add_product(&mut self, a: &Self, b: &Self) -> Option<()>;
    fn add_small(&mut self, a: &Self, b: i64) -> Option<()>;
    fn sign(&self) -> Ordering;
    fn big(&self) -> IBig;
}

impl Whole for i128 {
    fn read(value: &IBig) -> Option<Self> {
        Self::try_from(value).ok()
    }

    fn add_product(&mut self, a: &Self, b: &Self) -> Option<()> {
        if let Ok(b) = i64::try_from(*b) {
            return self.add_small(a, b);
        }
        *self = self.checked_add(a.checked_mul(*b)?)?;
        Some(())
    }

    fn add_small(&mut self, a: &Self, b: i64) -> Option<()> {
        // A product of words always fits, and takes one instruction in place of a call.
        let product = match i64::try_from(*a) {
            Ok(a) => Self::from(a) * Self::from(b),
            Err(_) => a.checked_mul(Self::from(b))?,
        };
        *self = self.checked_add(product)?;
        Some(())
    }

    fn sign(&self) -> Ordering {
        self.cmp(&0)
    }

    fn big(&self) -> IBig {
        IBig::from(*self)
    }
}

impl Whole for IBig {
    fn read(value: &IBig) -> Option<Self> {
        Some(value.clone())
    }

    fn add_product(&mut self, a: &Self, b: &Self) -> Option<()> {
        *self += a * b;
        Some(())
    }

    fn add_small(&mut self, a: &Self, b: i64) -> Option<()> {
        *self += a * Self::from(b);
        Some(())
    }

    fn sign(&self) -> Ordering {
        self.cmp(&Self::ZERO)
    }

    fn big(&self) -> IBig {
        self.clone()
    }
}
