//! The most violated set with an odd (or even) number of elements.
//!
//! Written with undirected pairs, `−violation(S) = constant + Σ_{i∈S} linear_i + cut(S)`. Where no
//! linear term is negative (as at points that meet the degree rows of a matching) each becomes an
//! edge to a slack node, and the odd set is a minimum odd cut on a cut tree (Padberg, Rao 1982):
//! n flows. Otherwise, and where elements are fixed, it is the smallest minimiser with one element
//! in and one out, for some two elements (Goemans, Ramakrishnan 1995): n(n − 1) flows.

use crate::conditions::Fixed;
use crate::cut_tree::CutTree;
use crate::quadratic::Quadratic;

/// The search for such a set, one flow a step.
#[derive(Debug, Clone)]
pub(crate) struct ParityMinimum {
    pub(crate) fixed: Vec<Fixed>,
    odd: bool,
    way: Way,
    /// Sets of the wanted parity with their scaled violation.
    pub(crate) sets: Vec<(f64, Vec<bool>)>,
}

#[derive(Debug, Clone)]
enum Way {
    Tree(CutTree),
    /// The next pair of elements.
    Pairs(usize),
    Done,
}

impl ParityMinimum {
    /// Linear terms down to `−slightly` count as 0.
    pub(crate) fn new(quadratic: &Quadratic, fixed: Vec<Fixed>, odd: bool, slightly: f64) -> Self {
        let free = fixed.iter().all(|fixed| *fixed == Fixed::Free);
        let tree = if odd && free { tree(quadratic, slightly) } else { None };
        let mut search =
            Self { fixed, odd, way: tree.map_or(Way::Pairs(0), Way::Tree), sets: Vec::new() };
        if let Way::Pairs(_) = search.way {
            for all in [false, true] {
                let side = |fixed: &Fixed| match fixed {
                    Fixed::Free => all,
                    Fixed::In => true,
                    Fixed::Out => false,
                };
                let set: Vec<bool> = search.fixed.iter().map(side).collect();
                search.note(quadratic, set);
            }
        }
        search
    }

    /// Whether nothing is left to do.
    pub(crate) fn is_finished(&self) -> bool {
        matches!(self.way, Way::Done)
    }

    /// One flow; the work done.
    pub(crate) fn step(&mut self, quadratic: &Quadratic, threshold: f64) -> u64 {
        match &mut self.way {
            Way::Done => 0,
            Way::Tree(tree) if !tree.is_finished() => tree.step(),
            Way::Tree(tree) => {
                let sides = tree.sides();
                let work = sides.len() * self.fixed.len();
                self.way = Way::Done;
                for side in sides {
                    self.note(quadratic, side[1..].to_vec());
                }
                u64::try_from(work).unwrap_or(u64::MAX)
            }
            Way::Pairs(next) => {
                let size = self.fixed.len();
                let (inside, outside) = (*next / size.max(1), *next % size.max(1));
                *next += 1;
                if inside >= size {
                    self.way = Way::Done;
                    return 1;
                }
                self.pair(quadratic, (inside, outside), threshold)
            }
        }
    }

    /// The smallest and largest minimisers with one element in and one out.
    fn pair(
        &mut self,
        quadratic: &Quadratic,
        (inside, outside): (usize, usize),
        threshold: f64,
    ) -> u64 {
        let fits = self.fixed[inside] != Fixed::Out && self.fixed[outside] != Fixed::In;
        if !fits || inside == outside {
            return 1;
        }
        let mut fixed = self.fixed.clone();
        fixed[inside] = Fixed::In;
        fixed[outside] = Fixed::Out;
        let (minimum, ticks) = quadratic.minimise(&fixed);
        if quadratic.violation(&minimum.smallest) > threshold {
            self.note(quadratic, minimum.smallest);
            self.note(quadratic, minimum.largest);
        }
        ticks
    }

    fn note(&mut self, quadratic: &Quadratic, set: Vec<bool>) {
        let odd = set.iter().filter(|inside| **inside).count() % 2 == 1;
        if odd == self.odd {
            self.sets.push((quadratic.violation(&set), set));
        }
    }
}

/// The network with the slack node 0, where no linear term is negative.
fn tree(quadratic: &Quadratic, slightly: f64) -> Option<CutTree> {
    let mut linear = quadratic.linear.clone();
    let mut edges = Vec::new();
    for &(i, j, there, back) in &quadratic.pairs {
        let net = (there - back) / 2.0;
        linear[i] += net;
        linear[j] -= net;
        edges.push((i + 1, j + 1, (there + back) / 2.0));
    }
    if linear.iter().any(|&value| value < -slightly) {
        return None;
    }
    let slack = linear.iter().enumerate().filter(|(_, value)| **value > 0.0);
    edges.extend(slack.map(|(i, &value)| (0, i + 1, value)));
    Some(CutTree::new(linear.len() + 1, edges, quadratic.tolerance()))
}
