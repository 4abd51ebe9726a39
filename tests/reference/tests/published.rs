//! Published optima and bounds of open data that no other check holds: Steiner trees, rounds of
//! vehicles, job shops, colourings, p-medians and facilities with limits, each by the shipped
//! rivals. Optima are published (SteinLib, CVRPLIB, OR-Library; job shops in their own file; the
//! chromatic numbers and p-medians from memory, computed again); bounds were computed with HiGHS
//! by a generator that shares no code with this project.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use hullward_tests_reference::graphs::colours_and_sets;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{instance, rival, root, solve};
use hullward_tests_reference::shops::shop;
use hullward_tests_reference::theory::{labels, table};
use hullward_tests_reference::{agree, open_data};
use instance::{Datum, Instance};
use model::{Column, ColumnId, Model, RowId, nearest_f64};
use proof::violations;
use tree::{Settings, Status};

fn read(file: &str, published: &str) -> Option<Instance> {
    let reading = instance::read_part(&open_data(file, published)?, None, Some(1));
    Some(reading.instance.unwrap_or_else(|| panic!("{file}: {:?}", reading.complaints)))
}

fn bound(id: &str, on: &Instance) -> f64 {
    let found = root(&rival(id, on));
    assert_eq!(found.status, Status::Optimal, "{id}");
    found.bound.unwrap()
}

/// One-commodity flow, undirected cuts, directed cuts; the optimum.
const STEINER: &[(&str, [f64; 3], f64)] = &[
    ("oddcycle3", [2.0, 3.0, 4.0], 4.0),
    ("oddwheel3", [2.0, 4.0, 4.5], 5.0),
    ("antiwheel5", [2.5, 5.0, 6.666666667], 7.0),
    ("design432", [3.333333333, 6.0, 9.0], 9.0),
    ("se03", [4.0, 8.0, 11.0], 12.0),
    ("csd03", [2.0, 3.0, 4.0], 4.0),
    ("csd04", [2.4, 6.0, 7.5], 8.0),
    ("smc03", [2.0, 3.0, 3.0], 3.0),
    ("smc04", [2.0, 4.0, 4.0], 4.0),
    ("s1", [2.0, 8.0, 8.75], 10.0),
    ("g01-00", [4.0, 6.0, 7.5], 8.0),
    ("g03-00", [8.0, 20.0, 21.25], 22.0),
    ("b01", [14.25, 72.0, 82.0], 82.0),
    ("b02", [20.25, 72.5, 83.0], 83.0),
    ("b03", [20.166666667, 124.5, 138.0], 138.0),
    ("b04", [14.5, 49.5, 59.0], 59.0),
    ("b06", [12.75, 89.0, 122.0], 122.0),
    ("b07", [23.5, 96.5, 111.0], 111.0),
    ("b08", [14.111111111, 82.5, 104.0], 104.0),
    ("b10", [16.083333333, 71.5, 86.0], 86.0),
    ("b11", [21.444444444, 70.0, 88.0], 88.0),
    ("b12", [18.162162162, 128.0, 174.0], 174.0),
    ("b13", [26.5, 137.0, 165.0], 165.0),
    ("b14", [36.833333333, 198.0, 235.0], 235.0),
];

#[test]
fn steiner_trees() {
    for (name, bounds, best) in STEINER {
        let Some(on) = read(&format!("steiner/{name}.stp"), "SteinLib") else { return };
        let ids = ["steiner/one-commodity", "steiner/cuts", "steiner/directed-cuts"];
        for (id, wanted) in ids.into_iter().zip(bounds) {
            let found = bound(id, &on);
            assert!(agree(found, *wanted, 1e-6), "{id} on {name}: {found} for {wanted}");
        }
        let settings = Settings { node_limit: Some(2_000), ..Settings::default() };
        let found = solve(&rival("steiner/directed-cuts", &on), settings);
        assert_eq!(found.status, Status::Optimal, "{name}");
        assert!(agree(found.incumbent.unwrap(), *best, 1e-9), "{name}: {:?}", found.incumbent);
    }
}

/// As many vehicles as wanted.
const ROUNDS: &[(&str, &str, f64)] = &[
    ("P-n16-k8", "cvrp/load-labels", 140.6),
    ("P-n16-k8", "cvrp/lifted-load-labels", 214.5),
    ("P-n16-k8", "cvrp/load-flow", 377.514285714),
    ("P-n16-k8", "cvrp/tight-load-flow", 408.939612051),
    ("P-n16-k8", "cvrp/capacity-cuts", 443.0),
    ("E-n22-k4", "cvrp/load-labels", 225.775),
    ("E-n22-k4", "cvrp/lifted-load-labels", 260.5),
    ("E-n22-k4", "cvrp/load-flow", 306.766666667),
    ("E-n22-k4", "cvrp/tight-load-flow", 327.649436341),
    ("E-n23-k3", "cvrp/load-labels", 388.414444444),
    ("E-n23-k3", "cvrp/lifted-load-labels", 454.0),
    ("E-n23-k3", "cvrp/load-flow", 470.542444444),
    ("E-n23-k3", "cvrp/tight-load-flow", 480.981642227),
    ("A-n32-k5", "cvrp/load-labels", 361.85),
    ("A-n32-k5", "cvrp/lifted-load-labels", 408.0),
    ("A-n32-k5", "cvrp/load-flow", 616.07),
    ("A-n32-k5", "cvrp/tight-load-flow", 658.812826643),
];

#[test]
fn rounds_of_vehicles() {
    for (name, id, wanted) in ROUNDS {
        let Some(on) = read(&format!("vrp/{name}.vrp"), "CVRPLIB") else { return };
        let found = bound(id, &on);
        // What is searched for heuristically may stay below the bound of all cuts.
        let held = agree(found, *wanted, 1e-6) || *id == "cvrp/capacity-cuts" && found < *wanted;
        assert!(held, "{id} on {name}: {found} for {wanted}");
        assert!(found > 0.97 * wanted, "{id} on {name}: {found} for {wanted}");
    }
}

/// The longest job, in every form by disjunctions; the work of the busiest machine, by ranks.
#[test]
fn job_shops() {
    for (name, longest, busiest) in [
        ("ft06", 47.0, Some(43.0)),
        ("la01", 413.0, Some(666.0)),
        ("la05", 380.0, Some(593.0)),
        ("ft10", 655.0, None),
    ] {
        let Some(text) = open_data(&format!("jobshop/{name}"), "JSPLIB") else { return };
        let on = shop(&text, 2_000);
        for id in ["job-shop/disjunctive", "job-shop/tight", "job-shop/surplus"] {
            let found = bound(id, &on);
            assert!(agree(found, longest, 1e-9), "{id} on {name}: {found}");
        }
        if let Some(busiest) = busiest {
            let found = bound("job-shop/ranks", &on);
            assert!(agree(found, busiest, 1e-9), "{name} by ranks: {found}");
        }
    }
    let Some(text) = open_data("jobshop/ft06", "JSPLIB") else { return };
    let found = bound("job-shop/time-indexed", &shop(&text, 60));
    assert!(agree(found, 47.0, 1e-8), "time-indexed: {found}");
}

/// The optimum of the smallest job shop, 55 (Fisher & Thompson 1963; in its own file), by HiGHS on our rows: with
/// seventy hours for all, so that big-Ms are no larger than they must be.
#[test]
fn the_optimum_of_a_job_shop() {
    let Some(text) = open_data("jobshop/ft06", "JSPLIB") else { return };
    for id in ["job-shop/disjunctive", "job-shop/tight", "job-shop/surplus"] {
        let Verdict::Optimal(found) = highs(&rival(id, &shop(&text, 70)), &[], true) else {
            panic!("{id}")
        };
        assert!(agree(found, 55.0, 1e-7), "{id}: {found}");
    }
}

/// The factors of ft10, whose routes have ten steps: the horizon less tail and head, added up here from
/// the lines of its file.
#[test]
fn factors_of_a_job_shop_leave_out_heads_and_tails() {
    let Some(text) = open_data("jobshop/ft10", "JSPLIB") else { return };
    let lines = text.lines().filter(|line| !line.starts_with('#')).skip(1);
    let jobs: Vec<Vec<f64>> = lines
        .map(|line| line.split_whitespace().map(|word| word.parse().unwrap()).collect())
        .collect();
    // By machine the head and the tail of each job there.
    let mut ends = vec![Vec::new(); 10];
    for job in jobs.iter().filter(|job| job.len() == 20) {
        let all: f64 = job.chunks(2).map(|step| step[1]).sum();
        let mut head = 0.0;
        for step in job.chunks(2) {
            ends[step[0] as usize].push((head, all - head - step[1]));
            head += step[1];
        }
    }
    let pairs = |machine: &Vec<(f64, f64)>| -> Vec<i64> {
        let all = machine.iter().enumerate();
        let others = |i| machine.iter().enumerate().filter(move |&(j, _)| i != j);
        all.flat_map(|(i, (_, tail))| {
            others(i).map(move |(_, (head, _))| (2000.0 - tail - head) as i64)
        })
        .collect()
    };
    let mut wanted: Vec<i64> = ends.iter().flat_map(pairs).collect();
    let model = rival("job-shop/tight", &shop(&text, 2_000));
    let orders = |c: &ColumnId| model.columns()[c.index()].integer;
    let rows = (0..model.row_count()).map(|row| model.row(RowId::from_index(row)));
    let entries = rows.flat_map(|row| row.entries);
    let mut found: Vec<i64> =
        entries.filter(|(c, _)| orders(c)).map(|(_, a)| nearest_f64(&a).abs() as i64).collect();
    wanted.sort_unstable();
    found.sort_unstable();
    assert_eq!(found.len(), 900);
    assert_eq!(found, wanted);
}

/// A graph as blocks with so many colours, and all stable sets that hold no further node.
fn colouring(on: &Instance, colours: usize) -> Instance {
    let (nodes, Some(Datum::Tuples { rows, .. })) = (labels(on, "V"), on.get("E")) else {
        panic!("no graph")
    };
    let edges: String = rows.iter().map(|edge| format!("{}\n", edge.join(" "))).collect();
    let rest = colours_and_sets(&nodes, rows, colours);
    let text = format!("V\n{}\n\nE by i, j\n{edges}\n{rest}", nodes.join(" "));
    instance(&text)
}

/// Colours that a greedy order needs; the bound by stable sets, which is the fractional chromatic
/// number (Larsen, Propp & Ullman 1995 for the graphs of Mycielski); the chromatic number.
#[test]
fn colourings() {
    for (name, greedy, fractional, best) in
        [("myciel3", 4, 2.9, 4.0), ("myciel4", 5, 941.0 / 290.0, 5.0)]
    {
        let file = format!("colour/{name}.col");
        let Some(on) = read(&file, "DIMACS graphs") else { return };
        let on = colouring(&on, greedy);
        let assigned = bound("colouring/assignment", &on);
        assert!(agree(assigned, 2.0, 1e-9), "{name}: {assigned}");
        let found = bound("colouring/stable-sets", &on);
        assert!(agree(found, fractional, 1e-8), "{name}: {found} for {fractional}");
        let found = solve(&rival("colouring/stable-sets", &on), Settings::default()).incumbent;
        assert!(agree(found.unwrap(), best, 1e-9), "{name}: {found:?}");
    }
    for (name, greedy) in [("huck", 11), ("jean", 10), ("david", 11)] {
        let file = format!("colour/{name}.col");
        let Some(on) = read(&file, "DIMACS graphs") else { return };
        let mut on = on;
        on.set("h", Datum::Number(greedy.into()));
        let Verdict::Optimal(found) = highs(&rival("colouring/assignment", &on), &[], false) else {
            panic!("{name}")
        };
        assert!(agree(found, 2.0, 1e-7), "{name}: {found}");
    }
}

/// Chromatic numbers of larger graphs (DIMACS colouring benchmarks): cliques on demand bound by as
/// much, on a board of queens representatives do, and a greedy order needs no more where it is told.
#[test]
fn chromatic_numbers() {
    for (name, best) in [("huck", 11), ("jean", 10), ("david", 11)] {
        let Some(on) = read(&format!("colour/{name}.col"), "DIMACS graphs") else { return };
        assert_eq!(on.get("h"), Some(&Datum::Number(best.into())), "{name}");
        let found = bound("colouring/cliques", &on);
        assert!(agree(found, f64::from(best), 1e-7), "{name}: {found}");
    }
    let Some(on) = read("colour/queen7_7.col", "DIMACS graphs") else { return };
    let model = rival("colouring/representatives", &on);
    let Verdict::Optimal(found) = highs(&model, &[], false) else { panic!("queen7_7") };
    assert!(agree(found, 7.0, 1e-7), "queen7_7: {found}");
}

/// Chromatic numbers of boards of queens (DIMACS colouring benchmarks): the stable sets bound by as much, rounded
/// up, and on the smallest board a plan has no more by our own search and by HiGHS. A graph of Mycielski is bounded by
/// the fraction of Larsen, Propp & Ullman 1995; to prove its six colours is hard for any search.
#[test]
fn chromatic_numbers_by_stable_sets() {
    let fifth = 941.0 / 290.0 + 290.0 / 941.0;
    let bound = |name: &str| {
        let on = read(&format!("colour/{name}.col"), "DIMACS graphs")?;
        let model = rival("colouring/stable-sets", &colouring(&on, 9));
        let found = root(&model).bound.unwrap();
        Some((model, found))
    };
    for (name, best) in [("queen6_6", 7.0), ("queen7_7", 7.0), ("queen8_8", 9.0)] {
        let Some((model, found)) = bound(name) else { return };
        assert!(agree((found - 1e-6).ceil(), best, 1e-9), "{name}: {found}");
        if name == "queen6_6" {
            let found = solve(&model, Settings::production());
            assert_eq!(found.status, Status::Optimal, "{name}");
            assert!(agree(found.incumbent.unwrap(), best, 1e-9), "{name}: {:?}", found.incumbent);
            let Verdict::Optimal(found) = highs(&model, &[], true) else { panic!("{name}") };
            assert!(agree(found, best, 1e-7), "{name}: {found}");
        }
    }
    let Some((_, found)) = bound("myciel5") else { return };
    assert!(agree(found, fifth, 1e-8), "myciel5: {found}");
}

/// The joined links bound by nothing, the split links and the radii by the published optimum.
#[test]
fn medians() {
    for (name, best) in [("pmed1", 5819.0), ("pmed5", 1355.0)] {
        let Some(on) = read(&format!("pmedian/{name}.txt"), "the OR-Library") else { return };
        for (id, wanted) in
            [("p-median/joined", 0.0), ("p-median/split", best), ("p-median/radius", best)]
        {
            let Verdict::Optimal(found) = highs(&rival(id, &on), &[], false) else {
                panic!("{id} on {name}")
            };
            assert!(agree(found, wanted, 1e-7), "{id} on {name}: {found}");
        }
    }
}

/// The optimum that a published solution states at its end: `Cost 450`.
fn cost(name: &str) -> Option<f64> {
    let text = open_data(&format!("vrp/{name}.sol"), "CVRPLIB")?;
    let line = text.lines().find(|line| line.to_lowercase().starts_with("cost"))?;
    Some(line.split_whitespace().nth(1)?.trim_end_matches(':').parse().unwrap())
}

/// Published optima of rounds of vehicles, by capacity cuts on demand and our own search; the larger ones as a
/// production solver would. The rival takes as many vehicles as it likes: E-n30-k3, whose optimum of 534 is that of
/// three, is no check (with four it is 503).
#[test]
fn optimal_rounds_of_vehicles() {
    let plain = || Settings { node_limit: Some(50_000), ..Settings::default() };
    let production = || Settings { node_limit: Some(2_000), ..Settings::production() };
    let searched = [
        ("E-n13-k4", plain()),
        ("P-n16-k8", plain()),
        ("E-n22-k4", plain()),
        ("E-n23-k3", plain()),
        ("A-n32-k5", production()),
        ("E-n33-k4", production()),
    ];
    for (name, settings) in searched {
        let Some(on) = read(&format!("vrp/{name}.vrp"), "CVRPLIB") else { return };
        let Some(best) = cost(name) else { return };
        let found = solve(&rival("cvrp/capacity-cuts", &on), settings);
        assert_eq!(found.status, Status::Optimal, "{name}");
        assert!(agree(found.incumbent.unwrap(), best, 1e-9), "{name}: {:?}", found.incumbent);
    }
}

/// The published routes, each a list of places after the depot.
fn routes(name: &str, nodes: &[String]) -> Option<Vec<Vec<String>>> {
    let text = open_data(&format!("vrp/{name}.sol"), "CVRPLIB")?;
    let lists = text.lines().filter_map(|line| line.strip_prefix("Route")?.split_once(':'));
    let name = |number: &str| nodes[number.parse::<usize>().unwrap()].clone();
    Some(lists.map(|(_, list)| list.split_whitespace().map(name).collect()).collect())
}

/// Drives and loads of routes, as a rival's columns.
fn driven(model: &Model, on: &Instance, routes: &[Vec<String>]) -> Vec<f64> {
    let (nodes, demands) = (labels(on, "V"), table(on, "q"));
    let mut values = vec![0.0; model.columns().len()];
    let mut set = |variable: &str, tuple: &[&str], value: f64| {
        values[model.find_column(variable, tuple).unwrap().index()] = value;
    };
    for route in routes {
        let (mut at, mut load) = (&nodes[0], 0.0);
        for stop in route {
            load += demands[&vec![stop.clone()]];
            set("x", &[at, stop], 1.0);
            set("u", &[stop], load);
            at = stop;
        }
        set("x", &[at, &nodes[0]], 1.0);
    }
    values
}

/// The published routes keep every row of the forms by loads in exact arithmetic, and cost what is published: the
/// optimum of E-n51-k5 too, whose proof is beyond these tests. No bound by capacity cuts passes it. The routes
/// of E-n30-k3 come to 537 by whole distances, and not to the 534 of their file: left out.
#[test]
fn published_routes_are_plans() {
    for name in ["E-n13-k4", "P-n16-k8", "E-n22-k4", "E-n23-k3", "A-n32-k5", "E-n33-k4", "E-n51-k5"]
    {
        let Some(on) = read(&format!("vrp/{name}.vrp"), "CVRPLIB") else { return };
        let (Some(best), Some(routes)) = (cost(name), routes(name, &labels(&on, "V"))) else {
            return;
        };
        for id in ["cvrp/load-labels", "cvrp/lifted-load-labels"] {
            let model = rival(id, &on);
            let values = driven(&model, &on, &routes);
            assert_eq!(violations(&model, &values), [], "{id} on {name}");
            let cost =
                |(column, value): (&Column, &f64)| model.numbers().float(column.cost) * value;
            let found: f64 = model.columns().iter().zip(&values).map(cost).sum();
            assert!(agree(found, best, 1e-12), "{id} on {name}: {found} for {best}");
        }
        let found = bound("cvrp/capacity-cuts", &on);
        assert!(found <= best && found > 0.97 * best, "{name}: {found} for {best}");
    }
}

/// File, capacity, the bounds of joined and split links, and the published optimum.
const LIMITED: &[(&str, u32, f64, f64, f64)] = &[
    ("cap71", 5_000, 1_018_151.625, 1_040_444.375, 1_040_444.375),
    ("cap72", 5_000, 1_071_419.625, 1_097_937.229_4, 1_098_000.45),
    ("cap73", 5_000, 1_124_687.625, 1_152_152.278_8, 1_153_000.45),
    ("cap74", 5_000, 1_204_589.625, 1_232_073.664_4, 1_235_500.45),
    ("cap73", 10_000, 941_395.125, 1_024_787.028_3, 1_025_208.225),
    ("cap71", 15_000, 865_538.687_5, 932_615.75, 932_615.75),
    ("cap73", 15_000, 902_175.204_2, 1_012_720.977_2, 1_014_062.05),
    ("cap74", 15_000, 928_920.970_8, 1_045_650.25, 1_045_650.25),
    ("cap101", 5_000, 771_766.587_5, 837_017.229_8, 838_499.288),
    ("cap102", 5_000, 825_982.087_5, 910_594.189, 910_889.563),
    ("cap104", 5_000, 959_152.087_5, 1_067_469.475_3, 1_069_369.525),
    ("cap101", 15_000, 680_700.15, 796_648.437_5, 796_648.438),
    ("cap103", 15_000, 718_457.333_3, 894_861.709_3, 896_617.538),
    ("cap104", 15_000, 746_143.366_7, 942_237.374_6, 946_051.325),
];

#[test]
fn facilities_with_limits() {
    for &(name, capacity, joined, split, best) in LIMITED {
        let Some(mut on) = read(&format!("cap/{name}.txt"), "the OR-Library") else { return };
        let cells = labels(&on, "I").into_iter().map(|site| (vec![site], capacity.into()));
        on.set("q", Datum::Table { arity: 1, cells: cells.collect() });
        let value = |id: &str, whole: bool| match highs(&rival(id, &on), &[], whole) {
            Verdict::Optimal(value) => value,
            other => panic!("{id} on {name}: {other:?}"),
        };
        let found =
            [value("cfl/joined", false), value("cfl/split", false), value("cfl/split", true)];
        for (found, wanted) in found.into_iter().zip([joined, split, best]) {
            assert!(agree(found, wanted, 1e-7), "{name}, {capacity}: {found} for {wanted}");
        }
    }
}
