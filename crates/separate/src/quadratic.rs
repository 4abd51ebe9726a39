//! The violation at one point as a function that a minimum cut minimises:
//! `−scale·violation(S) = constant + Σ_{i∈S} linear_i + Σ_{i∈S, j∉S} a_ij` with a ≥ 0.
//!
//! A pair inside S is turned into such terms by halves: with v ≥ 0,
//! `−v·[i,j∈S] = −v/2·[i∈S] − v/2·[j∈S] + v/2·[exactly one in S]`. At points that meet
//! degree equations the node terms then cancel, and what is left is a cut.
//!
//! Source: Picard, Ratliff 1975; Padberg, Wolsey 1983 for forests.

use std::collections::BTreeMap;

use crate::compiled::{Compiled, Kind};
use crate::conditions::Fixed;
use crate::flow::Network;
use crate::rounding::Rounding;

/// The function at one point.
#[derive(Debug, Clone)]
pub(crate) struct Quadratic {
    constant: f64,
    pub(crate) linear: Vec<f64>,
    /// Pairs i < j with a_ij and a_ji, by rising pair.
    pub(crate) pairs: Vec<(usize, usize, f64, f64)>,
    tolerance: f64,
    /// What is rounded; the function holds it without the rounding.
    rounding: Option<Rounding>,
}

/// What one search for the most violated set gave.
#[derive(Debug, Clone)]
pub(crate) struct Answer {
    /// `None`: no set meets the condition and is violated.
    pub(crate) minimum: Option<Minimum>,
    pub(crate) ticks: u64,
    /// Whether a more violated set may have been missed.
    pub(crate) cut_short: bool,
}

impl Answer {
    /// An exact answer.
    pub(crate) fn of(minimum: Minimum, work: usize) -> Self {
        let ticks = u64::try_from(work).unwrap_or(u64::MAX);
        Self { minimum: Some(minimum), ticks, cut_short: false }
    }

    /// There is none.
    pub(crate) fn none(work: usize) -> Self {
        let ticks = u64::try_from(work).unwrap_or(u64::MAX);
        Self { minimum: None, ticks, cut_short: false }
    }
}

/// The smallest and the largest set at which the minimum is attained.
#[derive(Debug, Clone)]
pub(crate) struct Minimum {
    pub(crate) smallest: Vec<bool>,
    pub(crate) largest: Vec<bool>,
}

impl Quadratic {
    /// The function at `x`; pairs up to `tolerance` are dropped, and so are those that a
    /// slightly negative x would give the wrong sign. `O(terms · log)`.
    pub(crate) fn new(compiled: &Compiled, x: &[f64], tolerance: f64) -> Self {
        let mut constant = -compiled.constant;
        let mut linear: Vec<f64> = compiled.weights.iter().map(|weight| -weight).collect();
        let mut pairs: BTreeMap<(usize, usize), (f64, f64)> = BTreeMap::new();
        let mut join = |i: usize, j: usize, there: f64, back: f64| {
            let (key, a, b) = if i < j { ((i, j), there, back) } else { ((j, i), back, there) };
            let entry = pairs.entry(key).or_insert((0.0, 0.0));
            entry.0 += a;
            entry.1 += b;
        };
        for term in &compiled.terms {
            let value = -term.coefficient * x[term.column];
            let small = value.abs() <= tolerance;
            match term.kind {
                Kind::Always => constant += value,
                Kind::Element(i) => linear[i] += value,
                Kind::Outside(i) => {
                    constant += value;
                    linear[i] -= value;
                }
                Kind::Inside(i, j) if value < 0.0 => {
                    linear[i] += value / 2.0;
                    linear[j] += value / 2.0;
                    if !small {
                        join(i, j, -value / 2.0, -value / 2.0);
                    }
                }
                Kind::Leaving(i, j) if value > 0.0 && !small => join(i, j, value, 0.0),
                Kind::Crossing(i, j) if value > 0.0 && !small => join(i, j, value, value),
                Kind::Inside(..) | Kind::Leaving(..) | Kind::Crossing(..) => {}
            }
        }
        let pairs = pairs.into_iter().map(|((i, j), (a, b))| (i, j, a, b)).collect();
        if let Some(rounding) = &compiled.rounding {
            let (always, weights) = rounding.linear();
            constant -= always;
            linear.iter_mut().zip(weights).for_each(|(sum, weight)| *sum -= weight);
        }
        Self { constant, linear, pairs, tolerance, rounding: compiled.rounding.clone() }
    }

    /// Takes rounding for nothing: right at points that [`Compiled::is_granular`] names.
    pub(crate) fn without_rounding(mut self) -> Self {
        self.rounding = None;
        self
    }

    /// Residual capacities up to this count as none.
    pub(crate) fn tolerance(&self) -> f64 {
        self.tolerance
    }

    /// Whether a sum is rounded.
    pub(crate) fn is_rounded(&self) -> bool {
        self.rounding.is_some()
    }

    /// The most that rounding adds to a violation.
    pub(crate) fn most_gain(&self) -> f64 {
        self.rounding.as_ref().map_or(0.0, Rounding::most_gain)
    }

    /// The violation with the rounding. `O(n + pairs)`.
    pub(crate) fn rounded_violation(&self, set: &[bool]) -> f64 {
        self.violation(set) + self.gain(set)
    }

    /// What rounding adds to the violation of a set. `O(n)`.
    pub(crate) fn gain(&self, set: &[bool]) -> f64 {
        self.rounding.as_ref().map_or(0.0, |rounding| rounding.gain(set))
    }

    /// `scale·violation(set)` but for rounding. `O(n + pairs)`.
    pub(crate) fn violation(&self, set: &[bool]) -> f64 {
        let mut sum = self.constant;
        for (value, _) in self.linear.iter().zip(set).filter(|(_, inside)| **inside) {
            sum += value;
        }
        for &(i, j, there, back) in &self.pairs {
            match (set[i], set[j]) {
                (true, false) => sum += there,
                (false, true) => sum += back,
                _ => {}
            }
        }
        -sum
    }

    /// The sets of largest violation that agree with `fixed`: one minimum cut.
    pub(crate) fn minimise(&self, fixed: &[Fixed]) -> (Minimum, u64) {
        let nodes = fixed.len();
        let (source, sink) = (nodes, nodes + 1);
        let place = |i: usize| match fixed[i] {
            Fixed::Free => i,
            Fixed::In => source,
            Fixed::Out => sink,
        };
        let mut network = Network::new(nodes + 2, self.tolerance);
        for (i, &value) in self.linear.iter().enumerate() {
            if fixed[i] == Fixed::Free && value < 0.0 {
                network.join((source, i), -value, 0.0);
            } else if fixed[i] == Fixed::Free && value > 0.0 {
                network.join((i, sink), value, 0.0);
            }
        }
        for &(i, j, there, back) in &self.pairs {
            let ends = (place(i), place(j));
            let both_fixed = ends.0 >= nodes && ends.1 >= nodes;
            if !both_fixed {
                network.join(ends, there, back);
            }
        }
        network.send(source, sink);
        let (reached, reaching) = (network.reached(source), network.reaching(sink));
        let side = |i: usize, free: bool| match fixed[i] {
            Fixed::Free => free,
            Fixed::In => true,
            Fixed::Out => false,
        };
        let minimum = Minimum {
            smallest: (0..nodes).map(|i| side(i, reached[i])).collect(),
            largest: (0..nodes).map(|i| side(i, !reaching[i])).collect(),
        };
        let size = u64::try_from(nodes + self.pairs.len()).unwrap_or(u64::MAX);
        (minimum, network.ticks + size)
    }

    /// Whether a set and its complement are equally violated, up to `tolerance` a node: no
    /// node terms, and as much out of each node as into it.
    pub(crate) fn is_balanced(&self, tolerance: f64) -> bool {
        let mut net = vec![0.0; self.linear.len()];
        for &(i, j, there, back) in &self.pairs {
            net[i] += there - back;
            net[j] -= there - back;
        }
        let small = |value: &f64| value.abs() <= tolerance;
        self.linear.iter().all(small) && net.iter().all(small)
    }
}
