//! Exact numbers and their interning.

use std::collections::BTreeMap;

use dashu_ratio::RBig;

use crate::NumberId;

/// An exact rational number: the truth about every coefficient.
pub type Number = RBig;

/// Whole numbers up to this are floats.
const EXACT: u64 = 1 << 53;

/// The `f64` nearest to an exact number; +0 for zero, never −0.
#[must_use]
pub fn nearest_f64(number: &Number) -> f64 {
    // One division of two floats that hold their numbers is rounded once, to the nearest.
    let top = i64::try_from(number.numerator()).ok().filter(|top| top.unsigned_abs() <= EXACT);
    let bottom = u64::try_from(number.denominator()).ok().filter(|bottom| *bottom <= EXACT);
    #[expect(clippy::cast_precision_loss, reason = "at most 2⁵³")]
    match (top, bottom) {
        (Some(top), Some(1)) => top as f64,
        (Some(top), Some(bottom)) => top as f64 / bottom as f64,
        _ => number.to_f64().value() + 0.0,
    }
}

/// A table in which each number is kept once, as a rational and as the nearest `f64`.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Numbers {
    exact: Vec<Number>,
    float: Vec<f64>,
    ids: BTreeMap<Number, NumberId>,
}

impl Numbers {
    /// The id of `number`, which is added if it is new. `O(log n)` comparisons.
    pub fn intern(&mut self, number: &Number) -> NumberId {
        if let Some(&id) = self.ids.get(number) {
            return id;
        }
        let id = NumberId::from_index(self.exact.len());
        self.float.push(nearest_f64(number));
        self.exact.push(number.clone());
        self.ids.insert(number.clone(), id);
        id
    }

    /// The exact value.
    #[must_use]
    pub fn exact(&self, id: NumberId) -> &Number {
        &self.exact[id.index()]
    }

    /// The nearest `f64`.
    #[must_use]
    pub fn float(&self, id: NumberId) -> f64 {
        self.float[id.index()]
    }

    /// How many different numbers the table holds.
    #[must_use]
    pub fn len(&self) -> usize {
        self.exact.len()
    }

    /// Whether the table is empty.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.exact.is_empty()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// The conversion of rationals is the reference; parts of up to 62 bits are on either side of the
    /// short way.
    #[test]
    fn the_nearest_float_is_that_of_the_rational() {
        let mut state = 7_u64;
        let mut next = || {
            state = state
                .wrapping_mul(6_364_136_223_846_793_005)
                .wrapping_add(1_442_695_040_888_963_407);
            state >> (2 + state % 60)
        };
        for round in 0..4_000 {
            let (top, bottom) = (next().cast_signed(), next().max(1));
            let top = if round % 2 == 0 { top } else { -top };
            let number = Number::from_parts(top.into(), bottom.into());
            let float = nearest_f64(&number);
            assert_eq!(float.to_bits(), (number.to_f64().value() + 0.0).to_bits(), "{number}");
        }
        assert_eq!(nearest_f64(&Number::ZERO).to_bits(), 0);
    }
}
