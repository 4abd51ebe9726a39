//! A cut tree of an undirected network (Gomory, Hu 1961) by n − 1 maximum flows without
//! contraction (Gusfield 1990): the fundamental cut of each tree edge is a minimum cut between
//! its ends, and one that parts an odd number of terminals from the rest is a minimum one among
//! all cuts that do (Padberg, Rao 1982).

use crate::flow::Network;

/// A cut tree in the making: rooted at node 0.
#[derive(Debug, Clone)]
pub(crate) struct CutTree {
    edges: Vec<(usize, usize, f64)>,
    tolerance: f64,
    parent: Vec<usize>,
    next: usize,
}

impl CutTree {
    /// A tree for a network of at least one node, with no flow sent yet.
    pub(crate) fn new(nodes: usize, edges: Vec<(usize, usize, f64)>, tolerance: f64) -> Self {
        Self { edges, tolerance, parent: vec![0; nodes], next: 1 }
    }

    /// Whether all flows are sent.
    pub(crate) fn is_finished(&self) -> bool {
        self.next >= self.parent.len()
    }

    /// One maximum flow; the work done.
    pub(crate) fn step(&mut self) -> u64 {
        let (source, sink) = (self.next, self.parent[self.next]);
        self.next += 1;
        let mut network = Network::new(self.parent.len(), self.tolerance);
        for &(i, j, room) in &self.edges {
            network.join((i, j), room, room);
        }
        network.send(source, sink);
        let side = network.reached(source);
        for (node, parent) in self.parent.iter_mut().enumerate() {
            if node != source && side[node] && *parent == sink {
                *parent = source;
            }
        }
        if side[self.parent[sink]] {
            self.parent[source] = self.parent[sink];
            self.parent[sink] = source;
        }
        let size = self.parent.len() + self.edges.len();
        network.ticks + u64::try_from(size).unwrap_or(u64::MAX)
    }

    /// The side of each fundamental cut that does not hold node 0. `O(n³)` at worst.
    pub(crate) fn sides(&self) -> Vec<Vec<bool>> {
        let nodes = self.parent.len();
        let above = |node: usize| {
            std::iter::successors(Some(node), |&node| Some(self.parent[node]))
                .take_while(|&node| node != 0)
        };
        let under = |top: usize| (0..nodes).map(|node| above(node).any(|a| a == top)).collect();
        (1..nodes).map(under).collect()
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn cut(edges: &[(usize, usize, f64)], side: &[bool]) -> f64 {
        edges.iter().filter(|(i, j, _)| side[*i] != side[*j]).map(|(_, _, room)| room).sum()
    }

    fn least(
        edges: &[(usize, usize, f64)],
        sets: &[Vec<bool>],
        wanted: &dyn Fn(&[bool]) -> bool,
    ) -> f64 {
        let cuts = sets.iter().filter(|set| wanted(set)).map(|set| cut(edges, set));
        cuts.fold(f64::INFINITY, |a, b| if b < a { b } else { a })
    }

    fn flags(nodes: usize, mask: usize) -> Vec<bool> {
        (0..nodes).map(|i| mask >> i & 1 == 1).collect()
    }

    /// Against all cuts, between every two nodes and for every set of terminals.
    fn hold(nodes: usize, edges: &[(usize, usize, f64)]) {
        let mut tree = CutTree::new(nodes, edges.to_vec(), 1e-9);
        while !tree.is_finished() {
            tree.step();
        }
        let sides = tree.sides();
        let all: Vec<Vec<bool>> = (1..(1 << nodes) - 1).map(|mask| flags(nodes, mask)).collect();
        for (s, t) in (0..nodes).flat_map(|s| (0..s).map(move |t| (s, t))) {
            let parts = |set: &[bool]| set[s] != set[t];
            assert_eq!(least(edges, &sides, &parts), least(edges, &all, &parts));
        }
        for terminals in (1..1_usize << nodes).filter(|mask| mask.count_ones() % 2 == 0) {
            let terminals = flags(nodes, terminals);
            let odd = |set: &[bool]| {
                set.iter().zip(&terminals).filter(|(a, b)| **a && **b).count() % 2 == 1
            };
            assert_eq!(least(edges, &sides, &odd), least(edges, &all, &odd));
        }
    }

    #[test]
    fn fundamental_cuts_are_minimum_cuts() {
        use rand_core::Rng;
        let mut random = rand_pcg::Pcg64Mcg::new(1961);
        for nodes in 2..=6_usize {
            for _ in 0..40 {
                let pairs = (0..nodes).flat_map(|i| (i + 1..nodes).map(move |j| (i, j)));
                let edges: Vec<_> =
                    pairs.map(|(i, j)| (i, j, f64::from(random.next_u32() % 5))).collect();
                hold(nodes, &edges);
            }
        }
    }
}
