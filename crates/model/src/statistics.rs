//! Size of a model and the ranges of its coefficients.

use std::collections::BTreeMap;

use crate::{Family, FamilyId, Model, RowId};

/// Size of a model. Rows of families on demand are not counted, for they are not written.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Statistics {
    /// Rows in the relaxation at the start.
    pub rows: u32,
    /// Columns.
    pub columns: u32,
    /// Columns that must be whole.
    pub integer_columns: u32,
    /// Entries of the rows counted above.
    pub nonzeros: u64,
    /// One entry a family.
    pub families: Vec<FamilyStatistics>,
}

/// Size and coefficients of one family.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct FamilyStatistics {
    /// Written rows (0 over subsets and when left out).
    pub rows: u32,
    /// How many coefficients have their absolute value in [10^k, 10^(k+1)), by k.
    pub decades: BTreeMap<i32, u64>,
}

impl Model {
    /// Counts the model. `O(non-zeros)`.
    #[must_use]
    pub fn statistics(&self) -> Statistics {
        let mut statistics = Statistics {
            rows: 0,
            columns: u32::try_from(self.columns.len()).unwrap_or(u32::MAX),
            integer_columns: 0,
            nonzeros: 0,
            families: Vec::with_capacity(self.families.len()),
        };
        statistics.integer_columns =
            u32::try_from(self.columns.iter().filter(|c| c.integer).count()).unwrap_or(u32::MAX);
        for (index, family) in self.families.iter().enumerate() {
            let counted = self.family_statistics(family);
            if family.state == crate::FamilyState::In {
                statistics.rows += counted.rows;
                statistics.nonzeros += counted.decades.values().sum::<u64>();
            }
            debug_assert!(
                family
                    .rows
                    .clone()
                    .all(|r| self.row_family(RowId(r)) == FamilyId::from_index(index))
            );
            statistics.families.push(counted);
        }
        statistics
    }

    fn family_statistics(&self, family: &Family) -> FamilyStatistics {
        let mut decades = BTreeMap::new();
        for row in family.rows.clone() {
            for &(_, number) in self.row_entries(RowId(row)) {
                *decades.entry(decade(self.numbers.float(number))).or_insert(0) += 1;
            }
        }
        FamilyStatistics { rows: family.rows.end - family.rows.start, decades }
    }
}

/// The power of ten at or under |value|, by comparison (no logarithm: the same bits everywhere).
fn decade(value: f64) -> i32 {
    let size = value.abs();
    let (mut power, mut exponent) = (1.0_f64, 0);
    while size >= power * 10.0 && exponent < 308 {
        power *= 10.0;
        exponent += 1;
    }
    while size < power && exponent > -308 {
        power /= 10.0;
        exponent -= 1;
    }
    exponent
}
