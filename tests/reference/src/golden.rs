//! The golden models: small, complete models with their LP and integer optimum, computed with
//! HiGHS. Made from the published formulations on invented data.

use std::path::Path;

use model::{ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use serde_json::Value;

/// A golden model with its reference values.
#[derive(Debug)]
pub struct Golden {
    /// The file's name without its ending.
    pub name: String,
    /// The model.
    pub model: Model,
    /// The value of the linear relaxation.
    pub lp: f64,
    /// The integer optimum.
    pub mip: f64,
}

/// All golden models by name.
///
/// # Panics
/// When a fixture cannot be read.
#[must_use]
pub fn all() -> Vec<Golden> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/golden");
    let summary = read(&folder.join("summary.json"));
    let mut out: Vec<Golden> =
        summary.as_array().unwrap().iter().map(|entry| golden(&folder, entry)).collect();
    out.sort_by(|a, b| a.name.cmp(&b.name));
    out
}

fn read(path: &Path) -> Value {
    serde_json::from_str(&std::fs::read_to_string(path).unwrap()).unwrap()
}

fn golden(folder: &Path, entry: &Value) -> Golden {
    let file = entry["file"].as_str().unwrap();
    let value = read(&folder.join(file));
    Golden {
        name: file.trim_end_matches(".json").to_owned(),
        model: model(file, &value),
        lp: entry["lp"].as_f64().unwrap(),
        mip: entry["mip"].as_f64().unwrap(),
    }
}

fn model(title: &str, value: &Value) -> Model {
    let sense = if value["sense"] == "max" { Sense::Maximise } else { Sense::Minimise };
    let mut builder = ModelBuilder::new(title, sense);
    let names = value["names"].as_array().unwrap();
    let mut columns = Vec::new();
    for (j, name) in names.iter().enumerate() {
        builder.variable(name.as_str().unwrap(), false);
        let spec = ColumnSpec {
            lower: number(&value["lb"][j]),
            upper: number(&value["ub"][j]),
            cost: number(&value["obj"][j]).unwrap(),
            integer: value["int"][j].as_i64().unwrap() != 0,
        };
        columns.push(builder.column(&[], &spec).unwrap());
    }
    builder.family("rows", FamilyState::In, false);
    for row in value["rows"].as_array().unwrap() {
        let entries = row[0].as_array().unwrap().iter().map(|entry| {
            let column = usize::try_from(entry[0].as_u64().unwrap()).unwrap();
            (columns[column], number(&entry[1]).unwrap())
        });
        let right = number(&row[2]);
        let (lower, upper) = match row[1].as_str().unwrap() {
            "<=" => (None, right),
            ">=" => (right, None),
            _ => (right.clone(), right),
        };
        builder.row(&[], Row { entries: entries.collect(), lower, upper }).unwrap();
    }
    builder.build()
}

/// The exact number that a JSON number stands for; `None` for null and for 10^18 and beyond,
/// which stand for infinite.
fn number(value: &Value) -> Option<Number> {
    let text = match value {
        Value::Number(n) => n.to_string(),
        Value::String(s) if s.trim_start_matches(['-', '+']).starts_with("inf") => return None,
        Value::String(s) => s.clone(),
        _ => return None,
    };
    let (mantissa, exponent) = text.split_once(['e', 'E']).unwrap_or((&text, "0"));
    let exponent: i32 = exponent.parse().unwrap();
    let (whole, fraction) = mantissa.split_once('.').unwrap_or((mantissa, ""));
    let digits: i128 = format!("{whole}{fraction}").parse().unwrap();
    let power = exponent - i32::try_from(fraction.len()).unwrap();
    let scale = 10u128.checked_pow(power.unsigned_abs()).map(Number::from)?;
    let digits = Number::from(digits);
    let exact = if power < 0 { digits / scale } else { digits * scale };
    let infinite = Number::from(10u64.pow(18));
    (exact < infinite && exact > -infinite).then_some(exact)
}
