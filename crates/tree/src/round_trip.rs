//! Finds a round trip in a model: arcs, one leaving and one entering each stop.
//!
//! A variable whose tuples are directed pairs, all whole, with the equations Σ_j x_ij = 1 for
//! every i and Σ_i x_ij = 1 for every j among the written rows, holds every round trip over its
//! stops. Whether a round trip is a solution is left to the check of each one.

use std::collections::{BTreeMap, BTreeSet};

use model::{
    ColumnId, ColumnSpec, FamilyState, LabelId, Model, ModelBuilder, Number, Relation, RowId,
    Scope, Sense, SubsetCondition, SubsetFamily, SubsetTerm,
};
use separate::Separator;

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

    /// A separator of the sets that arcs leave with less than 1 in all (Dantzig, Fulkerson,
    /// Johnson 1954), without the first stop; its columns are `arcs` in order.
    pub(crate) fn separator(&self, model: &Model) -> Option<Separator> {
        let mut builder = ModelBuilder::new("", Sense::Minimise);
        let stops: Vec<LabelId> =
            self.stops.iter().map(|&stop| builder.label(model.labels().name(stop))).collect();
        let arc = ColumnSpec {
            lower: Some(Number::ZERO),
            upper: None,
            cost: Number::ZERO,
            integer: false,
        };
        let mut terms = Vec::with_capacity(self.arcs.len());
        for &(tail, head, _) in &self.arcs {
            let column = builder.column(&[stops[tail], stops[head]], &arc).ok()?;
            let scope = Scope::Leaving(stops[tail], stops[head]);
            terms.push(SubsetTerm { column, coefficient: Number::ONE, scope });
        }
        let most = u32::try_from(stops.len()).ok()?.checked_sub(1)?;
        let family = builder.family("", FamilyState::OnDemand, false);
        let id = builder.subset_family(SubsetFamily {
            family,
            tuple: Vec::new(),
            conditions: vec![
                SubsetCondition::Size { at_least: 1, at_most: most },
                SubsetCondition::Avoids(*stops.first()?),
            ],
            terms,
            weights: vec![Number::ZERO; stops.len()],
            ground: stops,
            constant: -Number::ONE,
            rounded: None,
            relation: Relation::AtLeast,
        });
        Some(Separator::new(&builder.build(), id.ok()?))
    }

    /// The stops of a set that the separator found.
    pub(crate) fn stops_of(&self, subset: &BTreeSet<LabelId>) -> BTreeSet<LabelId> {
        subset.iter().filter_map(|label| self.stops.get(label.index()).copied()).collect()
    }
}

/// The column lists of the rows that say Σ x = 1 over columns in the range.
fn unit_sums(model: &Model, columns: &std::ops::Range<u32>) -> BTreeSet<Vec<ColumnId>> {
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

#[cfg(test)]
mod tests {
    use super::*;
    use crate::tests::support::{Form, Random, random_model, round_trip, row, spec};
    use std::rc::Rc;

    #[test]
    fn labels_flows_and_subtours_hold_round_trips() {
        let costs = Random(2).costs(5, 30);
        for form in [Form::Labels, Form::Flow, Form::Subtours] {
            for sense in [Sense::Minimise, Sense::Maximise] {
                let trip = RoundTrip::find(&round_trip(&costs, form, sense)).unwrap();
                assert_eq!((trip.stops.len(), trip.arcs.len()), (5, 20));
                for &(tail, head, column) in &trip.arcs {
                    assert_eq!(trip.column[tail * 5 + head], Some(column));
                    assert_eq!(trip.cost[tail * 5 + head], costs[tail][head] as f64);
                }
                assert_eq!(trip.cost[0], f64::INFINITY);
            }
        }
        assert_eq!(RoundTrip::find(&random_model(1, 5, 1)), None);
    }

    /// Arcs among three stops; the row that enters the last is as given.
    fn three(enter: Option<(i64, i64)>) -> Rc<Model> {
        let mut builder = ModelBuilder::new("t", Sense::Minimise);
        let stops: Vec<LabelId> = ["a", "b", "c"].iter().map(|name| builder.label(name)).collect();
        builder.variable("x", true);
        let mut arcs = Vec::new();
        for (i, j) in [(0, 1), (0, 2), (1, 0), (1, 2), (2, 0), (2, 1)] {
            arcs.push((
                i,
                j,
                builder.column(&[stops[i], stops[j]], &spec((0, 1), 1, true)).unwrap(),
            ));
        }
        builder.family("degree", FamilyState::In, false);
        for k in 0..3 {
            let out: Vec<_> = arcs.iter().filter(|a| a.0 == k).map(|a| (a.2, 3)).collect();
            builder.row(&[], row(&out, Some(3), Some(3))).unwrap();
            let Some((lower, upper)) = enter.filter(|_| k == 2).or((k < 2).then_some((1, 1)))
            else {
                continue;
            };
            let into: Vec<_> = arcs.iter().filter(|a| a.1 == k).map(|a| (a.2, 1)).collect();
            builder.row(&[], row(&into, Some(lower), Some(upper))).unwrap();
        }
        Rc::new(builder.build())
    }

    #[test]
    fn every_stop_must_be_left_and_entered_once() {
        assert!(RoundTrip::find(&three(Some((1, 1)))).is_some());
        assert_eq!(RoundTrip::find(&three(Some((0, 1)))), None);
        assert_eq!(RoundTrip::find(&three(Some((2, 2)))), None);
        assert_eq!(RoundTrip::find(&three(None)), None);
    }

    #[test]
    fn the_separator_finds_what_hangs_apart() {
        let costs = Random(2).costs(5, 30);
        let model = round_trip(&costs, Form::Labels, Sense::Minimise);
        let trip = RoundTrip::find(&model).unwrap();
        let used = [(0, 1), (1, 0), (2, 3), (3, 4), (4, 2)];
        let x: Vec<f64> = trip
            .arcs
            .iter()
            .map(|&(i, j, _)| if used.contains(&(i, j)) { 1.0 } else { 0.0 })
            .collect();
        let mut separator = trip.separator(&model).unwrap();
        separator.start(&x);
        while separator.advance(100) == separate::Progress::Working {}
        let found = separator.take();
        let apart: BTreeSet<LabelId> = trip.stops[2..].iter().copied().collect();
        assert!(found.iter().any(|f| trip.stops_of(&f.subset) == apart && f.violation == 1.0));
    }

    #[test]
    fn more_stops_than_can_be_listed_are_separated_by_cuts() {
        let costs = Random(3).costs(16, 30);
        let model = round_trip(&costs, Form::Labels, Sense::Minimise);
        let separator = RoundTrip::find(&model).unwrap().separator(&model).unwrap();
        assert_eq!(separator.exactness(), Some(separate::Exactness::Exact));
    }
}
