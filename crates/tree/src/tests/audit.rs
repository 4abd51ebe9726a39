//! Logs proved again, and logs that were tampered with.

use std::rc::Rc;

use model::{Model, Sense};

use super::support::{Form, Random, finish, random_model, round_trip, rules, working};
use crate::{
    Audit, AuditResult, Branch, Claim, Event, Judgement, LoggedRow, NodeId, NodeState, Search,
    Settings, Side, Testimony,
};

pub(super) fn audited(model: &Rc<Model>, told: Testimony, slice: u64) -> AuditResult {
    let mut audit = Audit::new(Rc::clone(model), told).unwrap();
    while !audit.advance(slice) {}
    audit.result()
}

/// A search at its end, and what its events say of it.
pub(super) fn searched(model: &Rc<Model>, settings: &Settings) -> (Search, Testimony) {
    let mut search = Search::new(Rc::clone(model), settings.clone());
    finish(&mut search, 10_000);
    let events = search.take_events();
    let of_tree = search.testimony();
    let mut told = Testimony {
        plan: of_tree.plan.clone(),
        rows: of_tree.rows.clone(),
        cutoff: of_tree.cutoff,
        own_bounds: of_tree.own_bounds,
        sources: of_tree.sources.clone(),
        cuts: of_tree.cuts.clone(),
        ..Testimony::default()
    };
    events.iter().for_each(|event| told.note(event));
    for (node, before, after) in search.tightened() {
        let claim = &mut told.claims[node.0 as usize - 1];
        (claim.before, claim.after) = (before.to_vec(), after.to_vec());
    }
    (search, told)
}

pub(super) fn names(result: &AuditResult, node: NodeId) -> bool {
    let by_number =
        |why: &str| why.split(|c: char| !c.is_ascii_digit()).any(|word| word == node.0.to_string());
    result.open.contains(&node)
        || result.faults.iter().any(|fault| fault.node == node || by_number(&fault.why))
}

/// Models whose trees have leaves of every kind.
pub(super) fn models() -> Vec<(&'static str, Rc<Model>)> {
    let costs = Random(41).distances(9);
    vec![
        ("labels", round_trip(&Random(3).distances(6), Form::Labels, Sense::Minimise)),
        ("flow", round_trip(&Random(12).distances(8), Form::Flow, Sense::Maximise)),
        ("subtours", round_trip(&costs, Form::Subtours, Sense::Minimise)),
        ("mixed", random_model(107, 9, 3)),
        ("whole", random_model(20, 12, 0)),
    ]
}

#[test]
fn a_search_that_checked_its_leaves_is_proved_again() {
    for (name, model) in models() {
        for settings in rules().into_iter().chain(working()) {
            let (search, told) = searched(&model, &settings);
            let leaves = |told: &Testimony| -> Vec<Claim> {
                told.claims.iter().filter(|claim| claim.children == 0).cloned().collect()
            };
            let same = leaves(&told) == leaves(&search.testimony());
            assert!(same, "{name}, {settings:?}: the events and the tree differ");
            let summary = search.summary();
            let result = audited(&model, told, 100);
            let place = format!("{name}, {settings:?}: {result:?}, {summary:?}");
            assert_eq!(result.judgement, Judgement::Proved, "{place}");
            let value = result.value.as_ref().map(model::nearest_f64);
            assert_eq!(value.is_some(), summary.incumbent.is_some(), "{place}");
            assert!((value.unwrap_or(0.0) - summary.incumbent.unwrap_or(0.0)).abs() < 1e-6);
            let leaves = summary.leaves_checked + summary.leaves_unchecked;
            assert_eq!(result.leaves, leaves, "{place}");
        }
    }
}

#[test]
fn slices_do_not_change_an_audit() {
    let (_, model) = models().remove(2);
    let (_, told) = searched(&model, &Settings::default());
    let whole = audited(&model, told.clone(), u64::MAX);
    assert_eq!(whole, audited(&model, told.clone(), 1));
    assert_eq!(whole, audited(&model, told, 777));
}

/// Each way to falsify one leaf, with the leaf that must be named.
pub(super) fn falsified(told: &Testimony, maximise: bool) -> Vec<(String, NodeId, Testimony)> {
    let mut all = Vec::new();
    let worse = if maximise { -1.0 } else { 1.0 };
    for (place, claim) in told.claims.iter().enumerate().filter(|(_, claim)| claim.children == 0) {
        let node = NodeId(u32::try_from(place + 1).unwrap());
        let mut add = |what: &str, change: &dyn Fn(&mut Testimony)| {
            let mut other = told.clone();
            change(&mut other);
            all.push((format!("{what} at {node:?} ({:?})", claim.state), node, other));
        };
        if let Some(bound) = claim.bound {
            let raised = bound + worse * (1.0 + bound.abs());
            add("bound raised", &move |told: &mut Testimony| {
                told.claims[place].bound = Some(raised);
            });
            add("said to have no point", &|told: &mut Testimony| {
                told.claims[place].state = NodeState::Infeasible;
            });
        }
        add("left open", &|told: &mut Testimony| told.claims[place].state = NodeState::Open);
        if let Some(branch) = claim.branching {
            let step = if branch.side == Side::AtMost { -1.0 } else { 1.0 };
            add("branching shifted", &move |told: &mut Testimony| {
                let branch = Branch { bound: branch.bound + step, ..branch };
                told.claims[place].branching = Some(branch);
            });
        }
    }
    all
}

#[test]
fn every_leaf_that_is_tampered_with_is_named() {
    let mut kinds = std::collections::BTreeSet::new();
    for (name, model) in models() {
        let (_, told) = searched(&model, &Settings::default());
        kinds.extend(told.claims.iter().map(|claim| format!("{:?}", claim.state)));
        for (what, node, other) in falsified(&told, model.sense() == Sense::Maximise) {
            let result = audited(&model, other, u64::MAX);
            // A leaf whose rows have no point at all may well be called so.
            let empty = what.starts_with("said to") && result.judgement == Judgement::Proved;
            assert!(empty || result.judgement != Judgement::Proved, "{name}: {what}");
            assert!(empty || names(&result, node), "{name}: {what}: {result:?}");
            assert!(!empty || holds_nothing(&model, &told, &path(&told, node)), "{name}: {what}");
        }
    }
    for kind in ["Integer", "Infeasible", "Pruned", "Branched"] {
        assert!(kinds.contains(kind), "no leaf of the kind {kind}: {kinds:?}");
    }
}

/// Whether no plan lies within a leaf, by a search of its own that knows no incumbent.
pub(super) fn holds_nothing(model: &Rc<Model>, told: &Testimony, path: &[Branch]) -> bool {
    let mut claims = vec![told.claims[0].clone()];
    claims[0].state = NodeState::Infeasible;
    claims[0].children = 0;
    claims[0].before = path.to_vec();
    let alone = Testimony { claims, own_bounds: true, ..Testimony::default() };
    // The bounds of the path stand as tightened: only the leaf itself is looked at.
    audited(model, alone, u64::MAX).empty == 1
}

fn path(told: &Testimony, node: NodeId) -> Vec<Branch> {
    let mut path = Vec::new();
    let mut at = Some(node);
    while let Some(here) = at {
        let claim: &Claim = &told.claims[here.0 as usize - 1];
        path.extend(claim.branching);
        at = claim.parent;
    }
    path.reverse();
    path
}

#[test]
fn a_leaf_that_is_taken_out_of_the_log_is_missed() {
    let (_, model) = models().remove(0);
    let mut search = Search::new(Rc::clone(&model), Settings::default());
    finish(&mut search, 10_000);
    let events = search.take_events();
    let told = search.testimony();
    for (place, claim) in told.claims.iter().enumerate().filter(|(_, claim)| claim.children == 0) {
        let node = NodeId(u32::try_from(place + 1).unwrap());
        let of = |event: &Event| match event {
            Event::Created { node, .. }
            | Event::Solved { node, .. }
            | Event::Dropped { node, .. } => Some(*node),
            Event::Incumbent { .. } | Event::Bound { .. } => None,
        };
        let mut other =
            Testimony { plan: told.plan.clone(), own_bounds: true, ..Testimony::default() };
        let kept = events.iter().filter(|event| of(event) != Some(node));
        kept.for_each(|event| other.note(event));
        let result = audited(&model, other, u64::MAX);
        assert_eq!(result.judgement, Judgement::Refused, "{node:?} {:?}", claim.state);
        // Where nothing comes after it, the node that it was made of misses it.
        let missed = claim.parent.is_some_and(|parent| names(&result, parent));
        assert!(names(&result, node) || missed, "{node:?}: {result:?}");
    }
}

#[test]
fn another_plan_or_another_value_is_refused_where_it_was_found() {
    for (name, model) in models() {
        let (_, told) = searched(&model, &Settings::default());
        let (node, value) = told.incumbent.unwrap();
        let better = if model.sense() == Sense::Maximise { 1.0 } else { -1.0 };
        for changed in [value + better, value - better, value * 2.0 + 7.0] {
            let mut other = told.clone();
            other.incumbent = Some((node, changed));
            let result = audited(&model, other, u64::MAX);
            assert_eq!(result.judgement, Judgement::Refused, "{name}");
            assert!(names(&result, node), "{name}: {result:?}");
        }
        for column in 0..told.plan.len() {
            let mut other = told.clone();
            other.plan[column] += 1.0;
            let result = audited(&model, other, u64::MAX);
            // A continuous column is solved anew: only whole ones say what the plan is.
            let free = !model.columns()[column].integer;
            let refused = result.judgement == Judgement::Refused && names(&result, node);
            assert!(refused || free, "{name}, column {column}: {result:?}");
        }
        let mut other = told.clone();
        other.plan.clear();
        assert_eq!(audited(&model, other, u64::MAX).judgement, Judgement::Refused);
    }
}

/// A log that claims less than the best: a value one worse as given, and no plan.
fn modest(told: &Testimony, maximise: bool) -> Testimony {
    let (_, value) = told.incumbent.unwrap();
    let worse = if maximise { -1.0 } else { 1.0 };
    Testimony { incumbent: None, cutoff: Some(value + worse), bound: None, ..told.clone() }
}

#[test]
fn a_leaf_that_holds_a_better_plan_is_named() {
    for (name, model) in models() {
        let (_, told) = searched(&model, &Settings::default());
        let result = audited(&model, modest(&told, model.sense() == Sense::Maximise), u64::MAX);
        assert_eq!(result.judgement, Judgement::Refused, "{name}: {result:?}");
        let leaf = &told.claims[result.faults[0].node.0 as usize - 1];
        let holds = path(&told, result.faults[0].node).iter().all(|branch| {
            let value = told.plan[branch.column.index()].round();
            if branch.side == Side::AtMost { value <= branch.bound } else { value >= branch.bound }
        });
        assert!(leaf.children == 0 && holds, "{name}: {result:?}");
    }
}

#[test]
fn a_tightened_bound_that_takes_a_better_plan_away_is_refused() {
    for (name, model) in models() {
        let (_, told) = searched(&model, &Settings::default());
        let columns = model.columns().iter().enumerate();
        for (column, _) in columns.filter(|(_, column)| column.integer) {
            let value = told.plan[column].round();
            let column = model::ColumnId::from_index(column);
            let away = Branch { column, side: Side::AtMost, bound: value - 1.0 };
            let mut other = modest(&told, model.sense() == Sense::Maximise);
            other.claims[0].after = vec![away];
            let result = audited(&model, other, u64::MAX);
            assert_eq!(result.judgement, Judgement::Refused, "{name}: {result:?}");
            let why = &result.faults[0];
            assert!(why.node == NodeId::ROOT && why.why.contains("takes a better plan away"));
            if name != "labels" {
                break;
            }
        }
    }
}

#[test]
fn a_row_that_is_no_member_is_refused() {
    let (_, model) = models().remove(2);
    let (_, told) = searched(&model, &Settings::default());
    let place = told.rows.iter().position(|row| matches!(row, LoggedRow::Member(..))).unwrap();
    let mut other = told;
    let LoggedRow::Member(_, subset) = &mut other.rows[place] else { return };
    // A family of sets of at least two stops has no member of one.
    while subset.len() > 1 {
        subset.pop_first();
    }
    let result = audited(&model, other, u64::MAX);
    assert_eq!(result.judgement, Judgement::Refused, "{result:?}");
}

#[test]
fn a_search_that_was_stopped_leaves_its_open_nodes_open() {
    let (_, model) = models().remove(0);
    let (_, told) = searched(&model, &Settings { node_limit: Some(4), ..Settings::default() });
    let result = audited(&model, told.clone(), u64::MAX);
    assert_eq!(result.judgement, Judgement::Open, "{result:?}");
    let open = told.claims.iter().filter(|claim| claim.state == NodeState::Open).count();
    assert_eq!(result.open.len(), open);
}

#[test]
fn a_value_that_was_given_is_said_to_be_given() {
    let (_, model) = models().remove(0);
    let (search, _) = searched(&model, &Settings::default());
    let best = search.summary().incumbent.unwrap();
    let settings = Settings { cutoff: Some(best - 1.0), ..Settings::default() };
    let (_, told) = searched(&model, &settings);
    let result = audited(&model, told, u64::MAX);
    assert_eq!((result.judgement, result.given, result.value), (Judgement::Proved, true, None));
}
