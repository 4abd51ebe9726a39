//! microlp as a second opinion, with its feasibility tolerance at 1e-10.

use crate::families::{KINDS, generate};
use crate::shadow::{Shadow, Verdict};
use hullward_lp::Limits;
use microlp::{ComparisonOp, Error, OptimizationDirection, SolveOptions};

/// microlp's verdict; none when it gives up.
fn second_opinion(shadow: &Shadow) -> Option<Verdict> {
    let mut problem = microlp::Problem::new(OptimizationDirection::Minimize);
    let columns: Vec<_> = (0..shadow.cost.len())
        .map(|j| problem.add_var(shadow.cost[j], (shadow.lower[j], shadow.upper[j])))
        .collect();
    for (entries, lower, upper) in &shadow.rows {
        let terms: Vec<_> = entries.iter().map(|&(j, value)| (columns[j], value)).collect();
        if lower == upper {
            problem.add_constraint(&terms, ComparisonOp::Eq, *lower);
            continue;
        }
        if lower.is_finite() {
            problem.add_constraint(&terms, ComparisonOp::Ge, *lower);
        }
        if upper.is_finite() {
            problem.add_constraint(&terms, ComparisonOp::Le, *upper);
        }
    }
    let mut options = SolveOptions::default();
    options.tolerances.feasibility = 1e-10;
    match problem.solve_with(options) {
        Ok(outcome) => Some(Verdict::Optimal(outcome.solution()?.objective())),
        Err(Error::Infeasible) => Some(Verdict::Infeasible),
        Err(Error::Unbounded) => Some(Verdict::Unbounded),
        Err(_) => None,
    }
}

#[test]
fn microlp_agrees_on_random_families() {
    let mut kinds_seen = [0u32; 3];
    for kind in KINDS {
        for seed in 0..400 {
            let shadow = generate(kind, seed);
            let name = format!("{kind} {seed}");
            let verdict = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
            let Some(other) = second_opinion(&shadow) else { panic!("{name}: no second opinion") };
            assert!(verdict.agrees(other, 1e-7), "{name}: {verdict:?}, microlp says {other:?}");
            kinds_seen[match verdict {
                Verdict::Optimal(_) => 0,
                Verdict::Infeasible => 1,
                Verdict::Unbounded => 2,
            }] += 1;
        }
    }
    assert!(kinds_seen.iter().all(|&count| count > 100), "{kinds_seen:?}");
}
