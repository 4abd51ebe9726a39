//! Identities on symmetric costs: a relaxation equals another, written anew in notation and
//! solved by HiGHS. Average a solution with its reverse and set all labels equal: the labels
//! become a cap on every drive off the depot, the lifted labels a fractional 2-matching.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::round_trip::{formulation, rival, root, tsplib};

const CAPPED_ASSIGNMENT: &str = "
data
  V                                      stops
  A ⊆ V × V                              drives
  c_{i,j}  ∀ (i,j) ∈ A                   cost
  r ∈ V                                  depot
definitions
  n = |V|
minimise
  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}
subject to
  Σ_{j : (i,j) ∈ A} x_{i,j} = 1                ∀ i ∈ V        (leave)
  Σ_{i : (i,j) ∈ A} x_{i,j} = 1                ∀ j ∈ V        (enter)
  0 ≤ x_{i,j} ≤ 1                              ∀ (i,j) ∈ A
  x_{i,j} ≤ (n−2)/(n−1)                        ∀ (i,j) ∈ A : i ≠ r, j ≠ r   (cap)
";

const TWO_MATCHING: &str = "
data
  V                                      stops
  A ⊆ V × V                              drives
  c_{i,j}  ∀ (i,j) ∈ A                   cost
minimise
  Σ_{(i,j) ∈ A : i < j} c_{i,j} x_{i,j}
subject to
  Σ_{j ∈ V : i < j} x_{i,j} + Σ_{j ∈ V : j < i} x_{j,i} = 2      ∀ i ∈ V      (degree)
  0 ≤ x_{i,j} ≤ 1                              ∀ (i,j) ∈ A : i < j
";

const SYMMETRIC: [&str; 6] = ["burma14", "gr17", "ulysses16", "gr21", "fri26", "bays29"];

fn identity(id: &str, other: &str) {
    for name in SYMMETRIC {
        let Some(instance) = tsplib(name) else { return };
        let bound = root(&rival(id, &instance)).bound.unwrap();
        let verdict = highs(&formulation(other, &instance), &[], false);
        let Verdict::Optimal(value) = verdict else { panic!("{name}: {verdict:?}") };
        assert!(agree(bound, value, 1e-7), "{id} on {name}: {bound}, by identity {value}");
    }
}

#[test]
fn labels_are_an_assignment_with_capped_drives() {
    identity("atsp/labels", CAPPED_ASSIGNMENT);
}

#[test]
fn lifted_labels_are_a_fractional_two_matching() {
    identity("atsp/lifted-labels", TWO_MATCHING);
}
