//! Every shipped formulation on generated instances: it reads without an error, its model has
//! the size that `family.toml` states, and what is printed reads back as the same model.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test ends where it fails")]

mod further;
mod holdings;
mod planned;

use std::collections::BTreeMap;

use hullward_catalogue::{Class, Entry, entries, generate};
use instance::{Datum, Instance};
use model::Model;
use notation::{Diagnostic, Severity};

mod sizes;

/// What the size of an instance is told in.
struct Counts {
    /// Stops, nodes or periods.
    n: usize,
    /// Arcs.
    m: usize,
    /// Facilities and clients.
    sites: (usize, usize),
}

/// Columns, rows and families over subsets.
type Size = (usize, usize, usize);

/// What `family.toml` states in words, for complete data.
fn stated(id: &str, instance: &Instance) -> Size {
    if let Some(size) = planned::stated(id, instance).or_else(|| further::stated(id, instance)) {
        return size;
    }
    let Counts { n, m, sites: (i, j) } = counts(instance);
    let pairs = n * (n + 1) / 2;
    match id {
        "atsp/assignment" => (n * (n - 1), 2 * n, 0),
        "atsp/labels" => (n * (n - 1) + n - 1, 2 * n + (n - 1) * (n - 2), 0),
        "atsp/lifted-labels" => (n * (n - 1) + n - 1, 2 * n + (n - 1) * n, 0),
        "atsp/one-commodity" => (2 * n * (n - 1), 2 * n + (n - 1) + n * (n - 1), 0),
        "atsp/two-commodity" => (3 * n * (n - 1), 2 * n + 2 * (n - 1) + n * (n - 1), 0),
        "atsp/multi-commodity" => (n * n * (n - 1), 2 * n + n * (n - 1) + n * (n - 1) * (n - 1), 0),
        "atsp/subtours" | "atsp/cuts" => (n * (n - 1), 2 * n, 1),
        "tsp/subtours" => (n * (n - 1) / 2, n, 1),
        "path/flow" => (m, n, 0),
        "path/potentials" => (n, m, 0),
        "ufl/joined" => (i * j + i, j + i, 0),
        "ufl/split" => (i * j + i, j + i * j, 0),
        "ufl/radii" => sizes::radii(instance),
        "lot/wagner-whitin" => (3 * n + 1, 2 * n + pairs, 0),
        "lot/big-m" | "lot/all-demand" => (3 * n + 1, 2 * n, 0),
        "lot/l-s" => (3 * n + 1, 2 * n, n),
        "lot/location-form" => (3 * n + 1 + pairs, 3 * n + pairs, 0),
        "lot/shortest-path-form" => (3 * n + 1 + pairs, 4 * n, 0),
        _ => sizes::networks(id, instance).unwrap_or_else(|| panic!("no size is stated for {id}")),
    }
}

fn length(instance: &Instance, name: &str) -> usize {
    match instance.get(name) {
        Some(Datum::Labels(labels)) => labels.len(),
        Some(Datum::Integers(values)) => values.len(),
        Some(Datum::Tuples { rows, .. }) => rows.len(),
        _ => 0,
    }
}

fn counts(instance: &Instance) -> Counts {
    let [stops, periods, arcs, facilities, clients] =
        ["V", "T", "A", "I", "J"].map(|name| length(instance, name));
    Counts { n: stops + periods, m: arcs, sites: (facilities, clients) }
}

fn read(text: &str) -> Instance {
    let reading = instance::read(text, None);
    assert!(reading.complaints.is_empty(), "{:?}\n{text}", reading.complaints);
    reading.instance.unwrap()
}

fn shown(text: &str, found: &[Diagnostic]) -> String {
    found.iter().map(|d| format!("{} {}\n", d.code, d.line(text))).collect()
}

fn made(text: &str, instance: &Instance) -> (Model, Vec<Diagnostic>) {
    notation::model(text, instance, &BTreeMap::new(), &BTreeMap::new())
        .unwrap_or_else(|found| panic!("{}", shown(text, &found)))
}

fn size(model: &Model) -> Size {
    (model.columns().len(), model.row_count(), model.subset_families().len())
}

/// Each entry on each generated instance of its family.
fn on_instances(mut check: impl FnMut(&Entry, Class, &Instance)) {
    for entry in entries() {
        let mut count = 0;
        for class in Class::ALL {
            // 11 items have 55,440 fences of three
            let large = if entry.id == "ordering/fences" { 9 } else { 11 };
            for (n, seed) in [(4, 1), (7, 2), (large, 3)] {
                if let Some(text) = generate(&entry.family, n, class, seed) {
                    check(&entry, class, &read(&text));
                    count += 1;
                }
            }
        }
        assert!(count >= 9, "{} has {count} instances", entry.id);
    }
}

/// What the data may bring about: no row for what small or complete data lack (a drive without a
/// drive back, a load too large for one vehicle, two in conflict that a third could represent), and
/// two radii between which a client has no site.
const BY_THE_DATA: [(&str, &str); 17] = [
    ("row.empty-family", "atsp/lifted-labels"),
    ("row.empty-family", "atsp/lifted-rows"),
    ("row.empty-family", "atsp/rlt-labels"),
    ("row.empty-family", "atsp/lifted-precedence-labels"),
    ("row.empty-family", "stable-set/odd-cycles"),
    ("row.empty-family", "stable-set/wheels"),
    ("row.empty-family", "ordering/fences"),
    ("row.empty-family", "capacitated-design/node-cuts"),
    ("row.empty-family", "colouring/partial-order"),
    ("row.empty-family", "colouring/tight-partial-order"),
    ("row.empty-family", "cvrp/lifted-load-labels"),
    ("row.empty-family", "colouring/representatives"),
    ("row.empty-family", "p-median/chained-radius"),
    ("lint.twin-rows", "cases/multi-m"),
    ("lint.twin-rows", "p-centre/radius"),
    ("lint.twin-rows", "stable-set/odd-cycles"),
    ("lint.twin-rows", "stable-set/wheels"),
];

#[test]
fn every_formulation_reads_and_checks_without_a_word() {
    for entry in entries() {
        let parsed = notation::parse(entry.text);
        assert!(parsed.diagnostics.is_empty(), "{}", shown(entry.text, &parsed.diagnostics));
        let (_, found) = notation::check(&parsed.tree);
        assert!(found.is_empty(), "{}\n{}", entry.id, shown(entry.text, &found));
    }
}

#[test]
fn models_have_the_stated_size() {
    on_instances(|entry, class, instance| {
        let (model, _) = made(entry.text, instance);
        assert_eq!(size(&model), stated(&entry.id, instance), "{} {class:?}", entry.id);
    });
}

#[test]
fn models_come_without_warnings() {
    let mut unexpected = String::new();
    on_instances(|entry, class, instance| {
        let (_, found) = made(entry.text, instance);
        let said = |d: &&Diagnostic| {
            d.severity != Severity::Info && !BY_THE_DATA.contains(&(d.code, entry.id.as_str()))
        };
        for warning in found.iter().filter(said) {
            let line = warning.line(entry.text);
            unexpected.push_str(&format!("{} {class:?}: {} {line}\n", entry.id, warning.code));
        }
    });
    assert!(unexpected.is_empty(), "{unexpected}");
}

#[test]
fn printed_texts_are_the_same_models() {
    for entry in entries() {
        let tree = notation::parse(entry.text).tree;
        let printed = notation::print(&tree);
        let again = notation::parse(&printed);
        assert!(again.diagnostics.is_empty(), "{}\n{printed}", entry.id);
        assert_eq!(again.tree, tree, "{}\n{printed}", entry.id);
        let instance = read(&generate(&entry.family, 5, Class::Uniform, 4).unwrap());
        assert_eq!(made(&printed, &instance).0, made(entry.text, &instance).0, "{}", entry.id);
    }
}
