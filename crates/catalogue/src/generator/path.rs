//! Networks: nodes, arcs with lengths, a start and an end, as named blocks. From each node
//! there is an arc to the next, and some two more to others.

use super::Class;
use super::blocks::{Blocks, names};
use super::draw::Draw;

pub(super) fn network(size: u32, class: Class, seed: u64) -> String {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let size = size as usize;
    let nodes: Vec<String> = (1..=size).map(|i| format!("n{i}")).collect();
    let mut text = format!("V\n{}\n\nc by i, j\n", nodes.join(" "));
    let others = i64::from(u32::try_from(size).unwrap_or(u32::MAX));
    for i in 0..size {
        for j in (0..size).filter(|&j| j != i) {
            if j == i + 1 || draw.below(others) < 2 {
                let length = draw.cost(class, points[i], points[j]);
                text.push_str(&format!("{} {} {length}\n", nodes[i], nodes[j]));
            }
        }
    }
    text.push_str(&format!("\ns = n1\nt = n{size}\n"));
    text
}

/// Lengths of either sign, so that circles of gain are about; from each node there is an arc to
/// the next, so that the end can be reached.
pub(super) fn with_gains(size: u32, class: Class, seed: u64) -> Blocks {
    let middle = class.middle();
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let (nodes, others) = (names('n', points.len()), i64::from(size));
    let mut lengths = Vec::new();
    for (i, from) in nodes.iter().enumerate() {
        for (j, to) in nodes.iter().enumerate().filter(|&(j, _)| j != i) {
            if j == i + 1 || draw.below(others) < 3 {
                let cost = draw.cost(class, points[i], points[j]);
                let length = if class == Class::ZeroOne { 2 * cost - 1 } else { cost - middle };
                lengths.push(format!("{from} {to} {length}"));
            }
        }
    }
    let mut out = Blocks::new();
    out.list("V", &nodes);
    out.by("c", "i, j", &lengths);
    out.value("s", &nodes[0]);
    out.value("t", &nodes[nodes.len() - 1]);
    out
}
