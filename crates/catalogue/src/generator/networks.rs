//! Networks of arcs: what to build for goods, the shortest path within a limit, hubs, and rounds
//! of vehicles, as named blocks.

use super::Class;
use super::blocks::{Blocks, names};
use super::draw::Draw;
use super::listed::{paths, rounds};

/// Rounds from the first place: demands above 0, and vehicles that hold about two fifths of all.
pub(super) fn vehicles(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let places = names('n', points.len());
    let mut ways = vec![vec![0; points.len()]; points.len()];
    let mut costs = Vec::new();
    for (i, &here) in points.iter().enumerate() {
        for (j, &there) in points.iter().enumerate().filter(|&(j, _)| j != i) {
            ways[i][j] = draw.cost(class, here, there);
            costs.push(format!("{} {} {}", places[i], places[j], ways[i][j]));
        }
    }
    let most = if class == Class::ZeroOne { 1 } else { 9 };
    let drawn = places.iter().skip(1).map(|_| 1 + draw.below(most));
    let demands: Vec<i64> = std::iter::once(0).chain(drawn).collect();
    let (all, largest) = (demands.iter().sum::<i64>(), demands.iter().max().copied());
    let room = largest.unwrap_or(0).max((2 * all + 4) / 5);
    let mut out = Blocks::new();
    out.list("V", &places);
    out.by("c", "i, j", &costs);
    out.column(("q", "i"), &places, |i| demands[i]);
    out.value("Q", room);
    out.value("r", &places[0]);
    rounds(&mut out, &places, &ways, (&demands, room));
    out
}

/// Arcs from each node to the next, in a ring, and some two more to others; as many pairs with
/// goods as there are nodes, with all paths of each. To build costs about as much as to carry a
/// few units.
pub(super) fn design(size: u32, class: Class, seed: u64) -> Blocks {
    let (mut out, arcs, pairs, _) = traffic(&mut Draw::new(seed), size, class);
    paths(&mut out, &names('n', size as usize), &arcs, &pairs);
    out
}

/// The same with a capacity for each arc: of one of the ring what all pairs put on it that go round
/// the ring, so that there is a plan; of others some two pairs.
pub(super) fn capacitated(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let (mut out, arcs, pairs, units) = traffic(&mut draw, size, class);
    let (nodes, count) = (names('n', size as usize), size as usize);
    let mut round = vec![0; count];
    for (&(from, to), sent) in pairs.iter().zip(units) {
        for step in 0..(to + count - from) % count {
            round[(from + step) % count] += sent;
        }
    }
    let mut most = Vec::new();
    for &(i, j) in &arcs {
        let drawn = 5 + draw.below(8);
        let carries = if j == (i + 1) % count { round[i].max(1) } else { drawn };
        most.push(format!("{} {} {carries}", nodes[i], nodes[j]));
    }
    out.by("u", "i, j", &most);
    paths(&mut out, &nodes, &arcs, &pairs);
    out
}

/// The same without paths; a line carries some two pairs.
pub(super) fn lines(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let (mut out, ..) = traffic(&mut draw, size / 2 + 2, class);
    out.value("Q", 8 + draw.below(5));
    out
}

type Ends = Vec<(usize, usize)>;

/// The network and what it carries, with its arcs, its pairs and what each sends.
fn traffic(draw: &mut Draw, size: u32, class: Class) -> (Blocks, Ends, Ends, Vec<i64>) {
    let points = draw.points(size, class);
    let (count, others) = (points.len(), i64::from(size));
    let nodes = names('n', count);
    let (mut arcs, mut building, mut carrying) = (Vec::new(), Vec::new(), Vec::new());
    let (mut pairs, mut units) = (Vec::new(), Vec::new());
    let (mut ways, mut ends, mut sent) = (Ends::new(), Ends::new(), Vec::new());
    for i in 0..count {
        for j in (0..count).filter(|&j| j != i) {
            let name = format!("{} {}", nodes[i], nodes[j]);
            if j == (i + 1) % count || draw.below(others) < 2 {
                let cost = draw.cost(class, points[i], points[j]);
                building.push(format!("{name} {}", 3 * cost + 1 + draw.below(20)));
                carrying.push(format!("{name} {cost}"));
                arcs.push(name.clone());
                ways.push((i, j));
            }
            if j == (i + 2) % count || draw.below(2 * others) == 0 {
                sent.push(1 + draw.below(9));
                units.extend(sent.last().map(|last| format!("{name} {last}")));
                pairs.push(name);
                ends.push((i, j));
            }
        }
    }
    let mut out = Blocks::new();
    out.list("V", &nodes);
    out.by("A", "i, j", &arcs);
    out.by("f", "i, j", &building);
    out.by("c", "i, j", &carrying);
    out.by("K", "s, t", &pairs);
    out.by("d", "s, t", &units);
    (out, ways, ends, sent)
}

/// From each node an arc to the next, which is long and takes little, and some two more to
/// others; the limit is what the way by all nodes takes.
pub(super) fn limited(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let (count, others) = (points.len(), i64::from(size));
    let nodes = names('n', count);
    let (mut lengths, mut amounts) = (Vec::new(), Vec::new());
    for i in 0..count {
        for j in (0..count).filter(|&j| j != i) {
            let next = j == i + 1;
            if next || draw.below(others) < 3 {
                let name = format!("{} {}", nodes[i], nodes[j]);
                let length = draw.cost(class, points[i], points[j]);
                let amount = if next { 1 } else { 2 + draw.below(others / 2 + 1) };
                lengths.push(format!("{name} {}", if next { 2 * length } else { length }));
                amounts.push(format!("{name} {amount}"));
            }
        }
    }
    let mut out = Blocks::new();
    out.list("V", &nodes);
    out.by("c", "i, j", &lengths);
    out.by("a", "i, j", &amounts);
    out.value("W", size.saturating_sub(1));
    out.value("s", &nodes[0]);
    out.value("t", &nodes[count - 1]);
    out
}

/// Places with the lengths of shortest ways, so that no way over a third place is shorter, and
/// two hubs.
pub(super) fn hubs(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let points = draw.points(size, class);
    let count = points.len();
    let nodes = names('n', count);
    let mut ways = vec![vec![0; count]; count];
    for i in 0..count {
        for j in (0..count).filter(|&j| j != i) {
            ways[i][j] = draw.cost(class, points[i], points[j]);
        }
    }
    for k in 0..count {
        for i in 0..count {
            for j in 0..count {
                ways[i][j] = ways[i][j].min(ways[i][k] + ways[k][j]);
            }
        }
    }
    let (mut lengths, mut units) = (Vec::new(), Vec::new());
    for i in 0..count {
        for j in 0..count {
            let sent = if i == j { 0 } else { draw.below(10) };
            lengths.push(format!("{} {} {}", nodes[i], nodes[j], ways[i][j]));
            units.push(format!("{} {} {sent}", nodes[i], nodes[j]));
        }
    }
    let mut out = Blocks::new();
    out.list("V", &nodes);
    out.by("c", "i, j", &lengths);
    out.by("w", "i, j", &units);
    for (name, value) in [("p", 2), ("χ", 3), ("α", 1), ("δ", 2)] {
        out.value(name, value);
    }
    out
}
