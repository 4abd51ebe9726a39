//! What every family of the catalogue must have: a generator for each class of data, readers that
//! exist, a drawing, a natural variable, an assumption on costs, a size and a pitfall for each rival,
//! a ready scenario that says what was decided and why, and a variant that is wrong on purpose. Lift
//! maps are held for every rival in `tests/reference/tests/lifts.rs`, sizes in
//! `crates/catalogue/tests/formulations.rs`, wrong variants in `tests/reference/tests/wrong.rs`.

#![allow(clippy::unwrap_used, reason = "a test fails by it")]

use std::collections::{BTreeMap, BTreeSet};
use std::path::{Path, PathBuf};

use catalogue::{Class, Entry, entries, generate};
use hullward_engine::{Worker, instance_report};
use record::event::NodeNumber;
use record::message::{LaneJob, Reply, Request};
use record::scenario::{InstanceText, Rival, Scenario};

/// So many families are shipped, and so many rivals.
const FAMILIES: usize = 39;
const RIVALS: usize = 188;

fn folder(path: &str) -> PathBuf {
    Path::new(env!("CARGO_MANIFEST_DIR")).join("../..").join(path)
}

fn files(folder: &Path) -> Vec<PathBuf> {
    let mut paths: Vec<PathBuf> = std::fs::read_dir(folder)
        .map(|entries| entries.map(|entry| entry.unwrap().path()).collect())
        .unwrap_or_default();
    paths.sort();
    paths
}

fn given(text: &str) -> InstanceText {
    InstanceText { text: text.to_owned(), ..InstanceText::default() }
}

/// The names of the drawings of a rival's root on a generated instance.
fn drawings(entry: &Entry, text: &str) -> Vec<String> {
    let mut worker = Worker::new();
    let rival = Rival { from: Some(entry.id.clone()), ..Rival::default() };
    let job = LaneJob { instance: Some(given(text)), rival, ..LaneJob::default() };
    worker.handle(Request::Load(Box::new(job)));
    while worker.advance(1_000_000) {}
    worker.handle(Request::Inspect(NodeNumber(1)));
    while worker.advance(1_000_000) {}
    let replies = worker.take().into_iter().map(|envelope| envelope.reply);
    let nodes = replies.filter_map(|reply| match reply {
        Reply::Node(detail) => Some(*detail),
        _ => None,
    });
    nodes.flat_map(|detail| detail.drawings).map(|drawing| drawing.name).collect()
}

/// What a family lacks in its file and its rivals.
fn lacks_in_words(family: &str, rivals: &[Entry]) -> Vec<String> {
    let file = folder("crates/catalogue/formulations").join(family).join("family.toml");
    let file = std::fs::read_to_string(file).unwrap();
    let line = file.lines().find(|line| line.starts_with("readers = [")).unwrap_or_default();
    let readers: Vec<&str> = line.split('"').skip(1).step_by(2).collect();
    let mut lacks = Vec::new();
    if readers.is_empty() || readers.iter().any(|name| instance::Reader::from_name(name).is_none())
    {
        lacks.push(format!("readers that exist, not {readers:?}"));
    }
    let natural = |entry: &&Entry| {
        let checked = notation::check(&notation::parse(entry.text).tree).0;
        checked.variables().contains(&entry.natural.as_str())
    };
    // of colourings, what all forms share is in words: the number of colours
    if !rivals.iter().any(|entry| natural(&entry) || entry.natural.contains(' ')) {
        lacks.push("a natural variable that a rival has".to_owned());
    }
    for entry in rivals {
        let words = [&entry.assumption, &entry.size, &entry.pitfall, &entry.citation];
        let said = words.iter().all(|words| !words.trim().is_empty());
        let pitfall = entry.pitfall.split_whitespace().count() >= 8;
        if !said || !pitfall || !entry.size.contains("column") {
            lacks.push(format!("an assumption, a size, a pitfall or a citation of {}", entry.id));
        }
    }
    lacks
}

/// What a family lacks on generated instances.
fn lacks_on_instances(family: &str, rivals: &[Entry]) -> Vec<String> {
    let mut lacks = Vec::new();
    for class in Class::ALL {
        let Some(text) = generate(family, 5, class, 1) else {
            lacks.push(format!("a generator of {class:?}"));
            continue;
        };
        let report = instance_report(&given(&text));
        if !report.usable || !report.complaints.is_empty() {
            lacks.push(format!("an instance of {class:?} without a complaint"));
        }
        if class == Class::Euclidean && !rivals.iter().any(|one| !drawings(one, &text).is_empty()) {
            lacks.push("a drawing".to_owned());
        }
    }
    lacks
}

/// The families that two rivals of a ready scenario stand for, where its notes say what was decided.
fn decided() -> BTreeSet<String> {
    let mut found = BTreeSet::new();
    for path in files(&folder("scenarios")) {
        let parsed = record::file::parse(&std::fs::read_to_string(&path).unwrap());
        let scenario: Scenario = parsed.scenario.unwrap();
        let reason = scenario.notes.split_once("Decided").map_or("", |(_, reason)| reason);
        if reason.split_whitespace().count() < 5 {
            continue;
        }
        let mut rivals: BTreeMap<String, usize> = BTreeMap::new();
        for id in scenario.rivals.iter().filter_map(|rival| rival.from.as_deref()) {
            let family = id.split('/').next().unwrap_or_default();
            *rivals.entry(family.to_owned()).or_default() += 1;
        }
        found.extend(rivals.into_iter().filter(|(_, count)| *count > 1).map(|(family, _)| family));
    }
    found
}

#[test]
fn every_family_has_all_that_a_family_has() {
    let mut families: BTreeMap<String, Vec<Entry>> = BTreeMap::new();
    for entry in entries() {
        families.entry(entry.family.clone()).or_default().push(entry);
    }
    let rivals: usize = families.values().map(Vec::len).sum();
    assert!(families.len() >= FAMILIES && rivals >= RIVALS, "{} and {rivals}", families.len());
    let decided = decided();
    let mut lacks = String::new();
    for (family, rivals) in &families {
        let mut own = lacks_in_words(family, rivals);
        own.extend(lacks_on_instances(family, rivals));
        if !decided.contains(family) {
            own.push(
                "a ready scenario of two rivals that says what was decided and why".to_owned(),
            );
        }
        if files(&folder("crates/catalogue/tests/wrong").join(family)).is_empty() {
            own.push("a variant that is wrong on purpose".to_owned());
        }
        own.iter().for_each(|what| lacks += &format!("{family} lacks {what}\n"));
    }
    assert!(lacks.is_empty(), "{lacks}");
}
