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

/// A sheet with clients in rows where the model names the sites first: turned round where the labels
/// show it, and by choice where both sets have the same.
#[test]
fn a_table_is_taken_by_the_order_of_its_sets() {
    let text = "Each site one client\ndata\n  I\n  J\n  c_{i,j} ∀ i ∈ I, j ∈ J\nminimise\n  \
        Σ_{i ∈ I} Σ_{j ∈ J} c_{i,j} x_{i,j}\nsubject to\n  Σ_{j ∈ J} x_{i,j} = 1 ∀ i ∈ I (one)\n  \
        x_{i,j} ∈ {0,1} ∀ i ∈ I, j ∈ J\n";
    let found = |sets: &str, cells: &str, bind: &[(&str, &str)]| {
        let bind = bind.iter().map(|&(a, b)| (a.to_owned(), b.to_owned())).collect();
        optimum(text.to_owned(), format!("{sets}\n\nc by rows, columns\n{cells}"), &bind)
    };
    let apart = "I\np q\n\nJ\na b";
    assert_eq!(found(apart, "p a 4\np b 5\nq a 1\nq b 6\n", &[]), Some(5.0));
    assert_eq!(found(apart, "a p 4\na q 5\nb p 1\nb q 6\n", &[]), Some(6.0));
    let alike = "I\na b\n\nJ\nb a";
    let cells = "a a 4\na b 5\nb a 1\nb b 6\n";
    assert_eq!(found(alike, cells, &[]), Some(5.0));
    assert_eq!(found(alike, cells, &[("bind c", "c, turned round")]), Some(6.0));
}
