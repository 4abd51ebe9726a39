//! Quadratic assignment: loads between plants, ways between places; and decisions of which two
//! together are worth something.

use super::Class;
use super::blocks::{Blocks, halved};
use super::draw::Draw;

pub(super) fn plants(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut blocks = Blocks::new();
    let count = halved(size);
    let plants = blocks.labels("V", 'v', count);
    let places = blocks.labels("L", 'l', count);
    let points = draw.points(size / 2 + 2, class);
    blocks.table(("f", "i, j"), (&plants, &plants), |i, j| (i != j).then(|| draw.below(6)));
    blocks.table(("d", "k, l"), (&places, &places), |k, l| {
        (k != l).then(|| draw.cost(class, points[k], points[l]))
    });
    blocks
}

/// Worth of either sign, about as often below 0 as above.
pub(super) fn decisions(size: u32, class: Class, seed: u64) -> Blocks {
    let middle = class.middle();
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let mut blocks = Blocks::new();
    let all = blocks.labels("V", 'v', points.len());
    blocks.column(("p", "i"), &all, |_| draw.below(2 * middle + 1) - middle);
    blocks.table(("q", "i, j"), (&all, &all), |i, j| {
        (i < j).then(|| {
            let cost = draw.cost(class, points[i], points[j]);
            if class == Class::ZeroOne { 2 * cost - 1 } else { cost - middle }
        })
    });
    blocks
}
