//! Items that are put in order or into groups, as named blocks.

use super::Class;
use super::blocks::{Blocks, names};
use super::draw::Draw;

/// What it is worth to have one item before another. Nothing has a place.
pub(super) fn ordering(size: u32, class: Class, seed: u64) -> Option<Blocks> {
    if matches!(class, Class::Euclidean | Class::Clustered) {
        return None;
    }
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let items = names('n', points.len());
    let mut worths = Vec::new();
    for (i, first) in items.iter().enumerate() {
        for (j, second) in items.iter().enumerate().filter(|&(j, _)| j != i) {
            let worth = draw.cost(class, points[i], points[j]);
            worths.push(format!("{first} {second} {worth}"));
        }
    }
    let mut out = Blocks::new();
    out.list("V", &items);
    out.by("c", "i, j", &worths);
    Some(out)
}

/// What it costs to have two items in one group, about as often below 0 as above.
pub(super) fn grouping(size: u32, class: Class, seed: u64) -> Option<Blocks> {
    let middle = match class {
        Class::Uniform => 50,
        Class::Euclidean => 450,
        Class::Clustered => 300,
        Class::ZeroOne => 1,
        Class::NearlySymmetric => return None,
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
    Some(out)
}
