//! Finds a round trip in a model: arcs, one leaving and one entering each stop.
//!
//! A variable whose tuples are directed pairs, all whole, with the equations Σ_j x_ij = 1 for
//! every i and Σ_i x_ij = 1 for every j among the written rows, holds every round trip over its
//! stops. Whether a round trip is a solution is left to the check of each one.

use std::collections::BTreeMap;

use model::{ColumnId, LabelId, Model, Number, RowId};

use crate::relaxation::{direction, float_bounds, is_meant};

/// The stops and arcs of a round trip.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct RoundTrip {
    /// The stops, by rising label.
    pub(crate) stops: Vec<LabelId>,
    /// The arcs: tail, head and column, by place in `stops`.
    pub(crate) arcs: Vec<(usize, usize, ColumnId)>,
    /// The column of each arc by tail · n + head; `None` where there is no arc.
    pub(crate) column: Vec<Option<ColumnId>>,
    /// Its cost, to be made small; infinite where there is no arc.
    pub(crate) cost: Vec<f64>,
}

impl RoundTrip {
    /// The first variable that is a round trip. `O(non-zeros)`.
    pub(crate) fn find(model: &Model) -> Option<Self> {
        let variables = model.variables().iter().filter(|variable| variable.arrow);
        variables.into_iter().find_map(|variable| Self::of(model, variable.columns.clone()))
    }

    fn of(model: &Model, columns: std::ops::Range<u32>) -> Option<Self> {
        let mut tails: BTreeMap<LabelId, Vec<ColumnId>> = BTreeMap::new();
        let mut heads: BTreeMap<LabelId, Vec<ColumnId>> = BTreeMap::new();
        for column in columns.clone().map(ColumnId) {
            let &[tail, head] = model.column_tuple(column) else { return None };
            if tail == head || !model.columns()[column.index()].integer {
                return None;
            }
            tails.entry(tail).or_default().push(column);
            heads.entry(head).or_default().push(column);
        }
        if tails.len() < 2 || !tails.keys().eq(heads.keys()) {
            return None;
        }
        let sums = unit_sums(model, &columns);
        let covered = |of: &BTreeMap<LabelId, Vec<ColumnId>>| of.values().all(|c| sums.contains(c));
        (covered(&tails) && covered(&heads)).then(|| Self::build(model, &tails))
    }

    fn build(model: &Model, tails: &BTreeMap<LabelId, Vec<ColumnId>>) -> Self {
        let stops: Vec<LabelId> = tails.keys().copied().collect();
        let n = stops.len();
        let mut trip = Self {
            stops,
            arcs: Vec::new(),
            column: vec![None; n * n],
            cost: vec![f64::INFINITY; n * n],
        };
        for (tail, &column) in
            tails.values().enumerate().flat_map(|(t, cs)| cs.iter().map(move |c| (t, c)))
        {
            let Ok(head) = trip.stops.binary_search(&model.column_tuple(column)[1]) else {
                continue;
            };
            let (lower, upper) = float_bounds(model, column);
            if lower > 1.0 || upper < 1.0 {
                continue;
            }
            trip.arcs.push((tail, head, column));
            trip.column[tail * n + head] = Some(column);
            trip.cost[tail * n + head] = direction(model)
                * model.numbers().float(model.columns()[column.index()].cost)
                + 0.0;
        }
        trip
    }

    /// The parts into which the arcs with a value join the stops, by their first stop; one part when
    /// all hang together. `O(arcs)`.
    pub(crate) fn parts(&self, x: &[f64], least: f64) -> Vec<Vec<LabelId>> {
        let mut part: Vec<usize> = (0..self.stops.len()).collect();
        for &(tail, head, column) in &self.arcs {
            if x[column.index()] > least {
                let (a, b) = (root(&part, tail), root(&part, head));
                let (low, high) = if a < b { (a, b) } else { (b, a) };
                part[high] = low;
            }
        }
        let mut parts: BTreeMap<usize, Vec<LabelId>> = BTreeMap::new();
        for (stop, &label) in self.stops.iter().enumerate() {
            parts.entry(root(&part, stop)).or_default().push(label);
        }
        parts.into_values().collect()
    }
}

fn root(part: &[usize], mut at: usize) -> usize {
    while part[at] != at {
        at = part[at];
    }
    at
}

/// The column lists of the rows that say Σ x = 1 over columns in the range.
fn unit_sums(
    model: &Model,
    columns: &std::ops::Range<u32>,
) -> std::collections::BTreeSet<Vec<ColumnId>> {
    let rows = (0..model.row_count()).map(RowId::from_index).filter(|&row| is_meant(model, row));
    rows.filter(|&row| is_unit_sum(model, row, columns))
        .map(|row| model.row_entries(row).iter().map(|&(column, _)| column).collect())
        .collect()
}

/// Whether a row says a·x₁ + … + a·x_k = a with a ≠ 0.
fn is_unit_sum(model: &Model, row: RowId, columns: &std::ops::Range<u32>) -> bool {
    let (Some(lower), Some(upper)) = model.row_sides(row) else { return false };
    let side = model.numbers().exact(lower);
    lower == upper
        && *side != Number::ZERO
        && model
            .row_entries(row)
            .iter()
            .all(|&(column, a)| a == lower && columns.contains(&column.0))
}
