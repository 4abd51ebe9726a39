//! The events are the same for every slicing, and with pauses between.

use std::rc::Rc;

use model::{Model, Sense};

use super::support::{Form, Random, finish, random_model, round_trip, rules, run, working};
use crate::{
    Branching, Classes, Cuts, Event, Heuristics, NodeWork, Progress, Search, Selection, Settings,
};

fn models() -> Vec<(String, Rc<Model>)> {
    let costs = Random(21).distances(8);
    let mut all = vec![
        ("labels".to_owned(), round_trip(&costs, Form::Labels, Sense::Minimise)),
        ("subtours".to_owned(), round_trip(&costs, Form::Subtours, Sense::Minimise)),
    ];
    all.extend((200..206).map(|seed| (format!("mixed {seed}"), random_model(seed, 9, 2))));
    all
}

#[test]
fn every_slice_size_gives_the_same_events() {
    for (name, model) in models() {
        for settings in rules().into_iter().chain(working()) {
            let (events, summary) = run(&model, &settings, u64::MAX);
            for ticks in [1, 7, 1000] {
                let (same, again) = run(&model, &settings, ticks);
                assert_eq!(same, events, "{name}, slices of {ticks}");
                assert_eq!(again, summary, "{name}, slices of {ticks}");
            }
        }
    }
}

#[test]
fn stepping_gives_the_same_events() {
    for (name, model) in models() {
        let settings = Settings::default();
        let (events, _) = run(&model, &settings, u64::MAX);
        let mut search = Search::new(Rc::clone(&model), settings);
        assert_eq!(wait(&mut search), Progress::RootSolved);
        let mut nodes = search.summary().nodes;
        loop {
            search.run(Some(3));
            let progress = wait(&mut search);
            let solved = search.summary().nodes;
            if progress == Progress::Finished {
                assert!(solved - nodes <= 3);
                break;
            }
            assert_eq!((progress, solved - nodes), (Progress::Paused, 3), "{name}");
            assert_eq!(search.advance(1000), Progress::Paused);
            nodes = solved;
        }
        assert_eq!(search.take_events(), events, "{name}");
    }
}

#[test]
fn pausing_anywhere_loses_nothing() {
    for (name, model) in models() {
        let settings = Settings::default();
        let (events, _) = run(&model, &settings, u64::MAX);
        let mut search = Search::new(Rc::clone(&model), settings);
        for ticks in 1.. {
            match search.advance(100 * ticks % 977) {
                Progress::Finished => break,
                Progress::RootSolved => search.run(None),
                Progress::Working => search.pause(),
                Progress::Paused => search.run(None),
            }
        }
        assert_eq!(search.take_events(), events, "{name}");
    }
}

/// Paused and let go again between any two steps, bare and with everything on.
#[test]
fn pausing_at_every_step_loses_nothing() {
    let all = Settings {
        branching: Branching::Reliability,
        selection: Selection::BestEstimate,
        node_work: NodeWork { propagation: true, fixing: true, lattice: true },
        cuts: Cuts { classes: Classes::all(), every: 2, rounds: 1 },
        heuristics: Heuristics { rounding: true, trip: true, diving: true, pump: true },
        ..Settings::default()
    };
    for (name, model) in models() {
        for settings in [Settings::default(), all.clone()] {
            let (events, summary) = run(&model, &settings, u64::MAX);
            let mut search = Search::new(Rc::clone(&model), settings);
            let mut pauses = 0;
            loop {
                match search.advance(1) {
                    Progress::Finished => break,
                    Progress::RootSolved | Progress::Paused => search.run(None),
                    Progress::Working => {
                        search.pause();
                        pauses += u32::from(search.advance(1) == Progress::Paused);
                        search.run(None);
                    }
                }
            }
            assert!(pauses > 20, "{name}: {pauses} pauses");
            assert_eq!((search.take_events(), search.summary()), (events, summary), "{name}");
        }
    }
}

#[test]
fn inspecting_between_changes_nothing() {
    let (_, model) = models().remove(1);
    let (events, summary) = run(&model, &Settings::default(), u64::MAX);
    let mut search = Search::new(model, Settings::default());
    while wait(&mut search) != Progress::Finished {
        for node in 1..=search.summary().nodes {
            assert!(search.inspect(crate::NodeId(node)).is_some());
        }
        search.run(Some(1));
    }
    assert_eq!((search.take_events(), search.summary()), (events, summary));
}

#[test]
fn the_bound_only_rises_and_nodes_are_told_in_order() {
    for (name, model) in models() {
        let minimise = model.sense() == Sense::Minimise;
        let mut search = Search::new(model, rules()[1].clone());
        finish(&mut search, 500);
        let (mut last, mut created) = (None, 0);
        for event in search.take_events() {
            match event {
                Event::Bound { bound, .. } => {
                    let now = if minimise { bound } else { -bound };
                    assert!(last.is_none_or(|last| now > last), "{name}");
                    last = Some(now);
                }
                Event::Created { node, parent, .. } => {
                    created += 1;
                    assert_eq!(node.0, created);
                    assert!(parent.is_none_or(|parent| parent < node));
                }
                Event::Solved { .. } | Event::Dropped { .. } | Event::Incumbent { .. } => {}
            }
        }
    }
}

fn wait(search: &mut Search) -> Progress {
    loop {
        let progress = search.advance(333);
        if progress != Progress::Working {
            return progress;
        }
    }
}
