//! Names and numbers as sentences have them.

use model::{Model, Number, Sense, nearest_f64};

/// 1 when minimising, −1 when maximising: a gain of the bound counts up.
pub(crate) fn direction(model: &Model) -> f64 {
    match model.sense() {
        Sense::Minimise => 1.0,
        Sense::Maximise => -1.0,
    }
}

/// Whether two values are the same up to rounding.
pub(crate) fn same(a: f64, b: f64) -> bool {
    let (size_a, size_b) = (a.abs(), b.abs());
    let size = if size_a > size_b { size_a } else { size_b };
    (a - b).abs() <= 1e-6 * (1.0 + size)
}

/// A count with its noun: "1 plan", "3 plans".
pub(crate) fn of(count: u32, noun: &str) -> String {
    if count == 1 { format!("1 {noun}") } else { format!("{count} {noun}s") }
}

/// A number to six significant digits.
pub(crate) fn short(value: f64) -> String {
    if value == 0.0 {
        return "0".to_owned();
    }
    let rounded = format!("{value:.5e}");
    let rounded: f64 = rounded.parse().unwrap_or(value);
    format!("{rounded}").replacen('-', "−", 1)
}

/// An exact number, decimal where it is short.
pub(crate) fn exact(number: &Number) -> String {
    short(nearest_f64(number))
}

/// `name` of the row's family and its index.
pub(crate) fn row(model: &Model, row: model::RowId) -> String {
    model.row_name(row)
}
