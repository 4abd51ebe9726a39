//! A sum of rows in floating-point numbers: what the roundings are worth that divisors and complements
//! give it. Here is decided which of them is derived; the exact derivation is made once, and shows
//! that the cut holds.

use model::{ColumnId, Number, nearest_f64};

use super::aggregate::{Aggregate, Frame};
use super::mir::at_upper;

/// The least and the largest fraction of the right side that is rounded.
pub(super) const FRACTIONS: (f64, f64) = (0.02, 0.98);

/// A column of the sum.
#[derive(Debug)]
struct Entry {
    column: ColumnId,
    place: usize,
    a: f64,
    integer: bool,
    /// Its bounds, or infinities, and whether rounding takes it as whole from each of them.
    lower: (f64, bool),
    upper: (f64, bool),
    x: f64,
    /// Whether it is nearer to its upper bound.
    at_upper: bool,
}

impl Entry {
    /// Which bound it is moved to, as a sign, where that is, and whether rounding takes it as whole
    /// from there.
    fn bound(&self, flip: bool) -> (f64, f64, bool) {
        let upper = self.at_upper != flip;
        let (bound, whole) = if upper { self.upper } else { self.lower };
        (if upper { -1.0 } else { 1.0 }, bound, whole)
    }
}

/// The slack of a row: its coefficient and value, and the row's entries by place.
#[derive(Debug)]
struct SlackEntry {
    c: f64,
    value: f64,
    whole: bool,
    entries: Vec<(usize, f64)>,
}

/// A sum at a point.
#[derive(Debug)]
pub(super) struct Sketch {
    entries: Vec<Entry>,
    slacks: Vec<SlackEntry>,
    right: f64,
    /// The coefficients of a cut by place.
    cut: Vec<f64>,
}

impl Sketch {
    /// The sum at a point; `None` where a column has no bound. `O(entries · log)`.
    pub(super) fn new(sum: &Aggregate, frame: &Frame, x: &[f64]) -> Option<Self> {
        let of_slacks = sum.slacks.iter().flat_map(|slack| &slack.entries);
        let mut columns: Vec<ColumnId> = of_slacks.map(|(column, _)| *column).collect();
        columns.extend(sum.coefficients.keys());
        columns.sort_unstable();
        columns.dedup();
        let place = |column: ColumnId| columns.binary_search(&column).unwrap_or_default();
        let entries = sum.coefficients.iter().map(|(&column, a)| {
            let (lower, upper) = &frame.bounds[column.index()];
            let integer = frame.integer[column.index()];
            let bound = |bound: &Option<Number>, none: f64| {
                bound.as_ref().map_or((none, false), |b| (nearest_f64(b), integer && b.is_int()))
            };
            Some(Entry {
                column,
                place: place(column),
                a: nearest_f64(a),
                integer,
                lower: bound(lower, f64::NEG_INFINITY),
                upper: bound(upper, f64::INFINITY),
                x: x[column.index()],
                at_upper: at_upper(frame, column, x)?,
            })
        });
        let slacks = sum.slacks.iter().map(|slack| {
            let mut value = nearest_f64(&slack.side);
            let entry = |(column, a): &(ColumnId, Number)| {
                let a = nearest_f64(a);
                value -= a * x[column.index()];
                (place(*column), a)
            };
            let entries = slack.entries.iter().map(entry).collect();
            SlackEntry { c: nearest_f64(&slack.coefficient), value, whole: slack.whole, entries }
        });
        Some(Self {
            slacks: slacks.collect(),
            right: nearest_f64(&sum.right),
            entries: entries.collect::<Option<_>>()?,
            cut: vec![0.0; columns.len()],
        })
    }

    /// The whole columns between their bounds: place among the entries, column, coefficient.
    pub(super) fn inner(&self) -> impl Iterator<Item = (usize, ColumnId, f64)> {
        let between =
            |entry: &Entry| entry.x - entry.lower.0 > 1e-6 && entry.upper.0 - entry.x > 1e-6;
        let all = self.entries.iter().enumerate();
        all.filter(move |(_, entry)| entry.integer && between(entry))
            .map(|(place, entry)| (place, entry.column, entry.a))
    }

    /// Which entries are of columns that are moved to their farther bound.
    pub(super) fn flips(&self, is_flipped: impl Fn(ColumnId) -> bool) -> Vec<bool> {
        self.entries.iter().map(|entry| is_flipped(entry.column)).collect()
    }

    /// The columns of the entries that are moved to their farther bound.
    pub(super) fn flipped(&self, flips: &[bool]) -> impl Iterator<Item = ColumnId> {
        self.entries.iter().zip(flips).filter(|(_, flip)| **flip).map(|(entry, _)| entry.column)
    }

    /// How far the point is beyond the rounding of the sum over `divisor`, each column moved to its
    /// nearer bound but those with a flip; −∞ where there is none. `O(entries)`.
    pub(super) fn efficacy(&mut self, divisor: f64, flips: &[bool]) -> f64 {
        let mut right = self.right / divisor;
        for (entry, &flip) in self.entries.iter().zip(flips) {
            right -= entry.a / divisor * entry.bound(flip).1;
        }
        let floor = right.floor();
        let f = right - floor;
        if !(FRACTIONS.0..=FRACTIONS.1).contains(&f) {
            return f64::NEG_INFINITY;
        }
        let mut violation = -floor;
        self.cut.fill(0.0);
        for (entry, &flip) in self.entries.iter().zip(flips) {
            let (sign, bound, whole) = entry.bound(flip);
            let g = rounded(sign * entry.a / divisor, whole, f);
            violation += g * sign * (entry.x - bound);
            self.cut[entry.place] += sign * g;
        }
        for slack in &self.slacks {
            let g = rounded(slack.c / divisor, slack.whole, f);
            if g != 0.0 {
                violation += g * slack.value;
                slack.entries.iter().for_each(|&(place, a)| self.cut[place] -= g * a);
            }
        }
        let length = self.cut.iter().fold(0.0, |sum, a| sum + a * a);
        if length > 0.0 { violation / length.sqrt() } else { f64::NEG_INFINITY }
    }
}

/// The coefficient that the rounding gives, `f` the fraction of the right side. A coefficient that is
/// whole but for the rounding of its float counts as whole.
fn rounded(a: f64, whole: bool, f: f64) -> f64 {
    if !whole {
        return if a < 0.0 { a / (1.0 - f) } else { 0.0 };
    }
    let near = a.round();
    let floor = if (a - near).abs() <= 1e-9 { near } else { a.floor() };
    let over = a - floor - f;
    if over > 0.0 { floor + over / (1.0 - f) } else { floor }
}
