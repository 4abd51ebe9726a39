//! Families drawn at random: every kind of scope, sign, condition and relation at once. Whatever
//! method is chosen, separation and membership agree with enumeration.

use model::{
    ColumnId, ColumnSpec, FamilyId, FamilyState, LabelId, Model, ModelBuilder, Number, Relation,
    RoundedUp, Scope, Sense, SubsetCondition, SubsetFamily, SubsetFamilyId, SubsetTerm,
};
use proptest::prelude::*;

use super::build::{check, enumerated};
use crate::{Exactness, Membership, Separator};

const COLUMNS: usize = 8;
const LABELS: u32 = 7;

fn label() -> impl Strategy<Value = LabelId> {
    (0..LABELS).prop_map(LabelId)
}

fn half(value: i64) -> Number {
    Number::from_parts(value.into(), 2_u32.into())
}

fn third(value: i64) -> Number {
    Number::from_parts(value.into(), 3_u32.into())
}

fn scope(cut_only: bool) -> impl Strategy<Value = Scope> {
    (0..if cut_only { 3 } else { 6 }, label(), label()).prop_map(|(kind, i, j)| match kind {
        0 => Scope::Leaving(i, j),
        1 => Scope::Crossing(i, j),
        2 => Scope::Outside(i),
        3 => Scope::Inside(i, j),
        4 => Scope::Always,
        _ => Scope::Element(i),
    })
}

fn condition() -> impl Strategy<Value = SubsetCondition> {
    let weights = || prop::collection::vec((label(), (-1_i64..3).prop_map(Number::from)), 1..5);
    prop_oneof![
        (0_u32..4, 2_u32..7)
            .prop_map(|(at_least, at_most)| SubsetCondition::Size { at_least, at_most }),
        label().prop_map(SubsetCondition::Contains),
        label().prop_map(SubsetCondition::Avoids),
        any::<bool>().prop_map(SubsetCondition::Odd),
        prop::collection::vec(label(), 0..4).prop_map(SubsetCondition::Meets),
        (weights(), -2_i64..4)
            .prop_map(|(weights, over)| SubsetCondition::WeightOver { weights, over: over.into() }),
        prop::collection::vec((label(), label()), 4..12).prop_map(SubsetCondition::Clique),
    ]
}

/// Terms all of one sign (so that a cut is often recognised) or of both.
fn family() -> impl Strategy<Value = SubsetFamily> {
    let relation = prop_oneof![
        Just(Relation::AtMost),
        Just(Relation::AtLeast),
        Just(Relation::AtLeast),
        Just(Relation::Equal)
    ];
    let terms = any::<bool>().prop_flat_map(|cut_only| {
        let low = if cut_only { 1_i64 } else { -2 };
        let column = (0..COLUMNS).prop_map(ColumnId::from_index);
        prop::collection::vec((column, low..4, scope(cut_only)), 3..14)
    });
    let ground = Just((0..LABELS).map(LabelId).collect::<Vec<_>>()).prop_shuffle();
    let rounded = (prop::collection::vec(-3_i64..4, 5), -2_i64..3, -2_i64..3);
    let rest = (
        prop::collection::vec(-2_i64..3, 5),
        -6_i64..4,
        prop::collection::vec(condition(), 0..3),
        prop::option::weighted(0.2, rounded),
    );
    (relation, terms, ground, rest).prop_map(
        |(relation, terms, ground, (weights, constant, conditions, rounded))| {
            let rounded = rounded.map(|(weights, constant, factor)| RoundedUp {
                factor: half(factor),
                weights: weights.into_iter().map(third).collect(),
                constant: third(constant),
            });
            let terms = terms.into_iter().map(|(column, coefficient, scope)| SubsetTerm {
                column,
                coefficient: half(coefficient),
                scope,
            });
            SubsetFamily {
                family: FamilyId(0),
                tuple: Vec::new(),
                ground: ground[..5].to_vec(),
                conditions,
                terms: terms.collect(),
                weights: weights.into_iter().map(half).collect(),
                constant: half(constant),
                rounded,
                relation,
            }
        },
    )
}

fn model(family: SubsetFamily) -> Model {
    let mut b = ModelBuilder::new("random", Sense::Minimise);
    (0..LABELS).for_each(|k| {
        b.label(&format!("v{k}"));
    });
    for _ in 0..COLUMNS {
        let (lower, upper) = (Some(Number::ZERO), Some(Number::from(2)));
        let spec = ColumnSpec { lower, upper, cost: Number::ONE, integer: true };
        b.column(&[], &spec).unwrap();
    }
    b.family("subsets", FamilyState::OnDemand, false);
    b.subset_family(family).unwrap();
    b.build()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(1500))]

    #[test]
    fn separation_and_membership_agree_with_enumeration(
        family in family(),
        eighths in prop::collection::vec(prop_oneof![Just(0_u8), 0_u8..17], COLUMNS),
    ) {
        let model = model(family);
        let mut separator = Separator::new(&model, SubsetFamilyId(0));
        prop_assert!(matches!(
            separator.exactness(),
            Some(Exactness::Exact | Exactness::Enumerated)
        ));
        let x: Vec<f64> = eighths.iter().map(|e| f64::from(*e) / 8.0).collect();
        check(&model, &mut separator, &x);

        let whole: Vec<f64> = eighths.iter().map(|e| f64::from(e / 8)).collect();
        let members = enumerated(model.subset_family(SubsetFamilyId(0)), &whole);
        let holds = members.iter().all(|(_, violation)| *violation <= 0.0);
        match separator.membership(&whole) {
            Membership::Satisfied => prop_assert!(holds),
            Membership::Violated(_) => prop_assert!(!holds),
            Membership::Unknown => prop_assert!(false, "all members can be listed"),
        }
    }
}

/// The families that are drawn are cuts often enough, and others often enough.
#[test]
fn both_methods_are_drawn() {
    use proptest::strategy::ValueTree;
    use proptest::test_runner::TestRunner;
    let mut runner = TestRunner::deterministic();
    let (mut exact, mut listed) = (0, 0);
    for _ in 0..300 {
        let family = family().new_tree(&mut runner).unwrap().current();
        match Separator::new(&model(family), SubsetFamilyId(0)).exactness() {
            Some(Exactness::Exact) => exact += 1,
            _ => listed += 1,
        }
    }
    assert!(exact > 30 && listed > 30, "{exact} exact, {listed} listed");
}
