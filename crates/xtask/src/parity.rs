//! The engine that the page ships computes what the native one computes.
//!
//! The engine module is taken out of the built page and run under Node; its digests of the logs of
//! ready and of small scenarios, in slices of several sizes, must be the native command's.

use std::path::{Path, PathBuf};
use std::process::Command;

use crate::check::cargo;
use crate::fault::{Attempt, Fault};
use crate::process::output;
use crate::workplace::Workplace;

/// Ticks a slice. The smallest cuts nearly everywhere that can be cut.
const SLICES: [u32; 3] = [997, 50_000, 10_000_000];

/// Compares all scenarios' rivals.
pub(crate) fn check(place: &Workplace) -> Result<(), Fault> {
    let scenarios = scenarios(place)?;
    let mut compared = 0;
    for scenario in &scenarios {
        let native = native(place, scenario)?;
        for slice in SLICES {
            let shipped = shipped(place, scenario, native.len(), slice)?;
            if shipped != native {
                return Err(Fault::new(format!(
                    "{}: in slices of {slice} the shipped engine's digests are\n{}\nand the \
                     native ones\n{}",
                    scenario.display(),
                    shipped.join("\n"),
                    native.join("\n"),
                )));
            }
            compared += shipped.len();
        }
        println!("   {}: {} rivals agree", scenario.display(), native.len());
    }
    println!("   {compared} logs agree");
    Ok(())
}

/// The ready scenarios and the small ones of the tests, in order of name.
pub(crate) fn scenarios(place: &Workplace) -> Result<Vec<PathBuf>, Fault> {
    let mut found = Vec::new();
    for folder in ["scenarios", "tests/browser/fixtures"] {
        let folder = place.root().join(folder);
        let entries =
            std::fs::read_dir(&folder).attempting(format!("read {}", folder.display()))?;
        found.extend(entries.flatten().map(|entry| entry.path()).filter(|path| is_scenario(path)));
    }
    found.sort();
    if found.is_empty() { Err(Fault::new("there are no scenarios to compare")) } else { Ok(found) }
}

fn is_scenario(path: &Path) -> bool {
    path.extension().is_some_and(|extension| extension == "toml")
}

/// The native digests, one a rival.
fn native(place: &Workplace, scenario: &Path) -> Result<Vec<String>, Fault> {
    let mut command = cargo(place);
    command.args(["run", "--quiet", "--package", "hullward-command", "--", "digest"]).arg(scenario);
    lines(&output(&mut command)?, scenario)
}

/// The shipped engine's digests for this many rivals.
fn shipped(
    place: &Workplace,
    scenario: &Path,
    rivals: usize,
    slice: u32,
) -> Result<Vec<String>, Fault> {
    let mut node = Command::new("node");
    node.arg(place.web().join("worker/digest.js"));
    node.arg(place.dist().join("hullward.html")).arg(scenario);
    node.args([rivals.to_string(), slice.to_string()]);
    lines(&output(&mut node)?, scenario)
}

fn lines(text: &str, scenario: &Path) -> Result<Vec<String>, Fault> {
    let lines: Vec<String> = text.lines().map(String::from).collect();
    if lines.is_empty() {
        return Err(Fault::new(format!("{} gave no digest", scenario.display())));
    }
    Ok(lines)
}
