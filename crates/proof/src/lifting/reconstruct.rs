//! Fractions with one denominator from their residues: n/d from n·d⁻¹ modulo P, by the continued
//! fraction of the residue over P (Wang 1981). |n| may have three fifths of the bits of P, d the
//! rest but two, so that at most one such fraction fits.

use dashu_int::{IBig, UBig, ops::BitTest};

use super::field::{PRIME, product};

/// Numerators and their denominator.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Fractions {
    pub(crate) values: Vec<IBig>,
    pub(crate) denominator: UBig,
}

/// The fractions of which these are the digits base p, lowest first; `None` where there is
/// none of that size.
pub(crate) fn fractions(digits: &[Vec<u64>]) -> Option<Fractions> {
    match digits {
        [] => None,
        [single] => of_one_digit(single),
        _ => of_digits(digits),
    }
}

const NUMERATOR_BITS: u32 = 36;
const DENOMINATOR_BITS: u32 = 23;

fn of_one_digit(digits: &[u64]) -> Option<Fractions> {
    let mut values: Vec<(i64, u64)> = Vec::with_capacity(digits.len());
    let mut denominator = 1_u64;
    for &digit in digits {
        let mut value = centred(product(digit, denominator));
        if value.unsigned_abs() >> NUMERATOR_BITS != 0 {
            let (top, bottom) = convergent(product(digit, denominator))?;
            denominator = denominator.checked_mul(bottom)?;
            if denominator >> DENOMINATOR_BITS != 0 {
                return None;
            }
            value = top;
        }
        values.push((value, denominator));
    }
    let whole = |(top, at): (i64, u64)| IBig::from(top) * IBig::from(denominator / at);
    let values: Vec<IBig> = values.into_iter().map(whole).collect();
    let large = values.iter().any(|value| bits(value) > NUMERATOR_BITS as usize);
    (!large).then(|| Fractions { values, denominator: UBig::from(denominator) })
}

/// The residue between −p/2 and p/2.
fn centred(residue: u64) -> i64 {
    let residue = residue as i64;
    if residue > PRIME as i64 / 2 { residue - PRIME as i64 } else { residue }
}

/// n and d with n ≡ d·residue.
fn convergent(residue: u64) -> Option<(i64, u64)> {
    let (mut before, mut now) = ((PRIME as i64, 0_i64), (residue as i64, 1_i64));
    while now.0 >> NUMERATOR_BITS != 0 {
        let step = before.0 / now.0;
        (before, now) = (now, (before.0 - step * now.0, before.1 - step.checked_mul(now.1)?));
        if now.1.unsigned_abs() >> DENOMINATOR_BITS != 0 {
            return None;
        }
    }
    let sign = now.1.signum();
    (sign != 0).then(|| (sign * now.0, now.1.unsigned_abs()))
}

fn of_digits(digits: &[Vec<u64>]) -> Option<Fractions> {
    let prime = UBig::from(PRIME);
    let modulus = digits.iter().fold(UBig::ONE, |modulus, _| modulus * &prime);
    let limits = Limits::new(modulus);
    let mut values: Vec<(IBig, UBig)> = Vec::with_capacity(digits[0].len());
    let mut denominator = UBig::ONE;
    for at in 0..digits[0].len() {
        let top = digits.iter().rev().map(|digit| digit[at]);
        let residue = top.fold(UBig::ZERO, |sum, digit| sum * &prime + UBig::from(digit));
        let residue = residue * &denominator % &limits.modulus;
        let mut value = limits.centred(&residue);
        if bits(&value) > limits.numerator_bits {
            let (top, bottom) = limits.convergent(residue)?;
            denominator *= bottom;
            if denominator.bit_len() > limits.denominator_bits {
                return None;
            }
            value = top;
        }
        values.push((value, denominator.clone()));
    }
    let whole = |(top, at): (IBig, UBig)| {
        if at == denominator { top } else { top * IBig::from(&denominator / at) }
    };
    let values: Vec<IBig> = values.into_iter().map(whole).collect();
    let large = values.iter().any(|value| bits(value) > limits.numerator_bits);
    (!large).then_some(Fractions { values, denominator })
}

/// The bits of a number's size.
pub(crate) fn bits(value: &IBig) -> usize {
    value.bit_len()
}

/// The modulus and how large fractions may be.
struct Limits {
    modulus: UBig,
    numerator_bits: usize,
    denominator_bits: usize,
}

impl Limits {
    fn new(modulus: UBig) -> Self {
        let all = modulus.bit_len();
        let numerator_bits = all * 3 / 5;
        Self { modulus, numerator_bits, denominator_bits: all - numerator_bits - 2 }
    }

    fn centred(&self, residue: &UBig) -> IBig {
        let value = IBig::from(residue.clone());
        if residue.clone() * UBig::from(2_u8) > self.modulus {
            value - IBig::from(self.modulus.clone())
        } else {
            value
        }
    }

    fn convergent(&self, residue: UBig) -> Option<(IBig, UBig)> {
        let (mut before, mut now) = (self.modulus.clone(), residue);
        let (mut last, mut factor) = (UBig::ZERO, UBig::ONE);
        let mut negative = false;
        while now.bit_len() > self.numerator_bits {
            let step = &before / &now;
            let rest = before - &step * &now;
            (before, now) = (now, rest);
            let next = last + step * &factor;
            (last, factor) = (factor, next);
            negative = !negative;
            if factor.bit_len() > self.denominator_bits {
                return None;
            }
        }
        let value = IBig::from(now);
        Some((if negative { -value } else { value }, factor))
    }
}
