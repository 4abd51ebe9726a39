//! What a node shows is what the log said, to the bit.

use model::Sense;

use super::support::{Form, Random, finish, random_model, round_trip, rules};
use crate::{Event, NodeId, NodeState, Search};

fn check(search: &mut Search) -> u32 {
    finish(search, 700);
    let mut nodes = 0;
    for event in search.take_events() {
        let Event::Solved { node, state, bound, fractional, branch_column, .. } = event else {
            continue;
        };
        nodes += 1;
        let view = search.inspect(node).unwrap();
        assert_eq!(view.state, state);
        assert_eq!(view.bound.map(f64::to_bits), bound.map(f64::to_bits), "{node:?}");
        assert_eq!(view.path.len(), view.depth as usize);
        assert_eq!(view.ray.is_empty(), state != NodeState::Infeasible);
        if !view.x.is_empty() {
            let apart = |v: &f64| (v - v.round()).abs() > 1e-6;
            let columns = search.model().columns().iter().zip(&view.x);
            let counted = columns.filter(|(column, v)| column.integer && apart(v)).count();
            assert_eq!(counted, fractional as usize);
            assert!(branch_column.is_none_or(|column| apart(&view.x[column.index()])));
            assert_eq!(view.reduced_costs.len(), view.x.len());
            let held: u32 = view.families.iter().map(|family| family.held).sum();
            assert!(held as usize <= view.x.len(), "a vertex is held by as many as it has columns");
            assert!(view.families.iter().all(|family| family.priced <= family.held));
        }
    }
    nodes
}

#[test]
fn the_bound_has_the_same_bits_as_the_log() {
    let costs = Random(41).distances(9);
    for settings in rules() {
        for form in [Form::Labels, Form::Subtours] {
            let model = round_trip(&costs, form, Sense::Minimise);
            assert!(check(&mut Search::new(model, settings.clone())) > 0);
        }
        for seed in 400..406 {
            check(&mut Search::new(random_model(seed, 9, 2), settings.clone()));
        }
    }
}

#[test]
fn an_unknown_or_unsolved_node_shows_no_point() {
    let costs = Random(41).distances(9);
    let mut search =
        Search::new(round_trip(&costs, Form::Labels, Sense::Minimise), rules()[0].clone());
    assert!(search.inspect(NodeId(0)).is_none() && search.inspect(NodeId(2)).is_none());
    let view = search.inspect(NodeId::ROOT).unwrap();
    assert_eq!((view.state, view.bound, view.x.len()), (NodeState::Open, None, 0));
}

/// To branch by hand one must see the point before the search comes to the node.
#[test]
fn an_open_node_is_solved_ahead_and_nothing_changes() {
    let costs = Random(41).distances(9);
    let model = round_trip(&costs, Form::Labels, Sense::Minimise);
    let mut search = Search::new(model.clone(), rules()[0].clone());
    let mut seen = std::collections::BTreeMap::new();
    for _ in 0..6 {
        while search.advance(1000) == crate::Progress::Working {}
        for node in 2..40 {
            let Some(view) = search.inspect(NodeId(node)) else { break };
            assert_eq!(view.ahead, view.state == NodeState::Open);
            assert_eq!(view.branchable.is_empty(), view.branching.is_some(), "{view:?}");
            assert!(view.path.iter().all(|branch| !view.branchable.contains(&branch.column)));
            if view.ahead {
                seen.insert(view.node, view.bound.map(f64::to_bits));
            }
        }
        search.run(Some(2));
    }
    finish(&mut search, 700);
    let events = search.take_events();
    let mut met = 0;
    for event in &events {
        let Event::Solved { node, bound, .. } = event else { continue };
        if let Some(ahead) = seen.get(node) {
            assert_eq!(bound.map(f64::to_bits), *ahead, "{node:?}");
            met += 1;
        }
    }
    assert!(met > 5, "{met}");
    let mut untouched = Search::new(model, rules()[0].clone());
    finish(&mut untouched, 700);
    assert_eq!(untouched.take_events(), events);
}

#[test]
fn the_sets_of_a_labels_point_are_those_that_few_arcs_leave() {
    // Two groups of four, 1 inside and 50 across: at the root the labels let them fall apart.
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
    let mut search =
        Search::new(round_trip(&costs, Form::Labels, Sense::Minimise), rules()[0].clone());
    while search.advance(1000) != crate::Progress::RootSolved {}
    let view = search.inspect(NodeId::ROOT).unwrap();
    let model = search.model();
    assert!(!view.violated.is_empty());
    for found in &view.violated {
        assert_eq!(found.family, "subtour");
        let out = (0..model.columns().len()).map(model::ColumnId::from_index).filter(|&c| {
            let tuple = model.column_tuple(c);
            tuple.len() == 2
                && found.subset.contains(&tuple[0])
                && !found.subset.contains(&tuple[1])
        });
        let leaving: f64 = out.map(|c| view.x[c.index()]).sum();
        assert!(
            (1.0 - leaving - found.violation).abs() < 1e-9 && found.violation > 1e-6,
            "{found:?}"
        );
    }
}

#[test]
fn a_separated_point_violates_nothing() {
    let costs = Random(43).distances(9);
    let mut search =
        Search::new(round_trip(&costs, Form::Subtours, Sense::Minimise), rules()[0].clone());
    while search.advance(1000) != crate::Progress::RootSolved {}
    assert!(search.inspect(NodeId::ROOT).unwrap().violated.is_empty());
}
