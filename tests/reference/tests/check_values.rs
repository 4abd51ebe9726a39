//! The list of published and computed values that lies beside the open data, walked from its first
//! record to its last: each is held here, or by another check that is named, or there is a reason why
//! it is not. What is held here: cutting stock, assignments to agents, knapsacks with several
//! rows, facilities, jobs on one machine, stable sets, colourings, matchings, rounds with a number of
//! vehicles, bent costs and minimum times. Relaxations that are written out are solved by HiGHS, those
//! with rows on demand by this project.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "it says what is not held")]

use std::collections::BTreeMap;

use hullward_tests_reference::graphs::{Edges, graph, names, network};
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{formulation, instance, rival, root, solve, values};
use hullward_tests_reference::{agree, open_data};
use instance::{Datum, Instance};
use serde_json::Value;
use tree::Settings;

/// A value with what it is of.
struct Record {
    problem: String,
    instance: String,
    formulation: String,
    quantity: String,
    value: Value,
}

impl Record {
    fn number(&self) -> f64 {
        self.value.as_f64().unwrap()
    }

    fn is(&self, problem: &str) -> bool {
        self.problem == problem
    }

    /// Whether it is a bound of a relaxation.
    fn bounds(&self) -> bool {
        self.quantity.starts_with("LP bound")
    }
}

fn records() -> Option<Vec<Record>> {
    let text = open_data("../check_values.json", "the list of values beside the open data")?;
    let list: Vec<Value> = serde_json::from_str(&text).unwrap();
    let text = |one: &Value, key: &str| one[key].as_str().unwrap_or_default().to_owned();
    let records = list.iter().map(|one| Record {
        problem: text(one, "problem"),
        instance: text(one, "instance"),
        formulation: text(one, "formulation"),
        quantity: text(one, "quantity"),
        value: one["value"].clone(),
    });
    Some(records.collect())
}

/// Problems whose values another check holds in full, and which.
const ELSEWHERE: [(&str, &str); 8] = [
    ("netlib LP", "mps.rs"),
    ("MIPLIB 3", "mps.rs"),
    ("MIPLIB 3 rival-formulation pair", "mps.rs"),
    ("HiGHS check set", "mps.rs"),
    ("textbook", "worked.rs"),
    ("Steiner tree", "published.rs"),
    ("branch and bound tree", "crates/tree/src/tests/jeroslow.rs"),
    ("ULS", "rivals.rs"),
];

/// What is not held: the problem, words of its formulation or instance, and why.
const LEFT: [(&str, &str, &str); 22] = [
    ("TSP", "", "a figure told twice, or derived from others that are held"),
    (
        "ATSP",
        "",
        "a figure told twice, a percentage of others, or one that its own list calls wrong",
    ),
    ("generalised assignment (max)", "Dantzig-Wolfe", "lists of jobs by the hundred thousand"),
    ("single machine weighted tardiness", "", "forty jobs are beyond a proof here"),
    ("single machine", "wt40", "forty jobs are beyond a proof here"),
    (
        "unit commitment",
        "Kazarlis",
        "start-up costs by hours off and chords of a square are no data of the family",
    ),
    (
        "piecewise linear",
        "big-M",
        "its amounts are bounded piece by piece in other rows: restated.rs",
    ),
    ("piecewise linear", "locally", "observed on random objectives of another program"),
    ("network", "", "an exercise that was not stated again"),
    (
        "graph colouring",
        "chromatic",
        "held for Mycielski's graphs in published.rs; larger ones are beyond a search of a test",
    ),
    ("graph colouring", "set cover", "stable sets of the larger graphs by the ten thousand"),
    ("graph colouring", "assignment", "2 whatever the graph: held in published.rs"),
    ("job shop", "optimal", "trees are too large for a test, but that of ft06"),
    ("job shop", "trivial", "held in published.rs, as the bound by ranks"),
    ("job shop", "disjunctive", "held in published.rs"),
    ("CVRP", "optimum", "trees are too large for a test"),
    ("CVRP", "all S", "every subset of customers: held by separation in published.rs"),
    ("CVRP", "elementary", "rounds by the ten thousand"),
    ("p-median", "", "pmed1 is held in published.rs; pmed5 has 10,000 links"),
    ("min-weight perfect matching", "", "beyond fifty nodes: behind HULLWARD_WHOLE"),
    ("stable set", "", "cliques of a chessboard: behind HULLWARD_WHOLE"),
    ("CFL", "", "beyond sixteen sites: too long for a test, cap51 aside (HULLWARD_WHOLE)"),
];

fn whole() -> bool {
    std::env::var_os("HULLWARD_WHOLE").is_some()
}

/// The optimum, or the relaxation's value, of a text.
fn value_of(text: &str, on: &Instance, relaxed: bool) -> f64 {
    match highs(&formulation(text, on), &[], !relaxed) {
        Verdict::Optimal(value) => value,
        other => panic!("{other:?}"),
    }
}

fn shipped(id: &str) -> &'static str {
    catalogue::find(id).unwrap_or_else(|| panic!("no rival {id}")).text
}

fn list(text: &str, name: &str) -> Vec<u32> {
    let from = text.find(&format!("{name}=[")).unwrap() + name.len() + 2;
    let inner = &text[from..from + text[from..].find(']').unwrap()];
    inner.split(", ").map(|one| one.trim().parse().unwrap()).collect()
}

/// `W=100 w=[45, 36] b=[97, 610]` with all patterns that leave no room for a piece.
fn rolls(text: &str) -> Instance {
    let from = text.find("W=").unwrap() + 2;
    let width: u32 = text[from..].split(' ').next().unwrap().parse().unwrap();
    let (widths, wanted) = (list(text, "w"), list(text, "b"));
    let (mut open, mut full) = (vec![(Vec::<u32>::new(), width)], Vec::new());
    while let Some((counts, left)) = open.pop() {
        match widths.get(counts.len()) {
            Some(&one) => {
                let longer =
                    |count: u32| ([counts.as_slice(), &[count]].concat(), left - count * one);
                // The last width fills what is left.
                let least = if counts.len() + 1 == widths.len() { left / one } else { 0 };
                open.extend((least..=left / one).map(longer));
            }
            None => full.push(counts),
        }
    }
    let names: Vec<String> = (0..widths.len()).map(|i| format!("i{i}")).collect();
    let patterns: Vec<String> = (0..full.len()).map(|p| format!("p{p}")).collect();
    let column = |numbers: &[u32]| -> String {
        names.iter().zip(numbers).map(|(name, number)| format!("{name} {number}\n")).collect()
    };
    let mut cells = String::new();
    for (pattern, counts) in patterns.iter().zip(&full) {
        for (name, count) in names.iter().zip(counts).filter(|(_, count)| **count > 0) {
            cells.push_str(&format!("{name} {pattern} {count}\n"));
        }
    }
    instance(&format!(
        "I\n{}\n\nw by i\n{}\nb by i\n{}\nQ = {width}\n\nP\n{}\n\na by i, p\n{cells}\n",
        names.join(" "),
        column(&widths),
        column(&wanted),
        patterns.chunks(200).map(|line| line.join(" ")).collect::<Vec<_>>().join("\n"),
    ))
}

fn cutting(record: &Record) -> Option<f64> {
    if !record.is("cutting stock") {
        return None;
    }
    let on = rolls(&record.instance);
    let id = match record.formulation.split(' ').next().unwrap() {
        "Kantorovich" => "bins/assignment",
        "arc-flow" => "bins/arc-flow",
        _ => "bins/patterns",
    };
    Some(value_of(shipped(id), &on, record.bounds()))
}

/// The numbers of a file from its `n`-th problem of agents or of rows on.
fn numbers(file: &str) -> Option<Vec<f64>> {
    let text = open_data(file, "the OR-Library")?;
    Some(text.split_whitespace().map(|word| word.parse().unwrap()).collect())
}

fn grid(rows: (&str, usize), columns: (&str, usize), cells: &[f64], sign: f64) -> String {
    let mut out = String::new();
    for r in 0..rows.1 {
        for c in 0..columns.1 {
            let value = sign * cells[r * columns.1 + c];
            out.push_str(&format!("{}{r} {}{c} {value}\n", rows.0, columns.0));
        }
    }
    out
}

fn row(letter: &str, cells: &[f64]) -> String {
    cells.iter().enumerate().map(|(k, value)| format!("{letter}{k} {value}\n")).collect()
}

/// `gap1-2`: the second problem of the first file, to be maximised.
fn agents(record: &Record) -> Option<f64> {
    if !record.is("generalised assignment (max)") || record.formulation.contains("Dantzig") {
        return None;
    }
    let (file, number) = record.instance.split_once('-').unwrap();
    let numbers = numbers(&format!("gap/{file}.txt"))?;
    let mut rest = &numbers[1..];
    for left in (1..=number.parse::<usize>().unwrap()).rev() {
        let (m, n) = (count(rest[0]), count(rest[1]));
        let length = 2 + 2 * m * n + m;
        if left > 1 {
            rest = &rest[length..];
            continue;
        }
        let (costs, hours, there) =
            (&rest[2..2 + m * n], &rest[2 + m * n..2 + 2 * m * n], &rest[2 + 2 * m * n..length]);
        let on = instance(&format!(
            "I\n{}\n\nJ\n{}\n\nc by i, j\n{}\na by i, j\n{}\nb by i\n{}\n",
            names("m", m),
            names("j", n),
            grid(("m", m), ("j", n), costs, -1.0),
            grid(("m", m), ("j", n), hours, 1.0),
            row("m", there),
        ));
        return Some(-value_of(shipped("gap/plain"), &on, record.bounds()));
    }
    None
}

#[allow(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "small and whole")]
fn count(number: f64) -> usize {
    number as usize
}

fn resources(record: &Record) -> Option<f64> {
    if !record.is("multi-dimensional knapsack (max)") {
        return None;
    }
    let number: usize = record.instance.rsplit_once('-').unwrap().1.parse().unwrap();
    let numbers = numbers("mknap/mknap1.txt")?;
    let mut rest = &numbers[1..];
    for left in (1..=number).rev() {
        let (n, m) = (count(rest[0]), count(rest[1]));
        let length = 3 + n + m * n + m;
        if left > 1 {
            rest = &rest[length..];
            continue;
        }
        let on = instance(&format!(
            "I\n{}\n\nR\n{}\n\nc by i\n{}\na by r, i\n{}\nb by r\n{}\n",
            names("i", n),
            names("r", m),
            row("i", &rest[3..3 + n]),
            grid(("r", m), ("i", n), &rest[3 + n..3 + n + m * n], 1.0),
            row("r", &rest[3 + n + m * n..length]),
        ));
        return Some(value_of(shipped("multi-knapsack/plain"), &on, record.bounds()));
    }
    None
}

/// `cap41 (= cap71 capacity 5000)`, `cap71 (capacity 58268)`, or `cap41` alone by the digits.
fn facilities(record: &Record) -> Option<f64> {
    let limited = record.is("CFL");
    if !limited && !record.is("UFL") {
        return None;
    }
    let name = record.instance.split(' ').next().unwrap();
    let digits = name.trim_start_matches("cap");
    let (set, last) = digits.split_at(digits.len() - 1);
    let (file, capacity) = match set {
        "4" => ("7", 5_000),
        "5" => return (last == "1").then(|| warehouses(record, "cap73", 10_000))?,
        "6" => ("7", 15_000),
        "8" => ("10", 5_000),
        "9" => ("10", 15_000),
        "11" => ("13", 5_000),
        "12" => ("13", 15_000),
        own => (own, 58_268),
    };
    if limited && file != "7" && !whole() {
        return None;
    }
    warehouses(record, &format!("cap{file}{last}"), capacity)
}

fn warehouses(record: &Record, file: &str, capacity: u32) -> Option<f64> {
    let text = open_data(&format!("cap/{file}.txt"), "the OR-Library")?;
    let mut on = instance::read_part(&text, None, Some(1)).instance.unwrap();
    let sites = hullward_tests_reference::theory::labels(&on, "I").into_iter();
    let cells = sites.map(|site| (vec![site], capacity.into())).collect();
    on.set("q", Datum::Table { arity: 1, cells });
    let split = record.formulation.contains("x_ij<=y_i") || !record.bounds();
    let family = if record.is("CFL") { "cfl" } else { "ufl" };
    let id = format!("{family}/{}", if split { "split" } else { "joined" });
    Some(value_of(shipped(&id), &on, record.bounds()))
}

/// Jobs by their numbers: times, weights, due dates.
fn machine(record: &Record) -> Option<f64> {
    if !record.is("single machine") {
        return None;
    }
    let due = [16.0, 26.0, 25.0, 27.0];
    let (times, weights, due): (&[f64], &[f64], Option<&[f64]>) = match record.instance.as_str() {
        name if name.starts_with("wC") => (&[4.0, 2.0, 6.0, 5.0], &[3.0, 1.0, 8.0, 2.0], None),
        name if name.starts_with("Pinedo 1||sum wT") => {
            (&[12.0, 8.0, 15.0, 9.0], &[4.0, 1.0, 5.0, 3.0], Some(&due))
        }
        name if name.starts_with("variant") => {
            (&[12.0, 8.0, 15.0, 9.0], &[4.0, 1.0, 6.0, 5.0], Some(&due))
        }
        name if name.contains("3.4.5") => (
            &[121.0, 79.0, 147.0, 83.0, 130.0],
            &[1.0; 5],
            Some(&[260.0, 266.0, 266.0, 336.0, 337.0]),
        ),
        name if name.contains("3.2.3") => return Some(latest()),
        _ => return None,
    };
    let mut text = format!(
        "J\n{}\n\np by j\n{}\nw by j\n{}\n",
        names("j", times.len()),
        row("j", times),
        row("j", weights)
    );
    if let Some(due) = due {
        text.push_str(&format!("\nd by j\n{}\n", row("j", due)));
    }
    let on = instance(&text);
    let family = if due.is_some() { "tardiness" } else { "machine" };
    let form = match record.formulation.split(' ').next().unwrap() {
        "disjunctive" => "big-m",
        "parallel" => "parallel",
        "linear" | "any" => "linear-ordering",
        _ => "time-indexed",
    };
    let model = rival(&format!("{family}/{form}"), &on);
    if record.bounds() {
        return root(&model).bound;
    }
    solve(&model, Settings::default()).incumbent
}

/// The latest job as early as can be, in the words of the linear ordering (Pinedo, example 3.2.3).
fn latest() -> f64 {
    let text = shipped("machine/linear-ordering");
    let text = text
        .replace("  Σ_{j ∈ J} w_j C_j\n", "  L\n")
        .replace("  C_j ≥ 0 ", "  L ≥ C_j − w_j  ∀ j ∈ J (late)\n  L ≥ 0\n  C_j ≥ 0 ");
    let on = instance(
        "J\na b c d\n\np by j\na 4\nb 2\nc 6\nd 5\n\nr by j\na 0\nb 1\nc 3\nd 5\n\n\
         w by j\na 8\nb 12\nc 11\nd 10\n",
    );
    value_of(&text, &on, false)
}

fn stable(record: &Record) -> Option<f64> {
    if !record.is("stable set") || record.instance == "queen8" && !whole() {
        return None;
    }
    let (nodes, edges) = graph(&record.instance)?;
    let ones = row("n", &vec![1.0; nodes]);
    let on = instance(&format!("{}\nw by i\n{ones}\n", network(nodes, &edges)));
    match record.formulation.split(' ').next().unwrap() {
        "edge" => Some(value_of(shipped("stable-set/edges"), &on, true)),
        "all" => root(&rival("stable-set/cliques", &on)).bound,
        _ => Some(value_of(shipped("stable-set/edges"), &on, false)),
    }
}

fn colours(record: &Record) -> Option<f64> {
    if !record.is("graph colouring") || !record.formulation.starts_with("asymmetric") {
        return None;
    }
    let (nodes, edges) = graph(&record.instance)?;
    Some(value_of(shipped("colouring/representatives"), &instance(&network(nodes, &edges)), true))
}

/// Each node matched: the degree rows as equations, minimised.
fn matching(record: &Record) -> Option<f64> {
    if !record.is("min-weight perfect matching") {
        return None;
    }
    let triangles = record.instance.starts_with("two triangles");
    let costs = if triangles {
        let pair = |a: usize, b: usize| if a / 3 == b / 3 { 1.0 } else { 5.0 };
        (0..6).map(|a| (0..6).map(|b| pair(a, b)).collect()).collect()
    } else {
        distances(&record.instance)?
    };
    if costs.len() > 30 && !whole() {
        return None;
    }
    let all = costs.len();
    let pairs: Edges = (0..all).flat_map(|a| (a + 1..all).map(move |b| (a, b))).collect();
    let worths: String =
        pairs.iter().map(|&(a, b)| format!("n{a} n{b} {}\n", costs[a][b])).collect();
    let on = instance(&format!("{}\nw by i, j\n{worths}\n", network(all, &pairs)));
    let odd = record.formulation.contains("odd");
    let text = shipped(if odd { "matching/odd-sets" } else { "matching/degree" });
    let text = text.replace("maximise", "minimise").replace("x(δ(i)) ≤ 1", "x(δ(i)) = 1");
    root(&formulation(&text, &on)).bound
}

fn distances(name: &str) -> Option<Vec<Vec<f64>>> {
    let on = hullward_tests_reference::round_trip::tsplib(name)?;
    let stops = hullward_tests_reference::theory::labels(&on, "V");
    let table: BTreeMap<Vec<String>, f64> = hullward_tests_reference::theory::table(&on, "c");
    let way = |a: &String, b: &String| table.get(&vec![a.clone(), b.clone()]).copied();
    let line = |a: &String| stops.iter().map(|b| way(a, b).unwrap_or(0.0)).collect();
    Some(stops.iter().map(line).collect())
}

/// Rounds with a number of vehicles, or with as many as wanted.
fn rounds(record: &Record) -> Option<f64> {
    if !record.is("CVRP") || !record.bounds() {
        return None;
    }
    let id = match record.formulation.as_str() {
        name if name.starts_with("degree") => "cvrp/load-labels",
        name if name.starts_with("MTZ loads lifted") => "cvrp/lifted-load-labels",
        name if name.starts_with("MTZ") => "cvrp/load-labels",
        name if name.contains("f<=Q x") => "cvrp/load-flow",
        name if name.contains("q_j x<=f") => "cvrp/tight-load-flow",
        _ => return None,
    };
    let text = open_data(&format!("vrp/{}.vrp", record.instance), "CVRPLIB")?;
    let on = instance::read_part(&text, None, Some(1)).instance?;
    let mut text = shipped(id).to_owned();
    if record.formulation.starts_with("degree") {
        let from = text.find("  u_i − u_j").unwrap();
        let to = from + text[from..].find("  x_{i,j} ∈").unwrap();
        text.replace_range(from..to, "");
    }
    if let Some((_, fixed)) = record.formulation.split_once("K=") {
        let vehicles = fixed.split(' ').next().unwrap();
        let rows =
            format!("  Σ_{{j : (r,j) ∈ A}} x_{{r,j}} = {vehicles}  (vehicles)\n  x_{{i,j}} ∈ ");
        text = text.replacen("  x_{i,j} ∈ ", &rows, 1);
    }
    Some(value_of(&text, &on, true))
}

fn bent(record: &Record) -> Option<f64> {
    if !record.is("piecewise linear") || record.quantity.starts_with("locally") {
        return None;
    }
    // The last curve has two pieces: its last one is cut in two, twice.
    let curves: [(&[f64], &[f64]); 3] = [
        (&[0.0, 2.0, 5.0, 9.0, 10.0], &[0.0, 8.0, 14.0, 18.0, 30.0]),
        (&[0.0, 3.0, 4.0, 6.0, 8.0], &[0.0, 9.0, 10.0, 18.0, 26.0]),
        (&[0.0, 1.0, 2.0, 3.5, 6.0], &[0.0, 5.0, 6.4, 8.5, 12.0]),
    ];
    let table = |ends: [&[f64]; 3]| -> String {
        let rows = ends.iter().enumerate().flat_map(|(i, cells)| {
            let cells = cells.iter().enumerate();
            cells.map(move |(k, value)| format!("s{i} {k} {value}\n"))
        });
        rows.collect()
    };
    let on = instance(&format!(
        "I\ns0 s1 s2\n\nK\n1 2 3 4\n\nB by i, k\n{}\nF by i, k\n{}\nd = 14\n",
        table(curves.map(|curve| curve.0)),
        table(curves.map(|curve| curve.1)),
    ));
    let form = match record.formulation.as_str() {
        "multiple choice" => "multiple-choice",
        "incremental" => "incremental",
        name if name.starts_with("log") => "logarithmic",
        name if name.starts_with("disagg") => "split-combination",
        name if name.starts_with("big-M") => return None,
        _ => "convex-combination",
    };
    Some(value_of(shipped(&format!("piecewise/{form}")), &on, record.bounds()))
}

/// Minimum times alone: gains of hours on, the cost of a start, no load.
fn minimum_times(record: &Record) -> Option<f64> {
    let given: Value = match record.problem.as_str() {
        "unit commitment (min up/down polytope, max)" => {
            serde_json::from_str(&record.instance).unwrap()
        }
        _ => return None,
    };
    let gains: String =
        given["c"].as_array().unwrap().iter().zip(1..).map(|(c, t)| format!("{t} {c}\n")).collect();
    let hours: Vec<String> = (1..=given["T"].as_u64().unwrap()).map(|t| t.to_string()).collect();
    let idle: String = hours.iter().map(|t| format!("{t} 0\n")).collect();
    let numbers = [
        ("c", &Value::from(0)),
        ("e", &Value::from(0)),
        ("f", &given["startcost"]),
        ("m", &Value::from(0)),
        ("q", &Value::from(0)),
        ("L", &given["minup"]),
        ("K", &given["mindown"]),
    ];
    let unit: String =
        numbers.iter().map(|(name, value)| format!("\n{name} by g\ng1 {value}\n")).collect();
    let hours = hours.join(" ");
    let on = instance(&format!("G\ng1\n\nT\n{hours}\n\nd by t\n{idle}\nk by t\n{gains}{unit}"));
    let form = match record.formulation.as_str() {
        "agg_lp" => "aggregated",
        "pairs_lp" => "pairwise",
        _ => "turn-on-off",
    };
    let text = shipped(&format!("unit/{form}"));
    let text = text
        .replace("(c_g p_{g,t} + e_g u_{g,t} + f_g v_{g,t})", "(f_g v_{g,t} − k_t u_{g,t})")
        // Nothing is known of the hour before the first.
        .replace("  u_{g,0} = 0 ", "  u_{g,0} ∈ {0,1} ")
        .replacen("  c_g  ∀ g ∈ G", "  k_t  ∀ t ∈ T  gain\n  c_g  ∀ g ∈ G", 1);
    Some(-value_of(&text, &on, record.bounds()))
}

fn held(record: &Record) -> Option<f64> {
    let checks = [
        cutting,
        agents,
        resources,
        facilities,
        machine,
        stable,
        colours,
        matching,
        rounds,
        bent,
        minimum_times,
    ];
    checks.iter().find_map(|check| check(record))
}

/// Why a value is not held here; `None` where nobody has said.
fn elsewhere(record: &Record, trips: &[(String, String, f64)]) -> Option<String> {
    let same = |trip: &(String, String, f64)| {
        trip.0 == record.instance
            && trip.1 == record.quantity
            && Some(trip.2) == record.value.as_f64()
    };
    if trips.iter().any(same) {
        return Some("held in tsplib.rs, identities.rs and variants.rs".to_owned());
    }
    if let Some((_, test)) = ELSEWHERE.iter().find(|(problem, _)| record.problem == *problem) {
        return Some(format!("held in {test}"));
    }
    let words = format!("{} {} {}", record.formulation, record.instance, record.quantity);
    let known =
        LEFT.iter().find(|(problem, of, _)| record.problem == *problem && words.contains(of));
    known.map(|(_, _, why)| format!("not held: {why}"))
}

#[test]
fn every_value_of_the_list_is_held_or_it_is_said_why_not() {
    let Some(records) = records() else { return };
    let trips: Vec<_> = values().into_iter().map(|v| (v.instance, v.quantity, v.value)).collect();
    let (mut here, mut wrong) = (0, Vec::new());
    let mut others: BTreeMap<String, usize> = BTreeMap::new();
    for record in &records {
        let name = format!(
            "{}: {}, {}, {}",
            record.problem, record.instance, record.formulation, record.quantity
        );
        match held(record) {
            Some(found) if agree(found, record.number(), 1e-6) => here += 1,
            Some(found) => wrong.push(format!("{name}: {found} for {}", record.number())),
            None => match elsewhere(record, &trips) {
                Some(why) => *others.entry(format!("{}: {why}", record.problem)).or_default() += 1,
                None => wrong.push(format!("{name}: held by nobody")),
            },
        }
    }
    eprintln!("{here} of {} values are held here", records.len());
    for (why, count) in &others {
        eprintln!("{count:5}  {why}");
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    assert!(here >= 200, "{here} values");
}
