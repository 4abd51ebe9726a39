//! The same problem in other words has the same value.

use crate::families::{KINDS, generate};
use crate::random::Random;
use crate::shadow::{Shadow, Verdict};
use hullward_lp::Limits;

fn verdict(shadow: &Shadow, name: &str) -> Verdict {
    shadow.verdict(shadow.simplex().solve(Limits::default()), name)
}

/// Rows and columns in another order.
fn shuffled(shadow: &Shadow, random: &mut Random) -> Shadow {
    let mut order: Vec<usize> = (0..shadow.cost.len()).collect();
    for k in (1..order.len()).rev() {
        order.swap(k, random.integer(0, k as i64) as usize);
    }
    let mut place = vec![0; order.len()];
    let mut other = Shadow::default();
    for (new, &old) in order.iter().enumerate() {
        place[old] = new;
        other.column(shadow.cost[old], shadow.lower[old], shadow.upper[old]);
    }
    for row in shadow.rows.iter().rev() {
        other.row(row.0.iter().map(|&(j, value)| (place[j], value)).collect(), row.1, row.2);
    }
    other
}

/// Rows and columns scaled by powers of two.
fn scaled(shadow: &Shadow, random: &mut Random, powers: [f64; 5]) -> Shadow {
    let mut other = shadow.clone();
    let factors: Vec<f64> =
        (0..shadow.cost.len()).map(|_| powers[random.integer(0, 4) as usize]).collect();
    for (j, factor) in factors.iter().enumerate() {
        other.cost[j] *= factor;
        other.lower[j] /= factor;
        other.upper[j] /= factor;
    }
    for row in &mut other.rows {
        let row_factor = powers[random.integer(0, 4) as usize];
        row.0.iter_mut().for_each(|(j, value)| *value *= factors[*j] * row_factor);
        row.1 *= row_factor;
        row.2 *= row_factor;
    }
    other
}

/// Each row as two single-sided ones.
fn split(shadow: &Shadow) -> Shadow {
    let mut other = shadow.clone();
    other.rows.clear();
    for row in &shadow.rows {
        other.row(row.0.clone(), row.1, f64::INFINITY);
        other.row(row.0.iter().map(|&(j, value)| (j, -value)).collect(), -row.2, f64::INFINITY);
    }
    other
}

/// Every column replaced by its negative.
fn mirrored(shadow: &Shadow) -> Shadow {
    let mut other = shadow.clone();
    for j in 0..shadow.cost.len() {
        other.cost[j] = -shadow.cost[j];
        other.lower[j] = -shadow.upper[j];
        other.upper[j] = -shadow.lower[j];
    }
    for row in &mut other.rows {
        row.0.iter_mut().for_each(|entry| entry.1 = -entry.1);
    }
    other
}

#[test]
fn other_words_same_value() {
    for kind in KINDS {
        for seed in 0..60 {
            let mut random = Random::new(seed);
            let shadow = generate(kind, 8000 + seed);
            let name = format!("{kind} {seed}");
            let original = verdict(&shadow, &name);
            let ways = [
                ("shuffled", shuffled(&shadow, &mut random)),
                ("scaled", scaled(&shadow, &mut random, [0.125, 0.5, 1.0, 4.0, 16.0])),
                (
                    "scaled widely",
                    scaled(&shadow, &mut random, [1.0 / 8192.0, 1.0 / 64.0, 1.0, 128.0, 4096.0]),
                ),
                ("split", split(&shadow)),
                ("mirrored", mirrored(&shadow)),
            ];
            for (way, other) in ways {
                let found = verdict(&other, &format!("{name} {way}"));
                assert!(
                    found.agrees(original, 1e-8),
                    "{name} {way}: {found:?}, should be {original:?}"
                );
            }
        }
    }
}
