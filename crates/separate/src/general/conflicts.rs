//! The conflict graph: two literals (a binary column or its complement) are joined where a row does
//! not let both be 1. Cliques of it (Padberg 1973; Atamtürk, Nemhauser, Savelsbergh 2000): greedily
//! from each literal with a fractional value, exactly where there are few, and then as large as it
//! goes.
//!
//! Two literals of a row `Σ a x ≤ b` are joined when the least activity of the row with both at 1 is
//! over b, which is looked for in floating point with a margin; the check is exact.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Number, Row, nearest_f64};

use super::aggregate::Frame;
use super::derivation::{Derivation, Literal, Used};
use super::mir::{LEAST, efficacy};
use super::{Class, GeneralCut};

/// How much over its side, relative to it, a row must be for two literals to be joined.
const MARGIN: f64 = 1e-6;
/// Literals of one row that are looked at, heaviest first.
const MOST_LITERALS: usize = 300;
/// Entries of rows that one step reads.
const AT_ONCE: u64 = 2_000;
/// Literals with a fractional value among which the best clique is found exactly.
const EXACT: usize = 40;
/// Steps of that search.
const MOST_STEPS: u32 = 20_000;

/// One side of a row: how far its least activity is from it, and what each literal adds, by falling
/// weight.
#[derive(Debug, Clone)]
struct Half {
    used: Used,
    room: f64,
    weights: Vec<(f64, Literal)>,
}

/// How far the graph is.
#[derive(Debug, Clone, Copy)]
enum Stage {
    /// The next row that is read.
    Read(usize),
    /// The next literal that is joined to the others.
    Join(usize),
}

/// The conflict graph of some rows at a point. It is whole once [`Self::step`] says so; only then is it
/// asked for cliques and holes.
#[derive(Debug, Clone)]
pub struct Conflicts {
    binary: Vec<bool>,
    stage: Stage,
    halves: Vec<Half>,
    /// The sides in which a literal stands, with its weight.
    of: BTreeMap<Literal, Vec<(usize, f64)>>,
    /// Literals with a fractional value, by falling value, each with what it is joined to among them.
    pub(super) fractional: Vec<(Literal, f64)>,
    pub(super) joined: Vec<Vec<bool>>,
}

impl Conflicts {
    /// A graph in which nothing is read yet. `O(columns)`.
    #[must_use]
    pub fn new(frame: &Frame, columns: usize) -> Self {
        Self {
            binary: (0..columns).map(|c| frame.is_binary(ColumnId::from_index(c))).collect(),
            stage: Stage::Read(0),
            halves: Vec::new(),
            of: BTreeMap::new(),
            fractional: Vec::new(),
            joined: Vec::new(),
        }
    }

    /// Reads some rows or joins one literal to the others; the work done, or `None` once the graph is
    /// whole. `O(entries + fractional² · sides of each)` in all.
    pub fn step(&mut self, rows: &[Row], frame: &Frame, x: &[f64]) -> Option<u64> {
        match self.stage {
            Stage::Read(next) => Some(self.read(next, rows, frame, x)),
            Stage::Join(next) => {
                let (a, _) = *self.fractional.get(next)?;
                let row = self.fractional.iter().map(|&(b, _)| self.witness(a, b).is_some());
                let row: Vec<bool> = row.collect();
                self.joined.push(row);
                self.stage = Stage::Join(next + 1);
                let own = self.of.get(&a).map_or(0, Vec::len);
                Some((self.len() * (1 + own)) as u64)
            }
        }
    }

    /// Reads rows until some entries are seen.
    fn read(&mut self, mut next: usize, rows: &[Row], frame: &Frame, x: &[f64]) -> u64 {
        let mut work = 1;
        while work < AT_ONCE && next < rows.len() {
            work += 1 + rows[next].entries.len() as u64;
            for upper in [true, false] {
                let used = Used { row: next, upper };
                let Some(half) = half(&rows[next], used, frame, &self.binary) else { continue };
                for &(weight, literal) in &half.weights {
                    self.of.entry(literal).or_default().push((self.halves.len(), weight));
                }
                self.halves.push(half);
            }
            next += 1;
        }
        self.stage = Stage::Read(next);
        if next >= rows.len() {
            let inside = |literal: &&Literal| (1e-6..1.0 - 1e-6).contains(&value(**literal, x));
            self.fractional = self.of.keys().filter(inside).map(|&l| (l, value(l, x))).collect();
            self.fractional.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.cmp(&b.0)));
            self.fractional.truncate(MOST_LITERALS);
            self.stage = Stage::Join(0);
        }
        work
    }

    /// How many literals have a fractional value.
    #[must_use]
    pub fn len(&self) -> usize {
        self.fractional.len()
    }

    /// Whether no literal has a fractional value.
    #[must_use]
    pub fn is_empty(&self) -> bool {
        self.fractional.is_empty()
    }

    /// A row that two literals break together.
    pub(super) fn witness(&self, a: Literal, b: Literal) -> Option<Used> {
        if a.column == b.column {
            return None;
        }
        let mut others = self.of.get(&b)?.iter().peekable();
        for &(place, weight) in self.of.get(&a)? {
            while others.peek().is_some_and(|(other, _)| *other < place) {
                others.next();
            }
            let other = others.peek().filter(|(other, _)| *other == place);
            let room = self.halves[place].room;
            if other.is_some_and(|(_, w)| weight + w > room + MARGIN * (1.0 + room.abs())) {
                return Some(self.halves[place].used);
            }
        }
        None
    }

    /// What may be joined to a literal: those of its rows.
    pub(super) fn around(&self, a: Literal) -> BTreeSet<Literal> {
        let places = self.of.get(&a).into_iter().flatten();
        let near = places.flat_map(|(place, _)| self.halves[*place].weights.iter());
        near.map(|&(_, literal)| literal).filter(|&b| self.witness(a, b).is_some()).collect()
    }

    /// The cliques that the point violates: one greedily from the literal at `start`; for the last
    /// one, the best of all where there are few.
    #[must_use]
    pub fn cliques(&self, start: usize, x: &[f64]) -> Vec<GeneralCut> {
        let mut sets = vec![self.greedy(start)];
        if start + 1 == self.len() && self.len() <= EXACT {
            sets.push(self.best());
        }
        let sum = |set: &Vec<usize>| set.iter().fold(0.0, |sum, &k| sum + self.fractional[k].1);
        let violated = sets.into_iter().filter(|set| sum(set) > 1.0 + LEAST);
        violated.filter_map(|set| self.clique(&set, x)).collect()
    }

    /// From one literal, the next of the largest value that is joined to all.
    fn greedy(&self, start: usize) -> Vec<usize> {
        let mut set = vec![start];
        for next in 0..self.len() {
            if set.iter().all(|&k| self.joined[next][k]) {
                set.push(next);
            }
        }
        set
    }

    /// The clique of the largest value, by branch and bound over the literals in order.
    fn best(&self) -> Vec<usize> {
        let mut best = (1.0, Vec::new());
        let mut stack = vec![(0.0, Vec::new(), (0..self.len()).collect::<Vec<usize>>())];
        let mut steps = 0;
        while let Some((sum, set, mut rest)) = stack.pop() {
            steps += 1;
            let more = rest.iter().fold(sum, |sum, &k| sum + self.fractional[k].1);
            if sum > best.0 {
                best = (sum, set.clone());
            }
            if rest.is_empty() || more <= best.0 + LEAST || steps > MOST_STEPS {
                continue;
            }
            let first = rest.remove(0);
            let near = rest.iter().copied().filter(|&k| self.joined[first][k]).collect();
            stack.push((sum, set.clone(), rest));
            let mut with: Vec<usize> = set;
            with.push(first);
            stack.push((sum + self.fractional[first].1, with, near));
        }
        best.1
    }

    fn clique(&self, set: &[usize], x: &[f64]) -> Option<GeneralCut> {
        let mut hubs: Vec<Literal> = set.iter().map(|&k| self.fractional[k].0).collect();
        for literal in self.around(*hubs.first()?) {
            if hubs.iter().all(|&hub| self.witness(hub, literal).is_some()) {
                hubs.push(literal);
            }
        }
        self.cut(Class::Clique, Vec::new(), hubs, x)
    }

    /// The cut of a cycle and its hubs.
    pub(super) fn cut(
        &self,
        class: Class,
        cycle: Vec<Literal>,
        hubs: Vec<Literal>,
        x: &[f64],
    ) -> Option<GeneralCut> {
        let next = cycle.iter().skip(1).chain(cycle.first());
        let mut witnesses: Option<Vec<Used>> =
            cycle.iter().zip(next).map(|(&a, &b)| self.witness(a, b)).collect();
        for (place, &hub) in hubs.iter().enumerate() {
            for &other in cycle.iter().chain(&hubs[..place]) {
                witnesses.as_mut()?.push(self.witness(hub, other)?);
            }
        }
        let most = if cycle.is_empty() { 1 } else { cycle.len() / 2 };
        let mut side = Number::from(most);
        let mut entries: BTreeMap<_, Number> = BTreeMap::new();
        let own = cycle.iter().map(|literal| (literal, 1));
        for (literal, count) in own.chain(hubs.iter().map(|literal| (literal, most))) {
            let a = Number::from(count);
            if !literal.plain {
                side -= &a;
            }
            *entries.entry(literal.column).or_default() += if literal.plain { a } else { -a };
        }
        let entries = entries.into_iter().filter(|(_, a)| !a.is_zero()).collect();
        let row = Row { entries, lower: None, upper: Some(side) };
        let efficacy = efficacy(&row, x);
        let derivation = Derivation::Conflicts { cycle, hubs, witnesses: witnesses? };
        (efficacy > LEAST).then_some(GeneralCut { class, row, efficacy, derivation })
    }
}

/// The value of a literal at a point.
pub(super) fn value(literal: Literal, x: &[f64]) -> f64 {
    let x = x[literal.column.index()];
    if literal.plain { x } else { 1.0 - x }
}

/// The side of a row with what its literals add; `None` where no two can break it.
fn half(row: &Row, used: Used, frame: &Frame, binary: &[bool]) -> Option<Half> {
    let side = if used.upper { &row.upper } else { &row.lower }.as_ref()?;
    let sign = if used.upper { 1.0 } else { -1.0 };
    let mut room = sign * nearest_f64(side);
    let mut weights = Vec::new();
    for (column, a) in &row.entries {
        let a = sign * nearest_f64(a);
        let (lower, upper) = &frame.bounds[column.index()];
        room -= a * nearest_f64(if a > 0.0 { lower } else { upper }.as_ref()?);
        if binary[column.index()] {
            weights.push((a.abs(), Literal { column: *column, plain: a > 0.0 }));
        }
    }
    weights.sort_by(|a, b| b.0.total_cmp(&a.0).then(a.1.cmp(&b.1)));
    weights.truncate(MOST_LITERALS);
    let two = weights.first()?.0 + weights.get(1)?.0;
    (two > room + MARGIN * (1.0 + room.abs())).then_some(Half { used, room, weights })
}
