//! A file of each published library, pasted, gives every rival of its family all data, without
//! a hand: by name, or by shape and wording. The files are read from the folder that
//! `HULLWARD_DATA` names: TSPLIB (Reinelt 1991), CVRPLIB, OR-Library (Beasley 1990), SteinLib
//! (Koch, Martin, Voß 2001), DIMACS graphs, QAPLIB's format by an invented text.
#![allow(
    clippy::unwrap_used,
    clippy::panic,
    clippy::print_stdout,
    reason = "a test ends where it fails"
)]

use std::collections::BTreeMap;
use std::path::{Path, PathBuf};

use hullward_catalogue::entries;
use notation::{Diagnostic, assumed, bind, check, parse};

/// A file of the folder, and the families whose rivals must take it.
const FILES: &[(&str, &[&str])] = &[
    ("jobshop/ft06", &["job-shop"]),
    ("gap/gap1.txt", &["gap"]),
    ("mknap/mknap1.txt", &["multi-knapsack"]),
    ("cap/cap41.txt", &["cfl", "ufl"]),
    ("pmedian/pmed1.txt", &["p-median", "p-centre"]),
    ("wt/wt40.txt", &["machine", "tardiness"]),
    ("colour/myciel3.col", &["colouring", "stable-set"]),
    ("steiner/b01.stp", &["steiner"]),
    ("tsplib/gr17.tsp", &["tsp"]),
    ("tsplib/br17.atsp", &["atsp"]),
    ("vrp/P-n16-k8.vrp", &["cvrp"]),
];

/// Rivals whose columns an instance must list (bundles of jobs, stable sets, rounds): no library's
/// file does.
const LISTED: [&str; 3] = ["gap/patterns", "colouring/stable-sets", "cvrp/routes"];

/// Formats of which the folder holds no small file, and some that need none: invented numbers.
const TEXTS: &[(&str, &str)] = &[
    ("knapsack", "3 6\n5 4\n4 3\n3 2\n"),
    ("job-shop", "2 2\n0 3 1 2\n1 4 0 5\n"),
    ("path", "from to c\ns a 4\na t 3\ns t 9\n"),
    ("qap", "3\n\n0 3 0\n3 0 1\n0 1 0\n\n0 1 4\n1 0 2\n4 2 0\n"),
];

/// The readers that a family's file names.
fn readers(family: &str) -> Vec<String> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("formulations");
    let file = std::fs::read_to_string(folder.join(family).join("family.toml")).unwrap();
    let table: toml::Table = file.parse().unwrap();
    let names = table["readers"].as_array().unwrap().iter();
    names.map(|name| name.as_str().unwrap().to_owned()).collect()
}

fn without_a_hand(text: &str, family: &str) -> String {
    let reading = instance::read(text, None);
    let mut wrong = String::new();
    if !readers(family).iter().any(|name| name == reading.reader.name()) {
        wrong += &format!("{family} does not name the reader {}\n", reading.reader.name());
    }
    let Some(instance) = reading.instance else { return format!("{:?}", reading.complaints) };
    let rivals = entries().into_iter().filter(|entry| entry.family == family);
    for rival in rivals.filter(|rival| !LISTED.contains(&rival.id.as_str())) {
        let (checked, _) = check(&parse(rival.text).tree);
        let (names, _) = assumed(rival.text, &checked, &instance, &BTreeMap::new());
        if let Err(found) = bind(&checked, &instance, &names) {
            // the data were found where only what is worked out from them is too large
            let errors = found.iter().filter(|d| Diagnostic::is_error(d));
            let told: Vec<&str> =
                errors.filter(|d| !d.code.starts_with("size.")).map(|d| &*d.message).collect();
            if !told.is_empty() {
                wrong += &format!("{}: {}\n", rival.id, told.join("; "));
            }
        }
    }
    wrong
}

#[test]
fn every_rival_of_the_family_takes_a_pasted_file() {
    let Some(folder) = std::env::var_os("HULLWARD_DATA").map(PathBuf::from) else {
        assert!(std::env::var("CI").as_deref() != Ok("true"), "HULLWARD_DATA is not set");
        println!("HULLWARD_DATA is not set: nothing is read");
        return;
    };
    let mut wrong = String::new();
    for (file, families) in FILES {
        let Ok(text) = std::fs::read_to_string(folder.join(file)) else {
            panic!("{file} is not in {}", folder.display())
        };
        for family in *families {
            assert!(entries().iter().any(|entry| entry.family == *family), "{family}");
            wrong += &without_a_hand(&text, family);
        }
    }
    assert!(wrong.is_empty(), "{wrong}");
}

#[test]
fn formats_without_a_small_file_do_as_well() {
    for (family, text) in TEXTS {
        assert_eq!(without_a_hand(text, family), "", "{family}");
    }
}
