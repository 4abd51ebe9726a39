//! Instructions of fixed solves against a list, as callgrind counts them: speed in a measure that a
//! busy machine does not change.
//!
//! `counts.txt` holds the counts of one compiler. More than the tolerance fails; less is welcome,
//! and said. Another compiler makes other code, so its counts say nothing: then the check is left
//! out, and says so. What a run does before it solves is taken off.

#![allow(clippy::print_stdout, clippy::print_stderr, reason = "a tool: it speaks to the terminal")]
#![allow(clippy::unwrap_used, clippy::panic, reason = "what cannot be measured ends the run")]

mod counts;
mod once;

#[path = "../../../crates/lp/tests/suite/instances.rs"]
mod instances;
#[path = "../../bench/src/problems.rs"]
#[expect(dead_code, reason = "the measurement beside others has a set of its own")]
mod problems;
#[path = "../../../crates/lp/tests/suite/random.rs"]
#[expect(dead_code, reason = "the tests of the kernel draw in more ways")]
mod random;
#[path = "../../bench/src/shadow.rs"]
#[expect(dead_code, reason = "the measurement beside others prints its size")]
mod shadow;

use std::path::Path;
use std::process::{Command, ExitCode};

use counts::{Counts, Finding, compare};

/// What is solved: from scratch, then with a bound changed for each of some columns.
const SOLVES: [&str; 10] = [
    "root tsp20-mtz",
    "root tsp20-scf",
    "root tsp10-mcf",
    "root ufl20x50-weak",
    "root ufl20x50-strong",
    "root uls50-fl",
    "root bp25x12",
    "root ti20",
    "children tsp20-scf",
    "children ufl20x50-strong",
];

const HELD: &str = concat!(env!("CARGO_MANIFEST_DIR"), "/counts.txt");

fn main() -> ExitCode {
    let words: Vec<String> = std::env::args().skip(1).collect();
    let words: Vec<&str> = words.iter().map(String::as_str).collect();
    match words.as_slice() {
        ["once", step, problem] => {
            once::run(step, problem);
            ExitCode::SUCCESS
        }
        [] => check(Path::new(HELD)),
        ["--write"] => {
            std::fs::write(HELD, measured().to_string()).unwrap();
            println!("   written: {HELD}");
            ExitCode::SUCCESS
        }
        _ => {
            eprintln!("error: nothing, or --write, is understood, not {words:?}");
            ExitCode::FAILURE
        }
    }
}

fn check(path: &Path) -> ExitCode {
    let held: Counts = std::fs::read_to_string(path).unwrap().parse().unwrap();
    let compiler = compiler();
    if held.compiler != compiler {
        println!("   LEFT OUT: the counts held are of {}, this is {compiler}", held.compiler);
        return ExitCode::SUCCESS;
    }
    let now = measured();
    let mut well = true;
    for (name, finding) in compare(&held, &now) {
        println!("   {name:<28} {finding}");
        well &= !matches!(finding, Finding::More { .. } | Finding::Unknown);
    }
    if well {
        return ExitCode::SUCCESS;
    }
    eprintln!(
        "error: more instructions than held; `cargo xtask counts --write` where that is meant"
    );
    ExitCode::FAILURE
}

/// The compiler that made this program: the one at hand.
fn compiler() -> String {
    let said = Command::new("rustc").arg("--version").output().unwrap();
    let said = String::from_utf8_lossy(&said.stdout).into_owned();
    said.split_whitespace().take(2).collect::<Vec<_>>().join(" ")
}

/// All counts, in thousands.
fn measured() -> Counts {
    let mut counts = Counts { compiler: compiler(), solves: Vec::new() };
    for solve in SOLVES {
        let (step, problem) = solve.split_once(' ').unwrap();
        let before = if step == "children" { "root" } else { "ready" };
        let own = collected(step, problem) - collected(before, problem);
        counts.solves.push((solve.to_owned(), own / 1000));
    }
    counts
}

/// The count that callgrind prints at the end.
fn collected(step: &str, problem: &str) -> u64 {
    let output = Command::new("valgrind")
        .args(["--tool=callgrind", "--callgrind-out-file=/dev/null"])
        .arg(std::env::current_exe().unwrap())
        .args(["once", step, problem])
        .output()
        .unwrap_or_else(|_| panic!("valgrind is not at hand: apt-get install valgrind"));
    let said = String::from_utf8_lossy(&output.stderr).into_owned();
    let line = said.lines().find(|line| line.contains("Collected :"));
    let line = line.unwrap_or_else(|| panic!("callgrind gave no count:\n{said}"));
    line.rsplit(' ').next().unwrap().parse().unwrap()
}
