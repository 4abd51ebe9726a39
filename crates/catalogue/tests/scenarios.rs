//! The ready scenarios: each says that its data are invented or whence they come, its instance
//! reads without a complaint, and each of its rivals is shipped and fits it.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test ends where it fails")]

use std::collections::BTreeMap;
use std::path::Path;

use hullward_catalogue::find;
use instance::Reader;
use notation::{Diagnostic, Severity};
use toml::{Table, Value};

fn scenarios() -> Vec<(String, Table)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../scenarios");
    let paths = std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path());
    let mut out: Vec<(String, Table)> = paths
        .filter(|path| path.extension().is_some_and(|ending| ending == "toml"))
        .map(|path| {
            let name = path.file_stem().unwrap().to_string_lossy().into_owned();
            (name, std::fs::read_to_string(path).unwrap().parse().unwrap())
        })
        .collect();
    out.sort_by(|a, b| a.0.cmp(&b.0));
    out
}

#[test]
fn ready_scenarios_are_honest_and_whole() {
    let scenarios = scenarios();
    assert!(scenarios.len() >= 5, "{} scenarios", scenarios.len());
    for (name, scenario) in scenarios {
        let text = |key: &str| scenario[key].as_str().unwrap();
        let invented = text("title").contains("(invented data)")
            && text("notes").contains("**All data here are invented");
        assert!(invented || text("notes").contains("Source: "), "{name}");

        let reader = scenario["instance"]["reader"].as_str().and_then(Reader::from_name);
        let reading = instance::read(scenario["instance"]["text"].as_str().unwrap(), reader);
        assert!(reading.complaints.is_empty(), "{name}: {:?}", reading.complaints);
        let instance = reading.instance.unwrap();

        let rivals = scenario["rival"].as_array().unwrap();
        assert!(rivals.len() >= 2, "{name}");
        for id in rivals.iter().filter_map(|rival| rival.get("from").and_then(Value::as_str)) {
            let entry = find(id).unwrap_or_else(|| panic!("{name}: {id} is not shipped"));
            let made = notation::model(entry.text, &instance, &BTreeMap::new(), &BTreeMap::new());
            let said = |found: Vec<Diagnostic>| {
                found.iter().map(|d| d.line(entry.text)).collect::<Vec<_>>().join("\n")
            };
            let (_, found) = made.unwrap_or_else(|found| panic!("{name}: {id}: {}", said(found)));
            // a note that a variable would be whole by itself is no pitfall of the scenario's question
            let alarm = |d: &Diagnostic| {
                d.is_error() || d.severity != Severity::Info && d.code.starts_with("lint.")
            };
            assert!(!found.iter().any(alarm), "{name}: {id}: {}", said(found));
        }
    }
}
