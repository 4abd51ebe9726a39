//! Published symmetric round trips of up to 100 stops to proved optimality, with subtours on demand.
//!
//! TSPLIB (Reinelt 1991, ORSA Journal on Computing 3), the instances from the folder that
//! `HULLWARD_DATA` names; the optima as TSPLIB publishes them, the root bounds as widely quoted for
//! Held and Karp's bound.

#![allow(
    clippy::print_stdout,
    clippy::unwrap_used,
    reason = "a test says what it passes over and fails loudly"
)]

use hullward_engine::native::{USUAL_SLICE, Watch, run_rival};
use record::file;
use record::results::{SearchReport, Status};

/// Name, bound of the root, optimum.
const PUBLISHED: [(&str, f64, f64); 6] = [
    ("eil51", 422.5, 426.0),
    ("berlin52", 7542.0, 7542.0),
    ("st70", 671.0, 675.0),
    ("eil76", 537.0, 538.0),
    ("rat99", 1206.0, 1211.0),
    ("kroA100", 20_936.5, 21_282.0),
];

/// The text of an instance; `None`, and a word, where it is not at hand.
fn instance(name: &str) -> Option<String> {
    let folder = std::env::var("HULLWARD_DATA").ok();
    let path = folder.map(|folder| format!("{folder}/tsplib/{name}.tsp"));
    let text = path.and_then(|path| std::fs::read_to_string(path).ok());
    if text.is_none() {
        let place = "it is published with TSPLIB, comopt.ifi.uni-heidelberg.de";
        println!("{name}.tsp is not at hand: {place}; HULLWARD_DATA names the folder");
        assert!(std::env::var("CI").is_err(), "CI needs {name}.tsp");
    }
    text
}

fn searched(name: &str, text: &str) -> (f64, SearchReport) {
    let text = format!(
        "hullward = 1\ntitle = \"{name}\"\n[instance]\nreader = \"tsplib\"\ntext = '''\n{text}'''\n\
         [[rival]]\nfrom = \"tsp/subtours\"\n[run]\nbranching = \"reliability\"\nnodes = 5000\n\
         node_work = [\"objective step\", \"reduced costs\"]\n"
    );
    let scenario = file::parse(&text).scenario.unwrap();
    let run = run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn);
    (run.root.unwrap().bound.unwrap(), run.search.unwrap())
}

#[test]
fn round_trips_of_up_to_a_hundred_stops_are_proved_optimal() {
    for (name, root, optimum) in PUBLISHED {
        let Some(text) = instance(name) else { continue };
        let (bound, search) = searched(name, &text);
        assert!((bound - root).abs() < 1e-6 * root, "{name}: root {bound} for {root}");
        assert_eq!(search.status, Status::Optimal, "{name}: {:?}", search.stopped);
        assert_eq!(search.incumbent, Some(optimum), "{name}");
        assert!(search.checked, "{name}: every leaf is checked");
        println!("{name}: {} nodes", search.nodes);
    }
}
