//! Facilities with limits, and p sites to open, as named blocks: the places of the family `ufl`
//! with further data.

use super::Class;
use super::blocks::{Blocks, names};
use super::draw::Draw;

/// Facilities and clients, and what it costs to serve each from each.
fn places(draw: &mut Draw, size: u32, class: Class, cost: &str) -> Blocks {
    let (facilities, clients) = (draw.points(size, class), draw.points(2 * size, class));
    let (sites, places) = (names('f', facilities.len()), names('c', clients.len()));
    let mut costs = Vec::new();
    for (site, &from) in sites.iter().zip(&facilities) {
        for (place, &to) in places.iter().zip(&clients) {
            costs.push(format!("{site} {place} {}", draw.cost(class, from, to)));
        }
    }
    let mut out = Blocks::new();
    out.list("I", &sites);
    out.list("J", &places);
    out.by(cost, "i, j", &costs);
    out
}

/// A number of each name, drawn from `least` on.
fn drawn(draw: &mut Draw, names: &[String], least: i64, range: i64) -> Vec<String> {
    names.iter().map(|name| format!("{name} {}", least + draw.below(range))).collect()
}

/// All facilities together serve at least twice the demand.
pub(super) fn limited(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut out = places(&mut draw, size, class, "c");
    let (sites, clients) = (names('f', size as usize), names('c', 2 * size as usize));
    let opening = if class == Class::ZeroOne { (1, 3) } else { (200, 400) };
    out.by("f", "i", &drawn(&mut draw, &sites, opening.0, opening.1));
    // Twice as many clients as facilities, and at most 20 each.
    out.by("q", "i", &drawn(&mut draw, &sites, 80, 41));
    out.by("d", "j", &drawn(&mut draw, &clients, 1, 20));
    out
}

/// A third of the sites may open; clients have weights.
pub(super) fn median(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let mut out = places(&mut draw, size, class, "d");
    out.by("w", "j", &drawn(&mut draw, &names('c', 2 * size as usize), 1, 9));
    out.value("p", size.div_ceil(3));
    out
}

/// A third of the sites may open.
pub(super) fn centre(size: u32, class: Class, seed: u64) -> Blocks {
    let mut out = places(&mut Draw::new(seed), size, class, "d");
    out.value("p", size.div_ceil(3));
    out
}
