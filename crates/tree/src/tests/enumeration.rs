//! Small models against enumeration, under every pair of rules.

use std::rc::Rc;

use model::{ColumnId, Model, ModelBuilder, Sense};

use super::support::{Random, enumerated, random_model, row, rules, run, spec, working};
use crate::Status;

fn agrees(model: &Rc<Model>, name: &str) {
    let expected = enumerated(model);
    let pure = model.columns().iter().all(|c| c.integer);
    for settings in rules().into_iter().chain(working()) {
        let (_, summary) = run(model, &settings, u64::MAX);
        let place = format!("{name}, {settings:?}: {summary:?}, expected {expected:?}");
        match expected {
            Some(value) => {
                assert_eq!(summary.status, Status::Optimal, "{place}");
                assert!((summary.incumbent.unwrap() - value).abs() < 1e-6, "{place}");
                assert!((summary.bound.unwrap() - value).abs() < 1e-6, "{place}");
            }
            None => assert_eq!(summary.status, Status::Infeasible, "{place}"),
        }
        assert_eq!(summary.open, 0, "{place}");
        assert!(summary.checked || !pure, "{place}");
    }
}

#[test]
fn knapsack() {
    // Martello, Toth 1990: optimum 107, LP 107.55 (recomputed by enumeration here).
    let mut builder = ModelBuilder::new("knapsack", Sense::Maximise);
    let profits = [70, 20, 39, 37, 7, 5, 10];
    let weights = [31, 10, 20, 19, 4, 3, 6];
    let columns: Vec<ColumnId> =
        profits.iter().map(|&p| builder.column(&[], &spec((0, 1), p, true)).unwrap()).collect();
    let entries: Vec<(ColumnId, i64)> = columns.into_iter().zip(weights).collect();
    builder.row(&[], row(&entries, None, Some(50))).unwrap();
    let model = Rc::new(builder.build());
    agrees(&model, "knapsack");
    assert_eq!(run(&model, &rules()[0], u64::MAX).1.incumbent, Some(107.0));
}

#[test]
fn general_integers() {
    // Wolsey 1998: max 4x − y; 7x − 2y ≤ 14, y ≤ 3, 2x − 2y ≤ 3; optimum 7 at (2, 1).
    let mut builder = ModelBuilder::new("two integers", Sense::Maximise);
    let x = builder.column(&[], &spec((0, 9), 4, true)).unwrap();
    let y = builder.column(&[], &spec((0, 3), -1, true)).unwrap();
    builder.row(&[], row(&[(x, 7), (y, -2)], None, Some(14))).unwrap();
    builder.row(&[], row(&[(x, 2), (y, -2)], None, Some(3))).unwrap();
    let model = Rc::new(builder.build());
    agrees(&model, "two integers");
    let (_, summary) = run(&model, &rules()[0], u64::MAX);
    assert_eq!((summary.incumbent, summary.solution), (Some(7.0), vec![2.0, 1.0]));
}

#[test]
fn assignment_needs_one_node() {
    let costs = Random(5).costs(5, 30);
    let mut builder = ModelBuilder::new("assignment", Sense::Minimise);
    let mut columns = Vec::new();
    for (i, line) in costs.iter().enumerate() {
        for (j, cost) in line.iter().enumerate() {
            columns.push((i, j, builder.column(&[], &spec((0, 1), 1 + cost, true)).unwrap()));
        }
    }
    for k in 0..5 {
        for side in [0, 1] {
            let here = columns.iter().filter(|&&(i, j, _)| if side == 0 { i == k } else { j == k });
            let entries: Vec<(ColumnId, i64)> = here.map(|&(_, _, c)| (c, 1)).collect();
            builder.row(&[], row(&entries, Some(1), Some(1))).unwrap();
        }
    }
    let model = Rc::new(builder.build());
    let best = permutations(5)
        .iter()
        .map(|p| p.iter().enumerate().map(|(i, &j)| 1 + costs[i][j]).sum::<i64>())
        .min();
    for settings in rules() {
        let (_, summary) = run(&model, &settings, u64::MAX);
        assert_eq!((summary.status, summary.nodes, summary.checked), (Status::Optimal, 1, true));
        assert_eq!(summary.incumbent, best.map(|v| v as f64));
    }
}

fn permutations(n: usize) -> Vec<Vec<usize>> {
    if n == 0 {
        return vec![Vec::new()];
    }
    let mut all = Vec::new();
    for shorter in permutations(n - 1) {
        for place in 0..n {
            let mut longer = shorter.clone();
            longer.insert(place, n - 1);
            all.push(longer);
        }
    }
    all
}

#[test]
fn random_whole_models() {
    for seed in 0..40 {
        agrees(&random_model(seed, 8, 0), &format!("whole {seed}"));
    }
}

#[test]
fn random_mixed_models() {
    for seed in 100..140 {
        agrees(&random_model(seed, 6, 3), &format!("mixed {seed}"));
    }
}
