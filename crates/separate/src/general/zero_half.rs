//! Zero-half cuts: half of a sum of whole rows, rounded down (Caprara, Fischetti 1996).
//!
//! Rows whose columns are all whole are multiplied to whole numbers and read mod 2; a column at a
//! bound drops out. A sum of rows with an odd right side is violated when its slacks and the
//! distances of its odd columns from their bounds come to less than 1. Such sums are looked for by
//! elimination over GF(2) (Koster, Zymolka, Kutschka 2009): each column in turn is cleared by the row
//! of least slack in which it is odd.

use std::collections::BTreeSet;

use dashu_int::{IBig, ops::Gcd};
use model::{Number, Row, nearest_f64};

use super::aggregate::{Aggregate, Frame};
use super::derivation::Used;
use super::mir::plain;
use super::{Class, GeneralCut};

/// Rows and columns of the system at most.
const MOST: usize = 150;
/// Sums at most that are made cuts.
const MOST_SUMS: usize = 40;
/// The largest multiplier of a row.
const MOST_SCALE: f64 = 1e6;
/// Entries of rows that one step reads.
const AT_ONCE: u64 = 2_000;
/// What a sum must be under 1 by.
const MARGIN: f64 = 1e-3;

/// A sum of rows mod 2.
#[derive(Debug, Clone)]
struct Parity {
    /// The columns between their bounds in which it is odd, by place.
    odd: BTreeSet<usize>,
    right: bool,
    slack: f64,
    /// The rows in it.
    rows: BTreeSet<usize>,
}

/// A whole row against one side: its number and side, and what makes its numbers whole.
#[derive(Debug, Clone)]
struct Whole {
    used: Used,
    scale: Number,
}

/// How far the search is.
#[derive(Debug, Clone, Copy)]
enum Stage {
    /// The next row that is read.
    Read(usize),
    /// The next column that is cleared.
    Clear(usize),
    /// The next sum that is made a cut.
    Cut(usize),
}

/// The search for zero-half cuts at a point, one step at a time. `O(rows · columns · rows)` over GF(2)
/// at worst.
#[derive(Debug, Clone)]
pub struct ZeroHalf {
    distances: Vec<f64>,
    /// The columns that are cleared, those far from their bounds first.
    active: Vec<usize>,
    wholes: Vec<Whole>,
    system: Vec<Parity>,
    sums: Vec<BTreeSet<usize>>,
    stage: Stage,
}

impl ZeroHalf {
    /// A search at a point. `O(columns · log)`.
    #[must_use]
    pub fn new(frame: &Frame, x: &[f64]) -> Self {
        let distances: Vec<f64> = (0..x.len()).map(|column| distance(frame, column, x)).collect();
        let mut active: Vec<usize> = (0..x.len()).filter(|&c| distances[c] > 1e-9).collect();
        active.sort_by(|&a, &b| distances[b].total_cmp(&distances[a]).then(a.cmp(&b)));
        active.truncate(MOST);
        Self {
            distances,
            active,
            wholes: Vec::new(),
            system: Vec::new(),
            sums: Vec::new(),
            stage: Stage::Read(0),
        }
    }

    /// Reads some rows, clears one column or makes one sum a cut that it puts to those `found`; the
    /// work done, or `None` at the end.
    pub fn step(
        &mut self,
        rows: &[Row],
        (frame, x): (&Frame, &[f64]),
        found: &mut Vec<GeneralCut>,
    ) -> Option<u64> {
        match self.stage {
            Stage::Read(next) => Some(self.read(next, rows, frame, x)),
            Stage::Clear(next) => {
                self.stage = Stage::Clear(next + 1);
                match self.active.get(next) {
                    Some(&column) => Some(self.clear(column)),
                    None => {
                        self.stage = Stage::Cut(0);
                        Some(1)
                    }
                }
            }
            Stage::Cut(next) => {
                let sum = self.sums.get(next)?;
                self.stage = Stage::Cut(next + 1);
                let (cut, work) = self.cut(sum, rows, frame, x);
                found.extend(cut);
                Some(work)
            }
        }
    }

    /// Reads rows until some entries are seen.
    fn read(&mut self, mut next: usize, rows: &[Row], frame: &Frame, x: &[f64]) -> u64 {
        let mut work = 1;
        while work < AT_ONCE && next < rows.len() && self.wholes.len() < MOST {
            let row = &rows[next];
            work += 1 + row.entries.len() as u64;
            if let Some((whole, mut parity)) = read(next, row, frame, x) {
                parity.odd.retain(|&c| self.distances[c] > 1e-9);
                parity.rows.insert(self.wholes.len());
                self.wholes.push(whole);
                self.system.push(parity);
            }
            next += 1;
        }
        self.stage = Stage::Read(next);
        if next >= rows.len() || self.wholes.len() >= MOST {
            let first = std::mem::take(&mut self.system);
            first.iter().for_each(|sum| self.show(sum));
            (self.system, self.stage) = (first, Stage::Clear(0));
        }
        work
    }

    /// Takes a sum that the point violates.
    fn show(&mut self, sum: &Parity) {
        let all = sum.odd.iter().fold(sum.slack, |all, &column| all + self.distances[column]);
        if sum.right && all < 1.0 - MARGIN && self.sums.len() < MOST_SUMS {
            self.sums.push(sum.rows.clone());
        }
    }

    /// Clears a column, and shows every sum on the way.
    fn clear(&mut self, column: usize) -> u64 {
        let mut system = std::mem::take(&mut self.system);
        let mut work = 1 + system.len() as u64;
        let with = (0..system.len()).filter(|&k| system[k].odd.contains(&column));
        let lightest = |a: usize, b: usize| if system[b].slack < system[a].slack { b } else { a };
        if let Some(pivot) = with.reduce(lightest) {
            let pivot = system.remove(pivot);
            for sum in system.iter_mut().filter(|sum| sum.odd.contains(&column)) {
                work += (sum.odd.len() + pivot.odd.len() + sum.rows.len()) as u64;
                sum.odd = &sum.odd ^ &pivot.odd;
                sum.rows = &sum.rows ^ &pivot.rows;
                sum.right ^= pivot.right;
                sum.slack += pivot.slack;
                self.show(sum);
            }
            system.retain(|sum| sum.slack < 1.0 - MARGIN && !sum.rows.is_empty());
        }
        self.system = system;
        work
    }

    fn cut(
        &self,
        sum: &BTreeSet<usize>,
        rows: &[Row],
        frame: &Frame,
        x: &[f64],
    ) -> (Option<GeneralCut>, u64) {
        let half = Number::from_parts(IBig::ONE, 2_u32.into());
        let mut total = Aggregate::default();
        let mut work = 1;
        for &place in sum {
            let Whole { used, scale } = &self.wholes[place];
            let y = if used.upper { scale * &half } else { -(scale * &half) };
            work += rows[used.row].entries.len() as u64;
            total.add_side(frame, (*used, &rows[used.row]), &y);
        }
        (plain(Class::ZeroHalf, &total, frame, x, &BTreeSet::new()), work)
    }
}

/// How far a column is from its nearer bound; infinite where it has none.
fn distance(frame: &Frame, column: usize, x: &[f64]) -> f64 {
    let (lower, upper) = &frame.bounds[column];
    let low = lower.as_ref().map_or(f64::INFINITY, |l| x[column] - nearest_f64(l));
    let high = upper.as_ref().map_or(f64::INFINITY, |u| nearest_f64(u) - x[column]);
    if high < low { high } else { low }
}

/// A row of whole columns that is nearly tight, mod 2, its columns moved to the nearer bounds.
fn read(number: usize, row: &Row, frame: &Frame, x: &[f64]) -> Option<(Whole, Parity)> {
    let activity = row.activity(x);
    let gap = |side: &Option<Number>| {
        side.as_ref().map_or(f64::INFINITY, |side| (nearest_f64(side) - activity).abs())
    };
    let upper = gap(&row.upper) <= gap(&row.lower);
    let side = if upper { &row.upper } else { &row.lower }.as_ref()?;
    let mut scale = side.denominator().clone();
    for (column, a) in &row.entries {
        if !frame.integer[column.index()] {
            return None;
        }
        let bottom = a.denominator();
        scale = &scale / (&scale).gcd(bottom) * bottom;
    }
    let scale = Number::from(scale);
    let slack = nearest_f64(&scale) * if upper { gap(&row.upper) } else { gap(&row.lower) };
    if nearest_f64(&scale) > MOST_SCALE || slack >= 1.0 - MARGIN {
        return None;
    }
    let is_odd = |a: &Number| (a * &scale).numerator() % 2_i32 != 0;
    let mut right = is_odd(side);
    let mut odd = BTreeSet::new();
    for (column, _) in row.entries.iter().filter(|(_, a)| is_odd(a)) {
        let (lower, upper) = &frame.bounds[column.index()];
        let low = lower.as_ref().map(|l| x[column.index()] - nearest_f64(l));
        let high = upper.as_ref().map(|u| nearest_f64(u) - x[column.index()]);
        let bound =
            if high.zip(low).is_none_or(|(h, l)| h < l) && high.is_some() { upper } else { lower };
        let bound = bound.as_ref()?;
        if !bound.is_int() {
            return None;
        }
        right ^= bound.numerator() % 2_i32 != 0;
        odd.insert(column.index());
    }
    let whole = Whole { used: Used { row: number, upper }, scale };
    Some((whole, Parity { odd, right, slack, rows: BTreeSet::new() }))
}
