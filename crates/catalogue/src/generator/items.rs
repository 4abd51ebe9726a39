//! Items that are put in order or into groups, as named blocks.

use super::Class;
use super::blocks::{Blocks, names};
use super::draw::Draw;
use super::listed::groups;

/// What it is worth to have one item before another; for points how much farther it lies one way
/// and how much less far the other, and up to a hundred.
pub(super) fn ordering(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let items = names('n', points.len());
    let mut worths = Vec::new();
    for (i, first) in items.iter().enumerate() {
        for (j, second) in items.iter().enumerate().filter(|&(j, _)| j != i) {
            let ((x, y), (a, b)) = (points[i], points[j]);
            let worth = match class {
                Class::Euclidean | Class::Clustered => {
                    std::cmp::max(0, a - x) + std::cmp::max(0, y - b) + draw.below(100)
                }
                _ => draw.cost(class, points[i], points[j]),
            };
            worths.push(format!("{first} {second} {worth}"));
        }
    }
    let mut out = Blocks::new();
    out.list("V", &items);
    out.by("c", "i, j", &worths);
    out
}

/// What it costs to have two items in one group, about as often below 0 as above.
pub(super) fn grouping(size: u32, class: Class, seed: u64) -> Blocks {
    let middle = match class {
        Class::Uniform => 50,
        Class::Euclidean => 450,
        Class::Clustered => 300,
        Class::ZeroOne => 1,
        Class::NearlySymmetric => 470,
    };
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let items = names('n', points.len());
    let mut costs = Vec::new();
    for i in 0..items.len() {
        for j in i + 1..items.len() {
            let cost = draw.cost(class, points[i], points[j]);
            let shifted = if class == Class::ZeroOne { 2 * cost - middle } else { cost - middle };
            costs.push(format!("{} {} {shifted}", items[i], items[j]));
        }
    }
    let mut out = Blocks::new();
    out.list("V", &items);
    out.by("c", "i, j", &costs);
    groups(&mut out, &items);
    out
}
