//! Every golden model: its relaxation against the stored value, HiGHS and microlp; its integer
//! optimum against the stored value. Source: the golden models, computed with HiGHS.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::rc::Rc;

use hullward_tests_reference::agree;
use hullward_tests_reference::golden;
use hullward_tests_reference::independent::{Verdict, highs, microlp};
use hullward_tests_reference::round_trip::{root, solve};
use model::nearest_f64;
use tree::{Settings, Status};

#[test]
fn every_relaxation_has_the_stored_value_and_both_references_agree() {
    let all = golden::all();
    assert_eq!(all.len(), 109);
    for golden in all {
        let model = Rc::new(golden.model);
        let root = root(&model);
        assert_eq!(root.status, Status::Optimal, "{}", golden.name);
        let bound = root.bound.unwrap();
        assert!(agree(bound, golden.lp, 1e-6), "{}: {bound} for {}", golden.name, golden.lp);
        for verdict in [highs(&model, &[], false), microlp(&model, &[])] {
            let Verdict::Optimal(value) = verdict else { panic!("{}: {verdict:?}", golden.name) };
            assert!(agree(bound, value, 1e-7), "{}: {bound} for {value}", golden.name);
        }
    }
}

/// The exact optimum: a bound and a point of the same value, both checked in rationals. The stored
/// values have six decimals, HiGHS is within 10⁻⁹ of it.
#[test]
fn every_relaxation_has_its_exact_optimum() {
    for golden in golden::all() {
        let model = Rc::new(golden.model);
        let root = root(&model);
        assert!(root.checked && root.exact, "{} is not exact", golden.name);
        let exact = root.checked_bound.unwrap_or_else(|| panic!("{} is not proved", golden.name));
        let (proved, bound) = (nearest_f64(&exact), root.bound.unwrap());
        assert!(agree(bound, proved, 1e-12), "{}: proved {proved}, found {bound}", golden.name);
        let decimals = 1e-6 + 1e-9 * proved.abs();
        assert!((proved - golden.lp).abs() <= decimals, "{}: {exact}", golden.name);
        let Verdict::Optimal(value) = highs(&model, &[], false) else { panic!("{}", golden.name) };
        assert!(agree(value, proved, 1e-9), "{}: {exact}, HiGHS {value}", golden.name);
    }
}

#[test]
fn every_integer_optimum_is_the_stored_one() {
    for golden in golden::all() {
        let summary = solve(
            &Rc::new(golden.model),
            Settings { node_limit: Some(50_000), ..Settings::default() },
        );
        assert_eq!(summary.status, Status::Optimal, "{}: {:?}", golden.name, summary.stopped);
        let found = summary.incumbent.unwrap();
        assert!(agree(found, golden.mip, 1e-6), "{}: {found} for {}", golden.name, golden.mip);
    }
}
