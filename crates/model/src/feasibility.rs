//! The question whether some of a model's families can hold together: the model without its
//! objective and without the other families.

use std::collections::BTreeSet;

use crate::{FamilyId, FamilyState, Model, Number};

impl Model {
    /// The model without its objective in which only the families in `kept` hold, each written or
    /// on demand as it was; every domain stays, and so do the numbers of columns, rows and
    /// families. `O(non-zeros)`.
    #[must_use]
    pub fn feasibility(&self, kept: &BTreeSet<FamilyId>) -> Self {
        let mut model = self.clone();
        let nothing = model.numbers.intern(&Number::ZERO);
        model.offset = Number::ZERO;
        for column in &mut model.columns {
            column.cost = nothing;
        }
        for (index, family) in model.families.iter_mut().enumerate() {
            if !kept.contains(&FamilyId::from_index(index)) {
                family.state = FamilyState::Out;
            }
        }
        model.subset_families.retain(|subsets| kept.contains(&subsets.family));
        model
    }

    /// The families that hold and have rows or members, in the order of their statements.
    #[must_use]
    pub fn families_that_hold(&self) -> Vec<FamilyId> {
        let families = self.families.iter().enumerate();
        let holding = families
            .filter(|(_, f)| f.state != FamilyState::Out && (f.over_subsets || !f.rows.is_empty()));
        holding.map(|(index, _)| FamilyId::from_index(index)).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{ColumnSpec, ModelBuilder, Row, RowId, Sense};

    #[test]
    fn what_is_kept_holds_and_nothing_has_a_cost() {
        let mut builder = ModelBuilder::new("t", Sense::Maximise);
        builder.offset(Number::ONE);
        let spec =
            ColumnSpec { lower: Some(Number::ZERO), upper: None, cost: Number::ONE, integer: true };
        let x = builder.column(&[], &spec).expect("few columns");
        for (name, state) in [
            ("p", FamilyState::In),
            ("q", FamilyState::OnDemand),
            ("none", FamilyState::In),
            ("r", FamilyState::Out),
        ] {
            builder.family(name, state, false);
            if name != "none" {
                let row = Row { entries: vec![(x, Number::ONE)], lower: None, upper: None };
                builder.row(&[], row).expect("few rows");
            }
        }
        let model = builder.build();
        let [p, q] = [0, 1].map(FamilyId::from_index);
        assert_eq!(model.families_that_hold(), [p, q]);
        let alone = model.feasibility(&BTreeSet::from([q]));
        assert_eq!(alone.families_that_hold(), [q]);
        assert!(!alone.row_is_in(RowId(0)));
        assert_eq!(alone.families()[q.index()].state, FamilyState::OnDemand);
        assert!(alone.numbers().exact(alone.columns()[0].cost).is_zero());
        assert!(alone.offset().is_zero() && alone.row_count() == model.row_count());
    }
}
