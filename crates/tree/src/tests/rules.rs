//! Rules and limits changed during a run.

use std::rc::Rc;

use model::{ModelBuilder, Sense};

use super::support::{Form, Random, finish, random_model, round_trip, row, rules, run, spec};
use crate::{Act, Acted, Branching, Event, Progress, Rule, Search, Selection, Settings, Status};

/// Goes on to so many nodes more, or to the end.
fn go_on(search: &mut Search, nodes: u32, ticks: u64) -> Progress {
    search.run(Some(nodes));
    loop {
        match search.advance(ticks) {
            Progress::Working | Progress::RootSolved => {}
            ended => return ended,
        }
    }
}

/// Every rule in turn, a few nodes each, then to the end; what was done and what happened.
fn changing(model: &Rc<model::Model>, ticks: u64) -> (Vec<Event>, Vec<Acted>, Option<f64>) {
    let mut search = Search::new(Rc::clone(model), Settings::default());
    let mut acted = Vec::new();
    while search.advance(ticks) == Progress::Working {}
    for settings in rules() {
        if go_on(&mut search, 3, ticks) == Progress::Finished {
            break;
        }
        search.act(Act::Rule(Rule::Branching(settings.branching)));
        search.act(Act::Rule(Rule::Selection(settings.selection)));
    }
    finish(&mut search, ticks);
    acted.extend(search.take_acted());
    let summary = search.summary();
    assert!(summary.checked, "{summary:?}");
    (search.take_events(), acted, summary.incumbent)
}

#[test]
fn rules_changed_during_a_run_lead_to_the_same_optimum_and_are_replayed() {
    let trip = round_trip(&Random(3).distances(6), Form::Labels, Sense::Minimise);
    let mut deep = 0;
    for model in [trip, random_model(20, 12, 0), random_model(107, 9, 3)] {
        let (events, acted, best) = changing(&model, 1_000);
        let mut plain = Search::new(Rc::clone(&model), Settings::default());
        finish(&mut plain, 10_000);
        assert_eq!(best, plain.summary().incumbent);
        assert_eq!((&events, &acted), (&changing(&model, 1).0, &changing(&model, 77).1));
        let done = acted.iter().filter(|acted| acted.refused.is_none());
        let mut again = Search::new(Rc::clone(&model), Settings::default());
        done.clone().for_each(|acted| again.replay(acted.after, acted.act.clone()));
        finish(&mut again, 500);
        assert_eq!(again.take_events(), events, "the replay differs");
        deep += done.count();
    }
    assert!(deep > 20, "{deep} changes took effect");
}

#[test]
fn a_rule_takes_hold_at_the_next_node() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    let next = |selection: Selection| {
        let mut search = Search::new(Rc::clone(&model), Settings::default());
        while search.advance(1_000) == Progress::Working {}
        assert_eq!(go_on(&mut search, 12, 1_000), Progress::Paused);
        search.take_events();
        search.act(Act::Rule(Rule::Selection(selection)));
        go_on(&mut search, 1, 1_000);
        let solved = search.take_events().into_iter().find_map(|event| match event {
            Event::Solved { node, .. } => Some(node),
            _ => None,
        });
        solved.unwrap()
    };
    assert!(next(Selection::DepthFirst) > next(Selection::BestBound));
}

#[test]
fn nodes_that_wait_for_a_person_are_branched_on_by_the_new_rule() {
    let model = round_trip(&Random(3).distances(6), Form::Labels, Sense::Minimise);
    let by_hand = Settings { branching: Branching::ByHand, ..Settings::default() };
    let mut search = Search::new(Rc::clone(&model), by_hand);
    search.run(None);
    while !matches!(search.advance(1_000), Progress::Paused | Progress::Finished) {
        if search.root().is_some() {
            search.run(None);
        }
    }
    assert!(search.waits_for_a_branching());
    search.act(Act::Rule(Rule::Branching(Branching::MostFractional)));
    finish(&mut search, 1_000);
    assert_eq!(search.summary().status, Status::Optimal);
    let mut plain = Search::new(model, Settings::default());
    finish(&mut plain, 1_000);
    assert_eq!(search.summary().incumbent, plain.summary().incumbent);
}

#[test]
fn limits_changed_while_it_stands_still_hold_when_it_goes_on() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    let limited = Settings { node_limit: Some(10), ..Settings::default() };
    let at = |rule: Option<Rule>| {
        let mut search = Search::new(Rc::clone(&model), limited.clone());
        while search.advance(1_000) == Progress::Working {}
        go_on(&mut search, 5, 1_000);
        rule.into_iter().for_each(|rule| search.act(Act::Rule(rule)));
        finish(&mut search, 1_000);
        (search.summary().status, search.summary().nodes)
    };
    assert_eq!(at(None), (Status::Limit, 10));
    assert_eq!(at(Some(Rule::Nodes(Some(14)))), (Status::Limit, 14));
    assert_eq!(at(Some(Rule::Nodes(None))).0, Status::Optimal);
    assert_eq!(at(Some(Rule::Iterations(Some(1)))).0, Status::Limit);
}

/// Every rule for branching, the one by hand among them, with every rule for the next node.
fn pairs() -> Vec<(Branching, Selection)> {
    let selections = [Selection::BestBound, Selection::DepthFirst, Selection::BestEstimate];
    let by_hand = selections.map(|selection| (Branching::ByHand, selection));
    let own = rules().into_iter().map(|settings| (settings.branching, settings.selection));
    own.chain(by_hand).collect()
}

/// From one pair of rules to another after some nodes, and to the end: where a person is waited for,
/// the first column that may be branched on is named.
fn changed(
    model: &Rc<model::Model>,
    from: (Branching, Selection),
    to: (Branching, Selection),
    ticks: u64,
) -> (Search, Vec<Acted>) {
    let settings = Settings { branching: from.0, selection: from.1, ..Settings::default() };
    let mut search = Search::new(Rc::clone(model), settings);
    while search.advance(ticks) == Progress::Working {}
    go_on(&mut search, 4, ticks);
    search.act(Act::Rule(Rule::Branching(to.0)));
    search.act(Act::Rule(Rule::Selection(to.1)));
    search.run(None);
    loop {
        match search.advance(ticks) {
            Progress::Finished => break,
            Progress::Paused => name_a_column(&mut search),
            Progress::Working | Progress::RootSolved => {}
        }
    }
    let acted = search.take_acted();
    (search, acted)
}

fn name_a_column(search: &mut Search) {
    assert!(search.waits_for_a_branching());
    let views = (1..).map(crate::NodeId).map_while(|node| search.inspect(node));
    let mut held = views.filter(|view| view.state == crate::NodeState::Open && !view.ahead);
    let view = held.next().unwrap();
    let off = |column: &&model::ColumnId| (view.x[column.index()].fract() - 0.5).abs();
    let column = view.branchable.iter().min_by(|a, b| off(a).total_cmp(&off(b)));
    let (node, column) = (view.node, *column.unwrap());
    search.act(Act::Branch { node, column });
    search.run(None);
}

#[test]
fn every_pair_of_rules_is_changed_into_every_other() {
    let model = round_trip(&Random(3).distances(6), Form::Labels, Sense::Minimise);
    let best = run(&model, &Settings::default(), u64::MAX).1.incumbent;
    let (mut done, mut logs) = (0, std::collections::BTreeSet::new());
    for from in pairs() {
        for to in pairs().into_iter().filter(|to| *to != from) {
            let (mut search, acted) = changed(&model, from, to, 700);
            let (events, summary) = (search.take_events(), search.summary());
            assert_eq!((summary.status, summary.incumbent), (Status::Optimal, best));
            assert!(summary.checked, "{from:?} to {to:?}");
            let took = |rule: &Rule| {
                let rule = Act::Rule(rule.clone());
                acted.iter().any(|acted| acted.act == rule && acted.refused.is_none())
            };
            let both = took(&Rule::Branching(to.0)) && took(&Rule::Selection(to.1));
            assert!(both || summary.nodes <= 5, "{from:?} to {to:?}");
            done += u32::from(both);
            let settings = Settings { branching: from.0, selection: from.1, ..Settings::default() };
            let mut again = Search::new(Rc::clone(&model), settings);
            acted.iter().for_each(|one| again.replay(one.after, one.act.clone()));
            finish(&mut again, 90);
            assert_eq!(again.take_events(), events, "{from:?} to {to:?}: the replay differs");
            logs.insert(format!("{events:?}"));
        }
    }
    assert_eq!(done, 15 * 14);
    assert!(logs.len() > 20, "{} trees differ", logs.len());
}

/// Things of two variables to be carried, in two respects: x and y have as much of everything.
fn two_variables(seed: u64) -> Rc<model::Model> {
    let mut random = Random(seed);
    let mut builder = ModelBuilder::new("two", Sense::Maximise);
    let mut rows = [Vec::new(), Vec::new()];
    for name in ["x", "y"] {
        builder.variable(name, false);
        for _ in 0..8 {
            let cost = 20 + random.below(30);
            let column = builder.column(&[], &spec((0, 1), cost, true)).unwrap();
            rows.iter_mut().for_each(|row| row.push((column, 15 + random.below(40))));
        }
    }
    for entries in &rows {
        let all: i64 = entries.iter().map(|(_, a)| a).sum();
        builder.row(&[], row(entries, None, Some(all / 2))).unwrap();
    }
    Rc::new(builder.build())
}

#[test]
fn priorities_are_changed_during_a_run() {
    let large = |model: &Rc<model::Model>| run(model, &Settings::default(), u64::MAX).1.nodes > 40;
    let model = (0..50).map(two_variables).find(large).unwrap();
    let branched_on = |events: &[Event]| -> Vec<String> {
        let columns = events.iter().filter_map(|event| match event {
            Event::Solved { branch_column, .. } => *branch_column,
            _ => None,
        });
        let variable = |c: model::ColumnId| model.columns()[c.index()].variable;
        columns.map(|c| model.variables()[variable(c).index()].name.clone()).collect()
    };
    let mut shares = Vec::new();
    for name in ["x", "y"] {
        let mut search = Search::new(Rc::clone(&model), Settings::default());
        while search.advance(1_000) == Progress::Working {}
        go_on(&mut search, 3, 1_000);
        let mut events = search.take_events();
        search.act(Act::Rule(Rule::Priority(vec![name.to_owned()])));
        finish(&mut search, 1_000);
        let next = search.take_events();
        let branched = branched_on(&next);
        let own = branched.iter().filter(|variable| *variable == "x").count();
        shares.push(own as f64 / branched.len() as f64);
        events.extend(next);
        let mut again = Search::new(Rc::clone(&model), Settings::default());
        for one in search.take_acted() {
            assert_eq!(one.refused, None);
            again.replay(one.after, one.act);
        }
        finish(&mut again, 77);
        assert_eq!(again.take_events(), events, "the replay differs");
    }
    // At a node where only the other variable is fractional there is no choice.
    assert!(shares[0] > shares[1], "{shares:?} of the branchings are on x");
}

/// A search that its limit of nodes has ended goes on where it was: the same events as one that had
/// the higher limit from the start, and as its replay.
#[test]
fn a_raised_limit_lets_an_ended_search_go_on() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    let whole = run(&model, &Settings::default(), u64::MAX);
    for limit in [1, 2, 10, 25] {
        let limited = Settings { node_limit: Some(limit), ..Settings::default() };
        let mut search = Search::new(Rc::clone(&model), limited.clone());
        finish(&mut search, 1_000);
        let at = (search.summary().status, search.summary().nodes);
        assert_eq!(at, (Status::Limit, limit));
        let iterations = search.work().iterations;
        search.act(Act::Rule(Rule::Nodes(Some(limit))));
        assert!(search.is_over(), "no more nodes than before are allowed");
        search.act(Act::Rule(Rule::Nodes(Some(limit + 5))));
        assert!(!search.is_over() && search.advance(1_000) == Progress::Paused);
        finish(&mut search, 1_000);
        assert_eq!(search.summary().nodes, limit + 5);
        search.act(Act::Rule(Rule::Nodes(None)));
        finish(&mut search, 1_000);
        assert!(search.work().iterations > iterations, "it went on");
        assert_eq!((search.take_events(), search.summary()), whole, "after {limit} nodes");
        let mut again = Search::new(Rc::clone(&model), limited);
        for one in search.take_acted() {
            assert_eq!(one.refused.is_some(), one.act == Act::Rule(Rule::Nodes(Some(limit))));
            if one.refused.is_none() {
                again.replay(one.after, one.act);
            }
        }
        finish(&mut again, 77);
        assert_eq!((again.take_events(), again.summary()), whole, "the replay differs");
    }
}

/// The same of a limit of iterations, which was looked at within a node: what was spent on a node that
/// is left cannot be had again by a replay.
#[test]
fn a_raised_limit_of_iterations_lets_an_ended_search_go_on() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    for settings in [Settings::default(), Settings::production()] {
        let whole = run(&model, &settings, u64::MAX);
        let root = run(&model, &Settings { node_limit: Some(1), ..settings.clone() }, u64::MAX).1;
        let (least, most) = (root.iterations, whole.1.iterations);
        for limit in [least, least + 1, (least + most) / 2] {
            let limited = Settings { iteration_limit: Some(limit), ..settings.clone() };
            let mut search = Search::new(Rc::clone(&model), limited.clone());
            finish(&mut search, 1_000);
            let stopped = search.summary();
            assert_eq!(stopped.stopped.as_deref(), Some("iteration limit"), "{limit} of {most}");
            search.act(Act::Rule(Rule::Iterations(Some(stopped.iterations))));
            assert!(search.is_over(), "no more iterations than before are allowed");
            search.act(Act::Rule(Rule::Iterations(Some(stopped.iterations + 1))));
            finish(&mut search, 1_000);
            assert!(search.summary().nodes > stopped.nodes);
            search.act(Act::Rule(Rule::Iterations(None)));
            finish(&mut search, 1_000);
            assert_eq!((search.take_events(), search.summary()), whole, "after {limit}");
            let mut again = Search::new(Rc::clone(&model), limited);
            for one in search.take_acted().into_iter().filter(|one| one.refused.is_none()) {
                again.replay(one.after, one.act);
            }
            finish(&mut again, 77);
            assert_eq!((again.take_events(), again.summary()), whole, "the replay differs");
        }
    }
}

/// A root that had no iterations left was over for good. It goes on within its LP, to the same numbers,
/// and a replay allows it more in the same place.
#[test]
fn a_root_without_iterations_goes_on_where_more_are_allowed() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    for settings in [Settings::default(), Settings::production()] {
        let whole = run(&model, &settings, u64::MAX);
        // Those of the LP alone, without branchings that were tried.
        let mut free = Search::new(Rc::clone(&model), Settings::default());
        while free.advance(u64::MAX) != Progress::RootSolved {}
        let most = free.root().unwrap().iterations;
        assert!(most > 10, "{most}");
        for limit in [0, 1, most / 3, most - 4] {
            let limited = Settings { iteration_limit: Some(limit), ..settings.clone() };
            let mut search = Search::new(Rc::clone(&model), limited.clone());
            finish(&mut search, 1_000);
            let stopped = search.root().unwrap();
            assert_eq!(stopped.stopped.as_deref(), Some("iteration limit"), "{limit}");
            assert_eq!((stopped.iterations, search.summary().nodes), (limit, 0));
            search.act(Act::Rule(Rule::Iterations(Some(limit))));
            assert!(search.is_over(), "no more iterations than before are allowed");
            search.act(Act::Rule(Rule::Iterations(Some(limit + 2))));
            finish(&mut search, 1_000);
            assert_eq!(search.root().unwrap().iterations, limit + 2);
            search.act(Act::Rule(Rule::Iterations(None)));
            finish(&mut search, 1_000);
            assert_eq!((search.take_events(), search.summary()), whole, "after {limit}");
            let mut again = Search::new(Rc::clone(&model), limited);
            for one in search.take_acted().into_iter().filter(|one| one.refused.is_none()) {
                again.replay(one.after, one.act);
            }
            finish(&mut again, 77);
            assert_eq!((again.take_events(), again.summary()), whole, "the replay differs");
        }
    }
}

/// Stopped at each plan that is better than all before, a search finds what it finds in one go.
#[test]
fn it_stands_still_at_each_better_plan() {
    let mut seen = 0;
    for seed in 0..12 {
        let model = random_model(seed, 14, 0);
        let settings = Settings { selection: Selection::DepthFirst, ..Settings::default() };
        let whole = run(&model, &settings, u64::MAX);
        let plans = whole.0.iter().filter(|e| matches!(e, Event::Incumbent { .. })).count();
        let mut search = Search::new(Rc::clone(&model), settings);
        while search.advance(300) == Progress::Working {}
        let (mut stops, mut events) = (0, search.take_events());
        let mut told = events.iter().filter(|e| matches!(e, Event::Incumbent { .. })).count();
        loop {
            search.run_to_a_plan();
            let mut progress = search.advance(300);
            while progress == Progress::Working {
                progress = search.advance(300);
            }
            let new = search.take_events();
            told += new.iter().filter(|e| matches!(e, Event::Incumbent { .. })).count();
            events.extend(new);
            if progress != Progress::Paused {
                break;
            }
            stops += 1;
            assert_eq!(told, stops, "seed {seed}: one plan a stop");
        }
        assert_eq!((told, events), (plans, whole.0), "seed {seed}");
        seen += stops;
    }
    assert!(seen > 12, "{seen} plans");
}
