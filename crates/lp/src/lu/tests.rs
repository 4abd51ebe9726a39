//! Solves and updates against the matrix itself, on random bases.

use super::*;

/// A small generator of pseudo-random numbers (splitmix64).
struct Random(u64);

impl Random {
    fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    fn below(&mut self, bound: u64) -> u64 {
        self.next() % bound
    }
}

type Columns = Vec<Vec<(u32, f64)>>;

fn gather(columns: &Columns, space: &mut Workspace) {
    space.columns.clear();
    for column in columns {
        column.iter().for_each(|&(row, value)| space.columns.push(row, value));
        space.columns.close_column();
    }
}

fn factorise(columns: &Columns) -> (Factor, Vec<Replaced>) {
    let (mut factor, mut space) = (Factor::default(), Workspace::default());
    gather(columns, &mut space);
    let (replaced, _) = factor.factorise(&mut space, 0.1, 1e-12);
    (factor, replaced)
}

/// A random matrix: a permuted diagonal (so that it is mostly regular) and further entries.
fn random_columns(random: &mut Random, size: usize, extra: u64) -> Columns {
    let shift = random.below(size as u64) as usize;
    (0..size)
        .map(|position| {
            let mut column =
                vec![(((position + shift) % size) as u32, 1.0 + random.below(5) as f64)];
            for _ in 0..random.below(extra + 1) {
                let row = random.below(size as u64) as u32;
                if column.iter().all(|entry| entry.0 != row) {
                    column.push((row, random.below(9) as f64 - 4.0));
                }
            }
            column.retain(|entry| entry.1 != 0.0);
            column
        })
        .collect()
}

fn vector(values: &[f64]) -> SparseVector {
    let mut v = SparseVector::default();
    v.reset(values.len());
    for (i, &value) in (0u32..).zip(values) {
        if value != 0.0 {
            v.set(i, value);
        }
    }
    v
}

/// The largest residual of B x = b and Bᵀy = c for random sparse right sides.
fn residual(factor: &mut Factor, columns: &Columns, random: &mut Random) -> f64 {
    let size = columns.len();
    let side: Vec<f64> = (0..size)
        .map(|_| if random.below(3) == 0 { random.below(9) as f64 - 4.0 } else { 0.0 })
        .collect();
    let mut x = vector(&side);
    factor.ftran(&mut x);
    let mut left: Vec<f64> = side.iter().map(|value| -value).collect();
    for (position, column) in (0u32..).zip(columns) {
        for &(row, value) in column {
            left[row as usize] += value * x.get(position);
        }
    }
    let mut y = vector(&side);
    factor.btran(&mut y);
    let mut worst = left
        .iter()
        .fold(0.0, |worst: f64, value| if value.abs() > worst { value.abs() } else { worst });
    for (column, wanted) in columns.iter().zip(&side) {
        let product: f64 = column.iter().map(|&(row, value)| value * y.get(row)).sum();
        let scale =
            1.0 + column.iter().map(|&(row, value)| (value * y.get(row)).abs()).sum::<f64>();
        let error = (product - wanted).abs() / scale;
        worst = if error > worst { error } else { worst };
    }
    worst
}

#[test]
fn solves_with_random_bases() {
    for seed in 0..300 {
        let mut random = Random(seed);
        let size = 1 + random.below(60) as usize;
        let extra = random.below(5);
        let mut columns = random_columns(&mut random, size, extra);
        let (mut factor, replaced) = factorise(&columns);
        for r in replaced {
            columns[r.position as usize] = vec![(r.row, -1.0)];
        }
        let worst = residual(&mut factor, &columns, &mut random);
        assert!(worst < 1e-8, "seed {seed}: residual {worst}");
    }
}

/// Factors of a random basis, and its columns as they are after dependent ones were replaced.
fn factorised(random: &mut Random, size: usize, kind: u64) -> (Factor, Columns) {
    let mut columns = basis_of_kind(random, size, kind);
    let (factor, replaced) = factorise(&columns);
    for r in replaced {
        columns[r.position as usize] = vec![(r.row, -1.0)];
    }
    (factor, columns)
}

/// Random, triangular or nearly singular: in the last kind one column is another plus a little.
fn basis_of_kind(random: &mut Random, size: usize, kind: u64) -> Columns {
    let mut columns = random_columns(random, size, 3);
    if kind == 1 {
        for (position, column) in (0u32..).zip(&mut columns) {
            column.retain(|entry| entry.0 < position);
            column.push((position, 1.0 + random.below(5) as f64));
        }
    } else if kind == 2 {
        columns[1] = columns[0].clone();
        columns[1][0].1 += 1e-4;
    }
    columns
}

/// Exchanges random columns where the pivot is not small; returns how many.
fn exchange_some(factor: &mut Factor, columns: &mut Columns, random: &mut Random) -> usize {
    let size = columns.len();
    let before = factor.updates();
    for _ in 0..25 {
        let fresh = random_columns(random, size, 3).swap_remove(0);
        let mut alpha = SparseVector::default();
        alpha.reset(size);
        fresh.iter().for_each(|&(row, value)| alpha.set(row, value));
        factor.ftran_entering(&mut alpha);
        let large: Vec<(u32, f64)> =
            alpha.iter().filter(|(_, value)| value.abs() > 0.5 && value.abs() < 1e3).collect();
        if !large.is_empty() {
            let (position, pivot) = large[random.below(large.len() as u64) as usize];
            factor.update(position, pivot);
            columns[position as usize] = fresh;
        }
    }
    factor.updates() - before
}

/// The largest difference of two vectors, relative to 1 + the largest value.
fn difference(a: &SparseVector, b: &SparseVector) -> f64 {
    let size = 1.0 + a.largest();
    crate::sparse::largest((0..a.len() as u32).map(|k| (a.get(k) - b.get(k)) / size))
}

#[test]
fn solves_after_updates_are_those_of_fresh_factors() {
    let mut updates = 0;
    for seed in 1000..1240 {
        let mut random = Random(seed);
        let size = 5 + random.below(40) as usize;
        let (mut factor, mut columns) = factorised(&mut random, size, seed % 3);
        updates += exchange_some(&mut factor, &mut columns, &mut random);
        let (mut fresh, replaced) = factorise(&columns);
        assert!(replaced.is_empty() && !factor.is_doubtful, "seed {seed}");
        for step in 0..size as u32 {
            let unit = |k: usize| f64::from(u8::from(k == step as usize));
            let side = vector(&(0..size).map(unit).collect::<Vec<f64>>());
            let (mut x, mut x_fresh) = (side.clone(), side.clone());
            factor.ftran(&mut x);
            fresh.ftran(&mut x_fresh);
            let (mut y, mut y_fresh) = (side.clone(), side);
            factor.btran(&mut y);
            fresh.btran(&mut y_fresh);
            let worst = difference(&x, &x_fresh) + difference(&y, &y_fresh);
            // The columns of the last kind differ by 1e-4: as many digits are lost.
            let room = if seed % 3 == 2 { 1e-8 } else { 1e-10 };
            assert!(worst < room, "seed {seed}, step {step}: {worst}");
        }
    }
    assert!(updates > 3000, "{updates}");
}

/// A column that makes the basis singular has no pivot: an update that is forced all the same does
/// not agree with its pivot, and the factors say so.
#[test]
fn an_update_that_does_not_fit_is_noticed() {
    let columns: Columns = vec![vec![(0, 1.0), (1, 2.0)], vec![(1, 1.0)], vec![(2, 1.0)]];
    let (mut factor, _) = factorise(&columns);
    let mut alpha = vector(&[1.0, 3.0, 1.0]);
    factor.ftran_entering(&mut alpha);
    assert!(!factor.is_worn());
    factor.update(1, alpha.get(1) + 1e-3);
    assert!(factor.is_worn());
}

#[test]
fn dependent_columns_are_replaced_by_logicals() {
    let columns: Columns =
        vec![vec![(0, 1.0), (1, 2.0)], vec![(0, 2.0), (1, 4.0)], vec![(1, 1.0), (2, 1.0)], vec![]];
    let (mut factor, replaced) = factorise(&columns);
    assert_eq!(replaced.len(), 2);
    let mut mended = columns;
    for r in replaced {
        mended[r.position as usize] = vec![(r.row, -1.0)];
    }
    assert!(residual(&mut factor, &mended, &mut Random(5)) < 1e-12);
}

/// All slots listed: the solve walks every slot. Few listed: it follows the queue. Both give the
/// same bits, after updates too.
#[test]
fn sparse_and_full_solves_give_the_same_bits() {
    let mut random = Random(77);
    let size = 400;
    let mut columns = random_columns(&mut random, size, 1);
    let (mut factor, _) = factorise(&columns);
    exchange_some(&mut factor, &mut columns, &mut random);
    let slots = factor.diagonal.len();
    for slot in 0..slots as u32 {
        let mut sparse = Work::default();
        sparse.reset(size + most_updates(size));
        let mut full = sparse.clone();
        sparse.set(slot, 1.0);
        (0..slots as u32).for_each(|k| full.set(k, f64::from(u8::from(k == slot))));
        for x in [&mut sparse, &mut full] {
            factor.upper_columns.solve(Some(&factor.diagonal), x, Direction::Backward);
            factor.upper_rows.solve(Some(&factor.diagonal), x, Direction::Forward);
        }
        assert!(
            (0..slots as u32).all(|k| sparse.get(k).to_bits() == full.get(k).to_bits()),
            "slot {slot}"
        );
        assert!(sparse.bits.iter().chain(&full.bits).all(|&word| word == 0));
    }
}

/// Room that other factorisations have left, larger and smaller ones and one of a singular basis,
/// changes no bit.
#[test]
fn a_used_workspace_gives_the_same_factors() {
    let mut random = Random(11);
    let (mut factor, mut space) = (Factor::default(), Workspace::default());
    for round in 0..40 {
        let size = 2 + random.below(30) as usize;
        let mut columns = random_columns(&mut random, size, 4);
        if round % 5 == 4 {
            columns[1] = columns[0].clone();
        }
        gather(&columns, &mut space);
        let (replaced, _) = factor.factorise(&mut space, 0.1, 1e-12);
        let (mut fresh, expected) = factorise(&columns);
        assert_eq!(replaced, expected);
        let values: Vec<f64> = (0..size).map(|i| 1.0 + i as f64).collect();
        let (mut used, mut new) = (vector(&values), vector(&values));
        factor.ftran(&mut used);
        fresh.ftran(&mut new);
        factor.btran(&mut used);
        fresh.btran(&mut new);
        for i in 0..size as u32 {
            assert_eq!(used.get(i).to_bits(), new.get(i).to_bits(), "round {round}");
        }
        factor.ftran_entering(&mut used);
        factor.update(0, 1.0);
    }
}
