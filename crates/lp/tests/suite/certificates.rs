//! Optima, rays and infeasibility that are known by construction.

use crate::families::INFINITY;
use crate::random::Random;
use crate::shadow::{Shadow, Verdict};
use hullward_lp::{Limits, Outcome};

/// A problem with x* and y* chosen first; bounds, sides and costs follow so that both are optimal.
/// Returns cᵀx*.
fn with_known_optimum(random: &mut Random) -> (Shadow, f64) {
    let (columns, rows) = (random.integer(3, 40) as usize, random.integer(2, 30) as usize);
    let x: Vec<f64> = (0..columns).map(|_| random.whole(-4, 6)).collect();
    let mut shadow = Shadow::default();
    let mut cost = vec![0.0; columns];
    let mut built = Vec::new();
    for _ in 0..rows {
        let places: Vec<usize> = (0..columns).filter(|_| random.one_in(4)).collect();
        let mut row: Vec<(usize, f64)> =
            places.into_iter().map(|j| (j, random.whole(-7, 7))).collect();
        row.retain(|entry| entry.1 != 0.0);
        let at: f64 = row.iter().map(|&(j, value)| value * x[j]).sum();
        let (dual, lower, upper) = match random.integer(0, 3) {
            0 => (random.whole(-5, 5), at, at),
            1 => (random.whole(0, 5), at, INFINITY),
            2 => (random.whole(-5, 0), -INFINITY, at),
            _ => (0.0, at - 2.0, at + 3.0),
        };
        row.iter().for_each(|&(j, value)| cost[j] += dual * value);
        built.push((row, lower, upper));
    }
    for j in 0..columns {
        let (reduced, lower, upper) = match random.integer(0, 4) {
            0 => (random.whole(0, 6), x[j], INFINITY),
            1 => (random.whole(-6, 0), -INFINITY, x[j]),
            2 => (random.whole(-6, 6), x[j], x[j]),
            3 => (0.0, -INFINITY, INFINITY),
            _ => (0.0, x[j] - 1.0, x[j] + 1.0),
        };
        shadow.column(cost[j] + reduced, lower, upper);
    }
    shadow.rows = built;
    let value = shadow.cost.iter().zip(&x).map(|(c, x)| c * x).sum();
    (shadow, value)
}

#[test]
fn the_constructed_optimum_is_met() {
    for seed in 0..600 {
        let (shadow, value) = with_known_optimum(&mut Random::new(seed));
        let name = format!("seed {seed}");
        let verdict = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
        assert!(
            verdict.agrees(Verdict::Optimal(value), 1e-9),
            "{name}: {verdict:?}, should be {value}"
        );
    }
}

/// Adds a row that contradicts the others: the sum of some rows, with a side beyond their sum.
#[test]
fn a_constructed_contradiction_is_proved() {
    for seed in 0..300 {
        let mut random = Random::new(10_000 + seed);
        let (mut shadow, _) = with_known_optimum(&mut random);
        let mut sum = vec![0.0; shadow.cost.len()];
        let mut side = 0.0;
        for row in shadow.rows.iter().filter(|row| row.2 < INFINITY) {
            row.0.iter().for_each(|&(j, value)| sum[j] += value);
            side += row.2;
        }
        let entries: Vec<(usize, f64)> =
            sum.iter().copied().enumerate().filter(|entry| entry.1 != 0.0).collect();
        shadow.row(entries, side + 1.0, INFINITY);
        let name = format!("seed {seed}");
        assert_eq!(
            shadow.verdict(shadow.simplex().solve(Limits::default()), &name),
            Verdict::Infeasible,
            "{name}"
        );
    }
}

/// A column that pays for itself and that no row holds back.
#[test]
fn a_constructed_ray_is_found() {
    for seed in 0..300 {
        let mut random = Random::new(20_000 + seed);
        let (mut shadow, _) = with_known_optimum(&mut random);
        let free = shadow.column(-1.0, 0.0, INFINITY);
        for row in &mut shadow.rows {
            if row.1 == -INFINITY {
                row.0.push((free, -1.0));
            } else if row.2 == INFINITY {
                row.0.push((free, 1.0));
            }
        }
        let name = format!("seed {seed}");
        assert_eq!(
            shadow.verdict(shadow.simplex().solve(Limits::default()), &name),
            Verdict::Unbounded,
            "{name}"
        );
    }
}

/// Whole multipliers come out where the basis allows it, so that an exact check loses nothing.
#[test]
fn rays_of_whole_problems_are_whole() {
    let mut shadow = Shadow::default();
    let x: Vec<usize> = (0..3).map(|_| shadow.column(1.0, -INFINITY, INFINITY)).collect();
    shadow.row(vec![(x[0], 3.0), (x[1], 1.0)], 1.0, INFINITY);
    shadow.row(vec![(x[1], 7.0), (x[2], -1.0)], -INFINITY, 2.0);
    shadow.row(vec![(x[0], 21.0), (x[2], 1.0)], -INFINITY, 4.0);
    let mut simplex = shadow.simplex();
    let Outcome::Infeasible(ray) = simplex.solve(Limits::default()) else {
        panic!("{:?}", simplex.outcome())
    };
    assert_eq!(ray.multipliers, vec![7.0, -1.0, -1.0]);
}
