//! Round trips against enumeration, with labels and with subtours on demand.

use std::rc::Rc;

use model::{Model, Sense};

use super::support::{Form, Random, best_trip, round_trip, rules, run};
use crate::{Event, Origin, Status};

/// Whether the solution's arcs are one round trip over all stops.
fn is_trip(model: &Model, solution: &[f64]) -> bool {
    let arcs: Vec<_> = (0..model.columns().len())
        .map(model::ColumnId::from_index)
        .filter(|c| model.columns()[c.index()].integer && solution[c.index()] > 0.5)
        .map(|c| (model.column_tuple(c)[0], model.column_tuple(c)[1]))
        .collect();
    let mut seen = vec![arcs[0].0];
    while let Some(&(_, head)) = arcs.iter().find(|(tail, _)| Some(tail) == seen.last()) {
        if head == seen[0] {
            break;
        }
        seen.push(head);
    }
    seen.len() == arcs.len()
}

fn agrees(costs: &[Vec<i64>], form: Form, sense: Sense) {
    let model = round_trip(costs, form, sense);
    let best = best_trip(costs) as f64;
    let expected = if sense == Sense::Minimise { best } else { -best };
    for settings in rules() {
        let (_, summary) = run(&model, &settings, u64::MAX);
        assert_eq!(
            (summary.status, summary.incumbent),
            (Status::Optimal, Some(expected)),
            "{settings:?}"
        );
        assert_eq!((summary.bound, summary.gap, summary.open), (Some(expected), Some(0.0), 0));
        assert!(is_trip(&model, &summary.solution));
        assert!(summary.checked, "{summary:?}");
    }
}

#[test]
fn subtours_on_demand() {
    for seed in 0..6 {
        let costs = Random(seed).costs(6 + usize::try_from(seed % 3).unwrap(), 40);
        agrees(&costs, Form::Subtours, Sense::Minimise);
    }
}

#[test]
fn labels() {
    for seed in 10..16 {
        let costs = Random(seed).costs(6 + usize::try_from(seed % 3).unwrap(), 40);
        agrees(&costs, Form::Labels, Sense::Minimise);
    }
}

#[test]
fn flow() {
    for seed in 20..23 {
        let costs = Random(seed).distances(6 + usize::try_from(seed % 2).unwrap());
        agrees(&costs, Form::Flow, Sense::Minimise);
    }
}

#[test]
fn turned_into_a_maximisation() {
    let costs = Random(77).costs(7, 40);
    agrees(&costs, Form::Subtours, Sense::Maximise);
    agrees(&costs, Form::Labels, Sense::Maximise);
}

#[test]
fn two_clusters_need_subtour_rows_and_get_them_in_order() {
    // Two groups of four, 1 inside and 50 across: the assignment bound is 8, the best trip 106.
    let far = |i: usize, j: usize| {
        if i == j {
            0
        } else if i / 4 == j / 4 {
            1
        } else {
            50
        }
    };
    let costs: Vec<Vec<i64>> = (0..8).map(|i| (0..8).map(|j| far(i, j)).collect()).collect();
    let model = round_trip(&costs, Form::Subtours, Sense::Minimise);
    let mut search = crate::Search::new(Rc::clone(&model), rules()[0].clone());
    while search.advance(50) != crate::Progress::RootSolved {}
    let root = search.root().unwrap();
    assert_eq!(root.bound, Some(106.0));
    assert_eq!(root.checked_bound, Some(model::Number::from(106)));
    assert!(root.rounds >= 1 && root.added[2] >= 1, "{root:?}");
    agrees(&costs, Form::Subtours, Sense::Minimise);
}

#[test]
fn the_heuristic_says_its_name() {
    let costs = Random(3).costs(12, 100);
    let model = round_trip(&costs, Form::Labels, Sense::Minimise);
    let settings = crate::Settings { node_limit: Some(2), ..rules()[0].clone() };
    let (events, summary) = run(&model, &settings, u64::MAX);
    let named = events.iter().any(|event| {
        matches!(event, Event::Incumbent { origin: Origin::Heuristic(name), .. } if name == crate::tour::NAME)
    });
    assert!(named, "{events:?}");
    assert!(is_trip(&model, &summary.solution));
}
