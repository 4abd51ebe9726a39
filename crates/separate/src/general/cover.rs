//! Lifted cover cuts of a row `Σ a x ≤ b` over binaries.
//!
//! Columns with a negative coefficient are complemented. A cover C (Σ_C a > b) is bought greedily,
//! cheapest violation for each unit of weight first, and made minimal; `Σ_C x ≤ |C| − 1` is then
//! lifted in sequence over the other columns: the coefficient of each is the most that keeps the
//! row valid, a knapsack over the value of the row so far (Zemel 1989).

use model::{ColumnId, Number, Row, nearest_f64};

use super::aggregate::Frame;
use super::derivation::{Derivation, Used};
use super::mir::{LEAST, efficacy};
use super::{Class, GeneralCut};

/// The most columns of a row that is looked at.
const MOST_COLUMNS: usize = 500;

/// A column of the knapsack, perhaps complemented.
#[derive(Debug, Clone)]
struct Item {
    column: ColumnId,
    weight: Number,
    complemented: bool,
    value: f64,
}

/// The lifted cover that `x` violates, of either side of a row; `None` where the row is no knapsack
/// of binaries or its cover is not violated.
#[must_use]
pub fn cover((number, row): (usize, &Row), frame: &Frame, x: &[f64]) -> Option<GeneralCut> {
    let of = |upper| Derivation::Knapsack(Used { row: number, upper });
    let upper = row.upper.as_ref();
    let upper = upper.and_then(|side| one_side((&row.entries, side), frame, x, of(true)));
    let lower = row.lower.as_ref().and_then(|side| {
        let turned: Vec<_> = row.entries.iter().map(|(c, a)| (*c, -a.clone())).collect();
        one_side((&turned, &-side.clone()), frame, x, of(false))
    });
    match (upper, lower) {
        (Some(a), Some(b)) => Some(if a.efficacy < b.efficacy { b } else { a }),
        (a, b) => a.or(b),
    }
}

fn one_side(
    (entries, side): (&[(ColumnId, Number)], &Number),
    frame: &Frame,
    x: &[f64],
    derivation: Derivation,
) -> Option<GeneralCut> {
    if entries.len() > MOST_COLUMNS {
        return None;
    }
    let mut capacity = side.clone();
    let mut items = Vec::new();
    for (column, a) in entries {
        let binary = (Some(Number::ZERO), Some(Number::ONE));
        if !frame.integer[column.index()] || frame.bounds[column.index()] != binary {
            return None;
        }
        let value = x[column.index()];
        let complemented = *a < Number::ZERO;
        let (weight, value) =
            if complemented { (-a.clone(), 1.0 - value) } else { (a.clone(), value) };
        if complemented {
            capacity += &weight;
        }
        items.push(Item { column: *column, weight, complemented, value });
    }
    if capacity < Number::ZERO {
        return None;
    }
    let inside = minimal_cover(&items, &capacity)?;
    let coefficients = lifted(&items, &inside, &capacity);
    let right = inside.iter().filter(|inside| **inside).count() - 1;
    let row = written(&items, &coefficients, right);
    let efficacy = efficacy(&row, x);
    (efficacy > LEAST).then_some(GeneralCut { class: Class::Cover, row, efficacy, derivation })
}

/// A cover of which no element can be left out, cheap in `1 − value` for its weight.
fn minimal_cover(items: &[Item], capacity: &Number) -> Option<Vec<bool>> {
    let ratio = |k: usize| (1.0 - items[k].value) / nearest_f64(&items[k].weight);
    let mut order: Vec<usize> = (0..items.len()).collect();
    order.sort_by(|&a, &b| ratio(a).total_cmp(&ratio(b)).then(a.cmp(&b)));
    let mut inside = vec![false; items.len()];
    let mut sum = Number::ZERO;
    for &k in &order {
        if sum > *capacity {
            break;
        }
        sum += &items[k].weight;
        inside[k] = true;
    }
    if sum <= *capacity {
        return None;
    }
    // what costs most goes first
    for &k in order.iter().rev().filter(|&&k| inside[k]).collect::<Vec<_>>() {
        if &sum - &items[k].weight > *capacity {
            sum -= &items[k].weight;
            inside[k] = false;
        }
    }
    Some(inside)
}

/// The coefficients of the lifted cover. `lightest[v]` is the least weight at which the columns
/// lifted so far reach the value v.
fn lifted(items: &[Item], inside: &[bool], capacity: &Number) -> Vec<usize> {
    let right = inside.iter().filter(|inside| **inside).count() - 1;
    let mut weights: Vec<&Number> =
        items.iter().zip(inside).filter(|(_, i)| **i).map(|(item, _)| &item.weight).collect();
    weights.sort();
    let mut lightest: Vec<Option<Number>> = vec![Some(Number::ZERO)];
    for weight in weights {
        let last = lightest.last().cloned().flatten().unwrap_or_default();
        lightest.push(Some(last + weight));
    }
    let mut coefficients: Vec<usize> = inside.iter().map(|&i| usize::from(i)).collect();
    let mut order: Vec<usize> = (0..items.len()).filter(|&k| !inside[k]).collect();
    order.sort_by(|&a, &b| items[b].value.total_cmp(&items[a].value).then(a.cmp(&b)));
    for k in order {
        let room = capacity - &items[k].weight;
        let fits = |weight: &Option<Number>| weight.as_ref().is_some_and(|weight| *weight <= room);
        let reached = lightest.iter().rposition(fits);
        // a column that does not fit by itself may have any coefficient; this one is enough
        let coefficient = reached.map_or(right + 1, |reached| right.saturating_sub(reached));
        coefficients[k] = coefficient;
        if coefficient > 0 {
            extend(&mut lightest, coefficient, &items[k].weight);
        }
    }
    coefficients
}

/// Takes one more column into the least weights.
fn extend(lightest: &mut Vec<Option<Number>>, coefficient: usize, weight: &Number) {
    let before = lightest.len();
    lightest.resize(before + coefficient, None);
    for value in (coefficient..lightest.len()).rev() {
        let Some(with) = lightest[value - coefficient].clone().map(|rest| rest + weight) else {
            continue;
        };
        if lightest[value].as_ref().is_none_or(|own| with < *own) {
            lightest[value] = Some(with);
        }
    }
}

/// The row in the columns as they are: x̄ = 1 − x.
fn written(items: &[Item], coefficients: &[usize], right: usize) -> Row {
    let mut side = Number::from(right);
    let mut entries = Vec::new();
    for (item, &coefficient) in items.iter().zip(coefficients).filter(|(_, a)| **a > 0) {
        let a = Number::from(coefficient);
        if item.complemented {
            side -= &a;
            entries.push((item.column, -a));
        } else {
            entries.push((item.column, a));
        }
    }
    entries.sort_by_key(|(column, _)| *column);
    Row { entries, lower: None, upper: Some(side) }
}
