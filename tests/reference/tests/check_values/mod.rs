//! The list of published and computed values that lies beside the open data, walked from its first
//! record to its last: each is held here, or by another check that is named, or there is a reason why
//! it is not. What is held here: cutting stock, assignments to agents, knapsacks with several
//! rows, facilities, jobs on one machine, stable sets, colourings, matchings, rounds with a number of
//! vehicles, bent costs and minimum times. Relaxations that are written out are solved by HiGHS, those
//! with rows on demand by this project.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "it says what is not held")]

mod curves;
mod graphs;
mod jobs;
mod rounds;
mod sites;
mod stocks;

use std::collections::BTreeMap;

use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{formulation, values};
use hullward_tests_reference::{agree, open_data, whole};
use instance::Instance;
use serde_json::Value;

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
    (
        "TSP",
        "",
        "a figure told twice, or derived from others that are held, or of more columns than a test takes",
    ),
    (
        "ATSP",
        "",
        "a figure told twice, a percentage of others, or one that its own list calls wrong",
    ),
    ("generalised assignment (max)", "gap3", "lists of jobs by the hundred thousand"),
    (
        "single machine weighted tardiness",
        "",
        "forty jobs are beyond a proof: tardy.rs holds that the optima are reached, not that they are least",
    ),
    ("single machine", "wt40", "the same"),
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
    ("graph colouring", "chromatic", "held in published.rs"),
    (
        "graph colouring",
        "set cover",
        "held in published.rs for all graphs of which it has the value",
    ),
    ("graph colouring", "assignment", "2 whatever the graph: held in published.rs"),
    (
        "job shop",
        "optimal",
        "that of ft06 is held in published.rs; beyond, trees are too large for a test",
    ),
    ("job shop", "trivial", "held in published.rs, as the bound by ranks"),
    ("job shop", "disjunctive", "held in published.rs"),
    (
        "CVRP",
        "optimum",
        "those up to 33 stops are held in published.rs, E-n51-k5 as a plan; E-n30-k3 is that of three vehicles",
    ),
    ("CVRP", "all S", "every subset of customers: held by separation in published.rs"),
    ("CVRP", "elementary", "rounds by the ten thousand"),
    ("p-median", "", "pmed1 and pmed5 are held in published.rs"),
    ("min-weight perfect matching", "", "beyond fifty nodes: behind HULLWARD_WHOLE"),
    ("stable set", "", "cliques of a chessboard: behind HULLWARD_WHOLE"),
    ("CFL", "", "beyond sixteen sites: behind HULLWARD_WHOLE"),
];

/// Numbers by `letter0`, `letter1`, ….
fn row(letter: &str, cells: &[f64]) -> String {
    cells.iter().enumerate().map(|(k, value)| format!("{letter}{k} {value}\n")).collect()
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

fn held(record: &Record) -> Option<f64> {
    let checks = [
        stocks::cutting,
        stocks::agents,
        stocks::resources,
        sites::facilities,
        jobs::machine,
        jobs::shops,
        graphs::stable,
        graphs::colours,
        graphs::matching,
        rounds::rounds,
        curves::bent,
        curves::minimum_times,
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
