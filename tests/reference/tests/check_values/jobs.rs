//! Jobs on one machine and on several.

use hullward_tests_reference::graphs::names;
use hullward_tests_reference::open_data;
use hullward_tests_reference::round_trip::{instance, rival, root, solve};
use hullward_tests_reference::shops::{shop, within_windows};
use tree::Settings;

use super::{Record, row, shipped, value_of};

/// Jobs by their numbers: times, weights, due dates.
pub(crate) fn machine(record: &Record) -> Option<f64> {
    if !record.is("single machine") {
        return None;
    }
    let due = [16.0, 26.0, 25.0, 27.0];
    let (times, weights, due): (&[f64], &[f64], Option<&[f64]>) = match record.instance.as_str() {
        name if name.starts_with("wC") => (&[4.0, 2.0, 6.0, 5.0], &[3.0, 1.0, 8.0, 2.0], None),
        name if name.starts_with("Pinedo 1||sum wT") => {
            (&[12.0, 8.0, 15.0, 9.0], &[4.0, 1.0, 5.0, 3.0], Some(&due))
        }
        name if name.starts_with("variant") => {
            (&[12.0, 8.0, 15.0, 9.0], &[4.0, 1.0, 6.0, 5.0], Some(&due))
        }
        name if name.contains("3.4.5") => (
            &[121.0, 79.0, 147.0, 83.0, 130.0],
            &[1.0; 5],
            Some(&[260.0, 266.0, 266.0, 336.0, 337.0]),
        ),
        name if name.contains("3.2.3") => return Some(latest()),
        _ => return None,
    };
    let mut text = format!(
        "J\n{}\n\np by j\n{}\nw by j\n{}\n",
        names("j", times.len()),
        row("j", times),
        row("j", weights)
    );
    if let Some(due) = due {
        text.push_str(&format!("\nd by j\n{}\n", row("j", due)));
    }
    let on = instance(&text);
    let family = if due.is_some() { "tardiness" } else { "machine" };
    let form = match record.formulation.split(' ').next().unwrap() {
        "disjunctive" => "big-m",
        "parallel" => "parallel",
        "linear" | "any" => "linear-ordering",
        _ => "time-indexed",
    };
    let model = rival(&format!("{family}/{form}"), &on);
    if record.bounds() {
        return root(&model).bound;
    }
    solve(&model, Settings::default()).incumbent
}

/// The latest job as early as can be, in the words of the linear ordering (Pinedo, example 3.2.3).
fn latest() -> f64 {
    let text = shipped("machine/linear-ordering");
    let text = text
        .replace("  Σ_{j ∈ J} w_j C_j\n", "  L\n")
        .replace("  C_j ≥ 0 ", "  L ≥ C_j − w_j  ∀ j ∈ J (late)\n  L ≥ 0\n  C_j ≥ 0 ");
    let on = instance(
        "J\na b c d\n\np by j\na 4\nb 2\nc 6\nd 5\n\nr by j\na 0\nb 1\nc 3\nd 5\n\n\
         w by j\na 8\nb 12\nc 11\nd 10\n",
    );
    value_of(&text, &on, false)
}

/// The relaxation by times of a shop, with a horizon, starts within their windows: the tighter it is,
/// the better the bound.
pub(crate) fn shops(record: &Record) -> Option<f64> {
    let (_, horizon) = record.formulation.split_once("horizon H=")?;
    let horizon = horizon.split(',').next()?.parse().ok()?;
    let text = open_data(&format!("jobshop/{}", record.instance), "JSPLIB")?;
    let on = shop(&text, horizon);
    Some(value_of(&within_windows("job-shop/time-indexed"), &on, record.bounds()))
}
