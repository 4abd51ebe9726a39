//! Models built by hand, small enumerations and ways to run a search.

use std::rc::Rc;

use lp::{Limits, Outcome, Simplex};
use model::{
    ColumnId, ColumnSpec, FamilyState, LabelId, Model, ModelBuilder, Number, Relation, Row, Scope,
    Sense, SubsetCondition, SubsetFamily, SubsetTerm,
};

use crate::relaxation::{direction, problem};
use crate::{Branching, Event, NodeWork, Progress, Search, Selection, Settings, Summary};

/// Every pair of rules that needs no person.
pub(crate) fn rules() -> Vec<Settings> {
    let branchings = [
        Branching::MostFractional,
        Branching::Pseudocost,
        Branching::Strong,
        Branching::Reliability,
    ];
    let selections = [Selection::BestBound, Selection::DepthFirst, Selection::BestEstimate];
    let mut all = Vec::new();
    for branching in branchings {
        for selection in selections {
            all.push(Settings { branching, selection, ..Settings::default() });
        }
    }
    all
}

/// A pair of rules under every choice of node work that tightens bounds.
pub(crate) fn working() -> Vec<Settings> {
    let mut all = Vec::new();
    for (propagation, fixing) in [(true, false), (false, true), (true, true)] {
        for selection in [Selection::BestBound, Selection::BestEstimate] {
            let node_work =
                NodeWork { propagation, fixing, lattice: selection == Selection::BestBound };
            let branching = Branching::Reliability;
            all.push(Settings { branching, selection, node_work, ..Settings::default() });
        }
    }
    all
}

/// Runs to the end in slices of `ticks`.
pub(crate) fn run(model: &Rc<Model>, settings: &Settings, ticks: u64) -> (Vec<Event>, Summary) {
    let mut search = Search::new(Rc::clone(model), settings.clone());
    finish(&mut search, ticks);
    (search.take_events(), search.summary())
}

/// Runs a search on to its end.
pub(crate) fn finish(search: &mut Search, ticks: u64) {
    for _ in 0..100_000_000_u64 {
        match search.advance(ticks) {
            Progress::Working => {}
            Progress::RootSolved | Progress::Paused => search.run(None),
            Progress::Finished => return,
        }
    }
    panic!("the search does not end");
}

/// Numbers from a seed: SplitMix64 (Steele, Lea, Flood 2014).
pub(crate) struct Random(pub(crate) u64);

impl Random {
    pub(crate) fn below(&mut self, limit: i64) -> i64 {
        self.0 = self.0.wrapping_add(0x9e37_79b9_7f4a_7c15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
        i64::try_from((z ^ (z >> 31)) % limit.unsigned_abs()).unwrap()
    }

    pub(crate) fn costs(&mut self, stops: usize, most: i64) -> Vec<Vec<i64>> {
        (0..stops)
            .map(|i| (0..stops).map(|j| if i == j { 0 } else { 1 + self.below(most) }).collect())
            .collect()
    }

    /// Distances between points of a grid, a little different by direction: hard for labels.
    pub(crate) fn distances(&mut self, stops: usize) -> Vec<Vec<i64>> {
        let points: Vec<(i64, i64)> =
            (0..stops).map(|_| (self.below(60), self.below(60))).collect();
        let mut far = |i: usize, j: usize| {
            let (a, b) = (points[i], points[j]);
            if i == j { 0 } else { (a.0 - b.0).abs() + (a.1 - b.1).abs() + self.below(4) }
        };
        (0..stops).map(|i| (0..stops).map(|j| far(i, j)).collect()).collect()
    }
}

pub(crate) fn whole(value: i64) -> Number {
    Number::from(value)
}

/// A column with whole bounds.
pub(crate) fn spec(bounds: (i64, i64), cost: i64, integer: bool) -> ColumnSpec {
    ColumnSpec {
        lower: Some(whole(bounds.0)),
        upper: Some(whole(bounds.1)),
        cost: whole(cost),
        integer,
    }
}

/// A row of whole numbers.
pub(crate) fn row(entries: &[(ColumnId, i64)], lower: Option<i64>, upper: Option<i64>) -> Row {
    Row {
        entries: entries.iter().map(|&(c, a)| (c, whole(a))).collect(),
        lower: lower.map(whole),
        upper: upper.map(whole),
    }
}

/// The best value by trying every assignment of the whole columns, each with an LP for the rest.
pub(crate) fn enumerated(model: &Model) -> Option<f64> {
    let columns: Vec<ColumnId> = (0..model.columns().len())
        .map(ColumnId::from_index)
        .filter(|c| model.columns()[c.index()].integer)
        .collect();
    let range = |c: ColumnId| {
        let column = &model.columns()[c.index()];
        let float = |id: Option<model::NumberId>| model.numbers().float(id.unwrap());
        (float(column.lower), float(column.upper))
    };
    let mut simplex = Simplex::new(problem(model, |_| true).unwrap());
    let mut values: Vec<f64> = columns.iter().map(|&c| range(c).0).collect();
    let mut best: Option<f64> = None;
    loop {
        for (&c, &v) in columns.iter().zip(&values) {
            simplex.set_bounds(lp::Col(c.0), v, v);
        }
        if let Outcome::Optimal(solution) = simplex.solve(Limits::default()) {
            let value = solution.objective;
            best = Some(best.map_or(value, |b| if value < b { value } else { b }));
        }
        let Some(at) = (0..columns.len()).find(|&k| values[k] < range(columns[k]).1) else { break };
        values[at] += 1.0;
        for k in 0..at {
            values[k] = range(columns[k]).0;
        }
    }
    best.map(|value| direction(model) * value + model::nearest_f64(model.offset()))
}

/// A random model of binaries and, if wanted, continuous columns.
pub(crate) fn random_model(seed: u64, binaries: usize, continuous: usize) -> Rc<Model> {
    let mut random = Random(seed);
    let sense = if random.below(2) == 0 { Sense::Minimise } else { Sense::Maximise };
    let mut builder = ModelBuilder::new("random", sense);
    builder.offset(whole(random.below(7) - 3));
    let mut columns = Vec::new();
    for _ in 0..binaries {
        columns.push(builder.column(&[], &spec((0, 1), random.below(41) - 20, true)).unwrap());
    }
    for _ in 0..continuous {
        columns.push(builder.column(&[], &spec((0, 3), random.below(41) - 20, false)).unwrap());
    }
    for k in 0..4 {
        let state = if k == 3 { FamilyState::OnDemand } else { FamilyState::In };
        builder.family(&format!("row {k}"), state, false);
        let entries: Vec<(ColumnId, i64)> =
            columns.iter().map(|&c| (c, random.below(19) - 4)).collect();
        let total: i64 = entries.iter().map(|&(_, a)| a).sum();
        let side = total / 2 + random.below(3);
        builder
            .row(&[], row(&entries, if k == 1 { Some(side - 9) } else { None }, Some(side)))
            .unwrap();
    }
    Rc::new(builder.build())
}

/// Which rows rule out subtours.
#[derive(Clone, Copy, PartialEq, Eq)]
pub(crate) enum Form {
    /// Position labels (Miller, Tucker, Zemlin 1960).
    Labels,
    /// One-commodity flow (Gavish, Graves 1978).
    Flow,
    /// Subtours inside (Dantzig, Fulkerson, Johnson 1954), on demand.
    Subtours,
}

/// A round trip over all stops; maximising turns the costs round.
pub(crate) fn round_trip(costs: &[Vec<i64>], form: Form, sense: Sense) -> Rc<Model> {
    let n = costs.len();
    let mut builder = ModelBuilder::new("round trip", sense);
    let stops: Vec<LabelId> = (0..n).map(|i| builder.label(&format!("s{i}"))).collect();
    let sign = if sense == Sense::Minimise { 1 } else { -1 };
    builder.variable("x", true);
    let mut arcs = Vec::new();
    for i in 0..n {
        for j in (0..n).filter(|&j| j != i) {
            let column = builder
                .column(&[stops[i], stops[j]], &spec((0, 1), sign * costs[i][j], true))
                .unwrap();
            arcs.push((i, j, column));
        }
    }
    for (name, tail) in [("leave", true), ("enter", false)] {
        builder.family(name, FamilyState::In, false);
        for (k, &stop) in stops.iter().enumerate() {
            let here = arcs.iter().filter(|&&(i, j, _)| if tail { i == k } else { j == k });
            let entries: Vec<(ColumnId, i64)> = here.map(|&(_, _, c)| (c, 1)).collect();
            builder.row(&[stop], row(&entries, Some(1), Some(1))).unwrap();
        }
    }
    match form {
        Form::Labels => labels(&mut builder, &stops, &arcs),
        Form::Flow => flow(&mut builder, &stops, &arcs),
        Form::Subtours => subtours(&mut builder, &stops, &arcs),
    }
    Rc::new(builder.build())
}

fn labels(builder: &mut ModelBuilder, stops: &[LabelId], arcs: &[(usize, usize, ColumnId)]) {
    let n = i64::try_from(stops.len()).unwrap();
    builder.variable("u", false);
    let label: Vec<ColumnId> = (1..stops.len())
        .map(|i| builder.column(&[stops[i]], &spec((1, n - 1), 0, false)).unwrap())
        .collect();
    builder.family("order", FamilyState::In, true);
    for &(i, j, x) in arcs.iter().filter(|&&(i, j, _)| i != 0 && j != 0) {
        let entries = [(label[i - 1], 1), (label[j - 1], -1), (x, n - 1)];
        builder.row(&[stops[i], stops[j]], row(&entries, None, Some(n - 2))).unwrap();
    }
}

fn flow(builder: &mut ModelBuilder, stops: &[LabelId], arcs: &[(usize, usize, ColumnId)]) {
    let n = i64::try_from(stops.len()).unwrap();
    builder.variable("f", true);
    let mut flows = Vec::new();
    for &(i, j, x) in arcs {
        let column = builder.column(&[stops[i], stops[j]], &spec((0, n), 0, false)).unwrap();
        flows.push((i, j, x, column));
    }
    builder.family("link", FamilyState::In, true);
    for &(i, j, x, f) in &flows {
        let entries = [(f, 1), (x, 1 - n)];
        builder.row(&[stops[i], stops[j]], row(&entries, None, Some(0))).unwrap();
    }
    builder.family("deliver", FamilyState::In, false);
    for (k, &stop) in stops.iter().enumerate().skip(1) {
        let mut entries = Vec::new();
        for &(i, j, _, f) in &flows {
            entries.push((f, i64::from(j == k) - i64::from(i == k)));
        }
        builder.row(&[stop], row(&entries, Some(1), Some(1))).unwrap();
    }
}

fn subtours(builder: &mut ModelBuilder, stops: &[LabelId], arcs: &[(usize, usize, ColumnId)]) {
    let family = builder.family("subtour", FamilyState::OnDemand, false);
    let terms = arcs.iter().map(|&(i, j, column)| SubsetTerm {
        column,
        coefficient: whole(1),
        scope: Scope::Inside(stops[i], stops[j]),
    });
    let most = u32::try_from(stops.len()).unwrap() - 1;
    let subset_family = SubsetFamily {
        family,
        tuple: Vec::new(),
        ground: stops.to_vec(),
        conditions: vec![SubsetCondition::Size { at_least: 2, at_most: most }],
        terms: terms.collect(),
        weights: vec![whole(-1); stops.len()],
        constant: whole(1),
        rounded: None,
        relation: Relation::AtMost,
    };
    builder.subset_family(subset_family).unwrap();
}

/// The cost of the best round trip, by trying every order of the stops after the first.
pub(crate) fn best_trip(costs: &[Vec<i64>]) -> i64 {
    fn extend(costs: &[Vec<i64>], here: usize, left: u32, sofar: i64, best: &mut i64) {
        if left == 0 {
            *best = (*best).min(sofar + costs[here][0]);
            return;
        }
        for next in (1..costs.len()).filter(|&next| left & (1 << next) != 0) {
            extend(costs, next, left & !(1 << next), sofar + costs[here][next], best);
        }
    }
    let mut best = i64::MAX;
    extend(costs, 0, (1 << costs.len()) - 2, 0, &mut best);
    best
}
