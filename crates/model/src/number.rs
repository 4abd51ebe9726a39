//! Exact numbers and their interning.

use std::collections::BTreeMap;

use dashu_ratio::RBig;

use crate::NumberId;

/// An exact rational number: the truth about every coefficient.
pub type Number = RBig;

/// The `f64` nearest to an exact number; +0 for zero, never −0.
#[must_use]
pub fn nearest_f64(number: &Number) -> f64 {
    number.to_f64().value() + 0.0
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
