//! The ready scenarios settle a question, and what their notes say of it is so: the bound of every
//! rival stands in them as it is computed, and the optimum; every number of columns or rows that is
//! named is that of a rival, or how far two are apart; every number with a point is a bound; every number of
//! nodes that stands behind "Decided" is that of a rival's tree.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::path::Path;

use hullward_tests_reference::round_trip::{rival, root, solve};
use instance::Reader;
use record::scenario::Scenario;
use tree::{Settings, Status};

/// What is computed of a scenario.
#[derive(Default)]
struct Facts {
    bounds: Vec<f64>,
    columns: Vec<usize>,
    rows: Vec<usize>,
    /// Nodes of the trees that are searched to their end.
    nodes: Vec<usize>,
    optimum: Option<f64>,
}

fn facts(scenario: &Scenario) -> Facts {
    let given = scenario.instance.as_ref().unwrap();
    let reading = instance::read(&given.text, given.reader.as_deref().and_then(Reader::from_name));
    let on = reading.instance.unwrap();
    let mut found = Facts::default();
    for one in &scenario.rivals {
        let id = one.from.as_deref().unwrap();
        let model = rival(id, &on);
        found.bounds.push(root(&model).bound.unwrap());
        found.columns.push(model.columns().len());
        found.rows.push(model.row_count());
        let entry = catalogue::find(id).unwrap();
        // Of a weak rival the tree may be large: one that is searched to its end is enough.
        let counted = scenario.notes.contains("nodes of");
        if !entry.relaxation && (counted || found.optimum.is_none()) {
            let limit = if counted { 2_000 } else { 400 };
            let settings = Settings { node_limit: Some(limit), ..Settings::default() };
            let summary = solve(&model, settings);
            if summary.status == Status::Optimal {
                found.optimum = summary.incumbent;
                found.nodes.push(summary.nodes as usize);
            }
        }
    }
    found
}

/// The numbers of a text, each with the word after it; commas between digits are left out.
fn numbers(text: &str) -> Vec<(String, String)> {
    let text = text.replace('−', "-");
    let words: Vec<&str> = text.split_whitespace().collect();
    let mut out = Vec::new();
    for (place, word) in words.iter().enumerate() {
        let bare = word.trim_matches(|c: char| !c.is_ascii_digit() && c != '-');
        let bare = bare.replace(',', "");
        let is_number =
            bare.trim_start_matches('-').chars().all(|c| c.is_ascii_digit() || c == '.');
        if is_number && bare.contains(|c: char| c.is_ascii_digit()) {
            let next =
                words.get(place + 1).map_or("", |next| next.trim_matches([',', '.', ';', ':']));
            out.push((bare, next.to_owned()));
        }
    }
    out
}

/// The ways to print a value: whole, or with one or two digits, or with one or two cut off.
fn is_printed(number: &str, value: f64) -> bool {
    let digits = number.split_once('.').map_or(0, |(_, digits)| digits.len());
    number == format!("{value:.digits$}") || value == 0.0 && number == "0"
}

fn wrong(name: &str, scenario: &Scenario) -> Vec<String> {
    let (found, said) = (facts(scenario), numbers(&scenario.notes));
    let mut out = Vec::new();
    if !scenario.notes.contains("Decided: ") {
        out.push(format!("{name} decides nothing"));
    }
    let stands = |value: f64| said.iter().any(|(number, _)| is_printed(number, value));
    for (bound, one) in found.bounds.iter().zip(&scenario.rivals) {
        if !stands(*bound) {
            out.push(format!("{name}: the bound {bound} of {} is not told", one.title));
        }
    }
    if !found.optimum.is_some_and(stands) {
        out.push(format!("{name}: the optimum {:?} is not told", found.optimum));
    }
    for (number, next) in &said {
        let of = |sizes: &[usize]| {
            let apart = sizes.iter().flat_map(|a| sizes.iter().map(move |b| a.abs_diff(*b)));
            apart.chain(sizes.iter().copied()).any(|size| size.to_string() == *number)
        };
        let so = match next.as_str() {
            "columns" => of(&found.columns),
            "rows" => of(&found.rows),
            "nodes" if scenario.notes.contains("nodes of") => {
                found.nodes.iter().any(|nodes| nodes.to_string() == *number)
            }
            _ if number.contains('.') => {
                let known = found.bounds.iter().chain(&found.optimum);
                known.into_iter().any(|&value| is_printed(number, value))
            }
            _ => true,
        };
        if !so {
            let (columns, rows) = (&found.columns, &found.rows);
            out.push(format!("{name}: {number} {next}; columns {columns:?}, rows {rows:?}"));
        }
    }
    out
}

#[test]
fn what_the_ready_scenarios_decide_rests_on_figures_that_are_so() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../scenarios");
    let mut paths: Vec<_> = std::fs::read_dir(folder).unwrap().map(|e| e.unwrap().path()).collect();
    paths.sort();
    let (mut missed, mut met) = (Vec::new(), std::collections::BTreeSet::new());
    for path in paths.iter().filter(|path| path.extension().is_some_and(|e| e == "toml")) {
        let name = path.file_stem().unwrap().to_string_lossy().into_owned();
        let scenario = record::file::parse(&std::fs::read_to_string(path).unwrap()).scenario;
        let scenario = scenario.unwrap();
        // A scenario of models in MPS alone has no rival of the catalogue.
        if scenario.rivals.iter().any(|one| one.from.is_none()) {
            continue;
        }
        let ids = scenario.rivals.iter().filter_map(|one| one.from.as_deref());
        met.extend(ids.filter_map(catalogue::find).map(|entry| entry.family));
        missed.extend(wrong(&name, &scenario));
    }
    let families: std::collections::BTreeSet<String> =
        hullward_tests_reference::seeded::families().into_iter().collect();
    assert!(missed.is_empty(), "{}", missed.join("\n"));
    assert_eq!(met, families, "each family has a ready scenario");
}
