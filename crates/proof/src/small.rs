//! Sums of products of fractions in machine words.
//!
//! Coefficients, bounds and values of plans are nearly always fractions of small whole numbers: their
//! sum is then built over one denominator in 128 bits, without a greatest common divisor a term.
//! Everything is exact: what does not fit is refused, and the caller takes rationals of any size.

use std::cmp::Ordering;

use dashu_int::{IBig, UBig};
use model::{Model, Number, NumberId, RowId};

use crate::multipliers::common_divisor;

/// The largest common denominator of a sum: with it, products with a term's numbers fit.
const LARGEST: i128 = 1 << 40;

/// A fraction whose parts fit into machine words.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Small {
    top: i64,
    bottom: i64,
}

impl Small {
    /// The fraction, where it fits.
    pub(crate) fn read(number: &Number) -> Option<Self> {
        let top = i64::try_from(number.numerator()).ok()?;
        let bottom = i64::try_from(number.denominator()).ok()?;
        Some(Self { top, bottom })
    }

    /// Compares with a number of the model; `None` where that does not fit.
    fn cmp(self, other: &Number) -> Option<Ordering> {
        let other = Self::read(other)?;
        let left = i128::from(self.top) * i128::from(other.bottom);
        Some(left.cmp(&(i128::from(other.top) * i128::from(self.bottom))))
    }

    /// Whether it lies within two sides of the model; `None` where one of them does not fit.
    pub(crate) fn is_within(self, model: &Model, sides: Sides) -> Option<bool> {
        let exact = |id: NumberId| model.numbers().exact(id);
        let over = sides.0.map_or(Some(true), |id| Some(self.cmp(exact(id))?.is_ge()));
        let under = sides.1.map_or(Some(true), |id| Some(self.cmp(exact(id))?.is_le()));
        Some(over? && under?)
    }
}

/// The sides of a row or the bounds of a column.
type Sides = (Option<NumberId>, Option<NumberId>);

/// A sum over a common denominator.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct SmallSum {
    top: i128,
    bottom: i128,
}

impl SmallSum {
    pub(crate) const ZERO: Self = Self { top: 0, bottom: 1 };

    /// Adds a product; `None` when the sum does not fit.
    pub(crate) fn add_product(&mut self, a: Small, b: Small) -> Option<()> {
        if a.top == 0 || b.top == 0 {
            return Some(());
        }
        let top = i128::from(a.top) * i128::from(b.top);
        let bottom = i128::from(a.bottom) * i128::from(b.bottom);
        if bottom != self.bottom {
            return self.add_apart(top, bottom);
        }
        self.top = self.top.checked_add(top)?;
        Some(())
    }

    /// Adds a term over another denominator.
    fn add_apart(&mut self, top: i128, bottom: i128) -> Option<()> {
        let divisor = common_divisor(self.bottom, bottom);
        let common = (self.bottom / divisor).checked_mul(bottom)?;
        if common > LARGEST {
            return None;
        }
        let term = top.checked_mul(common / bottom)?;
        self.top = self.top.checked_mul(common / self.bottom)?.checked_add(term)?;
        self.bottom = common;
        Some(())
    }

    /// The sum as a fraction in machine words, where it fits.
    fn small(self) -> Option<Small> {
        let (top, bottom) = (i64::try_from(self.top).ok()?, i64::try_from(self.bottom).ok()?);
        Some(Small { top, bottom })
    }

    /// The sum.
    pub(crate) fn number(self) -> Option<Number> {
        Some(Number::from_parts(IBig::from(self.top), UBig::try_from(self.bottom).ok()?))
    }
}

/// Whether the point meets a written row; `None` where words do not suffice to say so.
pub(crate) fn meets(model: &Model, row: RowId, x: &[Option<Small>]) -> Option<bool> {
    let mut sum = SmallSum::ZERO;
    for &(column, a) in model.row_entries(row) {
        let value = x[column.index()]?;
        if value.top != 0 {
            sum.add_product(Small::read(model.numbers().exact(a))?, value)?;
        }
    }
    sum.small()?.is_within(model, model.row_sides(row))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn fraction(top: i64, bottom: i64) -> Number {
        Number::from(top) / Number::from(bottom)
    }

    #[test]
    fn sums_are_those_of_rationals() {
        let terms = [(3, 7, -2, 5), (1, 3, 9, 1), (0, 1, 5, 11), (-8, 21, 4, 9), (5, 1, 6, 1)];
        let (mut sum, mut exact) = (SmallSum::ZERO, Number::ZERO);
        for (a, b, c, d) in terms {
            let (one, other) = (fraction(a, b), fraction(c, d));
            sum.add_product(Small::read(&one).unwrap(), Small::read(&other).unwrap()).unwrap();
            exact += one * other;
        }
        assert_eq!(sum.number(), Some(exact));
    }

    #[test]
    fn what_does_not_fit_is_refused() {
        let wide = Number::from(i64::MAX) + Number::ONE;
        assert_eq!(Small::read(&wide), None);
        assert_eq!(Small::read(&(Number::ONE / wide)), None);
        let most = Small { top: i64::MAX, bottom: 1 };
        let mut sum = SmallSum::ZERO;
        assert!(sum.add_product(most, most).is_some() && sum.add_product(most, most).is_some());
        assert_eq!(sum.add_product(most, most), None, "three times 2¹²⁶");
        assert_eq!(sum.small(), None);
        let primes = [999_983, 999_979, 999_961].map(|bottom| Small { top: 1, bottom });
        let mut sum = SmallSum::ZERO;
        assert!(sum.add_product(primes[0], Small { top: 1, bottom: 1 }).is_some());
        assert_eq!(sum.add_product(primes[1], primes[2]), None, "the denominator grows too large");
    }

    #[test]
    fn fractions_are_compared_exactly() {
        let third = Small { top: 1, bottom: 3 };
        assert_eq!(third.cmp(&fraction(333_333_333, 1_000_000_000)), Some(Ordering::Greater));
        assert_eq!(third.cmp(&fraction(2, 6)), Some(Ordering::Equal));
        assert_eq!(third.cmp(&fraction(1, 2)), Some(Ordering::Less));
    }
}
