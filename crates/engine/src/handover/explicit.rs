//! A model that came as MPS, said in journal notation: each column a name, each row a line. It is read
//! again and compared, as everything that is handed over.

use std::collections::BTreeMap;
use std::fmt::Write as _;

use instance::number_text;
use model::{Column, ColumnId, Model, Number, NumberId, RowId, Sense};

use super::compare::compare;

/// Entries up to which a model is written out.
const MOST_ENTRIES: u64 = 5_000;

/// The longest name of a row that is taken as its label.
const LONGEST: usize = 40;

/// The text, and what it does not say.
///
/// # Errors
/// A model that is too large, or that the notation cannot say.
pub(super) fn explicit(model: &Model) -> Result<(String, Vec<String>), String> {
    let entries = model.statistics().nonzeros;
    if entries > MOST_ENTRIES {
        return Err(format!(
            "a model in MPS is written out up to {MOST_ENTRIES} entries, and this one has {entries}: take it as MPS"
        ));
    }
    let own = text(model, &|column| model.column_name(column));
    if reads_back(model, &own).is_ok() {
        return Ok((own, Vec::new()));
    }
    let counted = text(model, &|column| format!("x_{{{}}}", column.index() + 1));
    reads_back(model, &counted)?;
    let note = "the columns are x_1, x_2, … in the order of the file: their names are no names of the notation";
    Ok((counted, vec![note.to_owned()]))
}

/// Whether a text becomes the same model.
fn reads_back(model: &Model, text: &str) -> Result<(), String> {
    let instance = instance::Instance::new(instance::Reader::Blocks);
    let made = notation::model(text, &instance, &BTreeMap::new(), &BTreeMap::new());
    let (again, _) = made.map_err(|found| {
        let first = found.iter().find(|one| one.is_error()).map_or("", |one| &one.message);
        format!("the rows cannot be said in notation: {first}")
    })?;
    compare(model, &again).map(drop)
}

/// Names each column by `name`.
fn text(model: &Model, name: &dyn Fn(ColumnId) -> String) -> String {
    let exact = |id: NumberId| model.numbers().exact(id).clone();
    let columns =
        || model.columns().iter().enumerate().map(|(at, one)| (ColumnId::from_index(at), one));
    let costs = columns().map(|(id, one)| (id, exact(one.cost)));
    let sense = if model.sense() == Sense::Minimise { "minimise" } else { "maximise" };
    let mut out = format!("{}\n\n{sense}\n  ", plain(model.title()));
    out.push_str(&sum(costs, model.offset(), name));
    out.push_str("\nsubject to\n");
    for row in (0..model.row_count()).map(RowId::from_index) {
        let (lower, upper) = model.row_sides(row);
        let entries = model.row_entries(row).iter().map(|&(id, a)| (id, exact(a)));
        let left = sum(entries, &Number::ZERO, name);
        if let Some(line) = between(&left, lower.map(exact), upper.map(exact)) {
            let _ = writeln!(out, "  {line}    ({})", label(model, row));
        }
    }
    for (id, column) in columns() {
        domains(&name(id), column, &exact, &mut out);
    }
    out
}

/// `3 x − y + 2`; `0` where there is nothing.
fn sum(
    terms: impl Iterator<Item = (ColumnId, Number)>,
    constant: &Number,
    name: &dyn Fn(ColumnId) -> String,
) -> String {
    let mut out = String::new();
    let mut add = |value: &Number, name: &str| {
        let (minus, size) =
            if *value < Number::ZERO { (true, -value) } else { (false, value.clone()) };
        let sign = match (minus, out.is_empty()) {
            (true, true) => "−",
            (true, false) => " − ",
            (false, true) => "",
            (false, false) => " + ",
        };
        let factor = if size == Number::ONE && !name.is_empty() {
            String::new()
        } else {
            number_text(&size)
        };
        let space = if factor.is_empty() || name.is_empty() { "" } else { " " };
        let _ = write!(out, "{sign}{factor}{space}{name}");
    };
    for (id, value) in terms.filter(|(_, value)| !value.is_zero()) {
        add(&value, &name(id));
    }
    if !constant.is_zero() {
        add(constant, "");
    }
    if out.is_empty() { "0".to_owned() } else { out }
}

/// The sides of a row or a domain; none where there are none.
fn between(left: &str, lower: Option<Number>, upper: Option<Number>) -> Option<String> {
    let told = |value: &Number| number_text(value).replace('-', "−");
    Some(match (lower, upper) {
        (Some(lower), Some(upper)) if lower == upper => format!("{left} = {}", told(&lower)),
        (Some(lower), Some(upper)) => format!("{} ≤ {left} ≤ {}", told(&lower), told(&upper)),
        (Some(lower), None) => format!("{left} ≥ {}", told(&lower)),
        (None, Some(upper)) => format!("{left} ≤ {}", told(&upper)),
        (None, None) => return None,
    })
}

/// The domain lines of a column.
fn domains(name: &str, column: &Column, exact: &impl Fn(NumberId) -> Number, out: &mut String) {
    let (lower, upper) = (column.lower.map(exact), column.upper.map(exact));
    let zero_one = lower == Some(Number::ZERO) && upper == Some(Number::ONE);
    if column.integer && zero_one {
        let _ = writeln!(out, "  {name} ∈ {{0,1}}");
        return;
    }
    if column.integer || lower.is_none() {
        let _ = writeln!(out, "  {name} ∈ {}", if column.integer { "ℤ" } else { "ℝ" });
    }
    if let Some(line) = between(name, lower, upper) {
        let _ = writeln!(out, "  {line}");
    }
}

/// The name of a row where it is one of a label, else its number.
fn label(model: &Model, row: RowId) -> String {
    let name = model.row_name(row);
    let letters = name.chars().count();
    let fits = name.chars().all(|c| c.is_ascii_alphanumeric())
        && name.starts_with(|c: char| c.is_ascii_alphabetic());
    if fits && (2..=LONGEST).contains(&letters) { name } else { format!("row {}", row.index() + 1) }
}

/// A title without what would be read as mathematics.
fn plain(title: &str) -> String {
    let word = |c: &char| c.is_ascii_alphanumeric() || *c == ' ';
    let kept =
        format!("Rows of {}", title.chars().filter(word).take(60).collect::<String>().trim());
    let read = notation::parse(&format!("{kept}\n\nminimise\n  x\n")).tree.title;
    if read.as_ref() == Some(&kept) { kept } else { "Rows of a model".to_owned() }
}
