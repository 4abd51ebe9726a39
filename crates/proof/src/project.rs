//! Multipliers whose open columns are closed together: y is moved so that the reduced costs of
//! all of them are 0, by solving their equations exactly over as many rows (the projection of Cook,
//! Koch, Steffy, Wolter 2013). Needed where open columns share rows, as free columns do, so that
//! mending one row opens the next column.

use std::collections::BTreeMap;

use dashu_int::IBig;
use model::Number;

use crate::basis::{Standing, Standings, System, reduced_costs};
use crate::kernel::{Objective, Open, Sides, Sum, sum};
use crate::lifting::{Elimination, Eliminator, Fractions, Lifting, field};
use crate::multipliers::{Multipliers, has_side};
use crate::rows::{Bounds, ExactRows};

/// Rounds: each closes the columns that the last one opened as well.
const ROUNDS: usize = 6;

/// Columns that are closed together at most, and rows that are looked at.
const MOST_COLUMNS: usize = 120;
const MOST_ROWS: usize = 600;

/// Digits of a solution at most.
const MOST_DIGITS: usize = 60;

/// The sum after a projection; `None` when some column stays open.
pub(crate) fn projected(
    rows: &ExactRows,
    objective: Objective,
    bounds: &[Bounds],
    (multipliers, open): (&Multipliers, &[Open]),
) -> Option<Number> {
    let reduced = reduced_costs(rows, objective, multipliers);
    let mut closed: Vec<usize> = open.iter().map(|open| open.column).collect();
    for _ in 0..ROUNDS {
        closed.sort_unstable();
        closed.dedup();
        if closed.is_empty() || closed.len() > MOST_COLUMNS {
            return None;
        }
        let chosen = independent_rows(rows, multipliers, &closed)?;
        let system = system(rows, &closed, &chosen)?;
        let right = closed.iter().map(|&column| reduced[column].clone()).collect();
        let moved = moved(rows, multipliers, &system, solved(&system, right)?);
        match sum(rows, objective, Sides { given: bounds, implied: None }, &moved) {
            Sum::Bound(value) => return Some(value),
            Sum::Open(next) => closed.extend(next.iter().map(|open| open.column)),
        }
    }
    None
}

/// As many rows as columns, over which the columns are independent modulo p: rows with two sides
/// before those with a multiplier, before the others; `None` where there are too few.
fn independent_rows(
    rows: &ExactRows,
    multipliers: &Multipliers,
    columns: &[usize],
) -> Option<Vec<u32>> {
    let places: BTreeMap<usize, usize> = columns.iter().copied().zip(0..).collect();
    let mut candidates: Vec<(u8, u32, Vec<u64>)> = Vec::new();
    for (row, scaled) in (0_u32..).zip(&rows.rows) {
        let (entries, coefficients) = rows.entries(row as usize);
        let mut over = vec![0; columns.len()];
        let mut any = false;
        for (k, &column) in entries.iter().enumerate() {
            if let Some(&place) = places.get(&(column as usize)) {
                over[place] = field::of_big(&coefficients.at(k));
                any = true;
            }
        }
        let rank = match (&scaled.lower, &scaled.upper) {
            (Some(_), Some(_)) => 0,
            _ if !multipliers.values[row as usize].is_zero() => 1,
            _ => 2,
        };
        if any {
            candidates.push((rank, row, over));
        }
        if candidates.len() > MOST_ROWS {
            return None;
        }
    }
    candidates.sort_by_key(|&(rank, row, _)| (rank, row));
    let mut basis: Vec<(usize, Vec<u64>)> = Vec::new();
    let mut chosen = Vec::new();
    for (_, row, mut over) in candidates {
        for (pivot, earlier) in &basis {
            let factor = over[*pivot];
            if factor != 0 {
                for (value, other) in over.iter_mut().zip(earlier) {
                    *value = field::less_product(*value, factor, *other);
                }
            }
        }
        let Some(pivot) = over.iter().position(|&value| value != 0) else { continue };
        let inverse = field::inverse(over[pivot]);
        over.iter_mut().for_each(|value| *value = field::product(*value, inverse));
        basis.push((pivot, over));
        chosen.push(row);
        if chosen.len() == columns.len() {
            chosen.sort_unstable();
            return Some(chosen);
        }
    }
    None
}

/// The chosen rows over the columns.
fn system(rows: &ExactRows, columns: &[usize], chosen: &[u32]) -> Option<System> {
    let mut basis = Standings {
        columns: vec![Standing::Lower; rows.column_count()],
        rows: vec![Standing::Basic; rows.row_count()],
    };
    columns.iter().for_each(|&column| basis.columns[column] = Standing::Basic);
    chosen.iter().for_each(|&row| basis.rows[row as usize] = Standing::Lower);
    System::new(rows, &basis)
}

fn solved(system: &System, right: Vec<IBig>) -> Option<Fractions> {
    let mut eliminator = Eliminator::new(&system.matrix);
    let factor = loop {
        match eliminator.step() {
            Elimination::Working => {}
            Elimination::Done => break eliminator.finish(),
            Elimination::Singular => return None,
        }
    };
    let mut lifting = Lifting::new(&system.matrix, true, right);
    (0..MOST_DIGITS).find_map(|_| lifting.step(&system.matrix, &factor))
}

/// The multipliers with the solution added, clipped.
fn moved(
    rows: &ExactRows,
    multipliers: &Multipliers,
    system: &System,
    found: Fractions,
) -> Multipliers {
    let change = system.multipliers(rows, found);
    let times = IBig::from(change.denominator.clone());
    let pairs = multipliers.values.iter().zip(&change.values).enumerate();
    let value = |(row, (value, change)): (usize, (&IBig, &IBig))| {
        let value = value * &times + change;
        if has_side(rows, row, value.cmp(&IBig::ZERO)) { value } else { IBig::ZERO }
    };
    Multipliers {
        values: pairs.map(value).collect(),
        denominator: &multipliers.denominator * change.denominator,
    }
}
