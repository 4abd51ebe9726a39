//! Texts with the diagnostics that they must give, written as comments at their end:
//! `#! line:column code message (mends)`. Those in `ok` must become models, whose size stands
//! in a line `#= rows columns non-zeros families-over-subsets`; those in `err` must not.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use std::collections::BTreeMap;

use crate::common::kitchen;
use hullward_notation::{Diagnostic, check, line_column, model, parse, print};

/// The fixtures of a folder by name.
fn fixtures(folder: &str) -> BTreeMap<String, String> {
    let path = format!("{}/tests/fixtures/{folder}", env!("CARGO_MANIFEST_DIR"));
    let entries = std::fs::read_dir(path).unwrap().map(|entry| entry.unwrap().path());
    let texts = entries.map(|path| {
        (
            path.file_name().unwrap().to_string_lossy().into_owned(),
            std::fs::read_to_string(path).unwrap(),
        )
    });
    texts.collect()
}

fn expected(text: &str) -> String {
    text.lines()
        .filter(|line| line.starts_with("#!") || line.starts_with("#="))
        .map(|l| l.to_owned() + "\n")
        .collect()
}

fn told(text: &str, found: &[Diagnostic]) -> String {
    let line = |d: &Diagnostic| {
        let whole = d.line(text);
        let (place, rest) = whole.split_once(": ").unwrap();
        format!("#! {place} {} {rest}\n", d.code)
    };
    found.iter().map(line).collect()
}

/// Every span lies in the text, on character boundaries, and is not turned round.
fn places_are_sound(text: &str, found: &[Diagnostic]) {
    for diagnostic in found {
        assert!(text.get(diagnostic.span.clone()).is_some(), "{diagnostic:?}");
        for (span, _) in &diagnostic.also {
            assert!(text.get(span.clone()).is_some(), "{diagnostic:?}");
        }
        let (line, column) = line_column(text, diagnostic.span.start);
        assert!(line >= 1 && column >= 1);
    }
}

#[test]
fn wrong_texts_say_what_is_wrong_and_where() {
    let mut failures = String::new();
    for (name, text) in fixtures("err") {
        match model(&text, &kitchen(), &BTreeMap::new(), &BTreeMap::new()) {
            Ok(_) => failures += &format!("{name} becomes a model\n"),
            Err(found) => {
                places_are_sound(&text, &found);
                assert!(found.iter().any(Diagnostic::is_error));
                let told = told(&text, &found);
                if told != expected(&text) {
                    failures += &format!("{name} says\n{told}");
                }
            }
        }
    }
    assert!(failures.is_empty(), "\n{failures}");
}

#[test]
fn right_texts_become_models_of_the_right_size() {
    let mut failures = String::new();
    for (name, text) in fixtures("ok") {
        match model(&text, &kitchen(), &BTreeMap::new(), &BTreeMap::new()) {
            Ok((model, found)) => {
                places_are_sound(&text, &found);
                let (rows, columns) = (model.row_count(), model.columns().len());
                let entries = model.statistics().nonzeros;
                let subsets = model.subset_families().len();
                let told =
                    told(&text, &found) + &format!("#= {rows} {columns} {entries} {subsets}\n");
                if told != expected(&text) {
                    failures += &format!("{name} says\n{told}");
                }
            }
            Err(found) => failures += &format!("{name} fails\n{}", told(&text, &found)),
        }
    }
    assert!(failures.is_empty(), "\n{failures}");
}

/// What is printed reads back, checks, and is the same model.
#[test]
fn printed_texts_are_the_same_models() {
    for (name, text) in fixtures("ok") {
        let tree = parse(&text).tree;
        let printed = print(&tree);
        let again = parse(&printed);
        assert_eq!(again.tree, tree, "{name}\n{printed}");
        assert!(check(&again.tree).0.is_sound(), "{name}");
        let made =
            |text: &str| model(text, &kitchen(), &BTreeMap::new(), &BTreeMap::new()).unwrap().0;
        assert_eq!(made(&printed), made(&text), "{name}");
    }
}
