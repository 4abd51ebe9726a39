//! How much slower the shipped engine is under Node than the native one.
//!
//! Both run the same rivals of the ready scenarios in one process each, several times over, and say
//! the shortest time of each; the two take turns, and the shortest of all turns counts: what else
//! runs on the machine makes times longer, never shorter. The native engine is built by the
//! compiler that builds the page where it can be: by Debian's for the web when that is at hand.

use std::path::{Path, PathBuf};
use std::process::Command;

use crate::compiler::Compiler;
use crate::fault::Fault;
use crate::parity::scenarios;
use crate::process::{output, run};
use crate::workplace::Workplace;

/// Turns of each.
const TURNS: usize = 3;

/// What the runs of a rival in a turn take, in milliseconds: Node compiles what runs often anew with
/// more effort, and that is what a search of some length meets.
const SPAN: f64 = 1500.0;

/// The most that the runs of all rivals of a scenario in a turn take natively, in milliseconds, when
/// they are more than the fewest.
const MOST: f64 = 8000.0;

/// The fewest and the most runs of a rival in a turn.
const RUNS: (f64, f64) = (4.0, 100.0);

/// Ticks a slice, as a worker takes.
const SLICE: &str = "1000000";

/// Rivals that take less, in milliseconds, are not compared: a clock says little of them.
const LEAST: f64 = 2.0;

/// Builds the native engine, measures and prints; the page must be built.
pub(crate) fn measure(place: &Workplace) -> Result<(), Fault> {
    let page = place.dist().join("hullward.html");
    if !page.is_file() {
        return Err(Fault::new("the page is not built: run `cargo xtask page --no-serve`"));
    }
    run(&mut Compiler::find()?.build_native(place, "hullward-command"))?;
    let native = place.wasm_target().join("release/hullward");
    println!("{:<40}{:>10}{:>10}{:>8}", "rival", "native ms", "wasm ms", "ratio");
    let mut logs = Vec::new();
    for scenario in scenarios(place)? {
        for (rival, native, wasm) in compared(place, &native, &scenario)? {
            if native >= LEAST {
                println!("{rival:<40}{native:>10.2}{wasm:>10.2}{:>8.2}", wasm / native);
                logs.push(libm::log(wasm / native));
            }
        }
    }
    let mean = libm::exp(logs.iter().sum::<f64>() / logs.len() as f64);
    println!("geometric mean of {} rivals: {mean:.2}", logs.len());
    Ok(())
}

/// The shortest native and wasm times of the rivals of a scenario.
fn compared(
    place: &Workplace,
    native: &PathBuf,
    scenario: &Path,
) -> Result<Vec<(String, f64, f64)>, Fault> {
    let mut best: Vec<(String, f64, f64)> = Vec::new();
    let once = native_times(native, scenario, "1")?;
    let runs = runs(&once.iter().map(|(_, time)| *time).collect::<Vec<_>>());
    let Some(runs) = runs.map(|runs| runs.to_string()) else { return Ok(best) };
    let name = scenario.file_stem().unwrap_or_default().to_string_lossy().into_owned();
    for _ in 0..TURNS {
        let ours = native_times(native, scenario, &runs)?;
        let mut node = Command::new("node");
        node.arg(place.web().join("worker/digest.js"));
        node.arg(place.dist().join("hullward.html")).arg(scenario);
        node.args([&ours.len().to_string(), SLICE, &runs]);
        let shipped = times(&output(&mut node)?)?;
        for (place, ((letter, native), (_, wasm))) in ours.into_iter().zip(shipped).enumerate() {
            match best.get_mut(place) {
                None => best.push((format!("{name} {letter}"), native, wasm)),
                Some(known) => (known.1, known.2) = (least(known.1, native), least(known.2, wasm)),
            }
        }
    }
    Ok(best)
}

fn native_times(
    native: &PathBuf,
    scenario: &Path,
    runs: &str,
) -> Result<Vec<(String, f64)>, Fault> {
    let mut command = Command::new(native);
    command.arg("digest").arg(scenario).args(["--slice", SLICE, "--runs", runs]);
    times(&output(&mut command)?)
}

/// How often each rival runs in a turn, from the milliseconds of one run of each; `None` where none
/// takes long enough to be compared.
fn runs(once: &[f64]) -> Option<f64> {
    let compared = once.iter().copied().filter(|&time| time >= LEAST);
    let shortest = compared.reduce(least)?;
    let within = least(SPAN / shortest, MOST / once.iter().sum::<f64>());
    let often = if within < RUNS.0 { RUNS.0 } else { within.ceil() };
    Some(least(often, RUNS.1))
}

fn least(a: f64, b: f64) -> f64 {
    if b < a { b } else { a }
}

/// Letter and milliseconds of each line of digests.
fn times(text: &str) -> Result<Vec<(String, f64)>, Fault> {
    let line = |line: &str| {
        let words: Vec<&str> = line.split_whitespace().collect();
        Some(((*words.first()?).to_owned(), words.get(3)?.parse().ok()?))
    };
    let wrong = |text: &str| Fault::new(format!("{text:?} holds no time"));
    text.lines().map(|text| line(text).ok_or_else(|| wrong(text))).collect()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn short_rivals_run_often_and_long_ones_a_few_times() {
        assert_eq!(runs(&[0.1, 1.9]), None);
        assert_eq!(runs(&[0.1, 2.5]), Some(100.0));
        assert_eq!(runs(&[50.0, 100.0]), Some(30.0));
        assert_eq!(runs(&[50.0, 700.0]), Some(11.0));
        assert_eq!(runs(&[5000.0, 6000.0]), Some(4.0));
    }

    #[test]
    fn times_stand_behind_digests() {
        let read = times("A 57 85944171f73967e8 12.5\nB 3 af63dc4c8601ec8c 0.25\n");
        assert_eq!(read, Ok(vec![("A".to_owned(), 12.5), ("B".to_owned(), 0.25)]));
        assert!(times("A 57 85944171f73967e8").is_err());
    }
}
