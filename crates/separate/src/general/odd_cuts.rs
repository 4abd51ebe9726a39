//! Blossoms and odd sets of degree rows `Σ x ≤ b` or `= b`, no column in more than two of them:
//! `x(E(W)) + x(F) ≤ ⌊(b(W) + |F|)/2⌋` for a set W of rows and a set F of columns with the upper
//! bound 1 in one row of W, b(W) + |F| odd. With F empty it is the odd set of a matching (Edmonds
//! 1965), else a blossom.
//!
//! Violated when `x(δ(W)∖F) + Σ_F (1 − x)` and the slacks of W come to less than 1: a minimum odd cut
//! (Padberg, Rao 1982), found on a cut tree with the weights min(x, 1 − x), the best F at each of its
//! cuts (Letchford, Reinelt, Theis 2008). The rounding of half the rows of W, with F at its upper
//! bounds, derives it.

use std::collections::{BTreeMap, BTreeSet};

use dashu_int::IBig;
use model::{ColumnId, Number, Row, nearest_f64};

use crate::cut_tree::CutTree;

use super::aggregate::{Aggregate, Frame};
use super::derivation::Used;
use super::mir::{LEAST, at_upper, plain};
use super::{Class, GeneralCut};

/// Degree rows at most.
const MOST_ROWS: usize = 300;
/// What has no flow left.
const TOLERANCE: f64 = 1e-9;

/// A degree row: its number, its coefficient, its b.
#[derive(Debug, Clone)]
struct Degree {
    row: usize,
    a: Number,
    odd: bool,
    slack: f64,
}

/// A column between two degree rows, or between one and none (0).
#[derive(Debug, Clone)]
struct Edge {
    ends: (usize, usize),
    column: ColumnId,
    value: f64,
    /// Whether its upper bound is 1.
    single: bool,
}

impl Edge {
    fn weight(&self) -> f64 {
        let other = 1.0 - self.value;
        let weight = if self.single && other < self.value { other } else { self.value };
        if weight > 0.0 { weight } else { 0.0 }
    }
}

/// The search for odd cuts at a point, one flow a step.
#[derive(Debug, Clone)]
pub struct OddCuts {
    degrees: Vec<Degree>,
    edges: Vec<Edge>,
    tree: CutTree,
}

impl OddCuts {
    /// The degree rows with what the point gives them; `None` where there are none, or their columns
    /// join two sides only, where nothing is violated. `O(entries · log)`.
    #[must_use]
    pub fn new(rows: &[Row], frame: &Frame, x: &[f64]) -> Option<Self> {
        let mut degrees = Vec::new();
        let mut ends: BTreeMap<ColumnId, Vec<usize>> = BTreeMap::new();
        for (number, row) in rows.iter().enumerate() {
            let Some(degree) = degree(number, row, frame, x) else { continue };
            let full = |column: &ColumnId| ends.get(column).is_some_and(|ends| ends.len() > 1);
            if degrees.len() < MOST_ROWS && !row.entries.iter().any(|(c, _)| full(c)) {
                degrees.push(degree);
                for (column, _) in &row.entries {
                    ends.entry(*column).or_default().push(degrees.len());
                }
            }
        }
        let edge = |(&column, ends): (&ColumnId, &Vec<usize>)| Edge {
            ends: (ends[0], ends.get(1).copied().unwrap_or(0)),
            column,
            value: x[column.index()],
            single: frame.bounds[column.index()].1 == Some(Number::ONE),
        };
        let edges: Vec<Edge> = ends.iter().map(edge).collect();
        if has_two_sides(degrees.len(), &edges) {
            return None;
        }
        let own = edges.iter().map(|edge| (edge.ends.0, edge.ends.1, edge.weight()));
        let slacks = degrees.iter().enumerate().map(|(k, degree)| (0, k + 1, degree.slack));
        let network = own.chain(slacks).filter(|(_, _, weight)| *weight > TOLERANCE).collect();
        Some(Self { tree: CutTree::new(degrees.len() + 1, network, TOLERANCE), degrees, edges })
    }

    /// One flow; the work done, or `None` when all are sent.
    pub fn step(&mut self) -> Option<u64> {
        (!self.tree.is_finished()).then(|| self.tree.step())
    }

    /// The cuts of the tree that the point violates.
    #[must_use]
    pub fn cuts(&self, rows: &[Row], frame: &Frame, x: &[f64]) -> Vec<GeneralCut> {
        self.tree.sides().iter().filter_map(|side| self.cut(side, rows, frame, x)).collect()
    }

    fn cut(&self, side: &[bool], rows: &[Row], frame: &Frame, x: &[f64]) -> Option<GeneralCut> {
        let inside: Vec<usize> = (0..self.degrees.len()).filter(|k| side[k + 1]).collect();
        let crossing = |edge: &&Edge| side[edge.ends.0] != side[edge.ends.1];
        let edges: Vec<&Edge> = self.edges.iter().filter(crossing).collect();
        let high = |edge: &&&Edge| edge.single && edge.value > 0.5;
        let mut single: BTreeSet<ColumnId> =
            edges.iter().filter(high).map(|edge| edge.column).collect();
        let mut weight = inside.iter().fold(0.0, |sum, &k| sum + self.degrees[k].slack);
        weight = edges.iter().fold(weight, |sum, edge| sum + edge.weight());
        let odd = inside.iter().fold(single.len() % 2 == 1, |odd, &k| odd ^ self.degrees[k].odd);
        if !odd {
            let loss = |edge: &Edge| (2.0 * edge.value - 1.0).abs();
            let least = |a: &'_ Edge, b: &'_ Edge| loss(b) < loss(a);
            let free = edges.iter().filter(|edge| edge.single).copied();
            let turned = free.reduce(|a, b| if least(a, b) { b } else { a })?;
            weight += loss(turned);
            if !single.remove(&turned.column) {
                single.insert(turned.column);
            }
        }
        if weight > 1.0 - LEAST {
            return None;
        }
        let mut sum = Aggregate::default();
        for k in inside {
            let Degree { row, a, .. } = &self.degrees[k];
            let half = Number::from_parts(IBig::ONE, 2_u32.into()) / a;
            let used = Used { row: *row, upper: true };
            sum.add_side(frame, (used, &rows[*row]), &half);
        }
        let crossed = edges.iter().map(|edge| edge.column);
        let wrong = |c: &ColumnId| at_upper(frame, *c, x) != Some(single.contains(c));
        let flips = crossed.filter(wrong).collect();
        let class = if single.is_empty() { Class::OddSet } else { Class::Blossom };
        plain(class, &sum, frame, x, &flips)
    }
}

/// A row `Σ a x ≤ a b` of whole columns that are at least 0, a > 0, b whole.
fn degree(number: usize, row: &Row, frame: &Frame, x: &[f64]) -> Option<Degree> {
    let (side, a) = (row.upper.as_ref()?, &row.entries.first()?.1);
    let fits = |(column, own): &(ColumnId, Number)| {
        own == a
            && frame.integer[column.index()]
            && frame.bounds[column.index()].0 == Some(Number::ZERO)
    };
    let b = side / a;
    if *a <= Number::ZERO || !b.is_int() || row.entries.len() < 2 || !row.entries.iter().all(fits) {
        return None;
    }
    let slack = (nearest_f64(side) - row.activity(x)) / nearest_f64(a);
    let odd = b.numerator() % 2_i32 != 0;
    Some(Degree { row: number, a: a.clone(), odd, slack: if slack > 0.0 { slack } else { 0.0 } })
}

/// Whether the rows split in two sides so that no edge joins two of the same side: the rows are then
/// totally unimodular.
fn has_two_sides(degrees: usize, edges: &[Edge]) -> bool {
    let mut next: Vec<Vec<usize>> = vec![Vec::new(); degrees + 1];
    for edge in edges.iter().filter(|edge| edge.ends.1 > 0) {
        next[edge.ends.0].push(edge.ends.1);
        next[edge.ends.1].push(edge.ends.0);
    }
    let mut side: Vec<Option<bool>> = vec![None; degrees + 1];
    for start in 1..=degrees {
        if side[start].is_some() {
            continue;
        }
        side[start] = Some(false);
        let mut stack = vec![start];
        while let Some(here) = stack.pop() {
            for &other in &next[here] {
                if side[other] == side[here] {
                    return false;
                }
                if side[other].is_none() {
                    side[other] = side[here].map(|side| !side);
                    stack.push(other);
                }
            }
        }
    }
    true
}
