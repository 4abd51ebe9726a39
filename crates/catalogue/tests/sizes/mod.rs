//! The sizes that the files of networks, routing, facilities and graphs state, as numbers.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test ends where it fails")]

use std::collections::BTreeSet;

use instance::{Datum, Instance};

/// Columns, rows and families over subsets.
type Size = (usize, usize, usize);

/// How many members a set has.
fn count(instance: &Instance, name: &str) -> usize {
    match instance.get(name) {
        Some(Datum::Labels(labels)) => labels.len(),
        Some(Datum::Tuples { rows, .. }) => rows.len(),
        Some(Datum::Table { cells, .. }) => cells.len(),
        other => panic!("{name} is {other:?}"),
    }
}

/// A whole number of the instance.
fn whole(instance: &Instance, name: &str) -> usize {
    let Some(Datum::Number(value)) = instance.get(name) else { panic!("no number {name}") };
    value.to_string().parse().unwrap()
}

/// Places, drives or edges, and the size.
pub(crate) fn networks(id: &str, instance: &Instance) -> Option<Size> {
    let (family, _) = id.split_once('/')?;
    match family {
        "atsp" | "tsp" => round_trips(id, count(instance, "V")),
        "cvrp" => vehicles(id, instance),
        "limited-path" => limited(id, instance),
        "cfl" | "p-median" | "p-centre" => sites(id, instance),
        "tree" | "steiner" => trees(id, instance),
        "design" => design(id, instance),
        "matching" | "stable-set" | "max-cut" | "colouring" => graphs(id, instance),
        _ => items(id, count(instance, "V")),
    }
}

fn design(id: &str, instance: &Instance) -> Option<Size> {
    let [n, a, k] = ["V", "A", "K"].map(|name| count(instance, name));
    let Some(Datum::Tuples { rows, .. }) = instance.get("K") else { panic!("no pairs") };
    let origins = rows.iter().map(|pair| &pair[0]).collect::<BTreeSet<_>>().len();
    Some(match id {
        "design/joined" => (a + k * a, k * n + a, 0),
        "design/split" => (a + k * a, k * n + k * a, 0),
        "design/by-origin" => (a * (origins + 1), origins * (n + a), 0),
        _ => return None,
    })
}

fn round_trips(id: &str, n: usize) -> Option<Size> {
    let (stops, drives) = (n - 1, n * (n - 1));
    let (inner, triples) = ((n - 1) * (n - 2), (n - 1) * (n - 2) * (n - 3));
    Some(match id {
        "atsp/tight-one-commodity" => (2 * drives, 2 * n + 3 * stops + 2 * inner, 0),
        "atsp/time-staged" => ((n + 1) * drives, 2 * n + drives + stops, 0),
        "atsp/one-at-a-time" => ((n + 1) * drives, 3 * n + drives + stops, 0),
        "atsp/legs" => (drives + (n - 2) * inner + stops * stops, 2 * n + 3 * stops + 3 * inner, 0),
        "atsp/loose-labels" | "atsp/lifted-rows" => (drives + stops, 2 * n + inner, 0),
        "atsp/precedence-labels" | "atsp/lifted-precedence-labels" => {
            (drives + inner, 2 * n + 2 * inner + triples, 0)
        }
        "atsp/precedence" => (drives + inner, 2 * n + 3 * inner / 2 + triples, 0),
        "atsp/rlt-labels" => (2 * drives + n, 2 * n + 5 * n - 4 + 4 * inner, 0),
        "tsp/degrees" => (drives / 2, n, 0),
        "tsp/multi-commodity" => (drives / 2 + drives * stops, n + drives + drives * stops / 2, 0),
        "tsp/two-commodity" => (3 * drives / 2, 2 * n - 1 + drives / 2, 0),
        _ => return None,
    })
}

fn vehicles(id: &str, instance: &Instance) -> Option<Size> {
    let n = count(instance, "V");
    let (stops, drives, inner) = (n - 1, n * (n - 1), (n - 1) * (n - 2));
    Some(match id {
        "cvrp/load-labels" | "cvrp/lifted-load-labels" => (drives + stops, 2 * stops + inner, 0),
        "cvrp/load-flow" => (2 * drives, 3 * stops + drives, 0),
        "cvrp/tight-load-flow" => (2 * drives, 3 * stops + 2 * drives, 0),
        "cvrp/three-index" => (drives * n + stops * stops, stops * (3 * n + 1), 1),
        "cvrp/routes" => (drives + count(instance, "P"), drives + stops, 0),
        "cvrp/fractional-cuts" | "cvrp/capacity-cuts" => (drives, 2 * stops, 1),
        _ => return None,
    })
}

/// The layered form has a column for each arc and each amount from which the arc can be taken.
fn limited(id: &str, instance: &Instance) -> Option<Size> {
    let Some(Datum::Table { cells, .. }) = instance.get("a") else { panic!("no amounts") };
    let [n, arcs] = ["V", "c"].map(|name| count(instance, name));
    if id == "limited-path/flow" {
        return Some((arcs, n + 1, 0));
    }
    let Some(Datum::Element(last)) = instance.get("t") else { panic!("no end") };
    let limit = whole(instance, "W");
    let (mut columns, mut touched) = (arcs, BTreeSet::new());
    for (key, amount) in cells.iter().filter(|(key, _)| key[0] != *last) {
        let amount: usize = amount.to_string().parse().unwrap();
        for used in 0..(limit + 1).saturating_sub(amount) {
            columns += 1;
            touched.insert((&key[0], used));
            if key[1] != *last {
                touched.insert((&key[1], used + amount));
            }
        }
    }
    // The start without use is not in transit.
    Some((columns, arcs + 2 + touched.len() - 1, 0))
}

fn sites(id: &str, instance: &Instance) -> Option<Size> {
    let [i, j] = ["I", "J"].map(|name| count(instance, name));
    Some(match id {
        "cfl/joined" => (i * j + i, j + i, 0),
        "cfl/total" => (i * j + i, j + i + 1, 0),
        "cfl/split" => (i * j + i, j + i + i * j, 0),
        "p-median/joined" => (i * j + i, j + i + 1, 0),
        "p-median/split" => (i * j + i, j + i * j + 1, 0),
        "p-median/radius" | "p-median/chained-radius" => {
            let radii = distances(instance).1 - j;
            (i + radii, radii + 1, 0)
        }
        "p-centre/assignment" => (i * j + i + 1, 2 * j + i * j + 1, 0),
        "p-centre/radius" => {
            let radii = distances(instance).0 - 1;
            (i + radii, radii * j + 1, 0)
        }
        _ => return None,
    })
}

/// The costs of a client that differ, but its largest, for all clients together.
pub(crate) fn radii(instance: &Instance) -> Size {
    let Some(Datum::Table { cells, .. }) = instance.get("c") else { panic!("no costs") };
    let each: BTreeSet<_> = cells.iter().map(|(key, c)| (&key[1], c.to_string())).collect();
    let radii = each.len() - count(instance, "J");
    (count(instance, "I") + radii, radii + 1, 0)
}

/// How many different distances there are, and how many of a client for all clients together.
fn distances(instance: &Instance) -> (usize, usize) {
    let Some(Datum::Table { cells, .. }) = instance.get("d") else { panic!("no distances") };
    let all: BTreeSet<String> = cells.values().map(ToString::to_string).collect();
    let each: BTreeSet<_> = cells.iter().map(|(key, d)| (&key[1], d.to_string())).collect();
    (all.len(), each.len())
}

fn trees(id: &str, instance: &Instance) -> Option<Size> {
    let [n, m] = ["V", "E"].map(|name| count(instance, name));
    Some(match id {
        "tree/subtours" | "tree/cuts" => (m, 1, 1),
        "tree/directed-cuts" => (3 * m, m + 1, 1),
        "tree/one-commodity" => (3 * m, 2 * m + n, 0),
        "tree/multi-commodity" => (m + 2 * m * n, 1 + m + (n - 1) * (n + 2 * m), 0),
        "tree/arborescences" => (m + 2 * m * n, 1 + n * m + n * (n - 1), 0),
        "tree/undirected-flow" => (m + 2 * m * (n - 1), 1 + (n + m) * (n - 1), 0),
        "tree/directed-flow" => (5 * m, 3 * m + 2 * n - 1, 0),
        "tree/labels" => (3 * m + n, 3 * m + n, 0),
        _ => return steiner(id, instance, n, m),
    })
}

fn steiner(id: &str, instance: &Instance, n: usize, m: usize) -> Option<Size> {
    let k = count(instance, "R");
    Some(match id {
        "steiner/one-commodity" => (3 * m, m + n - 1, 0),
        "steiner/cuts" => (m, 0, 1),
        "steiner/undirected-flow" => (m + 2 * m * (k - 1), (n + m) * (k - 1), 0),
        "steiner/directed-cuts" => (3 * m, m, 1),
        "steiner/multi-commodity" => (3 * m + 2 * m * (k - 1), m + (n + 2 * m) * (k - 1), 0),
        "steiner/directed-flow" => (5 * m, 3 * m + n + k - 1, 0),
        "steiner/nodes" => (m + n, 1, n),
        "steiner/balanced-cuts" => (3 * m, m + n - k, 1),
        _ => return None,
    })
}

fn graphs(id: &str, instance: &Instance) -> Option<Size> {
    let [n, m] = ["V", "E"].map(|name| count(instance, name));
    Some(match id {
        "matching/degree" => (m, n, 0),
        "matching/odd-sets" => (m, n, 1),
        "stable-set/stars" => (n, n, 0),
        "stable-set/edges" => (n, m, 0),
        "stable-set/cliques" => (n, m, 1),
        "max-cut/sides" => (m + n, 2 * m, 0),
        "max-cut/odd-cycles" => (m + 2 * n * n, 8 * n * m, 0),
        "max-cut/triangles" => (n * (n - 1) / 2, 2 * n * (n - 1) * (n - 2) / 3, 0),
        "stable-set/odd-cycles" => (n, m + short_cycles(instance), 0),
        "stable-set/wheels" => (n, m + short_cycles(instance) + wheels(instance), 0),
        "stable-set/every-odd-cycle" => (n + 2 * n * n, m + 4 * n * m, 0),
        "colouring/stable-sets" => (count(instance, "P"), n, 0),
        "colouring/representatives" => representatives(instance),
        _ => {
            let h = whole(instance, "h");
            let rows = n + h * (m + n);
            match id {
                "colouring/assignment" => (h * (n + 1), rows, 0),
                "colouring/ordered" => (h * (n + 1), rows + 2 * h - 1, 0),
                "colouring/partial-order" | "colouring/tight-partial-order" => {
                    (n * (h + 1), n * (h - 2) + m * h + (n - 1) * (h - 1), 0)
                }
                "colouring/cliques" => (h * (n + 1), rows, h),
                _ => return None,
            }
        }
    })
}

/// The ends of each edge, both ways.
fn joined(instance: &Instance) -> BTreeSet<(&String, &String)> {
    let Some(Datum::Tuples { rows, .. }) = instance.get("E") else { panic!("no edges") };
    rows.iter().flat_map(|edge| [(&edge[0], &edge[1]), (&edge[1], &edge[0])]).collect()
}

/// Fours that are all joined, and pentagons with a node that is joined to all five.
fn wheels(instance: &Instance) -> usize {
    let joined = joined(instance);
    let nodes: BTreeSet<&String> = joined.iter().map(|&(i, _)| i).collect();
    let mut found = [0; 2];
    let mut walks: Vec<Vec<&String>> = joined.iter().map(|&(i, j)| vec![i, j]).collect();
    for length in 3..=5 {
        walks = walks.iter().flat_map(|walk| longer(walk, &joined)).collect();
        for walk in walks.iter().filter(|walk| joined.contains(&(walk[length - 1], walk[0]))) {
            let hub = |h: &&&String| walk.iter().all(|&i| joined.contains(&(i, **h)));
            found[length / 5] += if length == 4 { 0 } else { nodes.iter().filter(hub).count() };
        }
    }
    found[0] / 24 + found[1] / 10
}

/// Three items, and three others in some order.
fn fences(n: usize) -> usize {
    (0..6).map(|k| n.saturating_sub(k)).product::<usize>() / 6
}

/// Triangles and pentagons, with chords or without: orders of three or five nodes that are joined
/// each to the next, counted once.
fn short_cycles(instance: &Instance) -> usize {
    let joined = joined(instance);
    let mut walks: Vec<Vec<&String>> = joined.iter().map(|&(i, j)| vec![i, j]).collect();
    let mut closed = 0;
    for length in 3..=5 {
        walks = walks.iter().flat_map(|walk| longer(walk, &joined)).collect();
        let back = walks.iter().filter(|walk| joined.contains(&(walk[length - 1], walk[0])));
        closed += if length == 4 { 0 } else { back.count() / (2 * length) };
    }
    closed
}

/// A walk and each node that it can go on to.
fn longer<'a>(
    walk: &[&'a String],
    joined: &BTreeSet<(&'a String, &'a String)>,
) -> Vec<Vec<&'a String>> {
    let ahead = joined.iter().filter(|(i, j)| *i == walk[walk.len() - 1] && !walk.contains(j));
    ahead.map(|&(_, j)| [walk, &[j]].concat()).collect()
}

/// Nodes are listed in the order of their labels' numbers.
fn representatives(instance: &Instance) -> Size {
    let Some(Datum::Tuples { rows, .. }) = instance.get("E") else { panic!("no edges") };
    let number = |label: &String| label.trim_start_matches('n').parse::<usize>().unwrap();
    let edges: BTreeSet<_> = rows.iter().map(|e| (number(&e[0]), number(&e[1]))).collect();
    let n = count(instance, "V");
    let free = |i: usize, j: usize| i < j && !edges.contains(&(i, j));
    let pairs = (1..=n).map(|i| (1..=n).filter(|&j| free(i, j)).count()).sum::<usize>();
    let conflict = |i: usize| edges.iter().filter(|&&(j, k)| free(i, j) && free(i, k)).count();
    (n + pairs, n + pairs + (1..=n).map(conflict).sum::<usize>(), 0)
}

fn items(id: &str, n: usize) -> Option<Size> {
    let (pairs, triples) = (n * (n - 1) / 2, n * (n - 1) * (n - 2) / 6);
    Some(match id {
        "ordering/labels" => (n * n, 3 * pairs, 0),
        "ordering/dicycles" => (2 * pairs, pairs + 2 * triples, 0),
        "ordering/fences" => (2 * pairs, pairs + 2 * triples + fences(n), 0),
        "grouping/two-partitions" => (pairs, 3 * triples + triples * n.saturating_sub(3), 0),
        "grouping/triangles" => (pairs, 3 * triples, 0),
        "grouping/assignment" => (pairs + n * n, n + 3 * n * pairs, 0),
        "grouping/representatives" => (n * n, n + pairs + 2 * (n + 1) * n * (n - 1) / 3, 0),
        "hub/paths" => (n * n + n.pow(4), n * n + 1 + 2 * n.pow(3), 0),
        "hub/bounded-paths" => (n * n + n.pow(4), 2 * n * n + 1 + 2 * n.pow(4), 0),
        "hub/flow" => (n * n + n.pow(3), 2 * n * n + 1, 0),
        _ => return None,
    })
}
