//! Numbers of about 32 digits: the sum of two floats, the lower one at most half a unit in the last
//! place of the upper one.
//!
//! Sums and products of floats are split into what is rounded and what rounding left, which is a float
//! itself (barring overflow and underflow): s = a ⊕ b, e = (a − (s − b')) + (b − b') with b' = s − a;
//! products by halves of 26 digits. Only + − × ÷ in a fixed order, no fused multiplication: the same
//! bits on every machine.
//!
//! Source: Dekker 1971; Knuth 1969, 4.2.2; error bounds (sum and product within 3·2⁻¹⁰⁶ and 7·2⁻¹⁰⁶,
//! quotient within 10·2⁻¹⁰⁶, relative): Joldes, Muller, Popescu 2017.

use std::cmp::Ordering;
use std::ops::{Add, Div, Mul, Neg, Sub};

/// The sum of two floats.
#[derive(Clone, Copy, Debug, Default, PartialEq)]
pub(crate) struct Double {
    high: f64,
    low: f64,
}

/// What splits a float into halves of 26 digits.
const SPLITTER: f64 = 134_217_729.0;

/// The sum as a float, and what rounding left of it.
fn two_sum(a: f64, b: f64) -> Double {
    let high = a + b;
    let from_b = high - a;
    Double { high, low: (a - (high - from_b)) + (b - from_b) }
}

/// The same where `a` is not smaller in size than `b`.
fn fast_two_sum(a: f64, b: f64) -> Double {
    let high = a + b;
    Double { high, low: b - (high - a) }
}

/// The upper and the lower half of the digits.
fn split(a: f64) -> (f64, f64) {
    let scaled = SPLITTER * a;
    let high = scaled - (scaled - a);
    (high, a - high)
}

/// The product as a float, and what rounding left of it.
fn two_product(a: f64, b: f64) -> Double {
    let high = a * b;
    let ((a_high, a_low), (b_high, b_low)) = (split(a), split(b));
    let low = ((a_high * b_high - high) + a_high * b_low + a_low * b_high) + a_low * b_low;
    Double { high, low }
}

impl Double {
    pub(crate) const ZERO: Self = Self { high: 0.0, low: 0.0 };
    pub(crate) const ONE: Self = Self { high: 1.0, low: 0.0 };

    /// The nearest float.
    pub(crate) fn float(self) -> f64 {
        self.high
    }

    /// The size.
    pub(crate) fn abs(self) -> Self {
        if self.high < 0.0 { -self } else { self }
    }

    /// True for zero.
    pub(crate) fn is_zero(self) -> bool {
        self.high == 0.0
    }
}

impl From<f64> for Double {
    fn from(value: f64) -> Self {
        Self { high: value, low: 0.0 }
    }
}

impl Neg for Double {
    type Output = Self;

    fn neg(self) -> Self {
        Self { high: -self.high, low: -self.low }
    }
}

impl Add for Double {
    type Output = Self;

    fn add(self, other: Self) -> Self {
        let (high, low) = (two_sum(self.high, other.high), two_sum(self.low, other.low));
        let sum = fast_two_sum(high.high, high.low + low.high);
        fast_two_sum(sum.high, sum.low + low.low)
    }
}

impl Sub for Double {
    type Output = Self;

    fn sub(self, other: Self) -> Self {
        self + -other
    }
}

impl Mul for Double {
    type Output = Self;

    fn mul(self, other: Self) -> Self {
        let product = two_product(self.high, other.high);
        let cross = self.high * other.low + self.low * other.high;
        fast_two_sum(product.high, product.low + cross)
    }
}

impl Div for Double {
    type Output = Self;

    fn div(self, other: Self) -> Self {
        let first = self.high / other.high;
        let rest = self - other * Self::from(first);
        let second = rest.high / other.high;
        let rest = rest - other * Self::from(second);
        fast_two_sum(first, second) + Self::from(rest.high / other.high)
    }
}

impl PartialOrd for Double {
    fn partial_cmp(&self, other: &Self) -> Option<Ordering> {
        match self.high.partial_cmp(&other.high) {
            Some(Ordering::Equal) => self.low.partial_cmp(&other.low),
            order => order,
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use dashu_ratio::RBig;
    use proptest::prelude::*;

    /// 2⁻¹⁰².
    fn unit() -> RBig {
        RBig::ONE / RBig::from(1u128 << 102)
    }

    fn exact(value: Double) -> RBig {
        RBig::try_from(value.high).unwrap() + RBig::try_from(value.low).unwrap()
    }

    fn size(value: RBig) -> RBig {
        if value < RBig::ZERO { -value } else { value }
    }

    /// Numbers of both signs, some next to powers of two, with a lower part of any size and sign.
    fn doubles() -> impl Strategy<Value = Double> {
        let float =
            (any::<bool>(), 0u64..1 << 52, -60i32..60).prop_map(|(minus, digits, power)| {
                let power = f64::from_bits(((1023 + power) as u64) << 52);
                let float = (1.0 + digits as f64 / (1u64 << 52) as f64) * power;
                if minus { -float } else { float }
            });
        let share = prop_oneof![
            Just(0.0),
            -1.0..1.0f64,
            (-1.0..1.0f64).prop_map(|share| share / (1u64 << 40) as f64),
        ];
        (float, share).prop_map(|(high, share)| two_sum(high, high * share / (1u64 << 53) as f64))
    }

    /// Whether a result is what it should be, to one unit of 2⁻¹⁰² of `scale`, and its parts do not
    /// overlap.
    fn is_near(found: Double, right: RBig, scale: RBig) -> bool {
        found.high + found.low == found.high && size(exact(found) - right) <= size(scale) * unit()
    }

    proptest! {
        #[test]
        fn sums_products_and_quotients_are_right(a in doubles(), b in doubles()) {
            let (x, y) = (exact(a), exact(b));
            prop_assert!(is_near(a + b, &x + &y, &x + &y));
            prop_assert!(is_near(a - b, &x - &y, &x - &y));
            prop_assert!(is_near(a * b, &x * &y, &x * &y));
            prop_assert!(is_near(a / b, &x / &y, &x / &y));
        }

        #[test]
        fn what_two_floats_leave_is_exact(a in doubles(), b in doubles()) {
            let (x, y) = (RBig::try_from(a.high).unwrap(), RBig::try_from(b.high).unwrap());
            prop_assert_eq!(exact(two_sum(a.high, b.high)), &x + &y);
            prop_assert_eq!(exact(two_product(a.high, b.high)), x * y);
        }

        #[test]
        fn order_sign_and_size_are_those_of_the_numbers(a in doubles(), b in doubles()) {
            let (x, y) = (exact(a), exact(b));
            prop_assert_eq!(a.partial_cmp(&b), x.partial_cmp(&y));
            prop_assert_eq!(a.partial_cmp(&a), Some(Ordering::Equal));
            prop_assert_eq!(exact(-a), -x.clone());
            prop_assert_eq!(exact(a.abs()), size(x));
            prop_assert!((a - a).is_zero());
        }
    }

    /// (1 + 2⁻⁸⁰) − 1, of which floats keep nothing.
    #[test]
    fn a_small_difference_is_kept() {
        let small = 1.0 / (1u128 << 80) as f64;
        assert_eq!((Double::ONE + Double::from(small) - Double::ONE).float(), small);
        let third = Double::ONE / Double::from(3.0);
        assert!((third + third + third - Double::ONE).float().abs() < 1e-31);
    }
}
