//! Further relaxations of round trips against stored values: labels with a looser multiplier, tight flow (Gavish &
//! Graves 1978), products of labels and drives (Sherali & Driscoll, Operations Research 50 (2002) 656-669), the
//! fractional 2-matching (Dantzig, Fulkerson & Johnson 1954), lifted rows without lifted bounds (Desrochers &
//! Laporte 1991) and time stages with one drive at a time (Fox, Gavish & Graves 1980), as they are shipped. And
//! bounds from every depot, for that of a directed label depends on it. Values with their sources: `fixtures/round_trips.json`.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::rc::Rc;

use hullward_tests_reference::round_trip::{check_bound, from_depot, rival, root, tsplib, values};
use hullward_tests_reference::theory::labels;
use instance::Instance;
use model::Model;

/// The shipped rival of a name in the fixture.
fn shipped(variant: &str) -> &str {
    match variant {
        "variant/two-matching" => "tsp/degrees",
        "variant/loose-labels" => "atsp/loose-labels",
        "variant/tight-flow" => "atsp/tight-one-commodity",
        "variant/products" => "atsp/rlt-labels",
        "variant/time-staged" => "atsp/one-at-a-time",
        "variant/lifted-rows" => "atsp/lifted-rows",
        rival => rival,
    }
}

fn model(variant: &str, instance: &Instance) -> Rc<Model> {
    rival(shipped(variant), instance)
}

/// Every stored bound of a variant on instances of at most so many columns.
fn bounds_agree(variant: &str, (columns, at_least): (usize, usize)) {
    let mut seen = 0;
    for value in values().iter().filter(|v| v.rival == variant && v.quantity == "LP bound") {
        let Some(instance) = tsplib(&value.instance) else { return };
        let model = model(variant, &instance);
        if model.columns().len() > columns {
            continue;
        }
        check_bound(value, &model);
        seen += 1;
    }
    assert!(seen >= at_least, "{variant}: {seen} bounds");
}

#[test]
fn labels_with_a_looser_multiplier() {
    bounds_agree("variant/loose-labels", (10_000, 23));
}

#[test]
fn lifted_rows_alone() {
    bounds_agree("variant/lifted-rows", (10_000, 23));
}

#[test]
fn tight_flow() {
    bounds_agree("variant/tight-flow", (6_000, 17));
}

#[test]
fn products_of_labels_and_drives() {
    bounds_agree("variant/products", (2_500, 9));
}

/// Time stages with one drive at a time (Fox, Gavish & Graves 1980), legs (Picard & Queyranne 1978), precedence (Sarin, Sherali & Bhootra 2005)
/// and labels with precedence (Gouveia & Pires 1999).
#[test]
fn stages_legs_and_precedence() {
    bounds_agree("variant/time-staged", (5_000, 4));
    bounds_agree("atsp/legs", (5_000, 4));
    bounds_agree("atsp/precedence", (2_000, 5));
    bounds_agree("atsp/lifted-precedence-labels", (2_000, 5));
}

#[test]
fn fractional_two_matchings() {
    bounds_agree("variant/two-matching", (10_000, 16));
}

/// The least and the largest bound over the choice of the depot.
#[test]
fn bounds_from_every_depot() {
    let mut seen = 0;
    for least in values().iter().filter(|v| v.quantity == "min over depots") {
        let Some(trip) = tsplib(&least.instance) else { return };
        if least.rival == "variant/products" && labels(&trip, "V").len() > 20 {
            continue;
        }
        let same = |v: &&_| is_largest(v, (&least.rival, &least.instance));
        let all = values();
        let largest = all.iter().find(same).unwrap();
        let bounds = (0..labels(&trip, "V").len())
            .map(|depot| root(&model(&least.rival, &from_depot(&trip, depot))).bound.unwrap());
        let (mut low, mut high) = (f64::INFINITY, f64::NEG_INFINITY);
        for bound in bounds {
            low = if bound < low { bound } else { low };
            high = if bound > high { bound } else { high };
        }
        let name = format!("{} on {}: {low} to {high}", least.rival, least.instance);
        let near = |found: f64, value: f64| (found - value).abs() <= 1e-6 * (1.0 + value.abs());
        assert!(near(low, least.value) && near(high, largest.value), "{name}");
        seen += 1;
    }
    assert_eq!(seen, 15);
}

fn is_largest(
    value: &hullward_tests_reference::round_trip::Published,
    (rival, instance): (&str, &str),
) -> bool {
    value.quantity == "max over depots" && value.rival == rival && value.instance == instance
}
