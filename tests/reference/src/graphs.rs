//! Named graphs of the literature, and graphs as named blocks.

use crate::theory::stable_sets;

/// Edges by the places of their ends.
pub type Edges = Vec<(usize, usize)>;

fn circle(count: usize) -> Edges {
    (0..count).map(|i| (i, (i + 1) % count)).collect()
}

fn queens(side: usize) -> Edges {
    let place = |k: usize| (k / side, k % side);
    let beats = |a: usize, b: usize| {
        let ((r, c), (s, d)) = (place(a), place(b));
        r == s || c == d || r.abs_diff(s) == c.abs_diff(d)
    };
    let all = side * side;
    (0..all).flat_map(|a| (a + 1..all).map(move |b| (a, b))).filter(|&(a, b)| beats(a, b)).collect()
}

/// Of Mycielski (1955): a copy of each node beside the node's neighbours, and one node beside all
/// copies.
fn mycielski(count: usize, edges: &Edges) -> Edges {
    let mut out = edges.clone();
    for &(a, b) in edges {
        out.extend([(a, count + b), (b, count + a)]);
    }
    out.extend((0..count).map(|i| (count + i, 2 * count)));
    out
}

/// The generalised Petersen graph: an outer circle, spokes, an inner star of steps of two.
fn petersen(count: usize) -> Edges {
    let star = (0..count).map(|i| (count + i, count + (i + 2) % count));
    circle(count).into_iter().chain((0..count).map(|i| (i, count + i))).chain(star).collect()
}

fn icosahedron() -> Edges {
    let mut out: Edges = (1..6).flat_map(|i| [(0, i), (i, i % 5 + 1)]).collect();
    out.extend((1..6).flat_map(|i| [(i, i + 5), (i, i % 5 + 6)]));
    out.extend((6..11).flat_map(|i| [(i, (i - 5) % 5 + 6), (i, 11)]));
    out
}

/// A named graph: how many nodes, and its edges; `None` where the name is not known.
#[must_use]
pub fn graph(name: &str) -> Option<(usize, Edges)> {
    Some(match name {
        "C5" | "C5_myciel2" => (5, circle(5)),
        "C7" => (7, circle(7)),
        "K5" => (5, (0..5).flat_map(|a| (a + 1..5).map(move |b| (a, b))).collect()),
        "Petersen" => (10, petersen(5)),
        "W5_wheel(hub+C5)" => (6, circle(5).into_iter().chain((0..5).map(|i| (i, 5))).collect()),
        "C7_complement" => {
            let apart = |a: usize, b: usize| b - a > 1 && b - a < 6;
            let pairs = (0..7).flat_map(|a| (a + 1..7).map(move |b| (a, b)));
            (7, pairs.filter(|&(a, b)| apart(a, b)).collect())
        }
        "Grotzsch" | "myciel3" => (11, mycielski(5, &circle(5))),
        "myciel4" => (23, mycielski(11, &mycielski(5, &circle(5)))),
        "K33" => (6, (0..3).flat_map(|a| (3..6).map(move |b| (a, b))).collect()),
        "queen5" | "queen5_5" => (25, queens(5)),
        "queen7_7" => (49, queens(7)),
        "queen8" => (64, queens(8)),
        "icosahedron" => (12, icosahedron()),
        "dodecahedron" => (20, petersen(10)),
        _ => return None,
    })
}

/// A graph as named blocks, its nodes `n0`, `n1`, ….
#[must_use]
pub fn network(count: usize, edges: &Edges) -> String {
    let edges: String = edges.iter().map(|(a, b)| format!("n{a} n{b}\n")).collect();
    format!("V\n{}\n\nE by i, j\n{edges}\n", names("n", count))
}

/// `n0 n1 n2` for `n` and 3.
#[must_use]
pub fn names(letter: &str, count: usize) -> String {
    (0..count).map(|k| format!("{letter}{k}")).collect::<Vec<_>>().join(" ")
}

/// What a colouring needs beside its graph, as blocks: how many colours, and all stable sets that hold no
/// further node.
#[must_use]
pub fn colours_and_sets(nodes: &[String], edges: &[Vec<String>], colours: usize) -> String {
    let sets = stable_sets(nodes, edges);
    let lists: Vec<String> = (0..sets.len()).map(|p| format!("p{p}")).collect();
    let lines: Vec<String> = lists.chunks(100).map(|line| line.join(" ")).collect();
    let mut text = format!("h = {colours}\n\nP\n{}\n\na by i, p\n", lines.join("\n"));
    for (set, name) in sets.iter().zip(&lists) {
        set.iter().for_each(|node| text.push_str(&format!("{node} {name} 1\n")));
    }
    text
}
