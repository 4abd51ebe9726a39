//! The member for a set, the same as [`SubsetFamily::member`], read off the compiled family:
//! whether a term counts costs two look-ups instead of two searches.

use std::collections::BTreeMap;

use model::{ColumnId, Number, Relation, Row, SubsetFamily};

use crate::compiled::Compiled;

/// The row. `O(terms + entries · log)`.
pub(crate) fn row(family: &SubsetFamily, compiled: &Compiled, set: &[bool]) -> Row {
    let mut sums: BTreeMap<ColumnId, Number> = BTreeMap::new();
    for term in compiled.terms.iter().filter(|term| term.kind.holds(set)) {
        let written = &family.terms[term.place];
        *sums.entry(written.column).or_insert(Number::ZERO) += &written.coefficient;
    }
    let right = family.right_side(set);
    let (lower, upper) = match family.relation {
        Relation::AtMost => (None, Some(right)),
        Relation::AtLeast => (Some(right), None),
        Relation::Equal => (Some(right.clone()), Some(right)),
    };
    let entries = sums.into_iter().filter(|(_, a)| !a.is_zero()).collect();
    Row { entries, lower, upper }
}
