//! Regression packs: JSON, which the browser reads.

use js_sys::{Array, JSON, Reflect};
use record::pack::{Expected, Pack, TOLERANCE, VERSION};
use record::results::Status;
use wasm_bindgen::JsValue;

/// The pack of a text.
///
/// # Errors
/// Why it is none, as a clause.
pub(crate) fn parse(json: &str) -> Result<Pack, String> {
    let object = JSON::parse(json).map_err(|_| "it is no JSON".to_owned())?;
    if number(&object, "hullward_pack") != Some(f64::from(VERSION)) {
        return Err(format!("it is not of version {VERSION}, which this page reads"));
    }
    let scenario = text(&object, "scenario").ok_or("it lacks its scenario")?;
    let expected = field(&object, "expected").filter(Array::is_array);
    let expected = expected.ok_or("it lacks what is expected")?;
    Ok(Pack {
        hullward_pack: VERSION,
        engine: text(&object, "engine").unwrap_or_default(),
        tolerance: number(&object, "tolerance").unwrap_or(TOLERANCE),
        digest: text(&object, "digest"),
        scenario,
        expected: Array::from(&expected).iter().map(|one| of_one(&one)).collect(),
    })
}

fn of_one(one: &JsValue) -> Expected {
    let words = |name| text(one, name).unwrap_or_default();
    let count = |name| number(one, name).unwrap_or_default();
    let decade = |name| number(one, name).map(|decade| decade as i32);
    Expected {
        instance: words("instance"),
        rival: words("rival"),
        title: words("title"),
        status: text(one, "status").and_then(|word| ending(&word)),
        rows: count("rows") as u32,
        columns: count("columns") as u32,
        nonzeros: count("nonzeros") as u64,
        root_bound: number(one, "root_bound"),
        checked_bound: text(one, "checked_bound"),
        optimum: number(one, "optimum"),
        smallest_decade: decade("smallest_decade"),
        largest_decade: decade("largest_decade"),
    }
}

fn ending(word: &str) -> Option<Status> {
    let all =
        [Status::Optimal, Status::Infeasible, Status::Unbounded, Status::Limit, Status::Error];
    all.into_iter().find(|status| status.word() == word)
}

fn field(of: &JsValue, name: &str) -> Option<JsValue> {
    Reflect::get(of, &JsValue::from_str(name)).ok()
}

fn text(of: &JsValue, name: &str) -> Option<String> {
    field(of, name)?.as_string()
}

fn number(of: &JsValue, name: &str) -> Option<f64> {
    field(of, name)?.as_f64()
}
