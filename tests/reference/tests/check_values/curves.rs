//! Bent costs, and units with minimum times.

use hullward_tests_reference::round_trip::instance;
use serde_json::Value;

use super::{Record, shipped, value_of};

pub(crate) fn bent(record: &Record) -> Option<f64> {
    if !record.is("piecewise linear") || record.quantity.starts_with("locally") {
        return None;
    }
    // The last curve has two pieces: its last one is cut in two, twice.
    let curves: [(&[f64], &[f64]); 3] = [
        (&[0.0, 2.0, 5.0, 9.0, 10.0], &[0.0, 8.0, 14.0, 18.0, 30.0]),
        (&[0.0, 3.0, 4.0, 6.0, 8.0], &[0.0, 9.0, 10.0, 18.0, 26.0]),
        (&[0.0, 1.0, 2.0, 3.5, 6.0], &[0.0, 5.0, 6.4, 8.5, 12.0]),
    ];
    let table = |ends: [&[f64]; 3]| -> String {
        let rows = ends.iter().enumerate().flat_map(|(i, cells)| {
            let cells = cells.iter().enumerate();
            cells.map(move |(k, value)| format!("s{i} {k} {value}\n"))
        });
        rows.collect()
    };
    let on = instance(&format!(
        "I\ns0 s1 s2\n\nK\n1 2 3 4\n\nB by i, k\n{}\nF by i, k\n{}\nd = 14\n",
        table(curves.map(|curve| curve.0)),
        table(curves.map(|curve| curve.1)),
    ));
    let form = match record.formulation.as_str() {
        "multiple choice" => "multiple-choice",
        "incremental" => "incremental",
        name if name.starts_with("log") => "logarithmic",
        name if name.starts_with("disagg") => "split-combination",
        name if name.starts_with("big-M") => return None,
        _ => "convex-combination",
    };
    Some(value_of(shipped(&format!("piecewise/{form}")), &on, record.bounds()))
}

/// Minimum times alone: gains of hours on, the cost of a start, no load.
pub(crate) fn minimum_times(record: &Record) -> Option<f64> {
    let given: Value = match record.problem.as_str() {
        "unit commitment (min up/down polytope, max)" => {
            serde_json::from_str(&record.instance).unwrap()
        }
        _ => return None,
    };
    let gains: String =
        given["c"].as_array().unwrap().iter().zip(1..).map(|(c, t)| format!("{t} {c}\n")).collect();
    let hours: Vec<String> = (1..=given["T"].as_u64().unwrap()).map(|t| t.to_string()).collect();
    let idle: String = hours.iter().map(|t| format!("{t} 0\n")).collect();
    let numbers = [
        ("c", &Value::from(0)),
        ("e", &Value::from(0)),
        ("f", &given["startcost"]),
        ("m", &Value::from(0)),
        ("q", &Value::from(0)),
        ("L", &given["minup"]),
        ("K", &given["mindown"]),
    ];
    let unit: String =
        numbers.iter().map(|(name, value)| format!("\n{name} by g\ng1 {value}\n")).collect();
    let hours = hours.join(" ");
    let on = instance(&format!("G\ng1\n\nT\n{hours}\n\nd by t\n{idle}\nk by t\n{gains}{unit}"));
    let form = match record.formulation.as_str() {
        "agg_lp" => "aggregated",
        "pairs_lp" => "pairwise",
        _ => "turn-on-off",
    };
    let text = shipped(&format!("unit/{form}"));
    let text = text
        .replace("(c_g p_{g,t} + e_g u_{g,t} + f_g v_{g,t})", "(f_g v_{g,t} − k_t u_{g,t})")
        // Nothing is known of the hour before the first.
        .replace("  u_{g,0} = 0 ", "  u_{g,0} ∈ {0,1} ")
        .replacen("  c_g  ∀ g ∈ G", "  k_t  ∀ t ∈ T  gain\n  c_g  ∀ g ∈ G", 1);
    Some(-value_of(&text, &on, record.bounds()))
}
