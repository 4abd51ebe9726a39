//! TSPLIB instances (Reinelt 1991): optima and relaxation bounds. Each value of
//! `fixtures/round_trips.json` names its source; the root is city 1 throughout.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use hullward_tests_reference::round_trip::{Published, check_bound, rival, solve, tsplib, values};
use tree::{Settings, Status};

/// Largest size at which each rival's relaxation is solved here.
fn largest(rival: &str) -> usize {
    match rival {
        "atsp/multi-commodity" => 29,
        "atsp/one-commodity" => 70,
        "atsp/two-commodity" => 48,
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
        check_bound(&value, &rival(id, &instance));
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
fn two_commodity_bounds() {
    bounds_agree("atsp/two-commodity", 14);
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

/// Written rows alone, without a family on demand, lead to the published optimum too. Of gr17 and
/// ulysses16 the compact rivals but multi-commodity flow are left out: their trees are very large.
#[test]
fn optima_of_compact_rivals() {
    let mut seen = 0;
    for value in values().into_iter().filter(|v| v.quantity.starts_with("integer optimum")) {
        if value.instance != "burma14" && value.rival != "atsp/multi-commodity" {
            continue;
        }
        let Some(instance) = tsplib(&value.instance) else { return };
        let settings = Settings { cutoff: Some(value.value + 0.5), ..Settings::default() };
        let summary = solve(&rival(&value.rival, &instance), settings);
        let name = format!("{} on {}", value.rival, value.instance);
        assert_eq!(summary.status, Status::Optimal, "{name}: {:?}", summary.stopped);
        let found = summary.incumbent.unwrap();
        assert!((found - value.value).abs() < 1e-6, "{name}: {found} for {}", value.value);
        seen += 1;
    }
    assert_eq!(seen, 9);
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
