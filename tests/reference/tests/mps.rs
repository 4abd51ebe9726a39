//! MPS files of others, read by our reader: the value of the relaxation, as found and exactly,
//! against the published one and HiGHS, integer optima by HiGHS, and the same after writing and reading again.
//!
//! Files: netlib lp/data (Gay, COAL Newsletter 13 (1985) 10-12), MIPLIB 3 (Bixby, Ceria, McZeal
//! and Savelsbergh, Optima 58 (1998) 12-15), and the check instances of HiGHS. Values with their
//! sources: `fixtures/mps_values.json`, the smallest files first. The exact value must have every
//! digit that was printed: 1e-9 for Netlib's table of eleven digits, 1e-9 for what HiGHS computed,
//! for MIPLIB's catalogue half a unit of its last digit, or one where it was cut off.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it has seen")]

use std::collections::BTreeMap;
use std::path::Path;
use std::rc::Rc;

use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::root;
use hullward_tests_reference::{agree, open_data};
use model::{Model, mps, nearest_f64};
use serde_json::Value;
use tree::Status;

/// How far the value found in floating-point arithmetic may be from the exact one.
const FOUND: f64 = 1e-10;

/// One value of a file.
struct Wanted {
    /// What is measured: `relaxation`, `status` or `optimum`.
    quantity: String,
    /// The value, or the status.
    value: Value,
    tolerance: f64,
}

/// The values by file.
fn values() -> Vec<(String, Vec<Wanted>)> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/mps_values.json");
    let list: Value = serde_json::from_str(&std::fs::read_to_string(path).unwrap()).unwrap();
    let mut out: Vec<(String, Vec<Wanted>)> = Vec::new();
    for entry in list.as_array().unwrap() {
        let text = |key: &str| entry[key].as_str().unwrap().to_owned();
        let file = text("file");
        assert!(!text("source").is_empty(), "{file}");
        let tolerance = entry["tolerance"].as_f64().unwrap();
        let wanted =
            Wanted { quantity: text("quantity"), value: entry["value"].clone(), tolerance };
        match out.last_mut() {
            Some((last, values)) if *last == file => values.push(wanted),
            _ => out.push((file, vec![wanted])),
        }
    }
    out
}

/// A file of the open data, if it is at hand.
fn file(name: &str) -> Option<String> {
    let published = match name.split_once('/').unwrap().0 {
        "netlib" => "netlib lp/data",
        "miplib3" => "MIPLIB 3",
        _ => "the check instances of HiGHS (in the package highs-sys)",
    };
    open_data(name, published)
}

/// A text that must be read, with the codes of its warnings.
fn read(name: &str, text: &str) -> (Rc<Model>, Vec<&'static str>) {
    match mps::read(text) {
        Ok((model, warnings)) => (Rc::new(model), warnings.iter().map(|w| w.code).collect()),
        Err(complaints) => panic!("{name}: {complaints:?}"),
    }
}

fn check_relaxation(name: &str, model: &Rc<Model>, wanted: &Value, tolerance: f64) {
    let root = root(model);
    assert_eq!(root.status, Status::Optimal, "{name}: {:?}", root.stopped);
    let (bound, wanted) = (root.bound.unwrap(), wanted.as_f64().unwrap());
    let Verdict::Optimal(value) = highs(model, &[], false) else { panic!("{name}") };
    let exact = root.checked_bound.filter(|_| root.exact).unwrap_or_else(|| panic!("{name}"));
    let exact = nearest_f64(&exact);
    let apart = |a: f64, b: f64| (a - b).abs() / (1.0 + b.abs());
    eprintln!(
        "{name}: {:.1e} from {wanted} (up to {tolerance:.1e}), found {:.1e}, HiGHS {:.1e} from it",
        apart(exact, wanted),
        apart(bound, exact),
        apart(value, exact)
    );
    assert!(agree(exact, wanted, tolerance), "{name}: exactly {exact}, for {wanted}");
    assert!(agree(bound, exact, FOUND), "{name}: exactly {exact}, found {bound}");
    assert!(agree(value, exact, 1e-8), "{name}: exactly {exact}, HiGHS {value}");
}

fn check_status(name: &str, model: &Rc<Model>, wanted: &Value) {
    let (status, verdict) = match wanted.as_str().unwrap() {
        "infeasible" => (Status::Infeasible, Verdict::Infeasible),
        "unbounded" => (Status::Unbounded, Verdict::Unbounded),
        other => panic!("{name}: {other}"),
    };
    let root = root(model);
    assert_eq!(root.status, status, "{name}");
    assert!(root.checked || status == Status::Unbounded, "{name}: the ray is not proved");
    // Presolve may find that there is no optimum without saying for which of the two reasons.
    let said = highs(model, &[], false);
    assert!(said == verdict || said == Verdict::Silent, "{name}: {said:?}");
}

#[test]
fn every_file_has_its_published_value_and_highs_agrees() {
    let values = values();
    assert_eq!(values.len(), 113);
    for (name, values) in values {
        let Some(text) = file(&name) else { continue };
        let (model, _) = read(&name, &text);
        for Wanted { quantity, value: wanted, tolerance } in values {
            match quantity.as_str() {
                "relaxation" => check_relaxation(&name, &model, &wanted, tolerance),
                "status" => check_status(&name, &model, &wanted),
                "optimum" => {
                    let Verdict::Optimal(value) = highs(&model, &[], true) else {
                        panic!("{name}")
                    };
                    let wanted = wanted.as_f64().unwrap();
                    assert!(agree(value, wanted, tolerance), "{name}: {value} for {wanted}");
                }
                other => panic!("{name}: {other}"),
            }
        }
    }
}

#[test]
fn what_is_written_is_read_as_the_same_model() {
    for (name, _) in values() {
        let Some(text) = file(&name) else { continue };
        let (before, _) = read(&name, &text);
        let written = mps::write(&before).unwrap();
        let (after, _) = read(&name, &written.text);
        let numbers = (before.numbers(), after.numbers());
        let size = |model: &Model| (model.columns().len(), model.row_count(), model.sense());
        assert_eq!(size(&before), size(&after), "{name}");
        assert_eq!(before.offset(), after.offset(), "{name}");
        for (old, new) in before.columns().iter().zip(after.columns()) {
            let old =
                [old.lower, old.upper, Some(old.cost)].map(|id| id.map(|id| numbers.0.exact(id)));
            let new =
                [new.lower, new.upper, Some(new.cost)].map(|id| id.map(|id| numbers.1.exact(id)));
            assert_eq!(old, new, "{name}");
        }
        for row in (0..u32::try_from(before.row_count()).unwrap()).map(model::RowId) {
            assert_eq!(before.row(row), after.row(row), "{name}");
        }
        let whole = |model: &Model| model.columns().iter().map(|c| c.integer).collect::<Vec<_>>();
        assert_eq!(whole(&before), whole(&after), "{name}");
    }
}

/// The files in which a disputed reading occurs, and which.
#[test]
fn disputed_readings_are_warned_of_where_they_occur() {
    let wanted = BTreeMap::from([
        ("mps/bgetam.mps", vec!["zero-upper"]),
        ("mps/dcmulti.mps", vec!["after-end"]),
        ("mps/e226.mps", vec!["objective-constant"]),
        ("mps/gas11.mps", vec!["minus-infinity"]),
        ("mps/small_mip.mps", vec!["unbounded-integer"]),
        ("netlib/e226.mps", vec!["objective-constant"]),
        ("netlib/forplan.mps", vec!["fixed-columns"]),
        ("netlib/recipe.mps", vec!["zero-upper"]),
        ("miplib3/dcmulti.mps", vec!["after-end"]),
    ]);
    for (name, _) in values() {
        let Some(text) = file(&name) else { continue };
        let (_, codes) = read(&name, &text);
        assert_eq!(codes, wanted.get(name.as_str()).cloned().unwrap_or_default(), "{name}");
    }
}
