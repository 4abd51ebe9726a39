//! Rules and limits changed during a run.

use std::rc::Rc;

use model::Sense;

use super::support::{Form, Random, finish, random_model, round_trip, rules};
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
