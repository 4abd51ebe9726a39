//! The model's public face, on a round trip of three stops written by hand.

#![allow(clippy::unwrap_used, reason = "a test fails by it")]

use std::collections::BTreeSet;

use hullward_model::{
    ColumnId, ColumnSpec, FamilyId, FamilyState, LabelId, Model, ModelBuilder, ModelError, Number,
    Relation, Row, RowId, Scope, Sense, SubsetCondition, SubsetFamily, SubsetTerm, nearest_f64,
};

fn number(top: i64, bottom: u64) -> Number {
    Number::from_parts(top.into(), bottom.into())
}

/// Three stops, all six drives with cost 1 to 6, leave rows written, subtours on demand.
fn round_trip() -> Model {
    let mut builder = ModelBuilder::new("three stops", Sense::Minimise);
    let stops: Vec<LabelId> = ["Ash", "Birch", "Cedar"].iter().map(|s| builder.label(s)).collect();
    builder.variable("x", true);
    let (mut arcs, mut cost) = (Vec::new(), 0);
    for &i in &stops {
        for &j in stops.iter().filter(|&&j| j != i) {
            cost += 1;
            let spec = ColumnSpec {
                lower: Some(Number::ZERO),
                upper: Some(Number::ONE),
                cost: number(cost, 1),
                integer: true,
            };
            arcs.push((i, j, builder.column(&[i, j], &spec).unwrap()));
        }
    }
    builder.family("leave", FamilyState::In, false);
    for &i in &stops {
        let entries =
            arcs.iter().filter(|a| a.0 == i).map(|a| (a.2, Number::ONE)).collect::<Vec<_>>();
        let one = Some(Number::ONE);
        builder.row(&[i], Row { entries, lower: one.clone(), upper: one }).unwrap();
    }
    builder.family("subtour", FamilyState::OnDemand, false);
    let terms = arcs.iter().map(|&(i, j, column)| SubsetTerm {
        column,
        coefficient: Number::ONE,
        scope: Scope::Inside(i, j),
    });
    let family = SubsetFamily {
        family: FamilyId(0),
        tuple: Vec::new(),
        ground: stops.clone(),
        conditions: vec![SubsetCondition::Size { at_least: 2, at_most: 2 }],
        terms: terms.collect(),
        weights: vec![-Number::ONE; 3],
        constant: Number::ONE,
        rounded: None,
        relation: Relation::AtMost,
    };
    builder.subset_family(family).unwrap();
    builder.build()
}

#[test]
fn columns_and_rows_know_their_names() {
    let model = round_trip();
    assert_eq!(model.column_name(ColumnId(1)), "x[Ash → Cedar]");
    assert_eq!(model.row_name(RowId(2)), "leave[Cedar]");
    assert_eq!(model.find_column("x", &["Cedar", "Ash"]), Some(ColumnId(4)));
    assert_eq!(model.find_column("x", &["Ash", "Ash"]), None);
    assert_eq!(model.find_column("y", &["Ash", "Birch"]), None);
}

#[test]
fn a_member_of_a_family_over_subsets_is_the_row_of_its_set() {
    let model = round_trip();
    let family = &model.subset_families()[0];
    let subset: BTreeSet<LabelId> = family.ground[..2].iter().copied().collect();
    assert!(family.admits(&subset));
    let row = family.member(&subset);
    assert_eq!(row.entries, vec![(ColumnId(0), Number::ONE), (ColumnId(2), Number::ONE)]);
    assert_eq!((row.lower, row.upper), (None, Some(Number::ONE)));
    assert!(!family.admits(&family.ground.iter().copied().collect()));
}

#[test]
fn statistics_count_what_is_written() {
    let statistics = round_trip().statistics();
    assert_eq!((statistics.rows, statistics.columns, statistics.integer_columns), (3, 6, 6));
    assert_eq!(statistics.nonzeros, 6);
    assert_eq!(statistics.families[0].decades.get(&0), Some(&6));
    assert_eq!(statistics.families[1].rows, 0);
}

#[test]
fn entries_on_one_column_are_added_up_and_zeros_dropped() {
    let mut builder = ModelBuilder::new("", Sense::Minimise);
    let spec = ColumnSpec { lower: None, upper: None, cost: Number::ZERO, integer: false };
    let (a, b) = (builder.column(&[], &spec).unwrap(), builder.column(&[], &spec).unwrap());
    let entries = vec![(b, number(1, 2)), (a, Number::ONE), (b, number(1, 3)), (a, -Number::ONE)];
    builder.row(&[], Row { entries, lower: None, upper: Some(Number::ZERO) }).unwrap();
    assert_eq!(builder.build().row(RowId(0)).entries, vec![(b, number(5, 6))]);
}

#[test]
fn a_row_on_an_unknown_column_is_refused() {
    let mut builder = ModelBuilder::new("", Sense::Minimise);
    let row = Row { entries: vec![(ColumnId(3), Number::ONE)], lower: None, upper: None };
    assert_eq!(builder.row(&[], row), Err(ModelError::UnknownColumn(ColumnId(3))));
}

#[test]
fn the_objective_lattice_is_the_common_divisor_of_the_costs() {
    let lattice = |costs: &[Number], integer: bool| {
        let mut builder = ModelBuilder::new("", Sense::Minimise);
        for cost in costs {
            let spec = ColumnSpec { lower: None, upper: None, cost: cost.clone(), integer };
            builder.column(&[], &spec).unwrap();
        }
        builder.build().objective_lattice()
    };
    assert_eq!(lattice(&[number(4, 1), number(-6, 1), Number::ZERO], true), Some(number(2, 1)));
    assert_eq!(lattice(&[number(1, 2), number(1, 3)], true), Some(number(1, 6)));
    assert_eq!(lattice(&[number(4, 1)], false), None);
    assert_eq!(lattice(&[Number::ZERO], true), None);
}

#[test]
fn zero_is_never_negative() {
    assert!(nearest_f64(&Number::ZERO).is_sign_positive());
    assert!(nearest_f64(&-Number::ZERO).is_sign_positive());
}

#[test]
fn conditions_hold_as_they_are_written() {
    let ids: Vec<LabelId> = (0..4).map(LabelId).collect();
    let set = |members: &[u32]| members.iter().map(|&i| LabelId(i)).collect::<BTreeSet<_>>();
    let weights = ids.iter().map(|&i| (i, number(2, 1))).collect();
    let over = SubsetCondition::WeightOver { weights, over: number(3, 1) };
    assert!(over.holds(&set(&[0, 1])) && !over.holds(&set(&[0])));
    assert!(SubsetCondition::Odd(true).holds(&set(&[2])));
    assert!(!SubsetCondition::Odd(true).holds(&set(&[2, 3])));
    let meets = SubsetCondition::Meets(vec![ids[0], ids[3]]);
    assert!(meets.holds(&set(&[3])) && !meets.holds(&set(&[1, 2])));
    let clique =
        SubsetCondition::Clique(vec![(ids[0], ids[1]), (ids[2], ids[1]), (ids[0], ids[2])]);
    assert!(clique.holds(&set(&[0, 1, 2])) && !clique.holds(&set(&[0, 3])));
}
