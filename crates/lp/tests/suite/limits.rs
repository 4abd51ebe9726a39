//! Stopped solves: their bounds against the optimum.

use crate::families::generate;
use crate::instances::{multi_commodity, single_commodity};
use crate::shadow::{Shadow, Verdict};
use hullward_lp::{Limits, Outcome, Progress, StopReason};

fn optimum(shadow: &Shadow) -> Option<f64> {
    match shadow.verdict(shadow.simplex().solve(Limits::default()), "whole") {
        Verdict::Optimal(value) => Some(value),
        _ => None,
    }
}

#[test]
fn an_iteration_limit_stops_with_a_valid_bound_and_can_be_resumed() {
    let shadow = multi_commodity(6, 2);
    let best = optimum(&shadow).unwrap();
    for limit in [0, 1, 2, 5, 10, 20, 40, 80] {
        let mut simplex = shadow.simplex();
        let outcome = simplex.solve(Limits { iterations: Some(limit), cutoff: None }).clone();
        let Outcome::Stopped { reason, bound, duals } = outcome else { panic!("{outcome:?}") };
        assert_eq!(reason, StopReason::Iterations);
        assert_eq!(simplex.stats().iterations, limit);
        let bound = bound.unwrap();
        assert!(bound <= best + 1e-9, "limit {limit}: {bound} over {best}");
        assert!((shadow.dual_bound(&duals, true, 1e-9) - bound).abs() < 1e-9 * (1.0 + best));
        assert!(
            shadow
                .verdict(simplex.solve(Limits::default()), "resumed")
                .agrees(Verdict::Optimal(best), 1e-9)
        );
    }
}

/// A stopped solve began anew from its basis, and came to its end by another way than one without a
/// limit.
#[test]
fn a_resumed_solve_does_what_one_without_a_limit_does() {
    for (shadow, exact) in [(multi_commodity(6, 2), true), (single_commodity(9, 4), false)] {
        let mut whole = shadow.simplex();
        let expected = whole.solve(Limits::default()).clone();
        let most = whole.stats().iterations;
        for limit in 0..most {
            let mut simplex = shadow.simplex();
            simplex.solve(Limits { iterations: Some(limit), cutoff: None });
            assert_eq!(simplex.stats().iterations, limit);
            assert!(simplex.resume(Some(limit + 1)), "limit {limit}");
            while simplex.advance(1) == Progress::Working {}
            if exact {
                assert!(simplex.resume(Some(limit + 2)) || limit + 1 == most);
                while simplex.advance(7) == Progress::Working {}
            }
            assert!(simplex.resume(None) || simplex.stats().iterations == most);
            while simplex.advance(100) == Progress::Working {}
            assert_eq!(simplex.outcome(), Some(&expected), "limit {limit}");
            assert_eq!(simplex.stats(), whole.stats(), "limit {limit}");
            assert!(!simplex.resume(None), "it has ended");
        }
    }
}

#[test]
fn a_cutoff_stops_only_when_the_bound_exceeds_it() {
    for shadow in [multi_commodity(7, 3), single_commodity(10, 4)] {
        let best = optimum(&shadow).unwrap();
        let mut whole = shadow.simplex();
        whole.solve(Limits::default());
        for share in [0.3, 0.6, 0.9] {
            let cutoff = share * best;
            let mut simplex = shadow.simplex();
            match simplex.solve(Limits { iterations: None, cutoff: Some(cutoff) }) {
                Outcome::Stopped { reason: StopReason::Cutoff, bound: Some(bound), duals } => {
                    assert!(*bound > cutoff && *bound <= best + 1e-9);
                    assert!(
                        (shadow.dual_bound(duals, true, 1e-9) - bound).abs() < 1e-9 * (1.0 + best)
                    );
                }
                other => panic!("cutoff {cutoff}: {other:?}"),
            }
            assert!(simplex.stats().iterations < whole.stats().iterations);
        }
        let mut simplex = shadow.simplex();
        assert!(matches!(
            simplex.solve(Limits { iterations: None, cutoff: Some(best + 1.0) }),
            Outcome::Optimal(_)
        ));
    }
}

#[test]
fn limits_never_contradict_the_optimum_on_random_problems() {
    for seed in 0..200 {
        let shadow = generate("box", 4000 + seed);
        let Some(best) = optimum(&shadow) else { continue };
        let limits = Limits { iterations: Some(seed % 12), cutoff: Some(best - 5.0) };
        match shadow.simplex().solve(limits) {
            Outcome::Stopped { reason, bound, .. } => {
                let bound = bound.unwrap();
                assert!(bound <= best + 1e-7 * (1.0 + best.abs()), "seed {seed}");
                assert!(*reason != StopReason::Cutoff || bound > best - 5.0, "seed {seed}");
            }
            Outcome::Optimal(solution) => assert!(
                (solution.objective - best).abs() < 1e-7 * (1.0 + best.abs()),
                "seed {seed}"
            ),
            other => panic!("seed {seed}: {other:?}"),
        }
    }
}
