//! An objective in the shared variables under which one relaxation has the better bound: so the other
//! does not lie within it. Tried are the objective of the instance and some random ones; what is
//! believed is the exact optimum of the weaker one against a proved bound of the stronger one.

use std::rc::Rc;

use model::{ColumnId, Model, Number, Sense, nearest_f64};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use record::study::Certificate;

use super::certificate::witness_of;
use crate::desk::Desk;
use crate::shared::{Shared, is_boxed};
use crate::subject::Subject;

/// Random objectives that are tried.
const RANDOM: u64 = 8;
/// Costs are whole numbers up to this, of either sign.
const LARGEST: i64 = 20;

type Costs = Vec<((ColumnId, ColumnId), Number)>;

/// An objective under which the bound of `outer` is better than that of `inner`, if one is found.
pub(super) async fn apart(
    desk: &Desk,
    seed: u64,
    rivals: [&Subject; 2],
    shared: &Shared,
) -> Option<Certificate> {
    let [inner, outer] = rivals;
    // A column that only one of them has would need to be 0 in the other.
    if shared.only.iter().any(|only| !only.is_empty()) {
        return None;
    }
    for number in 0..=RANDOM {
        let (costs, name) = match number {
            0 => (own(&inner.model, shared), "the objective of the instance".to_owned()),
            _ => (random(rivals, shared, seed + number), format!("random objective {number}")),
        };
        desk.say(format!("{name} over the relaxations of {} and {}", inner.letter, outer.letter));
        let mut found = tried(desk, rivals, &costs).await;
        if let Some(found) = &mut found {
            found.witness = name;
            return Some(found.clone());
        }
    }
    None
}

/// Both bounds under an objective that is minimised.
async fn tried(desk: &Desk, [inner, outer]: [&Subject; 2], costs: &Costs) -> Option<Certificate> {
    if costs.is_empty() {
        return None;
    }
    let priced = |model: &Model, own: fn(&(ColumnId, ColumnId)) -> ColumnId| {
        let costs: Vec<(ColumnId, Number)> =
            costs.iter().map(|(pair, cost)| (own(pair), cost.clone())).collect();
        Rc::new(model.priced(Sense::Minimise, &costs))
    };
    let weaker = desk.relax(&priced(&inner.model, |pair| pair.0)).await;
    let least = weaker.checked_bound.filter(|_| weaker.exact)?;
    let stronger = desk.relax(&priced(&outer.model, |pair| pair.1)).await;
    let bound = stronger.checked_bound?;
    if bound <= least {
        return None;
    }
    let mut out = Certificate {
        holds: Some(false),
        apart: Some((nearest_f64(&least), nearest_f64(&bound))),
        violation: Some(nearest_f64(&(bound - least))),
        ..Certificate::default()
    };
    let costs: Vec<(ColumnId, Number)> =
        costs.iter().map(|(pair, cost)| (pair.0, cost.clone())).collect();
    witness_of(&mut out, &inner.model, (&costs, &weaker.point));
    Some(out)
}

/// The objective of the instance, to be minimised.
fn own(model: &Model, shared: &Shared) -> Costs {
    let cost = |column: ColumnId| {
        let cost = model.numbers().exact(model.columns()[column.index()].cost).clone();
        if model.sense() == Sense::Minimise { cost } else { -cost }
    };
    shared.pairs.iter().map(|&pair| (pair, cost(pair.0))).collect()
}

/// Random costs on the pairs that lie between finite bounds in both.
fn random([inner, outer]: [&Subject; 2], shared: &Shared, seed: u64) -> Costs {
    let mut random = Pcg32::seed_from_u64(seed);
    let boxed = |pair: &&(ColumnId, ColumnId)| {
        is_boxed(&inner.model, pair.0) && is_boxed(&outer.model, pair.1)
    };
    let boxed = shared.pairs.iter().filter(boxed);
    let width = 2 * LARGEST + 1;
    boxed
        .map(|&pair| {
            let cost = ((i64::from(random.next_u32()) * width) >> 32) - LARGEST;
            (pair, Number::from(cost))
        })
        .collect()
}
