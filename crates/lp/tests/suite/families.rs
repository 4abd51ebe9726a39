//! Seeded random problems of several kinds.

use crate::random::Random;
use crate::shadow::Shadow;

pub(crate) const INFINITY: f64 = f64::INFINITY;

/// The kinds.
pub(crate) const KINDS: [&str; 7] =
    ["box", "infeasible", "free-equality", "degenerate", "big-m", "fixed-mix", "one-sided"];

/// A problem of a kind.
pub(crate) fn generate(kind: &str, seed: u64) -> Shadow {
    let mut random = Random::new(seed);
    let columns = random.integer(4, 30) as usize;
    let rows = random.integer(2, 20) as usize;
    match kind {
        "box" => around_a_point(&mut random, columns, rows, |random| (0.0, random.whole(1, 10))),
        "infeasible" => loose(&mut random, columns, rows),
        "free-equality" => free_equality(&mut random, columns, rows),
        "degenerate" => degenerate(&mut random, columns, rows),
        "big-m" => big_m(&mut random, columns),
        "fixed-mix" => around_a_point(&mut random, columns, rows, mixed_bounds),
        _ => around_a_point(&mut random, columns, rows, |random| {
            if random.one_in(2) { (0.0, INFINITY) } else { (-INFINITY, random.whole(0, 9)) }
        }),
    }
}

fn mixed_bounds(random: &mut Random) -> (f64, f64) {
    let low = random.whole(-5, 5);
    match random.integer(0, 4) {
        0 => (low, low),
        1 => (low, INFINITY),
        2 => (-INFINITY, low),
        3 => (-INFINITY, INFINITY),
        _ => (low, low + random.whole(1, 8)),
    }
}

/// Sparse rows with small integers.
fn entries(random: &mut Random, columns: usize) -> Vec<(usize, f64)> {
    let mut row = Vec::new();
    for j in 0..columns {
        if random.one_in(3) {
            let value = random.whole(-9, 9);
            if value != 0.0 {
                row.push((j, value));
            }
        }
    }
    row
}

/// Rows that hold at a chosen point, with ranges, equalities and single sides.
fn around_a_point(
    random: &mut Random,
    columns: usize,
    rows: usize,
    bounds: fn(&mut Random) -> (f64, f64),
) -> Shadow {
    let mut shadow = Shadow::default();
    let mut point = Vec::new();
    for _ in 0..columns {
        let (lower, upper) = bounds(random);
        let cost = random.whole(-20, 20);
        shadow.column(cost, lower, upper);
        let base = if lower > -INFINITY {
            lower
        } else if upper < INFINITY {
            upper - 3.0
        } else {
            0.0
        };
        let value = base + random.whole(0, 3);
        point.push(if value > upper { upper } else { value });
    }
    for _ in 0..rows {
        let row = entries(random, columns);
        let at: f64 = row.iter().map(|&(j, value)| value * point[j]).sum();
        let (lower, upper) = match random.integer(0, 3) {
            0 => (at, at),
            1 => (-INFINITY, at + random.whole(0, 5)),
            2 => (at - random.whole(0, 5), INFINITY),
            _ => (at - random.whole(0, 5), at + random.whole(0, 5)),
        };
        shadow.row(row, lower, upper);
    }
    shadow
}

/// Rows with sides at random: about half of these have no feasible point.
fn loose(random: &mut Random, columns: usize, rows: usize) -> Shadow {
    let mut shadow = Shadow::default();
    for _ in 0..columns {
        let (cost, upper) = (random.whole(-9, 9), random.whole(1, 4));
        shadow.column(cost, 0.0, upper);
    }
    for _ in 0..rows {
        let row = entries(random, columns);
        let side = random.whole(-12, 12);
        let (lower, upper) = match random.integer(0, 2) {
            0 => (side, side),
            1 => (-INFINITY, side),
            _ => (side, INFINITY),
        };
        shadow.row(row, lower, upper);
    }
    shadow
}

/// Free columns and equalities: often unbounded.
fn free_equality(random: &mut Random, columns: usize, rows: usize) -> Shadow {
    let mut shadow = Shadow::default();
    for _ in 0..columns {
        let cost = random.whole(-3, 9);
        let (lower, upper) = if random.one_in(2) { (-INFINITY, INFINITY) } else { (0.0, INFINITY) };
        shadow.column(cost, lower, upper);
    }
    for _ in 0..rows {
        let row = entries(random, columns);
        let side = random.whole(-9, 9);
        shadow.row(row, side, side);
    }
    shadow
}

/// Zero-one matrices with equal costs and right sides: many ties.
fn degenerate(random: &mut Random, columns: usize, rows: usize) -> Shadow {
    let mut shadow = Shadow::default();
    for _ in 0..columns {
        let cost = random.whole(0, 2);
        shadow.column(cost, 0.0, 1.0);
    }
    for _ in 0..rows {
        let mut row = entries(random, columns);
        row.iter_mut().for_each(|entry| entry.1 = 1.0);
        if row.is_empty() {
            row.push((0, 1.0));
        }
        shadow.row(row, 1.0, INFINITY);
    }
    shadow
}

/// Switches with coefficients up to a million.
fn big_m(random: &mut Random, pairs: usize) -> Shadow {
    let mut shadow = Shadow::default();
    let mut demand = Vec::new();
    for _ in 0..pairs {
        let (fixed, unit) = (random.whole(50, 200), random.whole(1, 9));
        let flow = shadow.column(unit, 0.0, INFINITY);
        let switch = shadow.column(fixed, 0.0, 1.0);
        let large = [1e3, 1e4, 1e6][random.integer(0, 2) as usize];
        shadow.row(vec![(flow, 1.0), (switch, -large)], -INFINITY, 0.0);
        demand.push((flow, 1.0));
    }
    let total = random.whole(5, 100);
    shadow.row(demand, total, INFINITY);
    shadow
}
