//! Relaxations that no row and no map tells apart, but an objective does.

use record::study::{OrderLevel, Relation};

use super::{driven, instance, subject};
use crate::Plan;

/// Two columns in the unit square; the second text has them on either side of a switch of its own, so
/// that they add up to 1 at most. `COSTS` stands for the objective.
const SQUARE: &str = "Square
data
  J  columns
minimise
  COSTS
subject to
  Σ_{j ∈ J} x_j ≤ 2                     (all)
  0 ≤ x_j ≤ 1  ∀ j ∈ J
";
const TRIANGLE: &str = "Triangle
data
  J  columns
  s ∈ J  the first
minimise
  COSTS
subject to
  x_s ≤ y                               (left)
  Σ_{j ∈ J : j ≠ s} x_j ≤ 1 − y         (right)
  0 ≤ y ≤ 1
  0 ≤ x_j ≤ 1  ∀ j ∈ J
";

fn order(costs: &str, seed: u64) -> record::study::Order {
    let data = instance("J\np q\n\ns = p\n");
    let text = |text: &str| text.replace("COSTS", costs);
    let subjects = vec![subject("A", &text(SQUARE), &data), subject("B", &text(TRIANGLE), &data)];
    let plan = Plan { seed, ..Plan::default() };
    driven(10_000, |desk| crate::order::order(desk, subjects, plan)).remove(0)
}

#[test]
fn the_objective_of_the_instance_tells_them_apart() {
    // The least of −x_p − x_q is −2 over the square and −1 over the triangle.
    let order = order("Σ_{j ∈ J} −1 x_j", 0);
    assert_eq!((order.relation, order.level), (Relation::NeverStronger, OrderLevel::Certified));
    let forth = &order.certificates[0];
    assert_eq!((forth.holds, forth.apart), (Some(false), Some((-2.0, -1.0))), "{forth:?}");
    assert_eq!(forth.witness, "the objective of the instance");
    assert_eq!(forth.violation, Some(1.0));
    let point: Vec<(&str, f64)> = forth.point.iter().map(|(name, x)| (name.as_str(), *x)).collect();
    assert_eq!(point, [("x[p]", 1.0), ("x[q]", 1.0)]);
}

#[test]
fn where_its_own_objective_does_not_a_random_one_tells_them_apart() {
    // Both are 0 at the origin under costs of 1: only an objective that both costs are negative in
    // leads to the corner that the triangle lacks.
    let mut told = 0;
    for seed in (0..12).map(|number| 100 * number) {
        let order = order("Σ_{j ∈ J} x_j", seed);
        let forth = &order.certificates[0];
        if forth.holds.is_none() {
            continue;
        }
        told += 1;
        assert_eq!(forth.holds, Some(false), "{forth:?}");
        assert!(forth.witness.starts_with("random objective"), "{forth:?}");
        let costs: Vec<f64> =
            forth.objective.iter().map(|(_, cost)| cost.parse().expect("a whole number")).collect();
        let [p, q] = costs.as_slice() else { panic!("{forth:?}") };
        assert!(*p < 0.0 && *q < 0.0, "{forth:?}");
        let better = if p < q { *p } else { *q };
        assert_eq!(forth.apart, Some((p + q, better)), "{forth:?}");
    }
    // Of eight objectives a quarter each has both costs negative: nine of ten seeds find one.
    assert!(told >= 8, "{told} of 12");
}

#[test]
fn the_same_relaxation_is_not_told_apart() {
    let data = instance("J\np q\n\ns = p\n");
    let text = TRIANGLE.replace("COSTS", "Σ_{j ∈ J} −1 x_j");
    let subjects = vec![subject("A", &text, &data), subject("B", &text, &data)];
    let order =
        driven(10_000, |desk| crate::order::order(desk, subjects, Plan::default())).remove(0);
    assert_eq!(order.relation, Relation::Equal, "{order:?}");
    assert!(order.certificates.iter().all(|one| one.apart.is_none()));
}
