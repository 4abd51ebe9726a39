//! What a search asks for beside solves: tableau rows, bases set aside, bounds on the way, the
//! condition of a basis.

use crate::families::{KINDS, generate};
use crate::instances::{multi_commodity, position_labels, single_commodity};
use crate::shadow::Shadow;
use hullward_lp::{Col, Limits, Outcome, Problem, Progress, Simplex, TableauRow};

/// x_basic + Σ α x − Σ ρ (row activity), multiplied out, is zero in every column.
fn check_tableau_row(shadow: &Shadow, basic: usize, row: &TableauRow, name: &str) {
    let mut left = vec![0.0; shadow.cost.len()];
    let mut size = 1.0;
    left[basic] = 1.0;
    for &(column, value) in &row.coefficients {
        left[column.0 as usize] += value;
    }
    for &(id, multiplier) in &row.multipliers {
        for &(j, value) in &shadow.rows[id.0 as usize].0 {
            left[j] -= multiplier * value;
            size += (multiplier * value).abs();
        }
    }
    assert!(left.iter().all(|value| value.abs() <= 1e-12 * size), "{name}, column {basic}");
}

#[test]
fn tableau_rows_are_combinations_of_the_rows() {
    let mut checked = 0;
    for kind in KINDS {
        for seed in 0..40 {
            let shadow = generate(kind, 5000 + seed);
            let mut simplex = shadow.simplex();
            simplex.solve(Limits::default());
            let basis = simplex.basis();
            for j in 0..shadow.cost.len() {
                let row = simplex.tableau_row(Col(j as u32));
                assert_eq!(row.is_some(), basis.is_basic_column(j as u32));
                if let Some(row) = row {
                    assert!(row.coefficients.iter().all(|at| !basis.is_basic_column(at.0.0)));
                    check_tableau_row(&shadow, j, &row, kind);
                    checked += 1;
                }
            }
        }
    }
    assert!(checked > 500, "{checked}");
}

/// Each side of each fractional column, from the basis set aside and from the packed one: the same
/// optimum; without a factorisation at the start.
#[test]
fn a_basis_set_aside_is_taken_up_without_factorising() {
    let shadow = position_labels(9, 3);
    let mut simplex = shadow.simplex();
    let Outcome::Optimal(root) = simplex.solve(Limits::default()).clone() else { panic!() };
    let (held, packed) = (simplex.checkpoint(), simplex.basis());
    let mut tried = 0;
    for j in 0..72u32 {
        let x = root.x[j as usize];
        if (x - x.round()).abs() < 1e-6 {
            continue;
        }
        tried += 1;
        for value in [0.0, 1.0] {
            assert!(simplex.restore(&held));
            assert_eq!(simplex.basis(), packed);
            let before = simplex.stats().refactors;
            simplex.set_bounds(Col(j), value, value);
            simplex.solve(Limits { iterations: Some(0), ..Limits::default() });
            assert_eq!(simplex.stats().refactors, before);
            let found = shadow_verdict(&mut simplex);
            let mut other = shadow.simplex();
            other.load_basis(&packed);
            other.set_bounds(Col(j), value, value);
            let wanted = shadow_verdict(&mut other);
            assert!((found - wanted).abs() < 1e-8 * (1.0 + wanted.abs()), "{found}, {wanted}");
            simplex.set_bounds(Col(j), 0.0, 1.0);
        }
    }
    assert!(tried > 3);
    let row = crate::shadow::new_row(&shadow.rows[0]);
    simplex.add_rows(&[row]).unwrap();
    assert!(!simplex.restore(&held));
}

/// The optimum, infinite when there is no feasible point.
fn shadow_verdict(simplex: &mut Simplex) -> f64 {
    match simplex.solve(Limits::default()) {
        Outcome::Optimal(solution) => solution.objective,
        Outcome::Infeasible(_) => 1e300,
        other => panic!("{other:?}"),
    }
}

#[test]
fn the_bound_on_the_way_is_never_above_the_optimum() {
    for shadow in [single_commodity(10, 4), multi_commodity(7, 2)] {
        let optimum = shadow_verdict(&mut shadow.simplex());
        let mut simplex = shadow.simplex();
        simplex.start(Limits::default());
        let mut last = f64::NEG_INFINITY;
        while simplex.advance(2_000) == Progress::Working {
            let bound = simplex.dual_bound().unwrap();
            assert!(bound <= optimum, "{bound} above {optimum}");
            last = if bound > last { bound } else { last };
        }
        assert!(last > 0.5 * optimum, "{last}");
        let end = simplex.dual_bound().unwrap();
        assert!(end <= optimum + 1e-9 && end > optimum - 1e-6);
    }
}

/// Hilbert matrices: the condition numbers in the 1-norm are 748, 28 375 and 943 656 for orders 3,
/// 4 and 5 (figures from memory; Higham 2002, chapter 28, treats these matrices).
#[test]
fn the_condition_of_hilbert_matrices() {
    for (order, wanted) in [(3u32, 748.0), (4, 28_375.0), (5, 943_656.0)] {
        let mut problem = Problem::new();
        let columns: Vec<Col> =
            (0..order).map(|_| problem.add_column(1.0, 0.0, 9.0).unwrap()).collect();
        for i in 0..order {
            let row: Vec<(Col, f64)> =
                columns.iter().map(|&j| (j, 1.0 / f64::from(i + j.0 + 1))).collect();
            let side: f64 = row.iter().map(|entry| entry.1).sum();
            problem.add_row(&row, side, side).unwrap();
        }
        let mut simplex = Simplex::new(problem);
        simplex.solve(Limits::default());
        assert!((0..order).all(|j| simplex.basis().is_basic_column(j)));
        let found = simplex.condition_estimate().unwrap();
        assert!(found > 0.3 * wanted && found < 1.001 * wanted, "{order}: {found}");
    }
}
