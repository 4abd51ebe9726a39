//! Instructions of a root solve as callgrind counts them: the same on every run.
//!
//! The count of a run that makes the model ready without solving it is taken off.

use crate::arguments::Arguments;
use crate::clock;
use crate::highs_peer;
use crate::problems::named;
use crate::solvers::{Solver, problem, sample};
use std::process::Command;

/// Problems small enough for the simulation.
const NAMES: [&str; 8] = [
    "tsp20-mtz",
    "tsp20-scf",
    "tsp10-mcf",
    "ufl20x50-weak",
    "ufl20x50-strong",
    "uls50-fl",
    "bp25x12",
    "ti20",
];

/// Makes a problem ready and, unless only that is asked for, solves it once; with nobody to solve it
/// and a name that begins with `search:`, searches it once in bare mode, plunging.
pub(crate) fn once(name: &str, seed: u64, who: Option<Solver>) {
    clock::stop();
    if let Some(name) = name.strip_prefix("search:") {
        return crate::trees::once(name, seed);
    }
    let lp = named(name, seed).unwrap_or_else(|| panic!("there is no problem {name}")).lp;
    match who {
        Some(solver) => println!("{:?}", sample(solver, &lp, 1)),
        None => {
            let rows = problem(&lp).row_count();
            let (model, _) = highs_peer::model(&lp);
            println!("{rows} rows, {} in HiGHS", model.num_rows());
        }
    }
}

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    println!("Instructions of a root solve, in millions");
    println!("{:<24}{:>10}{:>10}{:>10} {:>7}", "problem", "ours", "HiGHS", "microlp", "o/H");
    for name in NAMES.iter().filter(|name| arguments.wants(name)) {
        let counts: Option<Vec<f64>> =
            ["ours", "HiGHS", "microlp"].iter().map(|who| instructions(name, who)).collect();
        let Some(counts) = counts else {
            println!("valgrind is not at hand: apt-get install valgrind\n");
            return;
        };
        println!(
            "{name:<24}{:>10.2}{:>10.2}{:>10.2} {:>7.2}",
            counts[0],
            counts[1],
            counts[2],
            counts[0] / counts[1]
        );
    }
    println!();
}

fn instructions(name: &str, who: &str) -> Option<f64> {
    let solved = collected(name, who)?;
    let ready = collected(name, &format!("{who}-ready"))?;
    Some((solved - ready) / 1e6)
}

/// The count that callgrind prints at the end.
fn collected(name: &str, who: &str) -> Option<f64> {
    let program = std::env::current_exe().ok()?;
    let output = Command::new("valgrind")
        .args(["--tool=callgrind", "--callgrind-out-file=/dev/null"])
        .arg(program)
        .args(["once", name, "1", who])
        .output()
        .ok()?;
    let said = String::from_utf8_lossy(&output.stderr).into_owned();
    let line = said.lines().find(|line| line.contains("Collected :"))?;
    line.rsplit(' ').next()?.parse().ok()
}
