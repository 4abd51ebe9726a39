//! The most violated set over a weight, for terms that split by element: a knapsack.
//!
//! Elements that cost no violation and only add weight are taken; what is still missing of the
//! weight is bought at least cost by dynamic programming over the missing weight, or, at whole
//! points, over the cost that may be spent; beyond 10^6 states greedily by cost for each unit of
//! weight (Dantzig 1957).
//!
//! Separation of covers: Crowder, Johnson, Padberg 1983.

use std::collections::BTreeMap;

use dashu_int::{IBig, UBig, ops::Gcd};
use model::{LabelId, Number};

use crate::conditions::Fixed;
use crate::quadratic::{Answer, Minimum, Quadratic};

/// The most states of a dynamic programme.
const MOST_STATES: u64 = 1_000_000;
/// Weights up to this keep all sums in whole arithmetic.
const LARGEST: i128 = 1 << 90;

/// The condition `Σ_{i∈S} w_i ≥ need`, in whole numbers.
#[derive(Debug, Clone)]
pub(crate) struct Cover {
    weights: Vec<i128>,
    need: i128,
}

/// An element that adds weight, by being taken or by being left out, at a cost.
#[derive(Debug, Clone, Copy)]
struct Item {
    place: usize,
    weight: i128,
    cost: f64,
}

impl Cover {
    /// `Σ_{i∈S} w_i > over` in whole numbers; `None` where these are too large.
    pub(crate) fn new(
        ground: &[LabelId],
        weights: &[(LabelId, Number)],
        over: &Number,
    ) -> Option<Self> {
        let mut by_label: BTreeMap<LabelId, Number> = BTreeMap::new();
        for (label, weight) in weights {
            *by_label.entry(*label).or_insert(Number::ZERO) += weight;
        }
        let denominator = by_label.values().chain([over]).fold(UBig::ONE, |multiple, number| {
            let bottom = number.denominator();
            let divisor = (&multiple).gcd(bottom);
            multiple / divisor * bottom
        });
        let scale = Number::from(denominator);
        let whole = |number: &Number| {
            let number: IBig = (number * &scale).numerator().clone();
            i128::try_from(number).ok().filter(|n| n.abs() <= LARGEST)
        };
        let weight = |label: &LabelId| by_label.get(label).map_or(Some(0), whole);
        let weights: Option<Vec<i128>> = ground.iter().map(weight).collect();
        Some(Self { weights: weights?, need: whole(over)? + 1 })
    }

    /// Whether the dynamic programme over the missing weight is small enough whatever the point.
    pub(crate) fn is_small(&self) -> bool {
        let least: i128 = self.weights.iter().filter(|w| **w < 0).sum();
        states(self.weights.len(), self.need - least).is_some()
    }

    /// The most violated set over the weight that agrees with `fixed`.
    pub(crate) fn minimise(
        &self,
        quadratic: &Quadratic,
        fixed: &[Fixed],
        threshold: f64,
    ) -> Answer {
        let (mut set, mut items) = self.free_of_cost(&quadratic.linear, fixed);
        let held: i128 = self.weights.iter().zip(&set).filter(|(_, i)| **i).map(|(w, _)| w).sum();
        let missing = self.need - held;
        let base = quadratic.violation(&set);
        if missing <= 0 {
            self.drop_idle(&mut set, &quadratic.linear, fixed);
            return Answer::of(Minimum { smallest: set.clone(), largest: set }, self.weights.len());
        }
        items.retain(|item| item.weight > 0);
        if items.iter().map(|item| item.weight).sum::<i128>() < missing {
            return Answer::none(self.weights.len());
        }
        let by_cost = budget(&items, base - threshold);
        let (bought, work, exact) = if states(items.len(), missing).is_some() {
            let (bought, work) = by_weight(&items, missing);
            (Some(bought), work, true)
        } else if let Some(budget) = by_cost {
            let (bought, work) = by_budget(&items, missing, budget);
            (bought, work, true)
        } else {
            (Some(greedy(&items, missing)), items.len(), false)
        };
        let minimum = bought.map(|bought| {
            for place in bought {
                set[place] = !set[place];
            }
            self.drop_idle(&mut set, &quadratic.linear, fixed);
            Minimum { smallest: set.clone(), largest: set }
        });
        Answer { minimum, ticks: u64::try_from(work).unwrap_or(u64::MAX), cut_short: !exact }
    }

    /// The set without cost and of most weight, and what can be bought beside it.
    fn free_of_cost(&self, linear: &[f64], fixed: &[Fixed]) -> (Vec<bool>, Vec<Item>) {
        let mut set = vec![false; fixed.len()];
        let mut items = Vec::new();
        for (place, (&cost, &weight)) in linear.iter().zip(&self.weights).enumerate() {
            set[place] = match fixed[place] {
                Fixed::In => true,
                Fixed::Out => false,
                Fixed::Free => {
                    let wanted = cost < 0.0 || (cost == 0.0 && weight > 0);
                    if (weight > 0) != wanted {
                        items.push(Item { place, weight: weight.abs(), cost: cost.abs() });
                    }
                    wanted
                }
            };
        }
        (set, items)
    }

    /// Leaves out what costs nothing and is not needed, the heaviest first: the smaller cover
    /// is the stronger row.
    fn drop_idle(&self, set: &mut [bool], linear: &[f64], fixed: &[Fixed]) {
        let held: i128 = self.weights.iter().zip(&*set).filter(|(_, i)| **i).map(|(w, _)| w).sum();
        let mut spare = held - self.need;
        let idle = |i: &usize| set[*i] && linear[*i] == 0.0 && fixed[*i] == Fixed::Free;
        let mut places: Vec<usize> = (0..set.len()).filter(idle).collect();
        places.sort_by_key(|&i| std::cmp::Reverse(self.weights[i]));
        for place in places {
            if self.weights[place] <= spare {
                spare -= self.weights[place];
                set[place] = false;
            }
        }
    }
}

/// The number of states, if small enough.
fn states(items: usize, range: i128) -> Option<usize> {
    let states = u64::try_from(range.max(0)).ok()?.checked_add(1)?;
    let all = states.checked_mul(u64::try_from(items).ok()?)?;
    (all <= MOST_STATES).then(|| usize::try_from(states).ok()).flatten()
}

/// Least cost for each missing weight; the places bought and the work.
fn by_weight(items: &[Item], missing: i128) -> (Vec<usize>, usize) {
    let states = states(items.len(), missing).unwrap_or(1);
    let mut least = vec![f64::INFINITY; states];
    least[0] = 0.0;
    let mut taken = vec![false; states * items.len()];
    for (k, item) in items.iter().enumerate() {
        for weight in (1..states).rev() {
            let rest = lowered(weight, item.weight);
            let cost = least[rest] + item.cost;
            if cost < least[weight] {
                least[weight] = cost;
                taken[k * states + weight] = true;
            }
        }
    }
    let mut weight = states - 1;
    let mut bought = Vec::new();
    for (k, item) in items.iter().enumerate().rev() {
        if taken[k * states + weight] {
            bought.push(item.place);
            weight = lowered(weight, item.weight);
        }
    }
    (bought, states * items.len())
}

fn lowered(weight: usize, by: i128) -> usize {
    usize::try_from(by).map_or(0, |by| weight.saturating_sub(by))
}

/// The most that may be spent in units of the least common cost, where costs are whole and the
/// dynamic programme is small.
fn budget(items: &[Item], most: f64) -> Option<(usize, f64)> {
    let mut unit = 0_u64;
    for item in items {
        if item.cost.fract() != 0.0 || item.cost > 9e15 {
            return None;
        }
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "checked")]
        let cost = item.cost as u64;
        unit = unit.gcd(cost);
    }
    #[expect(clippy::cast_precision_loss, reason = "at most 9e15")]
    let unit = if unit == 0 { 1.0 } else { unit as f64 };
    let units = (most / unit).floor();
    if !(0.0..1e6).contains(&units) {
        return (units < 0.0).then_some((0, unit));
    }
    #[expect(clippy::cast_possible_truncation, reason = "checked")]
    let range = units as i128;
    states(items.len(), range).map(|states| (states - 1, unit))
}

/// Most weight for each cost up to a budget; the places bought, if these reach the missing weight.
fn by_budget(
    items: &[Item],
    missing: i128,
    (budget, unit): (usize, f64),
) -> (Option<Vec<usize>>, usize) {
    let states = budget + 1;
    let mut most = vec![0_i128; states];
    let mut taken = vec![false; states * items.len()];
    let cost = |item: &Item| {
        #[expect(clippy::cast_possible_truncation, clippy::cast_sign_loss, reason = "whole")]
        let units = (item.cost / unit) as usize;
        units
    };
    for (k, item) in items.iter().enumerate() {
        for spent in (cost(item)..states).rev() {
            let weight = most[spent - cost(item)] + item.weight;
            if weight > most[spent] {
                most[spent] = weight;
                taken[k * states + spent] = true;
            }
        }
    }
    let work = states * items.len();
    let Some(mut spent) = most.iter().position(|weight| *weight >= missing) else {
        return (None, work);
    };
    let mut bought = Vec::new();
    for (k, item) in items.iter().enumerate().rev() {
        if taken[k * states + spent] {
            bought.push(item.place);
            spent -= cost(item);
        }
    }
    (Some(bought), work)
}

/// Buys by cost for each unit of weight, then gives back what is not needed, the dearest first.
fn greedy(items: &[Item], missing: i128) -> Vec<usize> {
    let mut order: Vec<&Item> = items.iter().collect();
    #[expect(clippy::cast_precision_loss, reason = "a ratio to sort by")]
    let ratio = |item: &Item| item.cost / item.weight as f64;
    order.sort_by(|a, b| ratio(a).total_cmp(&ratio(b)).then(a.place.cmp(&b.place)));
    let mut bought: Vec<&Item> = Vec::new();
    let mut sum = 0;
    for item in order {
        if sum >= missing {
            break;
        }
        sum += item.weight;
        bought.push(item);
    }
    bought.sort_by(|a, b| b.cost.total_cmp(&a.cost).then(a.place.cmp(&b.place)));
    bought.retain(|item| {
        let needed = sum - item.weight < missing;
        sum -= if needed { 0 } else { item.weight };
        needed
    });
    bought.into_iter().map(|item| item.place).collect()
}
