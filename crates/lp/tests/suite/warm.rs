//! Warm solves against cold ones over chains of changes, and bits from a rebuilt solver.

use crate::families::{INFINITY, KINDS, generate};
use crate::instances::{facilities, multi_commodity, packing, position_labels, single_commodity};
use crate::random::Random;
use crate::shadow::{Shadow, Verdict, new_row};
use hullward_lp::{Basis, Col, Limits, Outcome, Problem, RowId, Simplex};

/// One change, made to the solver and to the shadow.
fn change(random: &mut Random, shadow: &mut Shadow, simplex: &mut Simplex) {
    let column = random.integer(0, shadow.cost.len() as i64 - 1) as usize;
    match random.integer(0, 5) {
        0 | 1 => {
            let at = random.whole(-2, 4);
            let (lower, upper) = if random.one_in(2) {
                (at, at)
            } else {
                (at - random.whole(0, 3), at + random.whole(0, 3))
            };
            set_bounds(shadow, simplex, column, (lower, upper));
        }
        2 => {
            let bounds = if random.one_in(3) { (-INFINITY, INFINITY) } else { (0.0, INFINITY) };
            set_bounds(shadow, simplex, column, bounds);
        }
        3 => {
            let places: Vec<usize> = (0..shadow.cost.len()).filter(|_| random.one_in(3)).collect();
            let entries = places.into_iter().map(|j| (j, random.whole(-5, 5))).collect();
            let side = random.whole(-5, 15);
            shadow.row(entries, if random.one_in(2) { -INFINITY } else { side - 20.0 }, side);
            let first = simplex.row_count();
            let added = simplex.add_rows(&[new_row(&shadow.rows[first as usize])]).unwrap();
            assert_eq!(added, first..first + 1);
        }
        4 => {
            shadow.cost[column] = random.whole(-9, 9);
            simplex.set_cost(Col(column as u32), shadow.cost[column]);
        }
        _ => delete_loose_rows(random, shadow, simplex),
    }
}

fn set_bounds(shadow: &mut Shadow, simplex: &mut Simplex, column: usize, bounds: (f64, f64)) {
    (shadow.lower[column], shadow.upper[column]) = bounds;
    simplex.set_bounds(Col(column as u32), bounds.0, bounds.1);
    assert_eq!(simplex.bounds(Col(column as u32)), bounds);
}

fn delete_loose_rows(random: &mut Random, shadow: &mut Shadow, simplex: &mut Simplex) {
    let basis = simplex.basis();
    let loose: Vec<u32> = (0..simplex.row_count())
        .filter(|&row| basis.is_basic_row(row) && random.one_in(2))
        .collect();
    let ids: Vec<RowId> = loose.iter().map(|&row| RowId(row)).collect();
    simplex.delete_rows(&ids).unwrap();
    let mut at = 0;
    shadow.rows.retain(|_| {
        at += 1;
        !loose.contains(&(at - 1))
    });
    assert_eq!(simplex.row_count() as usize, shadow.rows.len());
}

/// A solver made afresh from the shadow with this basis gives the same bits without a pivot.
fn check_bits(shadow: &Shadow, basis: &Basis, outcome: &Outcome, name: &str) {
    let mut rebuilt = shadow.simplex();
    rebuilt.load_basis(basis);
    assert_eq!(rebuilt.solve(Limits::default()), outcome, "{name}: other bits");
    assert_eq!(rebuilt.stats().iterations, 0, "{name}: pivots");
    assert_eq!(&rebuilt.basis(), basis, "{name}: other basis");
}

#[test]
fn warm_and_cold_agree_over_chains_of_changes() {
    for kind in KINDS {
        for seed in 0..25 {
            let mut random = Random::new(500 + seed);
            let mut shadow = generate(kind, 5000 + seed);
            let mut simplex = shadow.simplex();
            for edit in 0..25 {
                let name = format!("{kind} {seed}, change {edit}");
                let warm = shadow.verdict(simplex.solve(Limits::default()), &name);
                let cold = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
                assert!(warm.agrees(cold, 1e-8), "{name}: warm {warm:?}, cold {cold:?}");
                let outcome = simplex.outcome().unwrap();
                if matches!(outcome, Outcome::Optimal(_)) {
                    check_bits(&shadow, &simplex.basis(), outcome, &name);
                }
                change(&mut random, &mut shadow, &mut simplex);
            }
        }
    }
}

/// Columns fixed at 0 or 1 one after the other, as a search does, until nothing is feasible; then
/// all are freed.
fn dive(shadow: &mut Shadow, name: &str) {
    let mut random = Random::new(17);
    let free = (shadow.lower.clone(), shadow.upper.clone());
    let mut simplex = shadow.simplex();
    for step in 0..30 {
        let name = format!("{name}, step {step}");
        let warm = shadow.verdict(simplex.solve(Limits::default()), &name);
        let cold = shadow.verdict(shadow.simplex().solve(Limits::default()), &name);
        assert!(warm.agrees(cold, 1e-9), "{name}: warm {warm:?}, cold {cold:?}");
        if warm == Verdict::Infeasible {
            (shadow.lower, shadow.upper) = free.clone();
            for (j, (&lower, &upper)) in (0u32..).zip(free.0.iter().zip(&free.1)) {
                simplex.set_bounds(Col(j), lower, upper);
            }
        } else {
            check_bits(shadow, &simplex.basis(), simplex.outcome().unwrap(), &name);
            let column = random.integer(0, shadow.cost.len() as i64 / 2) as usize;
            let at = if random.one_in(3) { 1.0 } else { 0.0 };
            set_bounds(shadow, &mut simplex, column, (at, at));
        }
    }
}

#[test]
fn dives_into_known_formulations() {
    dive(&mut position_labels(9, 3), "position labels");
    dive(&mut single_commodity(8, 3), "one commodity");
    dive(&mut multi_commodity(6, 3), "a commodity a stop");
    dive(&mut facilities(5, 9, true, 3), "facilities, strong");
    dive(&mut facilities(5, 9, false, 3), "facilities, weak");
    dive(&mut packing(9, 5, 3), "packing");
}

#[test]
fn a_basis_for_fewer_rows_is_completed() {
    let shadow = generate("box", 3);
    let mut short = shadow.clone();
    let last = short.rows.pop().unwrap();
    let mut simplex = short.simplex();
    simplex.solve(Limits::default());
    let mut long = shadow.simplex();
    let repair = long.load_basis(&simplex.basis());
    assert_eq!((repair.new_rows, repair.dropped, repair.inserted), (1, 0, 0));
    simplex.add_rows(&[new_row(&last)]).unwrap();
    assert_eq!(simplex.basis(), long.basis());
    let outcome = long.solve(Limits::default()).clone();
    assert!(
        shadow
            .verdict(&outcome, "long")
            .agrees(shadow.verdict(simplex.solve(Limits::default()), "appended"), 1e-9)
    );
}

#[test]
fn a_basis_with_dependent_columns_is_mended() {
    let mut shadow = Shadow::default();
    let columns: Vec<usize> = (0..3).map(|_| shadow.column(1.0, 0.0, 5.0)).collect();
    shadow.row(columns.iter().map(|&j| (j, 1.0)).collect(), 2.0, INFINITY);
    shadow.row(vec![(0, 1.0), (1, -1.0)], 0.0, 0.0);
    let mut simplex = shadow.simplex();
    simplex.solve(Limits::default());
    let basis = simplex.basis();
    let mut other = Problem::new();
    for _ in 0..3 {
        other.add_column(1.0, 0.0, 5.0).unwrap();
    }
    let same: Vec<(Col, f64)> = (0..3).map(|j| (Col(j), 1.0)).collect();
    other.add_row(&same, 2.0, INFINITY).unwrap();
    other.add_row(&same, 0.0, 9.0).unwrap();
    let mut mended = Simplex::new(other);
    let repair = mended.load_basis(&basis);
    assert_eq!(repair.dropped, repair.inserted);
    let Outcome::Optimal(solution) = mended.solve(Limits::default()) else {
        panic!("{:?}", mended.outcome())
    };
    assert_eq!(solution.objective, 2.0);
}

#[test]
fn an_active_row_cannot_be_deleted() {
    let mut shadow = Shadow::default();
    let x = shadow.column(1.0, 0.0, INFINITY);
    shadow.row(vec![(x, 1.0)], 2.0, INFINITY);
    let mut simplex = shadow.simplex();
    simplex.solve(Limits::default());
    assert!(simplex.delete_rows(&[RowId(0)]).is_err());
    assert!(simplex.delete_rows(&[RowId(4)]).is_err());
    assert_eq!(simplex.row_count(), 1);
}

/// After `load_basis` the path depends on the basis alone, not on what the solver did before.
#[test]
fn a_loaded_basis_forgets_the_past() {
    for seed in 0..20 {
        let shadow = generate("box", 700 + seed);
        let start = shadow.simplex().basis();
        let mut used = shadow.simplex();
        used.solve(Limits::default());
        used.load_basis(&start);
        let before = used.stats();
        let outcome = used.solve(Limits::default()).clone();
        let mut fresh = shadow.simplex();
        fresh.load_basis(&start);
        let made = fresh.stats();
        assert_eq!(fresh.solve(Limits::default()), &outcome);
        assert_eq!(
            fresh.stats().iterations - made.iterations,
            used.stats().iterations - before.iterations
        );
        assert_eq!(fresh.basis(), used.basis());
    }
}

/// The basis that is current is loaded without making its factors again; they count as made, and all
/// that follows is as after any other loading.
#[test]
fn loading_the_basis_that_is_current_is_like_any_loading() {
    for lp in [single_commodity(7, 3), facilities(6, 9, false, 2), packing(9, 5, 4)] {
        let mut near = Simplex::new(lp.problem());
        let slack = near.basis();
        near.solve(Limits::default());
        let basis = near.basis();
        let mut far = near.clone();
        far.load_basis(&slack);
        let (mut counts, mut ends) = (Vec::new(), Vec::new());
        for simplex in [&mut near, &mut far] {
            let before = simplex.stats();
            simplex.load_basis(&basis);
            simplex.set_bounds(Col(1), 0.0, 0.0);
            ends.push(simplex.solve(Limits::default()).clone());
            let after = simplex.stats();
            counts.push((after.ticks - before.ticks, after.refactors - before.refactors));
        }
        assert_eq!(ends[0], ends[1]);
        assert_eq!(counts[0], counts[1]);
    }
}

/// The outcome of a child of a basis, one column fixed at 0, with the work that it took.
fn child(simplex: &mut Simplex, basis: &Basis, column: Col) -> (Outcome, u64, u64, u32) {
    let before = simplex.stats();
    let bounds = simplex.bounds(column);
    simplex.load_basis(basis);
    simplex.set_bounds(column, 0.0, 0.0);
    let outcome = simplex.solve(Limits::default()).clone();
    simplex.set_bounds(column, bounds.0, bounds.1);
    let after = simplex.stats();
    let made = after.refactors - before.refactors;
    (outcome, after.iterations - before.iterations, after.ticks - before.ticks, made)
}

/// Bases are visited as a search visits them, some again soon and some late, and a row comes in
/// between; all that follows is as in a solver that was never there.
#[test]
fn a_basis_met_again_is_like_one_never_seen() {
    for mut lp in [single_commodity(6, 3), facilities(6, 9, false, 2), packing(9, 5, 4)] {
        let mut used = lp.simplex();
        used.solve(Limits::default());
        let mut bases = vec![used.basis()];
        let mut random = Random::new(11);
        for visit in 0..80 {
            let last = bases.len() as i64 - 1;
            let at = if visit % 3 == 0 {
                random.integer(0, last)
            } else {
                random.integer(last / 2, last)
            };
            let column = Col(random.integer(0, lp.cost.len() as i64 - 1) as u32);
            let mut fresh = lp.simplex();
            let ends =
                [&mut used, &mut fresh].map(|simplex| child(simplex, &bases[at as usize], column));
            assert_eq!(ends[0], ends[1], "visit {visit}");
            bases.push(used.basis());
            if visit == 40 {
                lp.row(vec![(0, 1.0), (3, 1.0)], -INFINITY, 1.0);
                used.add_rows(&[new_row(&lp.rows[lp.rows.len() - 1])]).unwrap();
            }
        }
    }
}
