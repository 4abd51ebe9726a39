//! Every slice size gives the same outcome, basis and work.

use crate::families::{KINDS, generate};
use crate::instances::{multi_commodity, single_commodity};
use crate::shadow::Shadow;
use hullward_lp::{Limits, Progress};

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
