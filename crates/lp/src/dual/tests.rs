//! The invariants of the dual method, step by step.

use super::*;
use crate::problem::{Col, Problem};
use crate::random::half_to_one;

/// A covering problem whose slack basis is dual feasible and primal infeasible.
fn covering(columns: u32, rows: usize, salt: usize) -> Core {
    let draw = |k: usize| (half_to_one(1000 * salt + k) * 2e6) as u64 % 17;
    let mut problem = Problem::new();
    for j in 0..columns as usize {
        problem.add_column(1.0 + draw(j) as f64, 0.0, 1.0 + draw(j + 500) as f64).unwrap();
    }
    for i in 0..rows {
        let wanted = |j: &u32| draw(97 * i + 7 * *j as usize) < 6;
        let row: Vec<(Col, f64)> = (0..columns)
            .filter(wanted)
            .map(|j| (Col(j), 1.0 + draw(31 * i + j as usize) as f64))
            .collect();
        let most: f64 = row.iter().map(|&(j, value)| value * problem.upper[j.0 as usize]).sum();
        problem.add_row(&row, (0.4 * most).floor(), f64::INFINITY).unwrap();
    }
    Core::new(problem)
}

/// Factors, values and reduced costs from scratch.
fn prepared(mut core: Core) -> Core {
    core.refactor_canonical();
    core.compute_basic();
    core.compute_reduced();
    core
}

#[test]
fn weights_stay_exact_from_an_exact_start() {
    for salt in 0..20 {
        let mut core = prepared(covering(15, 10, salt));
        let mut state = DualState::default();
        begin(&mut core, &mut state);
        while step(&mut core, &mut state) == DualStep::Moved {
            for position in 0..core.rows() as u32 {
                core.compute_row(position);
                let exact = core.scratch.rho.norm_squared();
                let held = core.weight[position as usize];
                assert!((held - exact).abs() <= 1e-6 * exact, "weight {held}, should be {exact}");
            }
        }
        assert!(core.iterations > 3);
    }
}

#[test]
fn the_dual_objective_never_falls_and_signs_hold() {
    for salt in 20..60 {
        let mut core = prepared(covering(20, 12, salt));
        let mut state = DualState { may_perturb: true, ..DualState::default() };
        begin(&mut core, &mut state);
        // At a dual feasible basis the working objective is the dual one.
        let mut last = core.working_objective();
        while step(&mut core, &mut state) == DualStep::Moved {
            assert_eq!(core.worst_reduced(), 0.0);
            let now = core.working_objective();
            assert!(now >= last - 1e-9 * (1.0 + last.abs()), "{now} after {last}");
            last = now;
        }
        assert!(core.is_primal_feasible());
    }
}

/// The same with columns that have the wrong cost and no upper bound, so that the start is shifted.
fn shifted(salt: usize) -> Core {
    let mut core = covering(25, 15, salt);
    for j in (0..25).step_by(4) {
        core.cost[j] = -core.cost[j];
        core.upper[j] = f64::INFINITY;
    }
    core.restore_given();
    core
}

#[test]
fn values_carried_along_agree_with_fresh_ones() {
    for salt in 60..90 {
        let mut core = prepared(if salt < 75 { covering(25, 15, salt) } else { shifted(salt) });
        let mut state = DualState { may_perturb: true, ..DualState::default() };
        let wrong = core.worst_reduced() > 0.0;
        begin(&mut core, &mut state);
        state.patience = 0;
        while step(&mut core, &mut state) == DualStep::Moved {}
        assert!(state.perturbed && (salt < 75 || wrong));
        let (basic, reduced, head) = (core.basic.clone(), core.reduced.clone(), core.head.clone());
        core.refactor();
        core.compute_basic();
        core.compute_reduced();
        assert_eq!(core.head, head);
        let near = |a: &[f64], b: &[f64]| {
            a.iter().zip(b).all(|(a, b)| (a - b).abs() <= 1e-8 * (1.0 + a.abs()))
        };
        assert!(near(&basic, &core.basic) && near(&reduced, &core.reduced));
        assert_eq!(core.check(), Ok(()));
    }
}

#[test]
fn the_ratio_test_flips_boxed_variables() {
    let mut problem = Problem::new();
    let columns: Vec<Col> =
        (0..4).map(|j| problem.add_column(f64::from(j) + 1.0, 0.0, 1.0).unwrap()).collect();
    let row: Vec<(Col, f64)> = columns.iter().map(|&j| (j, 1.0)).collect();
    problem.add_row(&row, 2.5, f64::INFINITY).unwrap();
    let mut core = prepared(Core::new(problem));
    let mut state = DualState::default();
    begin(&mut core, &mut state);
    assert_eq!(step(&mut core, &mut state), DualStep::Moved);
    assert_eq!(step(&mut core, &mut state), DualStep::Feasible);
    assert_eq!(core.status[..4], [Status::Upper, Status::Upper, Status::Basic, Status::Lower]);
    assert_eq!((core.basic[0], core.iterations), (0.5, 1));
}
