//! Every slice size gives the same outcome, basis and work.

use crate::families::{KINDS, generate};
use crate::instances::{multi_commodity, single_commodity};
use crate::numerics::wide;
use crate::shadow::{Shadow, new_row};
use hullward_lp::{Col, Limits, Progress, Simplex};

/// A seed of the wide problems whose first attempts fail.
const CAREFUL: u64 = 129;

/// One that all attempts fail on, so that the last resort is asked.
const LAST_RESORT: u64 = 420;

fn check(shadow: &Shadow, limits: Limits, slices: &[u64], name: &str) {
    let mut whole = shadow.simplex();
    whole.solve(limits);
    for &ticks in slices {
        let mut sliced = shadow.simplex();
        sliced.start(limits);
        let mut calls = 0u64;
        while sliced.advance(ticks) == Progress::Working {
            assert!(sliced.outcome().is_none());
            calls += 1;
        }
        assert!(
            ticks > 1 || calls >= whole.stats().iterations,
            "{name}: a slice of one tick did more than a step"
        );
        assert_eq!(sliced.outcome(), whole.outcome(), "{name}, slices of {ticks}");
        assert_eq!(sliced.stats(), whole.stats(), "{name}, slices of {ticks}");
        assert_eq!(sliced.basis(), whole.basis(), "{name}, slices of {ticks}");
    }
}

#[test]
fn small_problems_in_every_slice_size() {
    let slices: Vec<u64> = (0..60).chain([100, 1000, u64::MAX]).collect();
    for kind in KINDS {
        for seed in 0..4 {
            check(&generate(kind, 900 + seed), Limits::default(), &slices, kind);
        }
    }
}

#[test]
fn larger_problems_in_some() {
    let slices = [0, 997, 20_011, 300_007];
    check(&single_commodity(12, 5), Limits::default(), &slices, "single commodity");
    check(&multi_commodity(7, 5), Limits::default(), &slices, "multi commodity");
    let limits = Limits { iterations: Some(60), cutoff: Some(800.0) };
    check(&multi_commodity(7, 5), limits, &slices, "multi commodity with limits");
}

/// A solve left in the middle, then a change: the next solve is right all the same.
#[test]
fn an_abandoned_solve_leaves_no_trace() {
    for kind in KINDS {
        for seed in 0..30 {
            let mut shadow = generate(kind, 3000 + seed);
            let name = format!("{kind} {seed}");
            let mut simplex = shadow.simplex();
            simplex.start(Limits::default());
            for _ in 0..3 + seed % 7 {
                simplex.advance(1);
            }
            if seed % 2 == 0 {
                (shadow.lower[0], shadow.upper[0]) = (1.0, 2.0);
                simplex.set_bounds(Col(0), 1.0, 2.0);
            } else {
                shadow.row(vec![(0, 1.0), (1, 2.0), (3, -1.0)], -3.0, 4.0);
                simplex.add_rows(&[new_row(&shadow.rows[shadow.rows.len() - 1])]).unwrap();
            }
            assert!(simplex.outcome().is_none(), "{name}");
            assert_eq!(simplex.advance(1), Progress::Finished, "{name}");
            let found = shadow.verdict(simplex.solve(Limits::default()), &name);
            let cold = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
            assert!(found.agrees(cold, 1e-8), "{name}: {found:?}, cold {cold:?}");
        }
    }
}

/// Interrupted once after k units of work, for every k that the solve has, then resumed: the same
/// bytes as without interruption, and a copy taken at the interruption goes on to them as well.
#[test]
fn an_interruption_at_any_unit_of_work_changes_no_byte() {
    for kind in KINDS {
        for seed in [7, 8] {
            let shadow = generate(kind, seed);
            let mut whole = shadow.simplex();
            whole.solve(Limits::default());
            let bytes = |solver: &Simplex| {
                format!("{:?} {:?} {:?}", solver.outcome(), solver.stats(), solver.basis())
            };
            let expected = bytes(&whole);
            for ticks in 0..=whole.stats().ticks {
                let mut stopped = shadow.simplex();
                stopped.start(Limits::default());
                if stopped.advance(ticks) == Progress::Working {
                    let mut copy = stopped.clone();
                    while copy.advance(1) == Progress::Working {}
                    assert_eq!(bytes(&copy), expected, "{kind} {seed}: copied after {ticks}");
                }
                while stopped.advance(u64::MAX) == Progress::Working {}
                assert_eq!(bytes(&stopped), expected, "{kind} {seed}: stopped after {ticks}");
            }
        }
    }
}

/// The same for a solve from an optimal basis: costs turned round (the primal method), bounds cut
/// (the dual one), and a problem whose equalities hold up to rounding only, which no attempt
/// settles at once (refined solves and new starts), and one that the last resort settles: stopped after
/// every step.
#[test]
fn an_interruption_of_every_method_changes_no_byte() {
    let mut primal = generate("box", 7).simplex();
    primal.solve(Limits::default());
    (0..primal.column_count()).for_each(|j| primal.set_cost(Col(j), f64::from(j % 5) - 2.0));
    let mut dual = generate("degenerate", 9).simplex();
    dual.solve(Limits::default());
    (0..3).for_each(|j| dual.set_bounds(Col(j), 0.0, 0.0));
    let [careful, last] =
        [CAREFUL, LAST_RESORT].map(|seed| wide(70_000 + seed, seed.is_multiple_of(2)).simplex());
    let ready = [("primal", primal), ("dual", dual), ("careful", careful), ("last resort", last)];
    for (name, ready) in ready {
        let bytes = |solver: &Simplex| {
            format!("{:?} {:?} {:?}", solver.outcome(), solver.stats(), solver.basis())
        };
        let mut whole = ready.clone();
        whole.solve(Limits::default());
        assert!(whole.stats().iterations > ready.stats().iterations, "{name}: nothing to do");
        let expected = bytes(&whole);
        let mut steps = ready.clone();
        steps.start(Limits::default());
        let mut count = 0;
        while steps.advance(0) == Progress::Working {
            let mut resumed = steps.clone();
            while resumed.advance(u64::MAX) == Progress::Working {}
            assert_eq!(bytes(&resumed), expected, "{name}: stopped after step {count}");
            count += 1;
        }
        assert_eq!(bytes(&steps), expected, "{name}, step by step");
    }
}

/// A copy made in the middle of a solve goes on as the original does.
#[test]
fn a_copy_goes_on_alike() {
    let shadow = single_commodity(9, 8);
    let mut original = shadow.simplex();
    original.start(Limits::default());
    original.advance(5_000);
    let mut copy = original.clone();
    while original.advance(100) == Progress::Working {}
    while copy.advance(7_777) == Progress::Working {}
    assert!(original.outcome().is_some());
    assert_eq!(original.outcome(), copy.outcome());
    assert_eq!(original.stats(), copy.stats());
}
