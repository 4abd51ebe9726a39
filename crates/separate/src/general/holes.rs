//! Odd holes of the conflict graph: `Σ_C x ≤ (|C| − 1)/2` for an odd cycle C.
//!
//! With the weight 1 − x_i − x_j ≥ 0 on each edge it is violated exactly when the cycle weighs less
//! than 1. The lightest odd closed walk through a literal is a shortest path from one of its copies
//! to the other in the graph in which every edge goes from a left copy to a right one (Grötschel,
//! Lovász, Schrijver 1988, section 9.1); a cycle is cut out of the walk. Literals that are joined to
//! the whole cycle and to one another come in with (|C| − 1)/2 (Padberg 1973).

use super::conflicts::Conflicts;
use super::derivation::Literal;
use super::mir::LEAST;
use super::{Class, GeneralCut};

impl Conflicts {
    /// The odd hole of at least five literals through the one at `start` that the point violates
    /// most. `O(fractional²)`.
    #[must_use]
    pub fn hole(&self, start: usize, x: &[f64]) -> Option<GeneralCut> {
        let walk = self.odd_walk(start)?;
        let cycle = odd_part(walk);
        if cycle.len() < 5 {
            return None;
        }
        let cycle: Vec<Literal> = cycle.into_iter().map(|k| self.fractional[k].0).collect();
        let mut hubs: Vec<Literal> = Vec::new();
        for literal in self.around(cycle[0]) {
            let all = cycle.iter().chain(&hubs);
            if all.into_iter().all(|&other| self.witness(other, literal).is_some()) {
                hubs.push(literal);
            }
        }
        self.cut(Class::OddHole, cycle, hubs, x)
    }

    /// The lightest odd closed walk through a literal that weighs less than 1: its places, the first
    /// one not repeated. Copy k is left, copy k + n right.
    fn odd_walk(&self, start: usize) -> Option<Vec<usize>> {
        let n = self.len();
        let mut length = vec![f64::INFINITY; 2 * n];
        let mut before = vec![None; 2 * n];
        let mut done = vec![false; 2 * n];
        length[start] = 0.0;
        loop {
            let open = (0..2 * n).filter(|&k| !done[k] && length[k] < 1.0 - LEAST);
            let here = open.reduce(|a, b| if length[b] < length[a] { b } else { a })?;
            if here == start + n {
                break;
            }
            done[here] = true;
            let (own, side) = (here % n, if here < n { n } else { 0 });
            for other in (0..n).filter(|&other| self.joined[own][other]) {
                let gap = 1.0 - self.fractional[own].1 - self.fractional[other].1;
                let far = length[here] + if gap > 0.0 { gap } else { 0.0 };
                if far < length[other + side] - 1e-12 {
                    length[other + side] = far;
                    before[other + side] = Some(here);
                }
            }
        }
        let back = std::iter::successors(before[start + n], |&k| before[k]);
        Some(back.map(|k| k % n).collect())
    }
}

/// An odd cycle without a literal twice that is part of an odd closed walk.
fn odd_part(mut walk: Vec<usize>) -> Vec<usize> {
    loop {
        let twice = (0..walk.len()).find_map(|end| {
            let begin = walk[..end].iter().position(|k| *k == walk[end])?;
            Some((begin, end))
        });
        let Some((begin, end)) = twice else { return walk };
        if (end - begin) % 2 == 1 {
            walk = walk[begin..end].to_vec();
        } else {
            walk.drain(begin..end);
        }
    }
}
