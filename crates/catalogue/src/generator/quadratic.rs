//! Quadratic assignment: loads between plants, ways between places.

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
