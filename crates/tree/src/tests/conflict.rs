//! Families in conflict, against enumeration of all whole points and all sets of families.

use std::collections::BTreeSet;
use std::rc::Rc;

use model::{FamilyId, FamilyState, Model, ModelBuilder, Sense};

use super::support::{Form, Random, round_trip, row, spec, whole};
use crate::{Certainty, Conflict, ConflictLimits, ConflictResult};

fn conflict(model: &Rc<Model>, limits: ConflictLimits, ticks: u64) -> ConflictResult {
    let mut conflict = Conflict::new(Rc::clone(model), limits);
    while !conflict.advance(ticks) {}
    conflict.result()
}

fn names(model: &Model, result: &ConflictResult) -> Vec<String> {
    result.families.iter().map(|id| model.families()[id.index()].name.clone()).collect()
}

/// Six binaries and five families of one or two rows each, of which about two clash.
fn clashing(seed: u64) -> Rc<Model> {
    let mut random = Random(seed);
    let mut builder = ModelBuilder::new("clashing", Sense::Maximise);
    let columns: Vec<_> = (0..6)
        .map(|_| builder.column(&[], &spec((0, 1), random.below(9), true)).unwrap())
        .collect();
    for k in 0..5 {
        let state = if k == 2 { FamilyState::OnDemand } else { FamilyState::In };
        builder.family(&format!("f{k}"), state, false);
        for _ in 0..=random.below(2) {
            let entries: Vec<_> = columns.iter().map(|&c| (c, random.below(7) - 3)).collect();
            let side = random.below(5) - 1;
            let upper = (random.below(2) == 0).then_some(side);
            builder.row(&[], row(&entries, Some(side), upper)).unwrap();
        }
    }
    Rc::new(builder.build())
}

/// The size of a smallest set of families without a whole point in common: every set, every point.
fn smallest(model: &Model) -> Option<usize> {
    let families = model.families().len();
    let points: Vec<Vec<f64>> = (0..1_u32 << model.columns().len())
        .map(|bits| (0..model.columns().len()).map(|j| f64::from(bits >> j & 1)).collect())
        .collect();
    let holds = |family: usize, x: &[f64]| {
        model.families()[family].rows.clone().all(|r| {
            let row = model.row(model::RowId(r));
            let activity = row.activity(x);
            row.lower.is_none_or(|lower| activity >= model::nearest_f64(&lower))
                && row.upper.is_none_or(|upper| activity <= model::nearest_f64(&upper))
        })
    };
    let clash = |set: &u32| {
        let inside = |family: &usize| set >> family & 1 == 1;
        !points.iter().any(|x| (0..families).filter(inside).all(|family| holds(family, x)))
    };
    (0..1_u32 << families).filter(clash).map(|set| set.count_ones() as usize).min()
}

#[test]
fn the_set_is_a_smallest_one() {
    let mut sizes = BTreeSet::new();
    for seed in 0..150 {
        let model = clashing(seed);
        let Some(size) = smallest(&model) else { continue };
        let result = conflict(&model, ConflictLimits::default(), u64::MAX);
        assert_eq!(result.certainty, Certainty::Smallest, "seed {seed}");
        assert_eq!(result.families.len(), size, "seed {seed}: {:?}", names(&model, &result));
        let kept: BTreeSet<FamilyId> = result.families.iter().copied().collect();
        assert!(smallest(&model.feasibility(&kept)).is_some(), "seed {seed}: it has a plan");
        sizes.insert(size);
    }
    assert!(sizes.contains(&1) && sizes.contains(&2) && sizes.contains(&3), "{sizes:?}");
}

#[test]
fn the_set_is_the_same_for_every_slicing() {
    for seed in (0..40).filter(|&seed| smallest(&clashing(seed)).is_some()) {
        let model = clashing(seed);
        let all = conflict(&model, ConflictLimits::default(), u64::MAX);
        for ticks in [1, 23, 1_000] {
            assert_eq!(conflict(&model, ConflictLimits::default(), ticks), all, "seed {seed}");
        }
    }
}

/// Position labels whose order rows hold at the depot too: every round trip comes back to it,
/// and no label is greater than itself.
fn depot_in_labels(stops: usize) -> Rc<Model> {
    let mut builder = ModelBuilder::new("labels", Sense::Minimise);
    let costs = Random(3).distances(stops);
    let names: Vec<_> = (0..stops).map(|i| builder.label(&format!("s{i}"))).collect();
    builder.variable("x", true);
    let pairs: Vec<(usize, usize)> =
        (0..stops).flat_map(|i| (0..stops).map(move |j| (i, j))).filter(|(i, j)| i != j).collect();
    let arcs: Vec<_> = pairs
        .iter()
        .map(|&(i, j)| {
            builder.column(&[names[i], names[j]], &spec((0, 1), costs[i][j], true)).unwrap()
        })
        .collect();
    builder.variable("u", false);
    let n = i64::try_from(stops).unwrap();
    let labels: Vec<_> =
        names.iter().map(|&s| builder.column(&[s], &spec((1, n), 0, false)).unwrap()).collect();
    for (name, tail) in [("leave", true), ("enter", false)] {
        builder.family(name, FamilyState::In, false);
        for (k, &name) in names.iter().enumerate().take(stops) {
            let here =
                pairs.iter().zip(&arcs).filter(|((i, j), _)| k == if tail { *i } else { *j });
            let entries: Vec<_> = here.map(|(_, &x)| (x, 1)).collect();
            builder.row(&[name], row(&entries, Some(1), Some(1))).unwrap();
        }
    }
    builder.family("order", FamilyState::In, true);
    for (&(i, j), &x) in pairs.iter().zip(&arcs) {
        let entries = [(labels[i], 1), (labels[j], -1), (x, n - 1)];
        builder.row(&[names[i], names[j]], row(&entries, None, Some(n - 2))).unwrap();
    }
    Rc::new(builder.build())
}

#[test]
fn a_depot_row_among_the_labels_is_found() {
    let model = depot_in_labels(5);
    let result = conflict(&model, ConflictLimits::default(), 5_000);
    // Where every stop is left (or entered) once there is a circle, and labels rise along it.
    assert_eq!(names(&model, &result), ["enter", "order"]);
    assert_eq!(result.certainty, Certainty::Smallest);
}

#[test]
fn families_over_subsets_count() {
    let trip = round_trip(&Random(5).distances(5), Form::Subtours, Sense::Minimise);
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    for name in 0..5 {
        builder.label(&format!("s{name}"));
    }
    builder.variable("x", true);
    let columns: Vec<_> = (0..trip.columns().len())
        .map(|j| {
            let tuple = trip.column_tuple(model::ColumnId::from_index(j)).to_vec();
            builder.column(&tuple, &spec((0, 1), 0, true)).unwrap()
        })
        .collect();
    builder.family("many", FamilyState::In, false);
    let all: Vec<_> = columns.iter().map(|&c| (c, 1)).collect();
    builder.row(&[], row(&all, Some(9), None)).unwrap();
    builder.family("idle", FamilyState::In, false);
    builder.row(&[], row(&all[..2], None, Some(2))).unwrap();
    builder.family("subtour", FamilyState::OnDemand, false);
    let mut over_subsets = trip.subset_families()[0].clone();
    over_subsets.weights = vec![whole(-1); 5];
    builder.subset_family(over_subsets).unwrap();
    let model = Rc::new(builder.build());
    // Each pair of stops is in three of the five sets of four, each with at most three drives:
    // at most five drives in all, not nine.
    let result = conflict(&model, ConflictLimits::default(), 1_000);
    assert_eq!(names(&model, &result), ["many", "subtour"]);
    assert_eq!(result.certainty, Certainty::Smallest);
}

#[test]
fn domains_alone_may_have_no_plan() {
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    let x = builder.column(&[], &spec((2, 1), 1, true)).unwrap();
    builder.row(&[], row(&[(x, 1)], Some(0), None)).unwrap();
    let result = conflict(&Rc::new(builder.build()), ConflictLimits::default(), 10);
    assert_eq!((result.families.len(), result.certainty), (0, Certainty::Smallest));
}

#[test]
fn limits_leave_it_open_and_say_so() {
    let model = depot_in_labels(6);
    let limits = ConflictLimits { nodes: 3, ..ConflictLimits::default() };
    let result = conflict(&model, limits, u64::MAX);
    assert_eq!(result.certainty, Certainty::Undecided);
    assert_eq!(names(&model, &result), ["leave", "enter", "order"]);
    assert!(result.nodes >= 3 && result.nodes <= 6, "{}", result.nodes);
}
