//! Every basic solution of tiny boxed problems, by Gaussian elimination.

use crate::random::Random;
use crate::shadow::{Shadow, Verdict};
use hullward_lp::Limits;

/// Solves a dense square system; none when it is singular.
fn solve(mut a: Vec<Vec<f64>>, mut b: Vec<f64>) -> Option<Vec<f64>> {
    let size = b.len();
    for k in 0..size {
        let pivot = (k..size).max_by(|&p, &q| a[p][k].abs().total_cmp(&a[q][k].abs()))?;
        if a[pivot][k].abs() < 1e-9 {
            return None;
        }
        a.swap(k, pivot);
        b.swap(k, pivot);
        let (pivot_row, pivot_side) = (a[k].clone(), b[k]);
        for i in (0..size).filter(|&i| i != k) {
            let factor = a[i][k] / pivot_row[k];
            a[i].iter_mut().zip(&pivot_row).for_each(|(value, pivot)| *value -= factor * pivot);
            b[i] -= factor * pivot_side;
        }
    }
    Some((0..size).map(|k| b[k] / a[k][k]).collect())
}

/// The least cost over the vertices, each a choice of n tight sides among rows and bounds.
fn best_vertex(shadow: &Shadow) -> Option<f64> {
    let n = shadow.cost.len();
    let mut planes: Vec<(Vec<f64>, f64)> = Vec::new();
    let mut push = |entries: &[(usize, f64)], side: f64| {
        if side.is_finite() {
            let mut dense = vec![0.0; n];
            entries.iter().for_each(|&(j, value)| dense[j] += value);
            planes.push((dense, side));
        }
    };
    for j in 0..n {
        push(&[(j, 1.0)], shadow.lower[j]);
        push(&[(j, 1.0)], shadow.upper[j]);
    }
    for row in &shadow.rows {
        push(&row.0, row.1);
        push(&row.0, row.2);
    }
    let mut best: Option<f64> = None;
    for choice in 0u32..(1 << planes.len()) {
        if choice.count_ones() as usize == n {
            let tight: Vec<&(Vec<f64>, f64)> = planes
                .iter()
                .enumerate()
                .filter(|(k, _)| choice >> k & 1 == 1)
                .map(|(_, plane)| plane)
                .collect();
            let found = solve(
                tight.iter().map(|plane| plane.0.clone()).collect(),
                tight.iter().map(|plane| plane.1).collect(),
            );
            let Some(x) = found.filter(|x| is_feasible(shadow, x)) else { continue };
            let value: f64 = shadow.cost.iter().zip(&x).map(|(c, x)| c * x).sum();
            best = Some(best.map_or(value, |held| if value < held { value } else { held }));
        }
    }
    best
}

fn is_feasible(shadow: &Shadow, x: &[f64]) -> bool {
    let inside =
        |value: f64, lower: f64, upper: f64| value >= lower - 1e-7 && value <= upper + 1e-7;
    let columns =
        x.iter().enumerate().all(|(j, &value)| inside(value, shadow.lower[j], shadow.upper[j]));
    columns
        && shadow
            .rows
            .iter()
            .all(|row| inside(row.0.iter().map(|&(j, value)| value * x[j]).sum(), row.1, row.2))
}

#[test]
fn the_best_vertex_is_found() {
    let (mut optimal, mut infeasible) = (0, 0);
    for seed in 0..400 {
        let mut random = Random::new(seed);
        let mut shadow = Shadow::default();
        for _ in 0..random.integer(1, 3) {
            let (cost, lower) = (random.whole(-5, 5), random.whole(-2, 2));
            let upper = lower + random.whole(0, 4);
            shadow.column(cost, lower, upper);
        }
        for _ in 0..random.integer(0, 3) {
            let row = (0..shadow.cost.len()).map(|j| (j, random.whole(-3, 3))).collect();
            let side = random.whole(-6, 6);
            let (lower, upper) =
                if random.one_in(2) { (side, f64::INFINITY) } else { (side - 2.0, side) };
            shadow.row(row, lower, upper);
        }
        let name = format!("seed {seed}");
        let expected = best_vertex(&shadow).map_or(Verdict::Infeasible, Verdict::Optimal);
        match expected {
            Verdict::Optimal(_) => optimal += 1,
            _ => infeasible += 1,
        }
        let verdict = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
        assert!(verdict.agrees(expected, 1e-9), "{name}: {verdict:?}, should be {expected:?}");
    }
    assert!(optimal > 100 && infeasible > 50, "{optimal} optimal, {infeasible} infeasible");
}
