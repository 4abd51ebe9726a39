//! Networks of edges: spanning and Steiner trees, matching, maximum cut, stable sets and
//! colouring, as named blocks. A chain joins all nodes, and about three pairs in eight more; in
//! conflict are also all pairs that lie near each other, where places are drawn.

use super::Class;
use super::blocks::{Blocks, names};
use super::draw::{Draw, Point};
use super::listed::stable_sets;

/// Whether edges are conflicts, and what for.
#[derive(Clone, Copy, PartialEq, Eq)]
enum Conflicts {
    None,
    Worths,
    Colours,
}

/// Nodes, where they lie, and edges by their ends, the first before the second.
struct Graph {
    nodes: Vec<String>,
    points: Vec<Point>,
    edges: Vec<(usize, usize)>,
}

impl Graph {
    /// Of nearly symmetric conflicts some lie farther apart; those of data of 0 and 1 are many where
    /// colours are wanted.
    fn new(draw: &mut Draw, size: u32, class: Class, conflicts: Conflicts) -> Self {
        let points = draw.points(size, class);
        let near = conflicts != Conflicts::None
            && matches!(class, Class::Euclidean | Class::Clustered | Class::NearlySymmetric);
        let dense = conflicts == Conflicts::Colours && class == Class::ZeroOne;
        let mut edges = Vec::new();
        for i in 0..points.len() {
            for j in i + 1..points.len() {
                let eighths = draw.below(8);
                let (across, along) = (points[i].0 - points[j].0, points[i].1 - points[j].1);
                let joined = if near {
                    let farther = class == Class::NearlySymmetric && eighths == 0;
                    farther || across * across + along * along < 400 * 400
                } else {
                    eighths < if dense { 5 } else { 3 }
                };
                if j == i + 1 || joined {
                    edges.push((i, j));
                }
            }
        }
        Self { nodes: names('n', points.len()), points, edges }
    }

    /// Nodes and edges.
    fn blocks(&self) -> Blocks {
        let mut out = Blocks::new();
        out.list("V", &self.nodes);
        let edge = |&(i, j): &(usize, usize)| format!("{} {}", self.nodes[i], self.nodes[j]);
        out.by("E", "i, j", &self.edges.iter().map(edge).collect::<Vec<_>>());
        out
    }

    /// A number for each edge.
    fn costs(&self, draw: &mut Draw, class: Class) -> Vec<String> {
        let mut out = Vec::new();
        for &(i, j) in &self.edges {
            let cost = draw.cost(class, self.points[i], self.points[j]);
            out.push(format!("{} {} {cost}", self.nodes[i], self.nodes[j]));
        }
        out
    }
}

/// A network with costs and a root.
pub(super) fn tree(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let graph = Graph::new(&mut draw, size, class, Conflicts::None);
    let mut out = graph.blocks();
    out.by("c", "i, j", &graph.costs(&mut draw, class));
    out.value("r", &graph.nodes[0]);
    out
}

/// The same, with every other node to be connected.
pub(super) fn steiner(size: u32, class: Class, seed: u64) -> Blocks {
    let mut out = tree(size, class, seed);
    let connected = names('n', size as usize).into_iter().step_by(2).collect::<Vec<_>>();
    out.list("R", &connected);
    out
}

/// A network with a worth for each edge.
pub(super) fn worths(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let graph = Graph::new(&mut draw, size, class, Conflicts::None);
    let mut out = graph.blocks();
    out.by("w", "i, j", &graph.costs(&mut draw, class));
    out
}

/// Conflicts between nodes, each node with a worth.
pub(super) fn conflicts(size: u32, class: Class, seed: u64) -> Blocks {
    let mut draw = Draw::new(seed);
    let graph = Graph::new(&mut draw, size, class, Conflicts::Worths);
    let mut out = graph.blocks();
    let mut worths = Vec::new();
    for node in &graph.nodes {
        let worth = if class == Class::ZeroOne { draw.below(2) } else { 1 + draw.below(9) };
        worths.push(format!("{node} {worth}"));
    }
    out.by("w", "i", &worths);
    out
}

/// Conflicts between nodes, and one colour more than the conflicts of the busiest.
pub(super) fn colours(size: u32, class: Class, seed: u64) -> Blocks {
    let graph = Graph::new(&mut Draw::new(seed), size, class, Conflicts::Colours);
    let mut degrees = vec![0; graph.nodes.len()];
    for &(i, j) in &graph.edges {
        degrees[i] += 1;
        degrees[j] += 1;
    }
    let mut out = graph.blocks();
    out.value("h", degrees.iter().max().unwrap_or(&0) + 1);
    stable_sets(&mut out, &graph.nodes, &graph.edges);
    out
}
