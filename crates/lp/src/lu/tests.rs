//! Solves and updates against the matrix itself, on random bases.

use super::*;
use crate::tolerances::MARKOWITZ;

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

fn gather(columns: &Columns) -> BasisColumns {
    let mut start = vec![0];
    let mut entry = Vec::new();
    for column in columns {
        entry.extend_from_slice(column);
        start.push(entry.len());
    }
    BasisColumns::new(start, entry)
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
        let (mut factor, replaced, _) = Factor::factorise(&gather(&columns), MARKOWITZ);
        for r in replaced {
            columns[r.position as usize] = vec![(r.row, -1.0)];
        }
        let worst = residual(&mut factor, &columns, &mut random);
        assert!(worst < 1e-8, "seed {seed}: residual {worst}");
    }
}

#[test]
fn updates_agree_with_fresh_factors() {
    for seed in 1000..1060 {
        let mut random = Random(seed);
        let size = 5 + random.below(40) as usize;
        let mut columns = random_columns(&mut random, size, 3);
        let (mut factor, replaced, _) = Factor::factorise(&gather(&columns), MARKOWITZ);
        for r in replaced {
            columns[r.position as usize] = vec![(r.row, -1.0)];
        }
        for _ in 0..20 {
            let fresh = random_columns(&mut random, size, 3).swap_remove(0);
            let mut alpha = SparseVector::default();
            alpha.reset(size);
            for &(row, value) in &fresh {
                alpha.set(row, value);
            }
            factor.ftran(&mut alpha);
            let best = alpha.iter().fold((0, 0.0), |best: (u32, f64), (i, value)| {
                if value.abs() > best.1 { (i, value.abs()) } else { best }
            });
            if best.1 > 0.1 {
                factor.update(best.0, &alpha);
                columns[best.0 as usize] = fresh;
            }
        }
        let worst = residual(&mut factor, &columns, &mut random);
        assert!(worst < 1e-7, "seed {seed}: residual {worst}");
    }
}

#[test]
fn dependent_columns_are_replaced_by_logicals() {
    let columns: Columns =
        vec![vec![(0, 1.0), (1, 2.0)], vec![(0, 2.0), (1, 4.0)], vec![(1, 1.0), (2, 1.0)], vec![]];
    let (mut factor, replaced, _) = Factor::factorise(&gather(&columns), MARKOWITZ);
    assert_eq!(replaced.len(), 2);
    let mut mended = columns;
    for r in replaced {
        mended[r.position as usize] = vec![(r.row, -1.0)];
    }
    assert!(residual(&mut factor, &mended, &mut Random(5)) < 1e-12);
}

/// Every place listed: the solve takes all steps. Few listed: it searches first. Both give the same
/// bits.
#[test]
fn sparse_and_full_solves_give_the_same_bits() {
    let mut random = Random(77);
    let size = 400;
    let columns = random_columns(&mut random, size, 1);
    let (factor, _, _) = Factor::factorise(&gather(&columns), MARKOWITZ);
    let mut reach = Reach::new(size);
    for step in 0..size as u32 {
        let mut sparse = SparseVector::default();
        sparse.reset(size);
        sparse.set(step, 1.0);
        let mut full = SparseVector::default();
        full.reset(size);
        (0..size as u32).for_each(|k| full.set(k, if k == step { 1.0 } else { 0.0 }));
        for x in [&mut sparse, &mut full] {
            factor.lower_columns.solve(None, x, Direction::Forward, &mut reach);
            factor.upper_columns.solve(Some(&factor.diagonal), x, Direction::Backward, &mut reach);
        }
        assert!(
            (0..size as u32).all(|k| sparse.get(k).to_bits() == full.get(k).to_bits()),
            "step {step}"
        );
        assert!(sparse.count() <= full.count());
    }
}
