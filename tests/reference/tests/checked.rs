//! Searches whose objective has no lattice end checked: every leaf is proved by an exact bound,
//! which must reach the incumbent's exact value without a rounding in between. Lot sizing with
//! decimal data, and two-commodity flows, whose leaves tie with the optimum. Invented data.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stdout, reason = "it says what was measured")]

use catalogue::{Class, generate};
use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{instance, rival, solve};
use tree::{Settings, Status};

/// The same blocks with decimals that have no short binary form.
fn with_decimals(text: &str) -> String {
    let mut out = String::new();
    for (count, line) in text.lines().enumerate() {
        let cells: Vec<&str> = line.split(' ').collect();
        match cells[..] {
            [period, value] if value.parse::<u32>().is_ok() && !line.contains("by") => {
                out.push_str(&format!("{period} {value}.{:02}\n", count * 37 % 100));
            }
            _ => out.push_str(&format!("{line}\n")),
        }
    }
    out
}

/// Solves and counts; gives how many of the searches ended checked.
fn checked(id: &str, texts: &[String]) -> (usize, usize) {
    let mut all = 0;
    for text in texts {
        let model = rival(id, &instance(text));
        let summary = solve(&model, Settings::default());
        assert_eq!(summary.status, Status::Optimal, "{id}: {:?}", summary.stopped);
        let Verdict::Optimal(value) = highs(&model, &[], true) else { panic!("{id}") };
        let found = summary.incumbent.unwrap();
        assert!(agree(found, value, 1e-6), "{id}: {found}, HiGHS {value}");
        if !summary.checked {
            println!(
                "{id}: {} leaves of {} are unchecked in\n{text}",
                summary.leaves_unchecked,
                summary.leaves_checked + summary.leaves_unchecked
            );
        }
        all += usize::from(summary.checked);
    }
    println!("{id}: {all} of {} ended checked", texts.len());
    (all, texts.len())
}

#[test]
fn lot_sizing_with_decimal_data_ends_checked() {
    let classes = [Class::Uniform, Class::Clustered, Class::ZeroOne];
    let draws = classes.iter().flat_map(|&class| (1..=4).map(move |seed| (class, seed)));
    let texts: Vec<String> = draws
        .filter_map(|(class, seed)| generate("lot", 9, class, seed))
        .map(|text| with_decimals(&text))
        .collect();
    assert!(texts.len() >= 8);
    for id in ["lot/big-m", "lot/location-form", "lot/shortest-path-form"] {
        let (checked, all) = checked(id, &texts);
        assert_eq!(checked, all, "{id}");
    }
}

#[test]
fn two_commodity_flows_end_checked() {
    let draws = Class::ALL.iter().flat_map(|&class| (1..=4).map(move |seed| (class, seed)));
    let texts: Vec<String> =
        draws.filter_map(|(class, seed)| generate("atsp", 6, class, seed)).collect();
    assert!(texts.len() >= 12);
    let (checked, all) = checked("atsp/two-commodity", &texts);
    assert_eq!(checked, all);
}
