//! Sentences of reports whose figures are known.

use record::study::{
    Equivalence, EquivalenceKind, EquivalenceLevel, Families, FamilyShare, Order, OrderLevel,
    Relation, Report, RivalFamilies,
};

use super::sections;

fn verdict_of(report: &Report) -> String {
    sections(report)
        .iter()
        .flat_map(|section| section.verdict.clone())
        .collect::<Vec<_>>()
        .join(" ")
}

#[test]
fn a_bound_on_one_instance_is_not_called_never_weaker() {
    let order = Order {
        rivals: ["A".to_owned(), "B".to_owned()],
        relation: Relation::NeverWeaker,
        level: OrderLevel::Observed,
        ..Order::default()
    };
    let said = verdict_of(&Report::Order(Box::new(order.clone())));
    assert!(said.contains("observed on this instance") && !said.contains("never"), "{said}");
    let theorem = Order { level: OrderLevel::Theorem, source: "Padberg".to_owned(), ..order };
    let said = verdict_of(&Report::Order(Box::new(theorem)));
    assert_eq!(said, "A ⪰ B: A is never weaker than B – theorem: Padberg.");
}

#[test]
fn a_family_without_effect_is_said_to_gain_nothing() {
    let share = |name: &str, lost| FamilyShare {
        name: name.to_owned(),
        without: Some(1.0),
        lost: Some(lost),
        ..FamilyShare::default()
    };
    let rival = RivalFamilies {
        bound: Some(3.0),
        families: vec![share("leave", 2.0), share("order", 0.0)],
        ..RivalFamilies::default()
    };
    let said = verdict_of(&Report::Families(Families { rivals: vec![rival] }));
    assert!(said.contains("Leaving out order loses 0.000."), "{said}");
}

#[test]
fn a_verdict_says_how_far_it_goes() {
    let said = |equivalent, level, kind| {
        let verdict = Equivalence {
            rivals: ["A".to_owned(), "B".to_owned()],
            equivalent,
            level,
            kind,
            shared: vec![("x".to_owned(), 12)],
            ..Equivalence::default()
        };
        verdict_of(&Report::Equivalence(Box::new(verdict)))
    };
    let sets = EquivalenceKind::Sets;
    assert!(said(Some(true), EquivalenceLevel::Unrefuted, sets).contains("Nothing that was tried"));
    assert!(said(Some(true), EquivalenceLevel::Enumerated, sets).contains("sub-instances"));
    assert!(said(None, EquivalenceLevel::Unrefuted, sets).contains("undecided"));
    let own = said(Some(true), EquivalenceLevel::Unrefuted, EquivalenceKind::ThisObjective);
    assert!(own.contains("do not admit the same plans"), "{own}");
    // Two models that name no column alike: nothing is said of their plans.
    let strangers = Equivalence {
        rivals: ["A".to_owned(), "B".to_owned()],
        equivalent: Some(true),
        kind: EquivalenceKind::ThisObjective,
        ..Equivalence::default()
    };
    let said = verdict_of(&Report::Equivalence(Box::new(strangers)));
    assert!(said.contains("whether they admit the same plans is not known"), "{said}");
}
