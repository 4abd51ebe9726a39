//! How a search can end: cut-offs, no point, no bound, limits.

use std::rc::Rc;

use model::{ColumnSpec, Model, ModelBuilder, Number, Sense};

use super::support::{
    Form, Random, best_trip, finish, random_model, round_trip, row, rules, run, spec, whole,
};
use crate::{Event, NodeState, Progress, Search, Settings, Status};

fn trip() -> (Rc<Model>, f64) {
    let costs = Random(31).distances(9);
    (round_trip(&costs, Form::Labels, Sense::Minimise), best_trip(&costs) as f64)
}

#[test]
fn a_cutoff_at_the_optimum_is_proved_or_met() {
    let (model, best) = trip();
    for settings in rules() {
        let (_, summary) = run(&model, &Settings { cutoff: Some(best), ..settings }, u64::MAX);
        assert_eq!((summary.status, summary.bound), (Status::Optimal, Some(best)));
        assert!(summary.incumbent.is_none_or(|value| value == best), "{summary:?}");
        assert!(summary.checked);
    }
}

#[test]
fn a_cutoff_under_the_optimum_leaves_no_incumbent() {
    let (model, best) = trip();
    let (events, summary) =
        run(&model, &Settings { cutoff: Some(best - 1.0), ..Settings::default() }, u64::MAX);
    assert_eq!(
        (summary.status, summary.bound, summary.incumbent),
        (Status::Optimal, Some(best - 1.0), None)
    );
    assert_eq!(summary.gap, None);
    assert!(summary.solution.is_empty());
    assert!(events.iter().all(|event| !matches!(event, Event::Incumbent { .. })));
}

#[test]
fn a_cutoff_over_the_optimum_changes_nothing_but_the_tree() {
    let (model, best) = trip();
    let (_, summary) =
        run(&model, &Settings { cutoff: Some(best + 5.0), ..Settings::default() }, u64::MAX);
    assert_eq!((summary.status, summary.incumbent), (Status::Optimal, Some(best)));
}

#[test]
fn an_infeasible_root_has_a_checked_ray() {
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    let x = builder.column(&[], &spec((0, 1), 1, true)).unwrap();
    let y = builder.column(&[], &spec((0, 1), 1, false)).unwrap();
    builder.row(&[], row(&[(x, 1), (y, 1)], Some(3), None)).unwrap();
    builder.row(&[], row(&[(x, 1), (y, -1)], None, Some(5))).unwrap();
    let mut search = Search::new(Rc::new(builder.build()), Settings::default());
    assert_eq!(advance_far(&mut search), Progress::RootSolved);
    let root = search.root().unwrap();
    assert_eq!((root.status, root.checked, root.bound), (Status::Infeasible, true, None));
    assert_eq!(root.ray.len(), 1);
    assert_eq!(root.ray[0].0, "row 1");
    assert_eq!(advance_far(&mut search), Progress::Finished);
    let summary = search.summary();
    assert_eq!((summary.status, summary.checked, summary.nodes), (Status::Infeasible, true, 1));
    let view = search.inspect(crate::NodeId::ROOT).unwrap();
    assert_eq!((view.state, view.ray.len()), (NodeState::Infeasible, 1));
}

#[test]
fn a_model_without_whole_points_is_infeasible_after_a_search() {
    // 2x + 2y = 1 with a slack of a third: the relaxation has points, no whole one is among them.
    let mut builder = ModelBuilder::new("t", Sense::Maximise);
    let x = builder.column(&[], &spec((0, 3), 1, true)).unwrap();
    let y = builder.column(&[], &spec((0, 3), 2, true)).unwrap();
    builder.row(&[], row(&[(x, 2), (y, 2)], Some(5), Some(5))).unwrap();
    let model = Rc::new(builder.build());
    for settings in rules() {
        let (_, summary) = run(&model, &settings, u64::MAX);
        assert_eq!(
            (summary.status, summary.bound, summary.incumbent),
            (Status::Infeasible, None, None)
        );
        assert!(summary.nodes > 1 && summary.checked);
    }
}

#[test]
fn an_unbounded_root_ends_the_search() {
    let mut builder = ModelBuilder::new("t", Sense::Maximise);
    let free = ColumnSpec { lower: Some(Number::ZERO), upper: None, cost: whole(1), integer: true };
    let x = builder.column(&[], &free).unwrap();
    let y = builder.column(&[], &free).unwrap();
    builder.row(&[], row(&[(x, 1), (y, -1)], None, Some(2))).unwrap();
    let model = Rc::new(builder.build());
    let (events, summary) = run(&model, &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.bound, summary.checked), (Status::Unbounded, None, false));
    let mut search = Search::new(model, Settings::default());
    finish(&mut search, 3);
    // Along the ray the row holds on and the objective rises: y alone, or x and y alike.
    let ray = &search.root().unwrap().ray;
    assert!(!ray.is_empty() && ray.iter().all(|(_, step)| *step == 1.0), "{ray:?}");
    assert!(events.iter().any(|e| matches!(e, Event::Solved { state: NodeState::Unbounded, .. })));
}

#[test]
fn a_row_on_demand_may_bound_the_root() {
    let mut builder = ModelBuilder::new("t", Sense::Maximise);
    let free = ColumnSpec { lower: Some(Number::ZERO), upper: None, cost: whole(1), integer: true };
    let x = builder.column(&[], &free).unwrap();
    let y = builder.column(&[], &free).unwrap();
    builder.row(&[], row(&[(x, 1), (y, -1)], None, Some(2))).unwrap();
    builder.family("cap", model::FamilyState::OnDemand, false);
    builder.row(&[], row(&[(x, 2), (y, 2)], None, Some(7))).unwrap();
    let model = Rc::new(builder.build());
    let (events, summary) = run(&model, &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.incumbent), (Status::Optimal, Some(3.0)));
    assert_eq!(run(&model, &Settings::default(), 1).0, events);
}

#[test]
fn a_cutoff_of_a_maximisation_is_an_upper_value() {
    let costs = Random(31).distances(8);
    let model = round_trip(&costs, Form::Labels, Sense::Maximise);
    let best = -(best_trip(&costs) as f64);
    for (cutoff, incumbent) in [(best - 0.5, Some(best)), (best + 0.5, None)] {
        let settings = Settings { cutoff: Some(cutoff), ..Settings::default() };
        let (_, summary) = run(&model, &settings, u64::MAX);
        assert_eq!((summary.status, summary.incumbent), (Status::Optimal, incumbent));
        assert!(summary.bound == incumbent.or(Some(cutoff)) && summary.checked, "{summary:?}");
    }
}

#[test]
fn limits_stop_and_say_so() {
    let (model, best) = trip();
    let (_, free) = run(&model, &Settings::default(), u64::MAX);
    assert!(free.nodes > 10, "{free:?}");
    let (_, summary) =
        run(&model, &Settings { node_limit: Some(5), ..Settings::default() }, u64::MAX);
    assert_eq!((summary.status, summary.nodes), (Status::Limit, 5));
    assert_eq!(summary.stopped.as_deref(), Some("node limit"));
    assert!(summary.bound.unwrap() <= best && summary.open > 0 && !summary.checked);

    let half = free.iterations / 2;
    let (events, summary) =
        run(&model, &Settings { iteration_limit: Some(half), ..Settings::default() }, u64::MAX);
    assert_eq!(summary.status, Status::Limit);
    assert!(summary.iterations >= half && summary.nodes < free.nodes, "{summary:?}");
    assert!(summary.iterations < free.iterations, "the node in hand and no more: {summary:?}");
    assert_eq!(summary.stopped.as_deref(), Some("iteration limit"));
    assert!(summary.bound.unwrap() <= best);
    let (same, _) =
        run(&model, &Settings { iteration_limit: Some(half), ..Settings::default() }, 13);
    assert_eq!(same, events);
}

#[test]
fn a_root_stopped_by_a_limit_keeps_the_bound_it_had() {
    let (model, best) = trip();
    let settings = Settings { iteration_limit: Some(3), ..Settings::default() };
    let mut search = Search::new(Rc::clone(&model), settings);
    assert_eq!(advance_far(&mut search), Progress::RootSolved);
    let root = search.root().unwrap();
    assert_eq!((root.status, root.stopped.as_deref()), (Status::Limit, Some("iteration limit")));
    assert!(root.checked && root.bound.unwrap() < best && root.iterations == 3);
    assert_eq!(advance_far(&mut search), Progress::Finished);
    let summary = search.summary();
    assert_eq!(
        (summary.status, summary.bound, summary.nodes),
        (Status::Limit, root_bound(&search), 0)
    );
    assert!(!summary.checked);
}

fn root_bound(search: &Search) -> Option<f64> {
    search.root().unwrap().bound
}

#[test]
fn stopping_keeps_what_is_known() {
    let (model, best) = trip();
    let mut search = Search::new(model, Settings::default());
    assert_eq!(advance_far(&mut search), Progress::RootSolved);
    search.run(Some(4));
    assert_eq!(advance_far(&mut search), Progress::Paused);
    search.run(None);
    search.advance(40);
    let before = search.summary();
    search.stop();
    let after = search.summary();
    assert_eq!(search.advance(100), Progress::Finished);
    assert_eq!((after.status, after.stopped.as_deref()), (Status::Limit, Some("stopped")));
    assert_eq!((after.bound, after.open, after.nodes), (before.bound, before.open, before.nodes));
    assert!(after.bound.unwrap() <= best);
}

#[test]
fn without_a_search_only_the_root_is_solved() {
    let (model, best) = trip();
    let (events, summary) =
        run(&model, &Settings { search: false, ..Settings::default() }, u64::MAX);
    assert_eq!((summary.status, summary.nodes, summary.open), (Status::Limit, 1, 0));
    assert!(summary.bound.unwrap() < best);
    assert!(
        events.iter().any(|e| matches!(
            e,
            Event::Solved { state: NodeState::Open, branch_column: None, .. }
        ))
    );
}

#[test]
fn rows_on_demand_come_only_when_violated() {
    let mut added = 0;
    for seed in 300..320 {
        let mut search = Search::new(random_model(seed, 7, 2), Settings::default());
        finish(&mut search, u64::MAX);
        let root = search.root().unwrap();
        assert_eq!(root.added.iter().take(3).sum::<u32>(), 0);
        assert!(root.added[3] <= 1);
        added += root.added[3];
    }
    assert!((1..20).contains(&added), "{added}");
}

fn advance_far(search: &mut Search) -> Progress {
    loop {
        let progress = search.advance(1_000_000);
        if progress != Progress::Working {
            return progress;
        }
    }
}

#[test]
fn a_node_that_cannot_be_solved_keeps_its_parents_bound() {
    let (model, best) = trip();
    let mut search = Search::new(model, Settings::default());
    assert_eq!(advance_far(&mut search), Progress::RootSolved);
    let root = search.root().unwrap().bound;
    search.run(None);
    while search.hand.is_none() {
        search.advance(1);
    }
    assert_eq!(search.unsolved("the kernel gave up"), None);
    finish(&mut search, 1000);
    let summary = search.summary();
    assert_eq!((summary.status, summary.bound), (Status::Limit, root));
    assert!(summary.incumbent.unwrap() >= best && !summary.checked);
    let why = summary.stopped.unwrap();
    assert_eq!(why, "a node could not be solved (1; the last: the kernel gave up)");
    let unsolved =
        |e: &Event| matches!(e, Event::Solved { state: NodeState::Unsolved, bound: None, .. });
    assert_eq!(search.take_events().iter().filter(|e| unsolved(e)).count(), 1);
}

#[test]
fn a_family_that_cannot_be_checked_leaves_the_solution_unproved() {
    // x(S) ≤ Σ_{i∈S} w_i over all S of 14 elements of odd size: 2^13 members, of no known shape.
    let mut builder = ModelBuilder::new("t", Sense::Maximise);
    let elements: Vec<_> = (0..14).map(|i| builder.label(&format!("e{i}"))).collect();
    let mut terms = Vec::new();
    for pair in elements.windows(2) {
        let column = builder.column(pair, &spec((0, 1), 1, true)).unwrap();
        let scope = model::Scope::Crossing(pair[0], pair[1]);
        terms.push(model::SubsetTerm { column, coefficient: whole(1), scope });
    }
    let family = builder.family("odd", model::FamilyState::OnDemand, false);
    let odd = model::SubsetFamily {
        family,
        tuple: Vec::new(),
        ground: elements,
        conditions: vec![model::SubsetCondition::Odd(true)],
        terms,
        weights: vec![whole(-2); 14],
        constant: whole(-1),
        rounded: None,
        relation: model::Relation::AtMost,
    };
    builder.subset_family(odd).unwrap();
    let search = Search::new(Rc::new(builder.build()), Settings::default());
    assert_eq!(search.separators()[0].exactness(), None);
    let (_, summary) = run(search.model(), &Settings::default(), u64::MAX);
    assert_eq!(
        (summary.status, summary.incumbent, summary.checked),
        (Status::Limit, Some(13.0), false)
    );
    let why = "not proved: a family over subsets has no exact membership check";
    assert_eq!(summary.stopped.as_deref(), Some(why));
}

#[test]
fn a_model_without_columns_has_one_solution() {
    let mut builder = ModelBuilder::new("t", Sense::Maximise);
    builder.offset(whole(4));
    let (_, summary) = run(&Rc::new(builder.build()), &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.incumbent, summary.nodes), (Status::Optimal, Some(4.0), 1));
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    builder.row(&[], row(&[], Some(1), None)).unwrap();
    let (_, summary) = run(&Rc::new(builder.build()), &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.checked), (Status::Infeasible, true));
}

#[test]
fn a_linear_programme_needs_one_node() {
    let mut builder = ModelBuilder::new("t", Sense::Maximise);
    let x = builder.column(&[], &spec((0, 9), 2, false)).unwrap();
    let y = builder.column(&[], &spec((0, 9), 1, false)).unwrap();
    builder.row(&[], row(&[(x, 3), (y, 1)], None, Some(10))).unwrap();
    let (_, summary) = run(&Rc::new(builder.build()), &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.nodes, summary.checked), (Status::Optimal, 1, true));
    assert!((summary.incumbent.unwrap() - 29.0 / 3.0).abs() < 1e-9);
}

#[test]
fn without_costs_any_solution_will_do() {
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    let columns: Vec<_> =
        (0..6).map(|_| builder.column(&[], &spec((0, 1), 0, true)).unwrap()).collect();
    let entries: Vec<_> = columns.iter().zip([3, 5, 7, 11, 13, 17]).map(|(&c, a)| (c, a)).collect();
    builder.row(&[], row(&entries, Some(29), Some(29))).unwrap();
    let model = Rc::new(builder.build());
    for settings in rules() {
        let (_, summary) = run(&model, &settings, u64::MAX);
        assert_eq!((summary.status, summary.incumbent), (Status::Optimal, Some(0.0)));
        assert!(summary.checked, "{summary:?}");
    }
}

#[test]
fn a_column_without_a_whole_value_is_infeasible() {
    let half = |n: i64| Some(whole(n) / whole(4));
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    let narrow = ColumnSpec { lower: half(1), upper: half(3), cost: whole(1), integer: true };
    builder.column(&[], &narrow).unwrap();
    let (_, summary) = run(&Rc::new(builder.build()), &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.nodes), (Status::Infeasible, 3));
    assert!(summary.checked);
    let mut builder = ModelBuilder::new("t", Sense::Minimise);
    builder.column(&[], &spec((2, 1), 1, true)).unwrap();
    let (_, summary) = run(&Rc::new(builder.build()), &Settings::default(), u64::MAX);
    assert_eq!((summary.status, summary.nodes, summary.checked), (Status::Infeasible, 1, true));
}
