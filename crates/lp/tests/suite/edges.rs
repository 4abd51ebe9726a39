//! Empty, fixed, crossed, free, refused.

use crate::families::INFINITY;
use crate::shadow::{Shadow, Verdict};
use hullward_lp::{Basis, Col, Limits, NewRow, Outcome, Problem, Progress, Simplex};
use proptest::prelude::*;

fn verdict(shadow: &Shadow) -> Verdict {
    shadow.verdict(shadow.simplex().solve(Limits::default()), "edge")
}

#[test]
fn nothing_at_all() {
    assert_eq!(verdict(&Shadow::default()), Verdict::Optimal(0.0));
    let mut rows_only = Shadow::default();
    rows_only.row(vec![], -1.0, 1.0);
    assert_eq!(verdict(&rows_only), Verdict::Optimal(0.0));
    rows_only.row(vec![], 1.0, 2.0);
    assert_eq!(verdict(&rows_only), Verdict::Infeasible);
}

#[test]
fn columns_without_rows() {
    let mut shadow = Shadow::default();
    shadow.column(2.0, -3.0, INFINITY);
    shadow.column(-1.0, -INFINITY, 4.0);
    shadow.column(0.0, -INFINITY, INFINITY);
    shadow.column(5.0, 2.0, 2.0);
    assert_eq!(verdict(&shadow), Verdict::Optimal(0.0));
    shadow.column(1.0, -INFINITY, 0.0);
    assert_eq!(verdict(&shadow), Verdict::Unbounded);
}

#[test]
fn a_free_row_binds_nothing() {
    let mut shadow = Shadow::default();
    let x = shadow.column(1.0, -INFINITY, INFINITY);
    shadow.row(vec![(x, 1.0)], -INFINITY, INFINITY);
    assert_eq!(verdict(&shadow), Verdict::Unbounded);
    shadow.row(vec![(x, 2.0)], -3.0, INFINITY);
    assert_eq!(verdict(&shadow), Verdict::Optimal(-1.5));
}

#[test]
fn crossed_bounds_are_infeasible_not_an_error() {
    let mut shadow = Shadow::default();
    let x = shadow.column(1.0, 2.0, 1.0);
    shadow.row(vec![(x, 1.0)], 0.0, 5.0);
    assert_eq!(verdict(&shadow), Verdict::Infeasible);
    shadow.lower[0] = 0.0;
    shadow.rows[0].1 = 6.0;
    assert_eq!(verdict(&shadow), Verdict::Infeasible);
}

#[test]
fn infeasible_and_unbounded_at_once_is_infeasible() {
    let mut shadow = Shadow::default();
    let x = shadow.column(-1.0, 0.0, INFINITY);
    let y = shadow.column(0.0, 0.0, 1.0);
    shadow.row(vec![(x, 1.0)], 0.0, INFINITY);
    shadow.row(vec![(y, 1.0)], 2.0, INFINITY);
    assert_eq!(verdict(&shadow), Verdict::Infeasible);
}

#[test]
fn repeated_entries_are_summed() {
    let mut problem = Problem::new();
    let x = problem.add_column(1.0, 0.0, INFINITY).unwrap();
    problem.add_row(&[(x, 1.0), (x, 1.0)], 3.0, INFINITY).unwrap();
    let mut simplex = Simplex::new(problem);
    let Outcome::Optimal(solution) = simplex.solve(Limits::default()) else { panic!() };
    assert_eq!((solution.objective, solution.duals[0]), (1.5, 0.5));
    assert!(
        simplex
            .add_rows(&[NewRow { entries: vec![(Col(9), 1.0)], lower: 0.0, upper: 1.0 }])
            .is_err()
    );
    assert_eq!(simplex.row_count(), 1);
}

#[test]
fn setters_ignore_what_makes_no_sense() {
    let mut problem = Problem::new();
    let x = problem.add_column(1.0, 0.0, 1.0).unwrap();
    let mut simplex = Simplex::new(problem);
    simplex.set_bounds(Col(5), 0.0, 0.0);
    simplex.set_cost(x, f64::NAN);
    simplex.set_bounds(x, f64::NAN, 1.0);
    assert_eq!(simplex.bounds(x), (f64::NEG_INFINITY, 1.0));
    assert!(matches!(simplex.solve(Limits::default()), Outcome::Unbounded { .. }));
    simplex.set_bounds(x, INFINITY, INFINITY);
    assert!(matches!(simplex.solve(Limits::default()), Outcome::Infeasible(_)));
    simplex.set_bounds(x, -2.0, 1.0);
    simplex.load_basis(&Basis::default());
    assert_eq!(simplex.advance(100), Progress::Finished);
    assert!(simplex.outcome().is_none());
    assert!(
        matches!(simplex.solve(Limits::default()), Outcome::Optimal(solution) if solution.objective == -2.0)
    );
}

/// The set of magnitudes that a careless or hostile caller could send.
fn number() -> impl Strategy<Value = f64> {
    prop_oneof![
        6 => (-9i32..=9).prop_map(f64::from),
        1 => Just(f64::INFINITY),
        1 => Just(f64::NEG_INFINITY),
        1 => Just(f64::NAN),
        1 => prop_oneof![Just(1e-12), Just(1e12), Just(-1e300), Just(5e-324), Just(-0.0)],
    ]
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, ..ProptestConfig::default() })]

    /// Whatever is put in, the solver ends with an outcome.
    #[test]
    fn any_input_ends_with_an_outcome(
        columns in prop::collection::vec((number(), number(), number()), 0..6),
        rows in prop::collection::vec((prop::collection::vec((0u32..7, number()), 0..6), number(), number()), 0..6),
        edits in prop::collection::vec((0u32..7, number(), number()), 0..4),
    ) {
        let mut problem = Problem::new();
        for (cost, lower, upper) in columns {
            let _ = problem.add_column(cost, lower, upper);
        }
        for (entries, lower, upper) in &rows {
            let entries: Vec<(Col, f64)> = entries.iter().map(|&(j, value)| (Col(j), value)).collect();
            let _ = problem.add_row(&entries, *lower, *upper);
        }
        let mut simplex = Simplex::new(problem);
        simplex.solve(Limits::default());
        prop_assert!(simplex.outcome().is_some());
        for (column, lower, upper) in edits {
            simplex.set_bounds(Col(column), lower, upper);
            simplex.set_cost(Col(column), upper);
            simplex.solve(Limits::default());
            prop_assert!(simplex.outcome().is_some());
        }
    }
}
