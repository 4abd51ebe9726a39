//! The same linear program in other words: other units, another order, everything negated, rows and
//! columns doubled. The exact optimum is the same fraction, and what has no optimum has none.
//! Random problems of ten kinds, and the golden models; a check of the kernel against itself.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]
#![allow(clippy::print_stderr, reason = "a check says what it has seen")]

use std::rc::Rc;

use hullward_tests_reference::parts::Parts;
use hullward_tests_reference::random_lp::{KINDS, random_lp};
use hullward_tests_reference::round_trip::root;
use hullward_tests_reference::{agree, golden};
use model::{Model, Number, nearest_f64};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use tree::{RootResult, Status};

/// The ways to say it, and whether the optimum changes its sign.
fn ways(parts: &Parts, seed: u64) -> [(&'static str, Parts, bool); 5] {
    let mut random = Pcg32::seed_from_u64(seed);
    let mut factors = |count: usize, sizes: &[(i64, i64)]| -> Vec<Number> {
        let one = |random: &mut Pcg32| sizes[random.next_u32() as usize % sizes.len()];
        let pairs = (0..count).map(|_| one(&mut random));
        pairs.map(|(a, b)| Number::from(a) / Number::from(b)).collect()
    };
    let near = [(1, 2), (2, 1), (3, 1), (1, 7), (1, 1)];
    let wide = [(1, 1000), (1000, 1), (1, 10), (33, 1), (1, 1)];
    let (columns, rows) = (parts.columns.len(), parts.rows.len());
    let scaled = parts.scaled(&factors(columns, &near), &factors(rows, &near));
    let widely = parts.scaled(&factors(columns, &wide), &factors(rows, &wide));
    let mut order: Vec<usize> = (0..columns).collect();
    for last in (1..columns).rev() {
        order.swap(last, random.next_u32() as usize % (last + 1));
    }
    [
        ("scaled", scaled, false),
        ("scaled widely", widely, false),
        ("permuted", parts.permuted(&order), false),
        ("negated", parts.negated(), true),
        ("duplicated", parts.duplicated(), false),
    ]
}

/// Whether a root is proved for what it is: its optimum, or that there is no point.
fn is_proved(root: &RootResult, name: &str) -> bool {
    match root.status {
        Status::Optimal => root.exact,
        Status::Infeasible => root.checked,
        Status::Unbounded => true,
        Status::Running | Status::Limit => panic!("{name}: {:?}", root.stopped),
    }
}

/// Says a problem in other words. Gives how it ends and the ways in which the optimum is only
/// proved to within 1e-9: where other units are no binary fractions, a basis of the kernel may be
/// singular in exact arithmetic.
fn check(model: &Model, name: &str, seed: u64) -> (Status, Vec<String>) {
    let parts = Parts::of(model);
    let first = root(&Rc::new(parts.build()));
    assert!(is_proved(&first, name), "{name}");
    let mut within = Vec::new();
    for (way, other, turned) in ways(&parts, seed) {
        let name = format!("{name}, {way}");
        let found = root(&Rc::new(other.build()));
        assert_eq!(found.status, first.status, "{name}");
        let exact = is_proved(&found, &name);
        let value = found.checked_bound.map(|value| if turned { -value } else { value });
        if exact {
            assert_eq!(value, first.checked_bound, "{name}");
            continue;
        }
        let near = value
            .zip(first.checked_bound.clone())
            .is_some_and(|(value, first)| agree(nearest_f64(&value), nearest_f64(&first), 1e-9));
        assert!(near, "{name}");
        within.push(name);
    }
    (first.status, within)
}

#[test]
fn random_problems_in_other_words_have_the_same_exact_optimum() {
    let mut seen = [0, 0, 0];
    for (kind, title) in KINDS.iter().enumerate() {
        for seed in 0..60 {
            let name = format!("{title}, seed {seed}");
            match check(&random_lp(kind, 3_000_000 + seed), &name, seed) {
                (Status::Optimal, none) if none.is_empty() => seen[0] += 1,
                (Status::Infeasible, _) => seen[1] += 1,
                (Status::Unbounded, _) => seen[2] += 1,
                (_, within) => panic!("not proved: {within:?}"),
            }
        }
    }
    eprintln!("{seen:?} optimal, infeasible, unbounded");
    assert!(seen.iter().all(|&count| count > 20), "{seen:?}");
}

#[test]
fn golden_models_in_other_words_have_the_same_exact_optimum() {
    let mut inexact = Vec::new();
    for (seed, golden) in (0..).zip(golden::all()) {
        let (status, within) = check(&golden.model, &golden.name, seed);
        assert_eq!(status, Status::Optimal, "{}", golden.name);
        inexact.extend(within);
    }
    eprintln!("to within 1e-9: {inexact:?}");
    assert!(inexact.len() <= 5, "{inexact:?}");
}
