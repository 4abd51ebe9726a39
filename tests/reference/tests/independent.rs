//! Two independent solvers on what notation makes of the shipped rivals: HiGHS and microlp on
//! the relaxation, HiGHS on the integer program of the rivals that are written out in full.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use catalogue::{Class, generate};
use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs, microlp};
use hullward_tests_reference::round_trip::{instance, rival, root, solve};
use tree::Settings;

const WRITTEN_OUT: [&str; 5] = [
    "atsp/assignment",
    "atsp/labels",
    "atsp/lifted-labels",
    "atsp/one-commodity",
    "atsp/multi-commodity",
];

#[test]
fn relaxations_agree_with_both() {
    for class in Class::ALL {
        for (size, seed) in [(6, 1), (9, 2), (12, 3)] {
            let instance = instance(&generate("atsp", size, class, seed).unwrap());
            for id in WRITTEN_OUT {
                let model = rival(id, &instance);
                let bound = root(&model).bound.unwrap();
                for verdict in [highs(&model, &[], false), microlp(&model, &[])] {
                    let Verdict::Optimal(value) = verdict else { panic!("{id}: {verdict:?}") };
                    assert!(agree(bound, value, 1e-7), "{id}, {class:?}, {size}: {bound}, {value}");
                }
            }
        }
    }
}

#[test]
fn integer_optima_agree_with_highs() {
    for class in Class::ALL {
        let instance = instance(&generate("atsp", 8, class, 5).unwrap());
        for id in WRITTEN_OUT {
            let model = rival(id, &instance);
            let found = solve(&model, Settings::default()).incumbent.unwrap();
            let verdict = highs(&model, &[], true);
            let Verdict::Optimal(value) = verdict else { panic!("{id}: {verdict:?}") };
            assert!(agree(found, value, 1e-6), "{id}, {class:?}: {found}, {value}");
        }
    }
}
