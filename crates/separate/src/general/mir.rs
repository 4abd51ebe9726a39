//! Mixed-integer rounding. With all columns moved to a bound and slacks y,
//!
//! ```text
//! Σ a x + Σ c y = b,  x ≥ 0 whole, y ≥ 0   ⇒   Σ F(a) x + Σ_{c<0} c/(1−f) y ≤ ⌊b⌋,
//! F(a) = ⌊a⌋ + max(0, frac a − f)/(1 − f),  f = frac b
//! ```
//!
//! (Nemhauser, Wolsey 1990). Slacks are then put back as what they stand for.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Number, Row, nearest_f64};

use super::aggregate::{Aggregate, Frame};
use super::derivation::Derivation;
use super::shorten::shortened;
use super::sketch::{FRACTIONS, Sketch};
use super::{Class, GeneralCut};

/// Divisors that are tried for one sum.
const MOST_DIVISORS: usize = 6;
/// The least efficacy of a cut.
pub(super) const LEAST: f64 = 1e-4;
/// The same in floating-point numbers, before the cut is derived.
const NEARLY: f64 = 0.9 * LEAST;

/// The cut of a sum that is divided by `divisor`, with each column moved to its nearer bound but
/// those in `flips`; if `x` violates it.
fn rounded(
    sum: &Aggregate,
    frame: &Frame,
    x: &[f64],
    (divisor, flips): (&Number, &BTreeSet<ColumnId>),
) -> Option<Row> {
    let mut right = &sum.right / divisor;
    let mut moved = Vec::new();
    for (&column, a) in &sum.coefficients {
        let upper = at_upper(frame, column, x)? != flips.contains(&column);
        let (lower_bound, upper_bound) = &frame.bounds[column.index()];
        let bound = if upper { upper_bound } else { lower_bound }.as_ref()?;
        let a = a / divisor;
        right -= &a * bound;
        moved.push((column, if upper { -a } else { a }, upper, bound));
    }
    let floor = Number::from(right.floor());
    let f = &right - &floor;
    let near = nearest_f64(&f);
    if near < FRACTIONS.0 || near > FRACTIONS.1 {
        return None;
    }
    let rest = Number::ONE - &f;
    let factor = |a: &Number, whole: bool| round_coefficient(a, whole, &f, &rest);
    let mut entries: BTreeMap<ColumnId, Number> = BTreeMap::new();
    let mut side = floor;
    for (column, a, upper, bound) in moved {
        let g = factor(&a, frame.integer[column.index()] && bound.is_int());
        let g = if upper { -g } else { g };
        side += &g * bound;
        *entries.entry(column).or_default() += g;
    }
    for slack in &sum.slacks {
        let g = factor(&(&slack.coefficient / divisor), slack.whole);
        side -= &g * &slack.side;
        for (column, a) in &slack.entries {
            *entries.entry(*column).or_default() -= &g * a;
        }
    }
    let entries = entries.into_iter().filter(|(_, a)| !a.is_zero()).collect();
    Some(Row { entries, lower: None, upper: Some(side) })
}

/// The cut of a row that a rounding gave: with short numbers and its derivation, if it is good
/// enough.
fn finished(
    (class, row): (Class, &Row),
    sum: &Aggregate,
    frame: &Frame,
    x: &[f64],
    (divisor, flips): (&Number, &BTreeSet<ColumnId>),
) -> Option<GeneralCut> {
    let row = shortened(row, frame)?;
    let efficacy = efficacy(&row, x);
    let is_upper = |c: &ColumnId| at_upper(frame, *c, x) == Some(!flips.contains(c));
    let derivation = Derivation::Rounding {
        sum: sum.used.clone(),
        divisor: divisor.clone(),
        upper: sum.columns().filter(is_upper).collect(),
    };
    (efficacy > LEAST).then_some(GeneralCut { class, row, efficacy, derivation })
}

/// The cut of a sum as it is, but for the columns that go to their farther bound.
pub(super) fn plain(
    class: Class,
    sum: &Aggregate,
    frame: &Frame,
    x: &[f64],
    flips: &BTreeSet<ColumnId>,
) -> Option<GeneralCut> {
    let mut sketch = Sketch::new(sum, frame, x)?;
    let flipped = sketch.flips(|column| flips.contains(&column));
    if sketch.efficacy(1.0, &flipped) < NEARLY {
        return None;
    }
    let way = (&Number::ONE, flips);
    let row = rounded(sum, frame, x, way)?;
    finished((class, &row), sum, frame, x, way)
}

/// The coefficient that the rounding gives.
fn round_coefficient(a: &Number, whole: bool, f: &Number, rest: &Number) -> Number {
    if !whole {
        return if *a < Number::ZERO { a / rest } else { Number::ZERO };
    }
    let floor = Number::from(a.floor());
    let over = a - &floor - f;
    if over > Number::ZERO { floor + over / rest } else { floor }
}

/// Whether a column is nearer to its upper bound; `None` where it has no bound.
pub(super) fn at_upper(frame: &Frame, column: ColumnId, x: &[f64]) -> Option<bool> {
    let value = x[column.index()];
    match &frame.bounds[column.index()] {
        (None, None) => None,
        (Some(_), None) => Some(false),
        (None, Some(_)) => Some(true),
        (Some(lower), Some(upper)) => Some(nearest_f64(upper) - value < value - nearest_f64(lower)),
    }
}

/// The best cut of a sum, over divisors and complements (Marchand, Wolsey 2001): whole columns
/// between their bounds give the divisors, the best of these is halved up to three times, and then
/// such columns are moved to their other bound while that makes the cut better. They are compared in
/// floating-point numbers; the best is derived.
#[must_use]
pub fn complemented(class: Class, sum: &Aggregate, frame: &Frame, x: &[f64]) -> Option<GeneralCut> {
    let mut sketch = Sketch::new(sum, frame, x)?;
    let way = Way::best(&mut sketch)?;
    let size = |a: &Number| if *a < Number::ZERO { -a.clone() } else { a.clone() };
    let divisor = way.of.and_then(|column| sum.coefficient(column)).map(size);
    let divisor = divisor.unwrap_or(Number::ONE) / Number::from(1_u32 << way.halved);
    let flips: BTreeSet<ColumnId> = sketch.flipped(&way.flips).collect();
    let row = rounded(sum, frame, x, (&divisor, &flips))?;
    finished((class, &row), sum, frame, x, (&divisor, &flips))
}

/// Gomory's mixed-integer cut of a sum that is a row of the tableau, in the better of its two
/// directions.
#[must_use]
pub fn from_tableau(sum: &Aggregate, frame: &Frame, x: &[f64]) -> Option<GeneralCut> {
    let none = BTreeSet::new();
    let cut = |sum: &Aggregate| plain(Class::Gomory, sum, frame, x, &none);
    match (cut(sum), cut(&sum.turned())) {
        (Some(a), Some(b)) => Some(if b.efficacy > a.efficacy { b } else { a }),
        (a, b) => a.or(b),
    }
}

/// How a sum is rounded: what that is worth, what divides it, of which column that is the coefficient
/// (`None`: 1), how often it is halved, and which entries are moved to their farther bound.
#[derive(Debug, Clone)]
struct Way {
    efficacy: f64,
    divisor: f64,
    of: Option<ColumnId>,
    halved: u32,
    flips: Vec<bool>,
}

impl Way {
    /// The best for a sum.
    fn best(sketch: &mut Sketch) -> Option<Self> {
        let inner: Vec<(usize, ColumnId, f64)> = sketch.inner().collect();
        let sizes = inner.iter().map(|&(_, column, a)| (a.abs(), Some(column)));
        let mut divisors: Vec<(f64, Option<ColumnId>)> = sizes.chain([(1.0, None)]).collect();
        divisors.sort_by(|a, b| b.0.total_cmp(&a.0));
        divisors.dedup_by(|a, b| a.0 == b.0);
        divisors.truncate(MOST_DIVISORS);
        let none = sketch.flips(|_| false);
        let mut best = Self { efficacy: NEARLY, divisor: 0.0, of: None, halved: 0, flips: none };
        for (divisor, of) in divisors {
            best.improve(sketch, &Self { divisor, of, ..best.clone() });
        }
        if best.divisor == 0.0 {
            return None;
        }
        let first = best.divisor;
        for (halved, part) in [(1, 0.5), (2, 0.25), (3, 0.125)] {
            best.improve(sketch, &Self { divisor: first * part, halved, ..best.clone() });
        }
        for (place, ..) in inner {
            let mut other = best.clone();
            other.flips[place] = true;
            best.improve(sketch, &other);
        }
        Some(best)
    }

    /// Takes another way where that is better.
    fn improve(&mut self, sketch: &mut Sketch, other: &Self) {
        let efficacy = sketch.efficacy(other.divisor, &other.flips);
        if efficacy > self.efficacy + 1e-9 {
            *self = Self { efficacy, ..other.clone() };
        }
    }
}

/// How far a point is beyond a row `Σ a x ≤ b`.
pub(super) fn efficacy(row: &Row, x: &[f64]) -> f64 {
    let length = row.entries.iter().fold(0.0, |sum, (_, a)| {
        let a = nearest_f64(a);
        sum + a * a
    });
    let side = row.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
    if length > 0.0 { (row.activity(x) - side) / length.sqrt() } else { 0.0 }
}
