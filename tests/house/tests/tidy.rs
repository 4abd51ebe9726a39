//! What every source file keeps to: its size, its head comment, no unfinished marks.

#![allow(clippy::unwrap_used, reason = "a test fails by it")]

use std::fs;
use std::path::{Path, PathBuf};

/// Most lines a source file may have.
const MOST_LINES: usize = 600;

fn sources() -> Vec<PathBuf> {
    let root = Path::new(env!("CARGO_MANIFEST_DIR")).join("../..");
    let mut found = Vec::new();
    for folder in ["crates", "web", "tests"] {
        collect(&root.join(folder), &mut found);
    }
    found.sort();
    assert!(found.len() > 30, "the sources were not found");
    found
}

fn collect(folder: &Path, found: &mut Vec<PathBuf>) {
    for entry in fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        let name = path.file_name().unwrap().to_string_lossy().into_owned();
        if path.is_dir() && name != "dist" && !name.starts_with("target") {
            collect(&path, found);
        } else if name.ends_with(".rs") {
            found.push(path);
        }
    }
}

#[test]
fn no_file_is_longer_than_a_reader_can_hold() {
    for path in sources() {
        let lines = fs::read_to_string(&path).unwrap().lines().count();
        assert!(lines <= MOST_LINES, "{} has {lines} lines", path.display());
    }
}

#[test]
fn every_file_begins_by_saying_its_idea() {
    for path in sources() {
        let text = fs::read_to_string(&path).unwrap();
        assert!(text.starts_with("//!"), "{} has no head comment", path.display());
    }
}

#[test]
fn nothing_is_left_unfinished() {
    let marks = [["TO", "DO"], ["FIX", "ME"], ["XX", "X"], ["#[ign", "ore"]].map(|m| m.concat());
    for path in sources() {
        let text = fs::read_to_string(&path).unwrap();
        for mark in &marks {
            assert!(!text.contains(mark.as_str()), "{} holds {mark}", path.display());
        }
    }
}

/// Where one program holds the tests of a folder, a file that its `main.rs` does not name would never
/// be run.
#[test]
fn no_file_of_tests_is_forgotten() {
    let sources = sources();
    let programs = sources.iter().filter(|path| path.ends_with("tests/main.rs"));
    let mut seen = 0;
    for program in programs {
        let text = fs::read_to_string(program).unwrap();
        let beside = sources.iter().filter(|path| path.parent() == program.parent());
        for file in beside.filter(|path| *path != program) {
            let name = file.file_stem().unwrap().to_string_lossy();
            let named = text.lines().any(|line| line == format!("mod {name};"));
            assert!(named, "{} does not name {name}", program.display());
            seen += 1;
        }
    }
    assert!(seen > 30, "the programs of tests were not found");
}
