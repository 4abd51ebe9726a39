//! Lots with limited hours, units that meet a load, suppliers whose cost bends.

use super::Class;
use super::blocks::Blocks;
use super::draw::Draw;

/// Two items; the hours allow for making each period's demand in it or before.
pub(super) fn limited_lots(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let items = blocks.labels("I", 'i', 2);
    let periods: Vec<String> = (1..=size).map(|t| t.to_string()).collect();
    blocks.list("T", &periods);
    let mut demand = vec![vec![0; periods.len()]; items.len()];
    for cell in demand.iter_mut().flatten() {
        *cell = draw.amount(class, 5, 35);
    }
    let (mut total, mut hours) = (0, 0);
    for (passed, (first, second)) in (1..).zip(demand[0].iter().zip(&demand[1])) {
        total += first + second;
        hours = std::cmp::max(hours, (total + passed - 1) / passed);
    }
    blocks.table(("d", "i, t"), (&items, &periods), |i, t| Some(demand[i][t]));
    blocks.column(("f", "i"), &items, |_| 50 + draw.below(100));
    blocks.column(("h", "i"), &items, |_| 1 + draw.below(3));
    blocks.column(("a", "i"), &items, |_| 1);
    blocks.column(("b", "i"), &items, |_| 5);
    let spare = 11 + hours / 10;
    blocks.column(("Q", "t"), &periods, |_| hours + spare);
    blocks
}

/// Three units; the load is a fifth to nine tenths of what they can give.
pub(super) fn units(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let units = blocks.labels("G", 'g', 3);
    let hours: Vec<String> = (1..=size).map(|t| t.to_string()).collect();
    blocks.list("T", &hours);
    let most: Vec<i64> = units.iter().map(|_| 40 + draw.below(60)).collect();
    let total: i64 = most.iter().sum();
    let mut load = Vec::new();
    for _ in &hours {
        let share = draw.amount(class, 20, 70);
        load.push(total * share / 100);
    }
    if class == Class::ZeroOne {
        load.iter_mut().for_each(|one| *one += total * draw.below(2) / 2);
    }
    blocks.column(("d", "t"), &hours, |t| load[t]);
    blocks.column(("c", "g"), &units, |_| 10 + draw.below(20));
    blocks.column(("e", "g"), &units, |_| 100 + draw.below(200));
    blocks.column(("f", "g"), &units, |_| 200 + draw.below(600));
    blocks.column(("m", "g"), &units, |g| most[g] / 3);
    blocks.column(("q", "g"), &units, |g| most[g]);
    blocks.column(("L", "g"), &units, |_| 2 + draw.below(3));
    blocks.column(("K", "g"), &units, |_| 2 + draw.below(3));
    blocks
}

/// The units of [`units`] with limits for the first and the last hour on, and a dear one that can
/// give everything at any hour.
pub(super) fn limited_units(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let units = blocks.labels("G", 'g', 4);
    let hours: Vec<String> = (1..=size).map(|t| t.to_string()).collect();
    blocks.list("T", &hours);
    let mut most: Vec<i64> = units.iter().map(|_| 40 + draw.below(60)).collect();
    let total: i64 = most.iter().take(3).sum();
    most[3] = total;
    let least = |g: usize| if g == 3 { 0 } else { most[g] / 3 };
    let load: Vec<i64> = hours.iter().map(|_| total * draw.amount(class, 20, 70) / 100).collect();
    blocks.column(("d", "t"), &hours, |t| load[t]);
    blocks.column(("c", "g"), &units, |g| if g == 3 { 80 } else { 10 + draw.below(20) });
    blocks.column(("e", "g"), &units, |_| 100 + draw.below(200));
    blocks.column(("f", "g"), &units, |_| 200 + draw.below(600));
    blocks.column(("m", "g"), &units, least);
    blocks.column(("q", "g"), &units, |g| most[g]);
    for name in ["a", "b"] {
        blocks.column((name, "g"), &units, |g| {
            let part = least(g) + (most[g] - least(g)) * draw.below(60) / 100;
            if g == 3 { total } else { part }
        });
    }
    blocks.column(("L", "g"), &units, |_| 2 + draw.below(3));
    blocks.column(("K", "g"), &units, |_| 2 + draw.below(3));
    blocks
}

/// Four suppliers with as many pieces each; somewhat more than half of all is needed.
pub(super) fn bent_costs(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let suppliers = blocks.labels("I", 's', 4);
    let pieces: Vec<String> = (1..=size).map(|k| k.to_string()).collect();
    blocks.list("K", &pieces);
    let ends: Vec<String> = (0..=size).map(|k| k.to_string()).collect();
    let (mut amounts, mut costs) = (Vec::new(), Vec::new());
    for _ in &suppliers {
        let (mut amount, mut cost) = (vec![0], vec![0]);
        for k in 0..pieces.len() {
            amount.push(amount[k] + 5 + draw.below(15));
            cost.push(cost[k] + draw.amount(class, 0, 60));
        }
        amounts.push(amount);
        costs.push(cost);
    }
    blocks.table(("B", "i, k"), (&suppliers, &ends), |i, k| Some(amounts[i][k]));
    blocks.table(("F", "i, k"), (&suppliers, &ends), |i, k| Some(costs[i][k]));
    let all: i64 = amounts.iter().filter_map(|amount| amount.last()).sum();
    blocks.value("d", all * 11 / 20);
    blocks
}
