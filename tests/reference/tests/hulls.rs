//! Theorems that hold on some data only, on seeded instances cut down to such data: relaxations that are integral
//! there, and a bound that does not depend on the root. What holds on all data stands in `known.rs`.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;

use hullward_tests_reference::agree;
use hullward_tests_reference::round_trip::{rival, root, solve};
use hullward_tests_reference::seeded::seeded;
use hullward_tests_reference::theory::labels;
use instance::{Datum, Instance};
use model::Number;
use tree::Settings;

fn bound(id: &str, on: &Instance) -> f64 {
    root(&rival(id, on)).bound.unwrap()
}

/// The relaxation's bound is the optimum, which the search finds by another rival.
fn is_hull(id: &str, other: &str, (name, on): (&str, &Instance)) {
    let found = bound(id, on);
    let wanted = solve(&rival(other, on), Settings::default()).incumbent.unwrap();
    assert!(agree(found, wanted, 1e-7), "{id} on {name}: {found} for {wanted}");
}

/// Directed cuts bound a Steiner tree by as much from every terminal (Goemans & Myung, Networks 23 (1993) 19-28).
#[test]
fn a_steiner_tree_is_bounded_by_as_much_from_every_root() {
    let mut roots = 0;
    for (name, on) in seeded("steiner", &[4, 6], 3) {
        let wanted = bound("steiner/directed-cuts", &on);
        for terminal in labels(&on, "R") {
            let mut turned = on.clone();
            turned.set("r", Datum::Element(terminal.clone()));
            let found = bound("steiner/directed-cuts", &turned);
            assert!(agree(found, wanted, 1e-7), "from {terminal} on {name}: {found} for {wanted}");
            roots += 1;
        }
    }
    assert!(roots >= 60, "{roots} roots");
}

/// Degree rows are integral where every edge joins an even with an odd node (König 1931; Hoffman & Kruskal 1956).
#[test]
fn matchings_between_two_sides_are_integral() {
    for (name, mut on) in seeded("matching", &[5, 7], 3) {
        let nodes = labels(&on, "V");
        let side = |label: &String| nodes.iter().position(|one| one == label).unwrap() % 2;
        let Some(Datum::Tuples { arity, rows }) = on.get("E").cloned() else { panic!("{name}") };
        let rows = rows.into_iter().filter(|edge| side(&edge[0]) != side(&edge[1])).collect();
        on.set("E", Datum::Tuples { arity, rows });
        is_hull("matching/degree", "matching/odd-sets", (&name, &on));
    }
}

/// The triangles describe all cuts of four nodes (Barahona & Mahjoub, Mathematical Programming 36 (1986) 157-173).
#[test]
fn triangles_are_all_that_cuts_of_four_nodes_need() {
    for (name, on) in seeded("max-cut", &[4], 6) {
        is_hull("max-cut/triangles", "max-cut/sides", (&name, &on));
    }
}

/// The stock rows of spans are the hull where nothing is gained by making a unit early and keeping it (Pochet &
/// Wolsey, Mathematical Programming 67 (1994) 297-323): here a unit costs the same to make in all periods.
#[test]
fn stock_rows_are_the_hull_where_it_does_not_pay_to_wait() {
    for (name, mut on) in seeded("lot", &[4, 7], 3) {
        let cells: BTreeMap<_, _> =
            labels(&on, "T").into_iter().map(|period| (vec![period], Number::from(3))).collect();
        on.set("p", Datum::Table { arity: 1, cells });
        is_hull("lot/wagner-whitin", "lot/big-m", (&name, &on));
    }
}
