//! What the tests share: small instances, and models that must come out.

#![expect(clippy::expect_used, clippy::panic, reason = "the helpers of these tests fail loudly")]

use std::collections::BTreeMap;

use hullward_notation::{Diagnostic, States, model as expand};
use instance::{Datum, Instance};
use model::{Model, Number};

const NAMES: [&str; 5] = ["Ash", "Birch", "Cedar", "Dogwood", "Elm"];

/// `n` stops with a drive between every two.
pub(crate) fn stops(n: usize) -> Instance {
    let name = |i: usize| NAMES.get(i).map_or_else(|| format!("stop {i}"), |&s| s.to_owned());
    let labels = (0..n).map(name).collect();
    let cells: Vec<_> = (0..n * n).map(|i| Some(Number::from(7 + i * i % 11))).collect();
    Instance::round_trip(labels, &cells)
}

/// An instance with something of every kind.
pub(crate) fn kitchen() -> Instance {
    let mut instance = stops(5);
    let own = |s: &str| s.to_owned();
    instance.set("T", Datum::Integers(vec![1, 2, 3, 4]));
    instance.set("K", Datum::Labels(vec![own("red"), own("blue")]));
    instance.set("Q", Datum::Number(Number::from(10)));
    let per = |keys: &[&str], values: &[i32]| Datum::Table {
        arity: 1,
        cells: keys.iter().zip(values).map(|(k, &v)| (vec![own(k)], Number::from(v))).collect(),
    };
    instance.set("d", per(&["1", "2", "3", "4"], &[5, 3, 4, 6]));
    instance.set("q", per(&NAMES, &[0, 4, 5, 6, 7]));
    instance.set("p", per(&["red"], &[3]));
    let row = |a: &str, b: &str| vec![own(a), own(b)];
    let near = vec![row("Ash", "Birch"), row("Ash", "Cedar"), row("Birch", "Ash")];
    instance.set("N", Datum::Tuples { arity: 2, rows: near });
    let pairs = [(0, 1), (1, 2), (2, 3), (3, 4), (0, 4)];
    let rows = pairs.iter().map(|&(i, j)| row(NAMES[i], NAMES[j])).collect();
    instance.set("E", Datum::Tuples { arity: 2, rows });
    instance
}

pub(crate) fn shown(text: &str, found: &[Diagnostic]) -> String {
    found.iter().map(|d| format!("{} {}\n", d.code, d.line(text))).collect()
}

/// The model of a text that has no error and no warning but those about empty families.
pub(crate) fn made(text: &str, instance: &Instance) -> Model {
    made_with(text, instance, &BTreeMap::new())
}

pub(crate) fn made_with(text: &str, instance: &Instance, states: &States) -> Model {
    match expand(text, instance, &BTreeMap::new(), states) {
        Ok((model, found)) => {
            // on complete data no drive is one-way, and texts that show a spelling mean no model
            let expected = |d: &Diagnostic| {
                d.severity == hullward_notation::Severity::Info
                    || d.code == "row.empty-family"
                    || d.code.starts_with("lint.")
            };
            assert!(found.iter().all(expected), "{}", shown(text, &found));
            model
        }
        Err(found) => panic!("{}", shown(text, &found)),
    }
}

/// The codes of the errors of a text, in order.
pub(crate) fn errors(text: &str, instance: &Instance) -> Vec<(&'static str, String)> {
    match expand(text, instance, &BTreeMap::new(), &BTreeMap::new()) {
        Ok(_) => Vec::new(),
        Err(found) => {
            let errors = found.into_iter().filter(Diagnostic::is_error);
            errors.map(|d| (d.code, d.line(text))).collect()
        }
    }
}

/// A row as text: `x[Ash → Birch] + 2 y − z ≤ 3`.
pub(crate) fn row_text(model: &Model, row: model::RowId) -> String {
    exact_row_text(model, &model.row(row))
}

pub(crate) fn exact_row_text(model: &Model, row: &model::Row) -> String {
    let mut out = String::new();
    for (column, a) in &row.entries {
        let negative = *a < Number::ZERO;
        let size = if negative { -a.clone() } else { a.clone() };
        out.push_str(match (out.is_empty(), negative) {
            (true, false) => "",
            (true, true) => "−",
            (false, false) => " + ",
            (false, true) => " − ",
        });
        if size != Number::ONE {
            out.push_str(&format!("{size} "));
        }
        out.push_str(&model.column_name(*column));
    }
    match (&row.lower, &row.upper) {
        (Some(a), Some(b)) if a == b => format!("{out} = {a}"),
        (Some(a), Some(b)) => format!("{a} ≤ {out} ≤ {b}"),
        (Some(a), None) => format!("{out} ≥ {a}"),
        (None, Some(b)) => format!("{out} ≤ {b}"),
        (None, None) => format!("{out} free"),
    }
}

/// How long this thread has run, where Linux tells it: other work on the machine does not count.
pub(crate) fn run_time() -> Option<std::time::Duration> {
    let told = std::fs::read_to_string("/proc/thread-self/schedstat").ok()?;
    told.split(' ').next()?.parse().ok().map(std::time::Duration::from_nanos)
}

/// All rows of a family.
pub(crate) fn rows_of(model: &Model, family: &str) -> Vec<String> {
    let family = model.families().iter().find(|f| f.name == family).expect("no such family");
    family.rows.clone().map(|r| row_text(model, model::RowId(r))).collect()
}
