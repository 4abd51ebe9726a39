//! Coefficients from 1e-4 to 1e4 times small integers, equalities that hold up to rounding only,
//! multiplied rows. Attempt after attempt in floats leaves seven solves in a thousand without an outcome
//! that its own multipliers bear out; the last resort in numbers of 32 digits settles those.

use crate::families::INFINITY;
use crate::random::Random;
use crate::shadow::{Shadow, Verdict};
use hullward_lp::{Limits, Outcome};

/// A power of ten from 1e-4 to 1e4.
fn magnitude(random: &mut Random) -> f64 {
    [1e-4, 1e-3, 1e-2, 0.1, 1.0, 10.0, 1e2, 1e3, 1e4][random.integer(0, 8) as usize]
}

fn bounds(random: &mut Random, boxed: bool) -> (f64, f64) {
    let low = random.whole(-5, 5);
    match random.integer(0, 4) {
        _ if boxed => (0.0, random.whole(1, 10)),
        0 => (low, low),
        1 => (low, INFINITY),
        2 => (-INFINITY, low),
        3 => (-INFINITY, INFINITY),
        _ => (low, low + random.whole(1, 8)),
    }
}

/// Rows through a point, each entry of a size of its own; some rows are multiples of the one
/// before.
pub(crate) fn wide(seed: u64, boxed: bool) -> Shadow {
    let mut random = Random::new(seed);
    let (columns, rows) = (random.integer(5, 40) as usize, random.integer(3, 30) as usize);
    let mut shadow = Shadow::default();
    let mut point = Vec::new();
    for _ in 0..columns {
        let (lower, upper) = bounds(&mut random, boxed);
        let cost = random.whole(-20, 20);
        shadow.column(cost, lower, upper);
        let base = if lower.is_finite() { lower } else { 0.0 };
        point.push(if base + 1.0 > upper { upper } else { base + 1.0 });
    }
    for i in 0..rows {
        let row: Vec<(usize, f64)> = if i % 7 == 6 {
            shadow.rows[i - 1].0.iter().map(|&(j, value)| (j, 3.0 * value)).collect()
        } else {
            let entry = |random: &mut Random| random.whole(-9, 9) * magnitude(random);
            (0..columns)
                .filter(|_| random.one_in(4))
                .collect::<Vec<_>>()
                .into_iter()
                .map(|j| (j, entry(&mut random)))
                .collect()
        };
        let at: f64 = row.iter().map(|&(j, value)| value * point[j]).sum();
        let slack = random.whole(0, 5);
        match random.integer(0, 2) {
            0 => shadow.row(row, at, at),
            1 => shadow.row(row, -INFINITY, at + slack),
            _ => shadow.row(row, at - slack, INFINITY),
        }
    }
    shadow
}

/// The problem of a seed: every other one with bounds on all columns.
fn of_seed(seed: u64) -> Shadow {
    wide(seed, seed.is_multiple_of(2))
}

/// One solve in five thousand once ended without an outcome. `HULLWARD_WIDE=600000` takes as many seeds.
#[test]
fn wide_coefficients_stop_no_solve() {
    let count = std::env::var("HULLWARD_WIDE").ok().and_then(|text| text.parse().ok());
    let mut stopped = Vec::new();
    for seed in 70_000..70_000 + count.unwrap_or(1_500) {
        if let Outcome::Stopped { reason, .. } = of_seed(seed).simplex().solve(Limits::default()) {
            stopped.push((seed, format!("{reason:?}")));
        }
    }
    assert!(stopped.is_empty(), "{stopped:?}");
}

/// These were released with other values once, the gap to the bound of their multipliers held against
/// the terms of that bound (multipliers are 10¹⁴ times the costs here): 78909 at 194.4, where its
/// multipliers prove nothing above 0, and 80765 at −161.5.
#[test]
fn what_is_released_is_borne_out_by_its_multipliers() {
    for (seed, value) in [(78_909, 112.956_256), (80_765, -172.498_101), (220_741, -1.013_790)] {
        let shadow = of_seed(seed);
        let name = format!("seed {seed}");
        let found = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
        assert!(found.agrees(Verdict::Optimal(value), 1e-6), "{name}: {found:?}");
    }
}

/// A row of these was let off by what the tolerance of a column times its coefficient makes: by 9·10⁻⁶
/// and 4·10⁻⁸ of its terms.
#[test]
fn no_row_is_let_off() {
    for seed in [87_063, 83_837] {
        let shadow = of_seed(seed);
        let mut simplex = shadow.simplex();
        let Outcome::Optimal(solution) = simplex.solve(Limits::default()) else {
            panic!("{:?}", simplex.outcome())
        };
        for (row, activity) in shadow.rows.iter().zip(&solution.activity) {
            let terms = row.0.iter().map(|&(j, value)| (value * solution.x[j]).abs());
            let room = 2.1e-9 * (1.0 + terms.fold(0.0, |a, b| if b > a { b } else { a }));
            assert!(*activity >= row.1 - room && *activity <= row.2 + room, "seed {seed}");
        }
    }
}

/// The rows of this one contradict each other in the last digits, so its value rests on what is taken
/// for rounding. It was released 0.9 away from the bound of its multipliers.
#[test]
fn where_the_last_digits_decide_the_gap_is_small_all_the_same() {
    let shadow = of_seed(635_811);
    let mut simplex = shadow.simplex();
    let Outcome::Optimal(solution) = simplex.solve(Limits::default()) else {
        panic!("{:?}", simplex.outcome())
    };
    let bound = shadow.dual_bound(&solution.duals, true, 1e-8);
    assert!((solution.objective - bound).abs() < 1e-2, "{} and {bound}", solution.objective);
}
