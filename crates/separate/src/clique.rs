//! The most violated clique, for terms that split by element: a clique of most weight.
//!
//! First greedily from each element; then exactly, by branch and bound with the bound of a
//! weighted colouring (Babel 1994), up to a node limit. What is found is extended by elements
//! that cost nothing: the larger clique is the stronger row.

use std::collections::BTreeMap;

use model::LabelId;

use crate::conditions::Fixed;
use crate::quadratic::{Answer, Minimum, Quadratic};

/// The most nodes of one branch and bound.
pub(crate) const MOST_NODES: u32 = 100_000;

/// The graph of the condition, by places.
#[derive(Debug, Clone)]
pub(crate) struct Cliques {
    joined: Vec<Vec<bool>>,
}

/// One level of the search: candidates in the order of their colours, each with a bound on what
/// it and those before it can add, and the weight so far.
struct Level {
    candidates: Vec<(usize, f64)>,
    weight: f64,
}

impl Cliques {
    /// The graph of `edges` over `ground`.
    pub(crate) fn new(ground: &[LabelId], edges: &[(LabelId, LabelId)]) -> Self {
        let places: BTreeMap<LabelId, usize> =
            ground.iter().enumerate().map(|(place, &label)| (label, place)).collect();
        let mut joined = vec![vec![false; ground.len()]; ground.len()];
        for (i, j) in edges {
            if let (Some(&i), Some(&j)) = (places.get(i), places.get(j)) {
                joined[i][j] = true;
                joined[j][i] = true;
            }
        }
        Self { joined }
    }

    fn fits(&self, set: &[bool], place: usize) -> bool {
        !set[place] && (0..set.len()).all(|other| !set[other] || self.joined[place][other])
    }

    /// A clique from each element that gains, taking the greatest gain each time. `O(n³)`.
    pub(crate) fn greedy(&self, quadratic: &Quadratic, fixed: &[Fixed]) -> Vec<Vec<bool>> {
        let gain = |i: usize| -quadratic.linear[i];
        let mut order: Vec<usize> =
            (0..fixed.len()).filter(|&i| fixed[i] == Fixed::Free && gain(i) > 0.0).collect();
        order.sort_by(|&a, &b| gain(b).total_cmp(&gain(a)).then(a.cmp(&b)));
        let mut sets = Vec::new();
        for &start in &order {
            let mut set = vec![false; fixed.len()];
            let held = (0..fixed.len()).filter(|&i| fixed[i] == Fixed::In);
            for place in held.chain([start]).chain(order.iter().copied()) {
                if self.fits(&set, place) {
                    set[place] = true;
                }
            }
            self.extend(&mut set, quadratic, fixed);
            sets.push(set);
        }
        sets
    }

    /// Adds elements that cost nothing.
    fn extend(&self, set: &mut [bool], quadratic: &Quadratic, fixed: &[Fixed]) {
        for place in 0..set.len() {
            let idle = fixed[place] == Fixed::Free && quadratic.linear[place] <= 0.0;
            if idle && self.fits(set, place) {
                set[place] = true;
            }
        }
    }

    /// The most violated clique that agrees with `fixed`, if it is violated by more than
    /// `threshold`. Up to [`MOST_NODES`] nodes.
    pub(crate) fn minimise(
        &self,
        quadratic: &Quadratic,
        fixed: &[Fixed],
        threshold: f64,
    ) -> Answer {
        let held: Vec<usize> = (0..fixed.len()).filter(|&i| fixed[i] == Fixed::In).collect();
        let clique = |i: &usize| held.iter().all(|j| i == j || self.joined[*i][*j]);
        if !held.iter().all(clique) {
            return Answer::none(held.len());
        }
        let mut base = vec![false; fixed.len()];
        held.iter().for_each(|&i| base[i] = true);
        let gain = |i: usize| -quadratic.linear[i];
        let free = |&i: &usize| fixed[i] == Fixed::Free && gain(i) > 0.0 && clique(&i);
        let candidates: Vec<usize> = (0..fixed.len()).filter(free).collect();
        let mut least = threshold - quadratic.violation(&base);
        let mut best = (least < 0.0).then(|| base.clone());
        least = if least < 0.0 { 0.0 } else { least };
        let (found, nodes) = self.search(candidates, &gain, least);
        if let Some(found) = found {
            found.iter().for_each(|&i| base[i] = true);
            best = Some(base);
        }
        let minimum = best.map(|smallest| {
            let mut largest = smallest.clone();
            self.extend(&mut largest, quadratic, fixed);
            Minimum { smallest, largest }
        });
        let ticks = u64::from(nodes) * u64::try_from(fixed.len()).unwrap_or(u64::MAX);
        Answer { minimum, ticks, cut_short: nodes >= MOST_NODES }
    }

    /// A clique of most weight among candidates, if that is more than `least`; and the nodes.
    fn search(
        &self,
        candidates: Vec<usize>,
        gain: &impl Fn(usize) -> f64,
        mut least: f64,
    ) -> (Option<Vec<usize>>, u32) {
        let mut best = None;
        let mut nodes = 0;
        let mut chosen: Vec<usize> = Vec::new();
        let mut levels = vec![Level { candidates: self.coloured(candidates, gain), weight: 0.0 }];
        while let Some(level) = levels.last_mut() {
            let next = level.candidates.pop().filter(|(_, bound)| level.weight + bound > least);
            let Some((place, _)) = next.filter(|_| nodes < MOST_NODES) else {
                levels.pop();
                chosen.pop();
                continue;
            };
            nodes += 1;
            let weight = level.weight + gain(place);
            let rest: Vec<usize> = level
                .candidates
                .iter()
                .map(|(other, _)| *other)
                .filter(|&other| self.joined[place][other])
                .collect();
            chosen.push(place);
            if weight > least {
                least = weight;
                best = Some(chosen.clone());
            }
            levels.push(Level { candidates: self.coloured(rest, gain), weight });
        }
        (best, nodes)
    }

    /// Candidates by colour classes of elements that are not joined: of each class a clique
    /// takes one element at most.
    fn coloured(&self, places: Vec<usize>, gain: &impl Fn(usize) -> f64) -> Vec<(usize, f64)> {
        let mut classes: Vec<Vec<usize>> = Vec::new();
        let mut order = places;
        order.sort_by(|&a, &b| gain(b).total_cmp(&gain(a)).then(a.cmp(&b)));
        for place in order {
            let apart = |class: &&mut Vec<usize>| class.iter().all(|&i| !self.joined[place][i]);
            match classes.iter_mut().find(apart) {
                Some(class) => class.push(place),
                None => classes.push(vec![place]),
            }
        }
        let mut before = 0.0;
        let mut out = Vec::new();
        for class in classes {
            // the greatest gain of a class comes first in it, and last here
            let greatest = class.first().map_or(0.0, |&i| gain(i));
            out.extend(class.iter().rev().map(|&i| (i, before + gain(i))));
            before += greatest;
        }
        out
    }
}
