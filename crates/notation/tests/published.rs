//! The shipped round-trip formulations on a small instance: rows, columns, and exactly the
//! right integer points, by enumeration.

use std::collections::BTreeMap;

use hullward_notation::{self as notation, Diagnostic, Severity};
use instance::Instance;
use model::{Model, Number};

/// `n` stops with a drive between every two.
fn stops(n: usize) -> Instance {
    let names = ["Ash", "Birch", "Cedar", "Dogwood", "Elm", "Fir"];
    let labels = names[..n].iter().map(|&s| s.to_owned()).collect();
    let cells: Vec<_> = (0..n * n).map(|i| Some(Number::from(7 + i * i % 11))).collect();
    Instance::round_trip(labels, &cells)
}

fn shipped(name: &str) -> String {
    let path = format!("{}/../catalogue/formulations/atsp/{name}.txt", env!("CARGO_MANIFEST_DIR"));
    std::fs::read_to_string(path).unwrap()
}

fn shown(text: &str, found: &[Diagnostic]) -> String {
    found.iter().map(|d| format!("{} {}\n", d.code, d.line(text))).collect()
}

fn made(text: &str, instance: &Instance) -> Model {
    match notation::model(text, instance, &BTreeMap::new(), &BTreeMap::new()) {
        Ok((model, found)) => {
            // on complete data no drive is one-way
            let expected =
                |d: &Diagnostic| d.severity == Severity::Info || d.code == "row.empty-family";
            assert!(found.iter().all(expected), "{}", shown(text, &found));
            model
        }
        Err(found) => panic!("{}", shown(text, &found)),
    }
}

/// Rows (of ordinary families), columns, families over subsets.
fn size(model: &Model) -> (usize, usize, usize) {
    (model.row_count(), model.columns().len(), model.subset_families().len())
}

#[test]
fn sizes_are_those_of_the_papers() {
    let instance = stops(5);
    let sizes = |name: &str| size(&made(&shipped(name), &instance));
    assert_eq!(sizes("assignment"), (10, 20, 0));
    assert_eq!(sizes("labels"), (10 + 12, 20 + 4, 0));
    assert_eq!(sizes("lifted-labels"), (10 + 12 + 8, 24, 0));
    assert_eq!(sizes("one-commodity"), (10 + 4 + 20, 40, 0));
    assert_eq!(sizes("multi-commodity"), (10 + 4 + 4 + 12 + 80, 20 + 80, 0));
    assert_eq!(sizes("subtours"), (10, 20, 1));
    assert_eq!(sizes("cuts"), (10, 20, 1));
}
