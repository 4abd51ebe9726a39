//! Theorems that hold on some data only, on seeded instances cut down to such data: relaxations that are integral
//! there, and a bound that does not depend on the root. What holds on all data stands in `known.rs`.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;
use std::rc::Rc;

use hullward_tests_reference::agree;
use hullward_tests_reference::parts::Parts;
use hullward_tests_reference::round_trip::{rival, root, solve};
use hullward_tests_reference::seeded::seeded;
use hullward_tests_reference::theory::labels;
use instance::{Datum, Instance};
use model::Number;
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use tree::{Settings, Status};

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

/// Vertices of a relaxation, by random costs of all its columns: how many have a whole column that is
/// fractional.
fn fractional_vertices(id: &str, on: &Instance) -> usize {
    let model = rival(id, on);
    let whole: Vec<bool> = model.columns().iter().map(|column| column.integer).collect();
    let mut random = Pcg32::seed_from_u64(7);
    let mut fractional = 0;
    for _ in 0..10 {
        let mut parts = Parts::of(&model);
        for column in &mut parts.columns {
            column.cost = Number::from(i64::from(random.next_u32() % 19) - 9);
        }
        let found = root(&Rc::new(parts.build()));
        assert_eq!(found.status, Status::Optimal, "{id}");
        let off = |(x, whole): (&f64, &bool)| *whole && (x - x.round()).abs() > 1e-7;
        fractional += usize::from(found.x.iter().zip(&whole).any(off));
    }
    fractional
}

/// The instances of a family with nothing asked for: each supplier, each unit stands by itself then, and
/// a vertex of all is a vertex of each.
fn apart(family: &str, seeds: u64, nothing: impl Fn(&Instance) -> Datum) -> Vec<Instance> {
    let all = seeded(family, &[4, 5, 6], seeds).into_iter();
    let free = all.map(|(_, mut on)| {
        on.set("d", nothing(&on));
        on
    });
    free.collect()
}

/// Forms of a bent cost are locally ideal but for the usual convex combination (Croxton, Gendron & Magnanti,
/// Management Science 49 (2003) 1268-1273; Vielma, Ahmed & Nemhauser, Operations Research 58 (2010) 303-315).
#[test]
fn forms_of_a_bent_cost_are_locally_ideal_but_one() {
    let curves = apart("piecewise", 10, |_| Datum::Number(Number::ZERO));
    let fractional = |id: &str| curves.iter().map(|on| fractional_vertices(id, on)).sum::<usize>();
    let ideal =
        ["incremental", "logarithmic", "multiple-choice", "split-combination", "tight-combination"];
    for form in ideal {
        assert_eq!(fractional(&format!("piecewise/{form}")), 0, "{form}");
    }
    let usual = fractional("piecewise/convex-combination");
    // 59 of 1,500
    assert!(usual > 30, "{usual}");
}

/// The rows over starts and stops are the hull of the least times on and off (Rajan & Takriti 2005; Malkin 2003);
/// summed up over the hours they are not.
#[test]
fn rows_over_starts_and_stops_are_the_hull_of_least_times() {
    let units = apart("unit", 10, |on| {
        let cells = labels(on, "T").into_iter().map(|hour| (vec![hour], Number::ZERO)).collect();
        Datum::Table { arity: 1, cells }
    });
    let fractional = |id: &str| units.iter().map(|on| fractional_vertices(id, on)).sum::<usize>();
    assert_eq!(fractional("unit/turn-on-off"), 0);
    assert!(fractional("unit/three-binary-summed") > 100);
}
