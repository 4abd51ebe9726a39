//! Facilities, with limits and without.

use hullward_tests_reference::open_data;
use instance::Datum;

use super::{Record, shipped, value_of, whole};

/// `cap41 (= cap71 capacity 5000)`, `cap71 (capacity 58268)`, or `cap41` alone by the digits.
pub(crate) fn facilities(record: &Record) -> Option<f64> {
    let limited = record.is("CFL");
    if !limited && !record.is("UFL") {
        return None;
    }
    let name = record.instance.split(' ').next().unwrap();
    let digits = name.trim_start_matches("cap");
    let (set, last) = digits.split_at(digits.len() - 1);
    let (file, capacity) = match set {
        "4" => ("7", 5_000),
        "5" => return (last == "1").then(|| warehouses(record, "cap73", 10_000))?,
        "6" => ("7", 15_000),
        "8" => ("10", 5_000),
        "9" => ("10", 15_000),
        "11" => ("13", 5_000),
        "12" => ("13", 15_000),
        own => (own, 58_268),
    };
    if limited && file != "7" && !whole() {
        return None;
    }
    warehouses(record, &format!("cap{file}{last}"), capacity)
}

fn warehouses(record: &Record, file: &str, capacity: u32) -> Option<f64> {
    let text = open_data(&format!("cap/{file}.txt"), "the OR-Library")?;
    let mut on = instance::read_part(&text, None, Some(1)).instance.unwrap();
    let sites = hullward_tests_reference::theory::labels(&on, "I").into_iter();
    let cells = sites.map(|site| (vec![site], capacity.into())).collect();
    on.set("q", Datum::Table { arity: 1, cells });
    let split = record.formulation.contains("x_ij<=y_i") || !record.bounds();
    let family = if record.is("CFL") { "cfl" } else { "ufl" };
    let id = format!("{family}/{}", if split { "split" } else { "joined" });
    Some(value_of(shipped(&id), &on, record.bounds()))
}
