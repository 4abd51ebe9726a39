//! Rows of one rival over every plan of the other, and levels that follow.

use std::collections::BTreeMap;
use std::rc::Rc;

use model::{ColumnId, FamilyState, Number, Row, RowId};
use record::study::{EquivalenceLevel, OrderLevel, Relation};

use super::{LINKED, driven, instance, shipped, stops, subject};
use crate::subject::model_of;
use crate::{Plan, Subject, court};

/// Two sites, three clients.
const SITES: &str = "I\np q\n\nJ\n1 2 3\n\nf by i\np 4\nq 5\n\nc by i, j\n\
                     p 1 1\np 2 3\np 3 6\nq 1 5\nq 2 2\nq 3 1\n";

fn plan() -> Plan {
    // No sub-instance: whatever is proved is proved by rows.
    Plan { sizes: Vec::new(), mutants: false, duels: 2, ..Plan::default() }
}

#[test]
fn links_added_up_admit_the_same_plans_and_that_is_proved_row_by_row() {
    let data = instance(SITES);
    let added = LINKED.replace(
        "  x_{i,j} ≤ y_i               ∀ i ∈ I, j ∈ J    (link)",
        "  Σ_{j ∈ J} x_{i,j} ≤ |J| y_i  ∀ i ∈ I           (link)",
    );
    let subjects = vec![subject("A", LINKED, &data), subject("B", &added, &data)];
    let verdict = driven(50_000, |desk| court::court(desk, subjects, plan())).remove(0);
    assert_eq!((verdict.equivalent, verdict.level), (Some(true), EquivalenceLevel::Proved));
    let rows: Vec<_> =
        verdict.evidence.iter().filter(|one| one.test.starts_with("rows of")).collect();
    assert_eq!(rows.len(), 2, "{verdict:?}");
    // A single link holds over the plans of the other, not over its relaxation.
    assert!(rows[0].outcome.contains("0 by search"), "{rows:?}");
    assert!(!rows[1].outcome.contains(" 0 by search"), "{rows:?}");
}

#[test]
fn a_row_that_one_plan_breaks_is_found_with_the_plan() {
    // The first site is dear: the best plan opens the other alone.
    let data = instance(&SITES.replace("p 4", "p 9"));
    let a = subject("A", LINKED, &data);
    // At most one site: the optimum may stay, two open sites are no plan any more.
    let ys: Vec<ColumnId> = (0..a.model.columns().len())
        .map(ColumnId::from_index)
        .filter(|&column| a.model.column_name(column).starts_with("y["))
        .collect();
    let entries = ys.iter().map(|&column| (column, Number::ONE)).collect();
    let row = Row { entries, lower: None, upper: Some(Number::ONE) };
    let model = a.model.with_rows("one site", vec![row]).expect("a row");
    assert_eq!(model.row_name(RowId::from_index(model.row_count() - 1)), "one site");
    let model = Rc::new(model);
    let b = Subject { letter: "B".to_owned(), model, source: None, ..a.clone() };
    let quiet = Plan { duels: 0, plans: 0, ..plan() };
    let verdict = driven(50_000, |desk| court::court(desk, vec![a, b], quiet)).remove(0);
    let example = verdict.counterexample.as_ref().expect("a plan");
    assert_eq!(
        (example.admitted_by.as_str(), &*example.violated),
        ("A", &["one site".to_owned()][..])
    );
    assert!(example.plan.iter().filter(|entry| entry.variable == "y").count() == 2, "{verdict:?}");
}

#[test]
fn every_subtour_row_is_certified_over_flows_where_they_are_few() {
    let data = stops(5);
    // Another title and no entry: no theorem is looked up.
    let plain = |letter: &str, id: &str| Subject { entry: None, ..shipped(letter, id, &data) };
    let subjects = vec![plain("A", "atsp/multi-commodity"), plain("B", "atsp/subtours")];
    let order =
        driven(100_000, |desk| crate::order::order(desk, subjects, Plan::default())).remove(0);
    let forth = &order.certificates[0];
    assert_eq!(forth.holds, Some(true), "{}", forth.why);
    assert_eq!((order.level, order.relation), (OrderLevel::Certified, Relation::NeverWeaker));
    assert!(forth.proofs.iter().any(|proof| proof.row.starts_with("subtour{")));
    assert!(order.certificates[1].why.contains("no affine map was found"), "{order:?}");
}

/// Rows on demand of the outer rival were passed over: what was certified was a part of it.
#[test]
fn rows_on_demand_are_rows_that_must_hold_too() {
    let data = instance(SITES);
    let added = LINKED.replace(
        "  x_{i,j} ≤ y_i               ∀ i ∈ I, j ∈ J    (link)",
        "  Σ_{j ∈ J} x_{i,j} ≤ |J| y_i  ∀ i ∈ I           (link)",
    );
    let states = BTreeMap::from([("link".to_owned(), FamilyState::OnDemand)]);
    let model = model_of(LINKED, &data, &BTreeMap::new(), &states).expect("a model");
    let split = Subject { model: Rc::new(model), ..subject("B", LINKED, &data) };
    let subjects = vec![subject("A", &added, &data), split];
    let order =
        driven(50_000, |desk| crate::order::order(desk, subjects, Plan::default())).remove(0);
    let [forth, back] = &order.certificates;
    assert_eq!(forth.holds, Some(false), "{}", forth.why);
    assert!(forth.witness.starts_with("link["), "{}", forth.witness);
    assert_eq!(back.holds, Some(true), "{}", back.why);
}
