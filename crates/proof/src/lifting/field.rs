//! Arithmetic modulo the prime p = 2⁶¹ − 1. It has the form of Mersenne, so that reductions are
//! shifts and sums.

use dashu_int::{IBig, ops::RemEuclid};

/// Bits of the prime.
pub(crate) const BITS: usize = 61;
/// The prime.
pub(crate) const PRIME: u64 = (1 << BITS) - 1;

/// The sum of the upper and lower 61 bits, once more below p; for values under 2¹²².
fn folded(value: u128) -> u64 {
    let sum = (value as u64 & PRIME) + (value >> BITS) as u64;
    if sum >= PRIME { sum - PRIME } else { sum }
}

pub(crate) fn product(a: u64, b: u64) -> u64 {
    folded(u128::from(a) * u128::from(b))
}

pub(crate) fn difference(a: u64, b: u64) -> u64 {
    if a >= b { a - b } else { a + PRIME - b }
}

/// `a − b·c`.
pub(crate) fn less_product(a: u64, b: u64, c: u64) -> u64 {
    difference(a, product(b, c))
}

/// The inverse, by Fermat: a^(p − 2). Of 0 it is 0.
pub(crate) fn inverse(a: u64) -> u64 {
    let (mut power, mut out, mut exponent) = (a, 1, PRIME - 2);
    while exponent > 0 {
        if exponent & 1 == 1 {
            out = product(out, power);
        }
        power = product(power, power);
        exponent >>= 1;
    }
    out
}

pub(crate) fn of_small(value: i64) -> u64 {
    of_wide(i128::from(value))
}

pub(crate) fn of_wide(value: i128) -> u64 {
    let size = value.unsigned_abs();
    let top = (size >> (2 * BITS)) as u64;
    let rest = folded(size & ((1 << (2 * BITS)) - 1));
    let sum = rest + top;
    let sum = if sum >= PRIME { sum - PRIME } else { sum };
    if value < 0 && sum != 0 { PRIME - sum } else { sum }
}

pub(crate) fn of_big(value: &IBig) -> u64 {
    match i128::try_from(value) {
        Ok(value) => of_wide(value),
        Err(_) => u64::try_from(value.rem_euclid(&IBig::from(PRIME))).unwrap_or_default(),
    }
}

/// `value / p` for a multiple of p whose quotient fits: by the inverse of p modulo 2¹²⁸, which is
/// −(1 + 2⁶¹ + 2¹²²).
pub(crate) fn exact_quotient(value: i128) -> i128 {
    let sum = value.wrapping_add(value << BITS).wrapping_add(value << (2 * BITS));
    sum.wrapping_neg()
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    proptest! {
        #[test]
        fn agrees_with_big_numbers(a in 0..PRIME, b in 0..PRIME, w in any::<i128>()) {
            let p = IBig::from(PRIME);
            let big = |v: u64| IBig::from(v);
            let rest = |v: IBig| IBig::from(v.rem_euclid(&p));
            prop_assert_eq!(big(product(a, b)), rest(big(a) * big(b)));
            prop_assert_eq!(big(less_product(a, b, b)), rest(big(a) - big(b) * big(b)));
            prop_assert_eq!(big(of_wide(w)), rest(IBig::from(w)));
            prop_assert_eq!(of_big(&(IBig::from(w) * &p + big(b))), b);
            prop_assert!(a == 0 || product(a, inverse(a)) == 1);
            let multiple = (w >> 64) * i128::from(PRIME);
            prop_assert_eq!(exact_quotient(multiple), w >> 64);
        }
    }
}
