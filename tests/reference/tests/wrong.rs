//! Formulations that are wrong on purpose, one of every family or more, in
//! `crates/catalogue/tests/wrong`: the first line of each says what is wrong and on which seeded
//! instance it shows. There its optimum, or that it has a plan at all, is not that of its family.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeSet;
use std::path::{Path, PathBuf};

use catalogue::{Class, entries, generate};
use hullward_tests_reference::agree;
use hullward_tests_reference::round_trip::{formulation, instance, rival, solve};
use hullward_tests_reference::seeded::families;
use instance::Instance;
use tree::{Settings, Status, Summary};

/// The files in a folder and its folders, by name.
fn files(folder: &Path) -> Vec<PathBuf> {
    let mut paths: Vec<PathBuf> =
        std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    paths.sort();
    let inside = |path: PathBuf| if path.is_dir() { files(&path) } else { vec![path] };
    paths.into_iter().flat_map(inside).collect()
}

/// The instance that the first line names: "Seen on Uniform, size 4, seed 1."
fn seen_on(family: &str, line: &str) -> Instance {
    let (what, place) = line.split_once(". Seen on ").unwrap();
    assert!(what.starts_with("# Wrong: "), "{line}");
    let words: Vec<&str> = place.trim_end_matches('.').split(", ").collect();
    let class = Class::ALL.into_iter().find(|class| format!("{class:?}") == words[0]).unwrap();
    let number = |place: usize, name: &str| words[place].strip_prefix(name).unwrap().parse::<u32>();
    let (size, seed) = (number(1, "size ").unwrap(), number(2, "seed ").unwrap());
    instance(&generate(family, size, class, seed.into()).unwrap())
}

fn ends(summary: &Summary) -> (bool, f64) {
    let solved = matches!(summary.status, Status::Optimal | Status::Infeasible);
    assert!(solved, "{:?}", summary.status);
    (summary.status == Status::Optimal, summary.incumbent.unwrap_or(0.0))
}

#[test]
fn what_is_wrong_shows_on_the_instance_that_it_names() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../crates/catalogue/tests/wrong");
    let mut met = BTreeSet::new();
    for path in files(&folder) {
        let family = path.parent().unwrap().file_name().unwrap().to_str().unwrap().to_owned();
        let text = std::fs::read_to_string(&path).unwrap();
        let instance = seen_on(&family, text.lines().next().unwrap());
        let wrong = ends(&solve(&formulation(&text, &instance), Settings::default()));
        for entry in entries().into_iter().filter(|e| e.family == family && !e.relaxation) {
            let right = ends(&solve(&rival(&entry.id, &instance), Settings::default()));
            let same = wrong.0 == right.0 && agree(wrong.1, right.1, 1e-6);
            assert!(!same, "{} is as {}: {right:?}", path.display(), entry.id);
        }
        met.insert(family);
    }
    assert_eq!(met, families().into_iter().collect::<BTreeSet<_>>());
}

/// They are wrong in what they say, not in how: none has an error or is told from its place alone.
#[test]
fn what_is_wrong_reads_without_an_error() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../crates/catalogue/tests/wrong");
    for path in files(&folder) {
        let parsed = notation::parse(&std::fs::read_to_string(&path).unwrap());
        let (_, found) = notation::check(&parsed.tree);
        let errors = parsed.diagnostics.iter().chain(&found).filter(|d| d.is_error());
        assert_eq!(errors.count(), 0, "{}", path.display());
    }
}

/// Each kind of slip that is common is there: a family that lacks, a factor that is too small, a way
/// that is open one way alone, a row for the depot too, a shift between 0 and 1.
#[test]
fn every_common_slip_is_among_them() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../../crates/catalogue/tests/wrong");
    let firsts: Vec<String> = files(&folder)
        .iter()
        .map(|path| std::fs::read_to_string(path).unwrap().lines().next().unwrap().to_owned())
        .collect();
    for (kind, at_least) in
        [("dropped", 3), ("factor", 3), ("way back", 2), ("depot", 1), ("counted", 2)]
    {
        let found = firsts.iter().filter(|line| line.contains(kind)).count();
        assert!(found >= at_least, "{kind}: {found}\n{}", firsts.join("\n"));
    }
}
