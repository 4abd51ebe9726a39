//! Presolve on problems of others: Netlib, the relaxations of MIPLIB 3, the golden models. Same
//! value, and the restored basis is optimal at once for the problem as given, by the kernel's own
//! check of what it releases.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it has seen")]

use std::path::Path;

use hullward_tests_reference::kernel::problem;
use hullward_tests_reference::{agree, golden, open_data};
use lp::{Limits, Outcome, Simplex, solve_presolved};
use model::{Model, mps};
use serde_json::Value;

/// What was seen over some problems.
#[derive(Debug, Default)]
struct Seen {
    solved: u32,
    shrunk: u32,
    pivots_after: Vec<(String, u64)>,
    plain: u64,
    reduced: u64,
}

fn check(name: &str, model: &Model, seen: &mut Seen) {
    let mut plain = Simplex::new(problem(model));
    let expected = plain.solve(Limits::default()).clone();
    let solved = solve_presolved(&problem(model));
    match (&expected, solved.simplex.outcome().unwrap()) {
        (Outcome::Optimal(a), Outcome::Optimal(b)) => {
            let (a, b) = (a.objective, b.objective);
            assert!(agree(a, b, 1e-8), "{name}: {b} by way of presolve, {a} without");
            seen.solved += 1;
        }
        (Outcome::Infeasible(_), Outcome::Infeasible(_))
        | (Outcome::Unbounded { .. }, Outcome::Unbounded { .. }) => return,
        (a, b) => panic!("{name}: {b:?} by way of presolve, {a:?} without"),
    }
    seen.shrunk += u32::from(solved.rows < plain.row_count());
    seen.plain += plain.stats().iterations;
    seen.reduced += solved.reduced.iterations;
    let after = solved.simplex.stats().iterations;
    if after > 0 {
        seen.pivots_after.push((name.to_owned(), after));
    }
}

#[test]
fn golden_models() {
    let mut seen = Seen::default();
    for golden in golden::all() {
        check(&golden.name, &golden.model, &mut seen);
    }
    eprintln!("{seen:?}");
    assert_eq!(seen.solved, 109);
    assert!(seen.shrunk > 30, "{seen:?}");
    assert!(seen.pivots_after.is_empty(), "{seen:?}");
}

/// The names of the MPS files, each once.
fn files() -> Vec<String> {
    let path = Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/mps_values.json");
    let list: Value = serde_json::from_str(&std::fs::read_to_string(path).unwrap()).unwrap();
    let names = list.as_array().unwrap().iter().map(|entry| entry["file"].as_str().unwrap());
    let mut names: Vec<String> = names.map(str::to_owned).collect();
    names.dedup();
    names
}

#[test]
fn files_of_netlib_and_miplib() {
    let mut seen = Seen::default();
    for name in files() {
        let Some(text) = open_data(&name, "netlib lp/data, MIPLIB 3") else { continue };
        let Ok((model, _)) = mps::read(&text) else { panic!("{name} is not read") };
        check(&name, &model, &mut seen);
    }
    eprintln!("{seen:?}");
    if seen.solved > 0 {
        assert!(seen.shrunk > 60, "{seen:?}");
        assert!(seen.pivots_after.is_empty(), "{seen:?}");
    }
}
