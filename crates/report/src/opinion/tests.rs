//! Every pair of a root and an opinion, and falsified ones above all.

use super::*;

fn solved(bound: f64) -> RootReport {
    RootReport {
        status: Status::Optimal,
        bound: Some(bound),
        checked: true,
        ..RootReport::default()
    }
}

fn ended(status: Status, checked: bool) -> RootReport {
    RootReport { status, checked, ..RootReport::default() }
}

#[test]
fn equal_values_agree_and_near_ones_do() {
    for theirs in [151.2, 151.2 + 1e-4, 151.2 - 1e-4] {
        assert_eq!(verdict(&solved(151.2), false, &Opinion::Optimal(theirs)), Verdict::Agrees);
    }
    assert_eq!(verdict(&solved(0.0), false, &Opinion::Optimal(5e-7)), Verdict::Agrees);
    assert_eq!(verdict(&solved(0.0), false, &Opinion::Optimal(-2e-6)), Verdict::Refuted);
    let words = words(&solved(151.2), false, &Opinion::Optimal(151.200_000_1));
    assert_eq!(words, "a second LP code agrees: 151.2");
}

// The big-M relaxations that float tolerances get wrong: an independent code gave 137.185 where
// 141.137 is the exact optimum.
#[test]
fn a_weaker_value_is_refuted_by_a_checked_bound_in_both_directions() {
    let low = Opinion::Optimal(137.185);
    assert_eq!(verdict(&solved(141.137), false, &low), Verdict::Refuted);
    assert_eq!(verdict(&solved(137.185), true, &Opinion::Optimal(141.137)), Verdict::Refuted);
    assert_eq!(
        words(&solved(141.137), false, &low),
        "a second LP code disagrees: 137.185, against 141.137 here. The exact check supports 141.137"
    );
}

#[test]
fn a_stronger_value_is_not_refuted_by_a_bound() {
    let high = Opinion::Optimal(145.0);
    assert_eq!(verdict(&solved(141.0), false, &high), Verdict::Undecided);
    let words = words(&solved(141.0), false, &high);
    assert!(
        words.ends_with("The exact check proves ours as a bound and does not rule the other out")
    );
    assert_eq!(verdict(&solved(141.0), true, &Opinion::Optimal(137.0)), Verdict::Undecided);
    assert_eq!(verdict(&solved(141.0), false, &Opinion::Infeasible), Verdict::Undecided);
}

// A point of the proved value rules out every better one.
#[test]
fn a_proved_optimum_refutes_every_other_value() {
    let root = RootReport { proof: Proof::Exact, ..solved(141.0) };
    for other in [Opinion::Optimal(145.0), Opinion::Optimal(137.0), Opinion::Infeasible] {
        assert_eq!(verdict(&root, false, &other), Verdict::Refuted, "{other:?}");
    }
    let within = RootReport { proof: Proof::Within, ..solved(141.0) };
    assert_eq!(verdict(&within, false, &Opinion::Optimal(145.0)), Verdict::Undecided);
}

#[test]
fn what_is_not_checked_decides_nothing() {
    let root = RootReport { checked: false, ..solved(141.137) };
    assert_eq!(verdict(&root, false, &Opinion::Optimal(137.185)), Verdict::Undecided);
    let words = words(&root, false, &Opinion::Optimal(137.185));
    assert!(words.contains("137.185") && words.contains("141.137"), "{words}");
    assert!(words.ends_with("decides for neither"), "{words}");
}

#[test]
fn statuses_are_compared_too() {
    let none = ended(Status::Infeasible, true);
    assert_eq!(verdict(&none, false, &Opinion::Infeasible), Verdict::Agrees);
    assert_eq!(words(&none, false, &Opinion::Infeasible), "a second LP code agrees: no point");
    assert_eq!(verdict(&none, false, &Opinion::Optimal(3.0)), Verdict::Refuted);
    assert_eq!(
        words(&none, false, &Opinion::Optimal(3.0)),
        "a second LP code disagrees: 3, against no point here. The exact check supports no point"
    );
    let unproved = ended(Status::Infeasible, false);
    assert_eq!(verdict(&unproved, false, &Opinion::Optimal(3.0)), Verdict::Undecided);
    let free = ended(Status::Unbounded, false);
    assert_eq!(verdict(&free, false, &Opinion::Unbounded), Verdict::Agrees);
    assert_eq!(verdict(&free, false, &Opinion::Optimal(3.0)), Verdict::Undecided);
    assert_eq!(verdict(&solved(3.0), false, &Opinion::Unbounded), Verdict::Refuted);
}

#[test]
fn silence_has_its_reason() {
    let silent = Opinion::Silent("took longer than 10 s".to_owned());
    assert_eq!(verdict(&solved(3.0), false, &silent), Verdict::Silent);
    assert_eq!(words(&solved(3.0), false, &silent), "no second opinion: took longer than 10 s");
    let stopped = ended(Status::Limit, false);
    assert_eq!(verdict(&stopped, false, &Opinion::Optimal(3.0)), Verdict::Silent);
}
