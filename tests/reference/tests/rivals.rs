//! What theory says of the rivals for shortest paths, facility location, lot sizing and the
//! undirected round trip, on seeded instances and on published ones; and that the rivals of
//! every family have one optimum. Sources: the citations in
//! the catalogue's `family.toml`, and those named at the values.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{
    formulation, instance, rival, root, solve, tsplib, values,
};
use hullward_tests_reference::seeded::{extent, families, seeded};
use hullward_tests_reference::theory::{
    cheapest_lots, cheapest_sites, shortest_path, sites_of_or_library, table,
};
use hullward_tests_reference::{agree, open_data};
use instance::Instance;
use model::nearest_f64;
use tree::{Settings, Status};

const LOTS: [&str; 4] = ["lot/big-m", "lot/l-s", "lot/location-form", "lot/shortest-path-form"];
const INTEGRAL_LOTS: [&str; 3] = ["lot/l-s", "lot/location-form", "lot/shortest-path-form"];

/// The bound of a shipped rival, which must be proved up to rounding.
fn bound(id: &str, instance: &Instance) -> f64 {
    let root = root(&rival(id, instance));
    assert_eq!(root.status, Status::Optimal, "{id}");
    let (bound, proved) = (root.bound.unwrap(), nearest_f64(&root.checked_bound.unwrap()));
    assert!(agree(proved, bound, 1e-7), "{id}: proved {proved} of {bound}");
    bound
}

fn optimum(id: &str, instance: &Instance) -> f64 {
    let summary = solve(&rival(id, instance), Settings::default());
    assert_eq!(summary.status, Status::Optimal, "{id}");
    summary.incumbent.unwrap()
}

#[test]
fn written_out_rivals_agree_with_highs() {
    let mut compared = 0;
    for family in families() {
        let extent = extent(&family);
        for (name, instance) in seeded(&family, &extent.optima[..1], 2) {
            for entry in catalogue::entries().into_iter().filter(|entry| entry.family == family) {
                let (id, model) = (&entry.id, rival(&entry.id, &instance));
                if !model.subset_families().is_empty() {
                    continue;
                }
                compared += 1;
                let pairs = [
                    (bound(id, &instance), highs(&model, &[], false)),
                    (optimum(id, &instance), highs(&model, &[], true)),
                ];
                for (found, verdict) in pairs {
                    let Verdict::Optimal(value) = verdict else { panic!("{id}: {verdict:?}") };
                    assert!(agree(found, value, 1e-6), "{id} on {name}: {found}, {value}");
                }
            }
        }
    }
    assert!(compared >= 80, "{compared} models");
}

/// They describe the same plans: what one finds every other finds, on thirty instances or more.
#[test]
fn all_rivals_of_a_family_have_one_optimum() {
    let all = catalogue::entries();
    for family in families() {
        let extent = extent(&family);
        let instances = seeded(&family, extent.optima, extent.searched);
        assert!(instances.len() >= 30, "{family}: {} instances", instances.len());
        for (name, instance) in instances {
            let mut first = None;
            for entry in &all {
                if entry.family != family || entry.relaxation {
                    continue;
                }
                let found = optimum(&entry.id, &instance);
                let (id, value) = first.get_or_insert_with(|| (entry.id.clone(), found));
                assert!(
                    agree(found, *value, 1e-6),
                    "{} on {name}: {found}, but {id}: {value}",
                    entry.id
                );
            }
        }
    }
}

#[test]
fn two_loads_bound_as_one() {
    for (name, instance) in seeded("atsp", &[5, 8, 11], 4) {
        let (two, one) =
            (bound("atsp/two-commodity", &instance), bound("atsp/one-commodity", &instance));
        assert!(agree(two, one, 1e-7), "{name}: {two}, {one}");
    }
}

#[test]
fn flow_and_potentials_are_the_shortest_path() {
    for (name, instance) in seeded("path", &[4, 9, 20, 40], 5) {
        let length = shortest_path(&instance);
        for id in ["path/flow", "path/potentials"] {
            let (bound, optimum) = (bound(id, &instance), optimum(id, &instance));
            assert!(agree(bound, length, 1e-9), "{id} on {name}: {bound}, path {length}");
            assert!(agree(optimum, length, 1e-9), "{id} on {name}: {optimum}, path {length}");
        }
    }
}

/// Which is right by duality: of two programs one is infeasible where the other is unbounded.
#[test]
fn negative_cycles_and_missing_ways_are_told() {
    let status = |id: &str, text: &str| root(&rival(id, &instance(text))).status;
    let cycle = "V\na b c\n\nc by i, j\na b 1\nb a -2\nb c 1\n\ns = a\nt = c\n";
    assert_eq!(status("path/flow", cycle), Status::Unbounded);
    assert_eq!(status("path/potentials", cycle), Status::Infeasible);
    let cut_off = "V\na b c\n\nc by i, j\na b 1\nb a 2\nc b 1\n\ns = a\nt = c\n";
    assert_eq!(status("path/flow", cut_off), Status::Infeasible);
    assert_eq!(status("path/potentials", cut_off), Status::Unbounded);
}

#[test]
fn both_location_rivals_find_the_cheapest_sites() {
    for (name, instance) in seeded("ufl", &[3, 5, 7], 3) {
        let cheapest = cheapest_sites(&instance);
        for id in ["ufl/joined", "ufl/split"] {
            let found = optimum(id, &instance);
            assert!(agree(found, cheapest, 1e-7), "{id} on {name}: {found} for {cheapest}");
            let bound = bound(id, &instance);
            assert!(bound <= cheapest + 1e-6 * (1.0 + cheapest), "{id} on {name}: {bound}");
        }
    }
}

/// The bound of the joined links, computed with HiGHS (that of the larger files also stands in
/// public tables); the optimum, published in the OR-Library, which the split links reach.
const OR_LIBRARY: [(&str, Option<f64>, f64); 12] = [
    ("cap71", Some(844807.5875), 932615.75),
    ("cap72", None, 977799.4),
    ("cap73", Some(853434.975), 1010641.45),
    ("cap74", Some(859463.45), 1034976.975),
    ("cap101", Some(659341.15), 796648.4375),
    ("cap102", Some(664015.9), 854704.2),
    ("cap103", None, 893782.1125),
    ("cap104", Some(674734.5875), 928941.75),
    ("cap131", Some(631421.45), 793439.5625),
    ("cap132", Some(636321.45), 851495.325),
    ("cap133", None, 893076.7125),
    ("cap134", Some(648426.3), 928941.75),
];

#[test]
fn or_library_bounds() {
    let published = "OR-Library, J. E. Beasley, files of uncapacitated warehouse location";
    for (name, joined, optimum) in OR_LIBRARY {
        let Some(text) = open_data(&format!("cap/{name}.txt"), published) else { return };
        let instance = instance(&sites_of_or_library(&text));
        let found = bound("ufl/split", &instance);
        assert!(agree(found, optimum, 1e-8), "{name}: {found} for {optimum}");
        let weak = bound("ufl/joined", &instance);
        assert!(weak < found, "{name}");
        let agrees = joined.is_none_or(|joined| agree(weak, joined, 1e-8));
        assert!(agrees, "{name}: {weak} for {joined:?}");
    }
}

#[test]
fn lot_forms_are_integral_and_find_the_cheapest_lots() {
    for (name, instance) in seeded("lot", &[3, 6, 10], 6) {
        let cheapest = *cheapest_lots(&instance).last().unwrap();
        for id in INTEGRAL_LOTS {
            let bound = bound(id, &instance);
            assert!(agree(bound, cheapest, 1e-7), "{id} on {name}: {bound}, lots {cheapest}");
        }
        let weak = bound("lot/big-m", &instance);
        assert!(weak <= cheapest + 1e-7 * (1.0 + cheapest), "{name}: {weak}, lots {cheapest}");
        for id in LOTS {
            let found = optimum(id, &instance);
            assert!(agree(found, cheapest, 1e-7), "{id} on {name}: {found}, lots {cheapest}");
        }
    }
}

/// An instance of lot sizing with the same costs of making and holding in all periods.
fn lots(demand: &[u32], set_up: &[u32], making: &str, holding: &[&str]) -> String {
    let block = |name: &str, value: &dyn Fn(usize) -> String| {
        let rows = (0..demand.len()).map(|t| format!("{} {}\n", t + 1, value(t)));
        format!("{name} by t\n{}\n", rows.collect::<String>())
    };
    let periods: Vec<String> = (1..=demand.len()).map(|t| t.to_string()).collect();
    let blocks = [
        block("d", &|t| demand[t].to_string()),
        block("f", &|t| set_up[t % set_up.len()].to_string()),
        block("p", &|_| making.to_owned()),
        block("h", &|t| holding[t % holding.len()].to_owned()),
    ];
    format!("T\n{}\n\n{}", periods.join(" "), blocks.concat())
}

const MONTHS: [u32; 12] = [69, 29, 36, 61, 61, 26, 34, 67, 45, 67, 79, 56];
const SET_UPS: [u32; 12] = [85, 102, 102, 101, 98, 114, 105, 86, 119, 110, 98, 114];

/// Wagner & Whitin, Management Science 5 (1958) 89-96: the twelve months of their example, and
/// the cost of the best plan for the first months, as many as there are.
#[test]
fn the_twelve_months_of_wagner_and_whitin() {
    let published =
        [85.0, 114.0, 186.0, 277.0, 348.0, 400.0, 469.0, 555.0, 600.0, 710.0, 789.0, 864.0];
    for (last, value) in (1..=12).zip(published) {
        let months = instance(&lots(&MONTHS[..last], &SET_UPS, "0", &["1"]));
        assert_eq!(cheapest_lots(&months).last(), Some(&value), "{last} months");
        for id in INTEGRAL_LOTS {
            let bound = bound(id, &months);
            assert!(agree(bound, value, 1e-8), "{id}, {last} months: {bound} for {value}");
        }
    }
    let months = instance(&lots(&MONTHS, &SET_UPS, "0", &["1"]));
    for id in LOTS {
        let found = optimum(id, &months);
        assert!(agree(found, 864.0, 1e-8), "{id}: {found}");
    }
    big_m_bounds(&months, 296.3478, 101.2397);
    let lots = [(1, 98.0), (3, 97.0), (5, 121.0), (8, 112.0), (10, 67.0), (11, 135.0)];
    assert!(agree(cost_of(&lots, &months), 864.0, 1e-12));
}

/// What published lots cost, each a period and how much is made in it; no period may run short.
fn cost_of(lots: &[(usize, f64)], instance: &Instance) -> f64 {
    let cells = |name: &str, t: usize| table(instance, name)[&vec![t.to_string()]];
    let (mut stock, mut cost) = (0.0, 0.0);
    for t in 1..=table(instance, "d").len() {
        if let Some((_, made)) = lots.iter().find(|(period, _)| *period == t) {
            stock += made;
            cost += cells("f", t) + cells("p", t) * made;
        }
        stock -= cells("d", t);
        assert!(stock >= 0.0, "period {t} runs short by {}", -stock);
        cost += cells("h", t) * stock;
    }
    assert!(agree(stock, 0.0, 1e-12), "{stock} are left");
    cost
}

/// The bounds of the big-M form with the demand of the remaining periods, and of all periods.
fn big_m_bounds(instance: &Instance, remaining: f64, all: f64) {
    let found = bound("lot/big-m", instance);
    assert!((found - remaining).abs() < 1e-4, "{found} for {remaining}");
    let text = catalogue::find("lot/big-m").unwrap().text;
    let loose = text.replace("D_{t,n} y_t", "D_{1,n} y_t");
    assert_ne!(loose, text);
    let found = root(&formulation(&loose, instance)).bound.unwrap();
    assert!((found - all).abs() < 1e-4, "{found} for {all}");
}

/// Four periods from Wolsey, Integer Programming (1998): optimum 69; bounds computed.
#[test]
fn the_four_periods_of_wolsey() {
    let periods = instance(&lots(&[2, 4, 5, 1], &[12, 20, 16, 8], "3", &["1", "2", "1", "1"]));
    assert_eq!(cheapest_lots(&periods), [18.0, 34.0, 64.0, 69.0]);
    assert!(agree(cost_of(&[(1, 6.0), (3, 6.0)], &periods), 69.0, 1e-12));
    for id in INTEGRAL_LOTS {
        assert!(agree(bound(id, &periods), 69.0, 1e-8), "{id}");
    }
    big_m_bounds(&periods, 63.0, 52.0);
}

/// Twelve periods from the text of Silver & Meal: optimum 501.20; bounds, forward values and lots computed.
#[test]
fn the_twelve_periods_of_silver_and_meal() {
    let demand = [10, 62, 12, 130, 154, 129, 88, 52, 124, 160, 238, 41];
    let periods = instance(&lots(&demand, &[54], "0", &["0.4"]));
    let forward = [54.0, 78.8, 88.4, 142.4, 196.4, 248.0, 285.6, 322.8, 376.8, 430.8, 484.8, 501.2];
    let found = cheapest_lots(&periods);
    assert_eq!(found.len(), forward.len());
    for (found, wanted) in found.iter().zip(forward) {
        assert!(agree(*found, wanted, 1e-12), "{found} for {wanted}");
    }
    let lots = [84.0, 130.0, 283.0, 140.0, 124.0, 160.0, 279.0];
    let lots: Vec<(usize, f64)> = [1, 4, 5, 7, 9, 10, 11].into_iter().zip(lots).collect();
    assert!(agree(cost_of(&lots, &periods), 501.2, 1e-12));
    for id in INTEGRAL_LOTS {
        assert!(agree(bound(id, &periods), 501.2, 1e-8), "{id}");
    }
    big_m_bounds(&periods, 140.2349, 54.0);
}

#[test]
fn round_trips_on_edges_are_those_on_drives() {
    for (name, instance) in seeded("tsp", &[4, 6, 8], 3) {
        let (edges, drives) =
            (optimum("tsp/subtours", &instance), optimum("atsp/subtours", &instance));
        assert!(agree(edges, drives, 1e-7), "{name}: {edges}, {drives}");
    }
}

/// The subtour bounds of symmetric TSPLIB instances; sources in the fixture.
#[test]
fn subtour_bounds_of_tsplib_on_edges() {
    let small = ["burma14", "gr17", "ulysses16", "gr21", "ulysses22", "gr24", "fri26", "bays29"];
    let mut checked = 0;
    for value in values() {
        let wanted = value.rival == "atsp/subtours" && value.quantity == "LP bound";
        if !wanted || !small.contains(&value.instance.as_str()) {
            continue;
        }
        let Some(instance) = tsplib(&value.instance) else { return };
        let found = bound("tsp/subtours", &instance);
        let tolerance = value.tolerance * (1.0 + value.value);
        assert!(
            (found - value.value).abs() <= tolerance,
            "{}: {found} for {} ({})",
            value.instance,
            value.value,
            value.source
        );
        checked += 1;
    }
    assert!(checked >= 6, "{checked} bounds");
}
