//! The optimum of model sections as papers write them (`crates/notation/tests/models`): found by
//! the search, and known by hand, for each instance is small enough to see it.

use std::collections::BTreeMap;

use hullward_engine::native::{USUAL_SLICE, Watch, run_rival};
use record::results::Status;
use record::scenario::{InstanceText, Rival, Scenario};

/// A file of the corpus: text, instance, expectations.
fn papers() -> Vec<(String, String, String, BTreeMap<String, String>)> {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/../notation/tests/models");
    let mut paths = Vec::new();
    let parts = ["", "/unseen", "/printed", "/journals", "/further", "/habits", "/manuscripts"];
    for folder in parts.map(|part| format!("{folder}{part}")) {
        let entries = std::fs::read_dir(folder).into_iter().flatten().flatten();
        paths.extend(entries.map(|entry| entry.path()).filter(|p| p.is_file()));
    }
    paths.sort();
    let read = |path: &std::path::PathBuf| {
        let whole = std::fs::read_to_string(path).ok()?;
        let (text, rest) = whole.split_once("=== instance\n")?;
        let (instance, expected) = rest.split_once("=== expect\n")?;
        let pairs = expected.lines().filter_map(|line| line.rsplit_once(' '));
        let pairs = pairs.map(|(key, value)| (key.to_owned(), value.to_owned())).collect();
        let name = path.file_stem()?.to_string_lossy().into_owned();
        Some((name, text.to_owned(), instance.to_owned(), pairs))
    };
    paths.iter().filter_map(read).collect()
}

/// The value that the search proves.
fn optimum(text: String, instance: String, expected: &BTreeMap<String, String>) -> Option<f64> {
    let names = expected.iter().filter_map(|(key, value)| {
        key.strip_prefix("bind ").map(|name| (name.to_owned(), value.clone()))
    });
    let instance =
        InstanceText { text: instance, bind: names.collect(), ..InstanceText::default() };
    let rival = Rival { text: Some(text), ..Rival::default() };
    let scenario =
        Scenario { instance: Some(instance), rivals: vec![rival], ..Scenario::default() };
    let run = run_rival(&scenario, (0, 0), USUAL_SLICE, &mut |_| Watch::GoOn);
    let search = run.search?;
    (search.status == Status::Optimal).then_some(search.incumbent).flatten()
}

#[test]
fn optima_are_those_known_by_hand() {
    let mut wrong = Vec::new();
    let mut checked = 0;
    for (name, text, instance, expected) in papers() {
        let Some(wanted) = expected.get("optimum").and_then(|v| v.parse::<f64>().ok()) else {
            continue;
        };
        checked += 1;
        let found = optimum(text, instance, &expected);
        if found.is_none_or(|found| (found - wanted).abs() > 1e-9) {
            wrong.push(format!("{name}: {found:?} instead of {wanted}"));
        }
    }
    assert!(wrong.is_empty(), "{}", wrong.join("\n"));
    assert!(checked >= 40, "{checked} optima are known");
}
