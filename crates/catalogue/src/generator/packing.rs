//! Bins with all patterns, knapsacks, agents with hours, coverings.

use super::Class;
use super::blocks::Blocks;
use super::draw::Draw;
use super::listed::lists;

/// Pieces from a fifth to three fifths of a bin, and every pattern that leaves no room for a piece.
pub(super) fn bins(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let length = 24 + draw.below(8);
    let mut lengths = Vec::new();
    for _ in 0..size {
        lengths.push(draw.amount(class, length / 5 + 1, length / 2 - 4));
    }
    if class == Class::ZeroOne {
        lengths.iter_mut().for_each(|one| *one += length / 5);
    }
    let mut blocks = Blocks::new();
    let sizes = blocks.labels("I", 'i', size as usize);
    blocks.column(("w", "i"), &sizes, |k| lengths[k]);
    blocks.column(("b", "i"), &sizes, |k| if class == Class::Clustered && k < 2 { 2 } else { 1 });
    blocks.value("Q", length);
    let patterns = patterns(&lengths, length);
    let names = blocks.labels("P", 'p', patterns.len());
    blocks.table(("a", "i, p"), (&sizes, &names), |i, p| {
        Some(patterns[p][i]).filter(|&count| count > 0)
    });
    blocks
}

/// All ways to fill a bin so that no piece fits in what is left.
fn patterns(lengths: &[i64], room: i64) -> Vec<Vec<i64>> {
    let least = lengths.iter().copied().min().unwrap_or(1);
    let mut found = Vec::new();
    let mut open = vec![(Vec::new(), room)];
    while let Some((counts, left)) = open.pop() {
        let Some(&length) = lengths.get(counts.len()) else {
            if left < least {
                found.push(counts);
            }
            continue;
        };
        for count in 0..=left / length {
            let mut longer: Vec<i64> = counts.clone();
            longer.push(count);
            open.push((longer, left - count * length));
        }
    }
    found
}

/// Worth is weight and a little on top; half of all weight can be carried.
pub(super) fn knapsack(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut weights = Vec::new();
    for _ in 0..size {
        weights.push(draw.amount(class, 10, 90));
    }
    let mut blocks = Blocks::new();
    let items = blocks.labels("I", 'i', size as usize);
    blocks.column(("c", "i"), &items, |k| weights[k] + draw.below(20));
    blocks.column(("a", "i"), &items, |k| weights[k]);
    blocks.value("b", weights.iter().sum::<i64>() / 2);
    blocks
}

/// Three resources; worth is what is taken of all and a little on top, and half of all can be had.
pub(super) fn several(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let items = blocks.labels("J", 'j', size as usize);
    let resources = blocks.labels("I", 'r', 3);
    let mut taken = vec![vec![0; items.len()]; resources.len()];
    for cell in taken.iter_mut().flatten() {
        *cell = draw.amount(class, 5, 45);
    }
    let all = |j: usize| taken.iter().map(|row| row[j]).sum::<i64>();
    blocks.column(("p", "j"), &items, |j| all(j) / 3 + draw.below(20));
    blocks.table(("a", "i, j"), (&resources, &items), |r, j| Some(taken[r][j]));
    blocks.column(("b", "i"), &resources, |r| taken[r].iter().sum::<i64>() / 2);
    blocks
}

/// Three agents; jobs dealt out in turn fit, with little to spare.
pub(super) fn agents(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let agents = blocks.labels("I", 'm', 3);
    let jobs = blocks.labels("J", 'j', size as usize);
    let mut hours = vec![vec![0; jobs.len()]; agents.len()];
    for cell in hours.iter_mut().flatten() {
        *cell = draw.amount(class, 5, 20);
    }
    blocks.table(("c", "i, j"), (&agents, &jobs), |_, _| Some(10 + draw.below(41)));
    blocks.table(("a", "i, j"), (&agents, &jobs), |i, j| Some(hours[i][j]));
    let mut there = Vec::new();
    for (i, one) in hours.iter().enumerate() {
        there.push(one.iter().skip(i).step_by(3).sum::<i64>() + draw.below(6));
    }
    blocks.column(("b", "i"), &agents, |i| there[i]);
    lists(&mut blocks, (&agents, &jobs), &hours, &there);
    blocks
}

/// Twice as many choices as rows; most choices cover two rows, each row has one choice or more.
pub(super) fn covers(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let rows = blocks.labels("I", 'r', size as usize);
    let choices = blocks.labels("J", 'c', 2 * size as usize);
    let mut covered = vec![vec![false; choices.len()]; rows.len()];
    for j in 0..choices.len() {
        covered[j % rows.len()][j] = true;
        covered[draw.place(rows.len())][j] = true;
    }
    let mut costs = Vec::new();
    for _ in &choices {
        costs.push(draw.amount(class, 2, 8));
    }
    blocks.table(("a", "i, j"), (&rows, &choices), |i, j| covered[i][j].then_some(1));
    blocks.column(("c", "j"), &choices, |j| costs[j]);
    blocks
}
