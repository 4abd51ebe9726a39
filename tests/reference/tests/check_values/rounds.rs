//! Rounds of vehicles.

use hullward_tests_reference::open_data;

use super::{Record, shipped, value_of};

/// Rounds with a number of vehicles, or with as many as wanted.
pub(crate) fn rounds(record: &Record) -> Option<f64> {
    if !record.is("CVRP") || !record.bounds() {
        return None;
    }
    let id = match record.formulation.as_str() {
        name if name.starts_with("degree") => "cvrp/load-labels",
        name if name.starts_with("MTZ loads lifted") => "cvrp/lifted-load-labels",
        name if name.starts_with("MTZ") => "cvrp/load-labels",
        name if name.contains("f<=Q x") => "cvrp/load-flow",
        name if name.contains("q_j x<=f") => "cvrp/tight-load-flow",
        _ => return None,
    };
    let text = open_data(&format!("vrp/{}.vrp", record.instance), "CVRPLIB")?;
    let on = instance::read_part(&text, None, Some(1)).instance?;
    let mut text = shipped(id).to_owned();
    if record.formulation.starts_with("degree") {
        let from = text.find("  u_i − u_j").unwrap();
        let to = from + text[from..].find("  x_{i,j} ∈").unwrap();
        text.replace_range(from..to, "");
    }
    if let Some((_, fixed)) = record.formulation.split_once("K=") {
        let vehicles = fixed.split(' ').next().unwrap();
        let rows =
            format!("  Σ_{{j : (r,j) ∈ A}} x_{{r,j}} = {vehicles}  (vehicles)\n  x_{{i,j}} ∈ ");
        text = text.replacen("  x_{i,j} ∈ ", &rows, 1);
    }
    Some(value_of(&text, &on, true))
}
