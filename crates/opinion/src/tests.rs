//! Small relaxations with answers by hand, and those that it must be silent on.

use super::*;
use record::opinion::RelaxationColumn;

const LIMIT: Duration = Duration::from_secs(10);

fn column(cost: f64, lower: f64, upper: f64) -> RelaxationColumn {
    RelaxationColumn { cost, lower, upper }
}

fn row(lower: f64, entries: &[(u32, f64)], upper: f64) -> RelaxationRow {
    RelaxationRow { lower, upper, entries: entries.to_vec() }
}

/// min x + 2y + 5, 1 ≤ x + y ≤ 3, x − y = 0, both 0 to 10: 6.5 at (½, ½).
fn small() -> Relaxation {
    Relaxation {
        maximise: false,
        offset: 5.0,
        columns: vec![column(1.0, 0.0, 10.0), column(2.0, 0.0, 10.0)],
        rows: vec![row(1.0, &[(0, 1.0), (1, 1.0)], 3.0), row(0.0, &[(0, 1.0), (1, -1.0)], 0.0)],
    }
}

fn value(relaxation: &Relaxation) -> f64 {
    match ask(relaxation, LIMIT) {
        Opinion::Optimal(value) => value,
        other => panic!("{other:?}"),
    }
}

#[test]
fn ranges_equalities_and_the_offset_are_kept() {
    assert!((value(&small()) - 6.5).abs() < 1e-9);
    let most = Relaxation { maximise: true, ..small() };
    assert!((value(&most) - 9.5).abs() < 1e-9);
}

#[test]
fn a_row_without_sides_binds_nothing() {
    let mut relaxation = small();
    relaxation.rows.push(row(f64::NEG_INFINITY, &[(0, 1.0)], f64::INFINITY));
    assert!((value(&relaxation) - 6.5).abs() < 1e-9);
}

#[test]
fn no_point_and_no_bound_are_answers() {
    let mut none = small();
    none.rows.push(row(2.0, &[(0, 1.0)], f64::INFINITY));
    assert_eq!(ask(&none, LIMIT), Opinion::Infeasible);
    let free = Relaxation {
        columns: vec![column(-1.0, 0.0, f64::INFINITY), column(0.0, 0.0, f64::INFINITY)],
        rows: vec![row(0.0, &[(0, 1.0), (1, -1.0)], 0.0)],
        ..small()
    };
    assert_eq!(ask(&free, LIMIT), Opinion::Unbounded);
}

#[test]
fn what_cannot_be_asked_is_silence_with_its_reason() {
    for entries in [vec![(7, 1.0)], vec![(0, 1.0), (0, 2.0)]] {
        let mut wrong = small();
        wrong.rows.push(row(0.0, &entries, 1.0));
        assert!(matches!(ask(&wrong, LIMIT), Opinion::Silent(_)));
    }
    let endless = Relaxation { columns: vec![column(f64::NAN, 0.0, 1.0); 2], ..small() };
    assert!(matches!(ask(&endless, LIMIT), Opinion::Silent(_)));
    let said = record::wire::read_opinion(&answer(b"no relaxation"));
    assert!(matches!(said, Ok(Opinion::Silent(_))), "{said:?}");
}

#[test]
fn bytes_are_answered_by_bytes() {
    let bytes = record::wire::write_relaxation(&small()).expect("it is small");
    let said = record::wire::read_opinion(&answer(&bytes));
    assert!(matches!(said, Ok(Opinion::Optimal(value)) if (value - 6.5).abs() < 1e-9), "{said:?}");
}

/// A transport problem of 60 × 60 with costs that repeat: more than a thousand pivots.
fn long() -> Relaxation {
    let side = 60_u32;
    let cost = |cell: u32| f64::from(cell * 7919 % 97);
    let sum = |cells: Vec<u32>, right: f64| {
        row(right, &cells.into_iter().map(|cell| (cell, 1.0)).collect::<Vec<_>>(), right)
    };
    let rows = (0..side).map(|i| sum((0..side).map(|j| i * side + j).collect(), f64::from(i + 1)));
    let columns =
        (0..side).map(|j| sum((0..side).map(|i| i * side + j).collect(), f64::from(j + 1)));
    Relaxation {
        columns: (0..side * side).map(|cell| column(cost(cell), 0.0, f64::INFINITY)).collect(),
        rows: rows.chain(columns).collect(),
        ..Relaxation::default()
    }
}

#[test]
fn when_its_time_is_over_it_says_so() {
    let said = ask(&long(), Duration::ZERO);
    assert_eq!(said, Opinion::Silent("took longer than 0 s".to_owned()));
}
