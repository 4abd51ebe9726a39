//! The arrows of the house (DEVELOPERS.md): which crate may use which, held against what
//! `cargo metadata` says the manifests declare.

#![allow(clippy::unwrap_used, reason = "a test fails by it")]

use std::collections::{BTreeMap, BTreeSet};
use std::process::Command;

use serde_json::Value;

/// Crate and the house crates it may use (dev-dependencies aside).
const ARROWS: &[(&str, &[&str])] = &[
    ("lp", &[]),
    ("model", &[]),
    ("instance", &[]),
    ("record", &[]),
    ("opinion", &["record"]),
    ("notation", &["instance", "model"]),
    ("separate", &["model"]),
    ("proof", &["model"]),
    ("report", &["record"]),
    ("tree", &["lp", "model", "separate", "proof"]),
    ("catalogue", &["notation", "instance", "model"]),
    ("study", &["lp", "model", "instance", "record", "notation", "proof", "tree", "catalogue"]),
    (
        "engine",
        &[
            "lp",
            "model",
            "instance",
            "record",
            "notation",
            "separate",
            "proof",
            "tree",
            "catalogue",
            "study",
        ],
    ),
    ("command", &["engine", "opinion", "report", "record"]),
    ("xtask", &[]),
    ("web", &["record", "report"]),
    ("worker", &["engine"]),
    ("opinion-worker", &["opinion"]),
];

/// Outside crates that only some of the house may use, and who may.
const KEPT_APART: &[(&str, &[&str])] = &[
    ("serde", &["record"]),
    ("postcard", &["record"]),
    ("wasm-bindgen", &["web", "worker", "opinion-worker"]),
    ("web-sys", &["web", "worker"]),
    ("js-sys", &["web", "worker"]),
    ("yew", &["web"]),
    ("microlp", &["opinion"]),
    ("highs", &[]),
];

fn metadata() -> Value {
    let output = Command::new(env!("CARGO"))
        .args(["metadata", "--format-version", "1", "--no-deps", "--offline"])
        .current_dir(concat!(env!("CARGO_MANIFEST_DIR"), "/../.."))
        .output()
        .unwrap();
    assert!(output.status.success(), "{}", String::from_utf8_lossy(&output.stderr));
    serde_json::from_slice(&output.stdout).unwrap()
}

/// Each crate of the house (short name) with the short or outside names it depends on.
fn declared() -> BTreeMap<String, BTreeSet<String>> {
    let short = |name: &str| name.trim_start_matches("hullward-").to_owned();
    let mut out = BTreeMap::new();
    for package in metadata()["packages"].as_array().unwrap() {
        let name = short(package["name"].as_str().unwrap());
        let dependencies = package["dependencies"].as_array().unwrap().iter();
        let normal = dependencies.filter(|d| d["kind"].is_null());
        out.insert(name, normal.map(|d| short(d["name"].as_str().unwrap())).collect());
    }
    out
}

#[test]
fn the_house_has_only_the_arrows_it_was_drawn_with() {
    let houses: BTreeSet<&str> = ARROWS.iter().map(|&(name, _)| name).collect();
    for (name, dependencies) in declared() {
        if name.starts_with("tests-") {
            continue;
        }
        let allowed = ARROWS.iter().find(|&&(known, _)| known == name);
        assert!(allowed.is_some(), "crate {name} is not in the drawing");
        let (_, allowed) = allowed.unwrap();
        for used in dependencies.iter().filter(|d| houses.contains(d.as_str())) {
            assert!(allowed.contains(&used.as_str()), "{name} may not use {used}");
        }
    }
}

#[test]
fn what_is_kept_apart_stays_apart() {
    for (name, dependencies) in declared() {
        if name.starts_with("tests-") {
            continue;
        }
        for &(outside, users) in KEPT_APART {
            let used = dependencies.contains(outside);
            assert!(!used || users.contains(&name.as_str()), "{name} may not use {outside}");
        }
    }
}
