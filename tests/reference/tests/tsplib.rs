//! TSPLIB instances (Reinelt 1991): optima and relaxation bounds. Each value of
//! `fixtures/round_trips.json` names its source; the root is city 1 throughout.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use hullward_tests_reference::round_trip::{Published, rival, root, solve, tsplib, values};
use model::nearest_f64;
use tree::{Settings, Status};

/// Largest size at which each rival's relaxation is solved here.
fn largest(rival: &str) -> usize {
    match rival {
        "atsp/multi-commodity" => 29,
        "atsp/one-commodity" => 70,
        _ => 100,
    }
}

fn cities(instance: &str) -> usize {
    let digits = instance.trim_start_matches(|c: char| !c.is_ascii_digit());
    digits.trim_end_matches(|c: char| !c.is_ascii_digit()).parse().unwrap()
}

fn wanted(rival: &str, quantity: &str) -> Vec<Published> {
    let fits = |v: &Published| {
        v.rival == rival
            && v.quantity.starts_with(quantity)
            && cities(&v.instance) <= largest(rival)
    };
    values().into_iter().filter(fits).collect()
}

/// Every bound of a rival that is small enough, found and proved.
fn bounds_agree(id: &str, at_least: usize) {
    let values = wanted(id, "LP bound");
    assert!(values.len() >= at_least, "{id}: {} values", values.len());
    for value in values {
        let Some(instance) = tsplib(&value.instance) else { return };
        let root = root(&rival(id, &instance));
        assert_eq!(root.status, Status::Optimal, "{id} on {}", value.instance);
        let bound = root.bound.unwrap();
        let off = (bound - value.value).abs();
        assert!(
            off <= value.tolerance * (1.0 + bound.abs()),
            "{id} on {}: {bound} for {} ({})",
            value.instance,
            value.value,
            value.source
        );
        let proved = nearest_f64(&root.checked_bound.unwrap());
        assert!(
            (proved - bound).abs() <= 1e-7 * (1.0 + bound.abs()),
            "{id} on {}: proved {proved} of {bound}",
            value.instance
        );
    }
}

#[test]
fn assignment_bounds() {
    bounds_agree("atsp/assignment", 20);
}

#[test]
fn label_bounds() {
    bounds_agree("atsp/labels", 20);
}

#[test]
fn lifted_label_bounds() {
    bounds_agree("atsp/lifted-labels", 20);
}

#[test]
fn one_commodity_bounds() {
    bounds_agree("atsp/one-commodity", 18);
}

#[test]
fn multi_commodity_bounds() {
    bounds_agree("atsp/multi-commodity", 8);
}

#[test]
fn subtour_bounds() {
    bounds_agree("atsp/subtours", 28);
}

#[test]
fn cut_bounds() {
    bounds_agree("atsp/cuts", 8);
}

/// Subtours on demand close each of these to its published optimum.
#[test]
fn published_optima() {
    let mut seen = 0;
    for value in values().into_iter().filter(|v| v.rival == "optimum") {
        if cities(&value.instance) > 55 || value.instance == "p43" {
            continue;
        }
        let Some(instance) = tsplib(&value.instance) else { return };
        let summary = solve(
            &rival("atsp/subtours", &instance),
            Settings { node_limit: Some(20_000), ..Settings::default() },
        );
        assert_eq!(summary.status, Status::Optimal, "{}: {:?}", value.instance, summary.stopped);
        let found = summary.incumbent.unwrap();
        assert!(
            (found - value.value).abs() < 1e-6,
            "{}: {found} for {} ({})",
            value.instance,
            value.value,
            value.source
        );
        assert!(summary.checked, "{}: the optimum is not checked", value.instance);
        seen += 1;
    }
    assert!(seen >= 20, "{seen} instances");
}
