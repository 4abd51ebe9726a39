//! Dives, the pump and suggestions: what they find are plans, whatever the slices, and the optimum
//! stays what enumeration says.

use std::rc::Rc;

use model::{ColumnId, Model, Sense};

use super::support::{Form, Random, best_trip, enumerated, finish, random_model, round_trip, run};
use crate::{
    Audit, Classes, Cuts, Event, Heuristics, Judgement, NodeWork, Origin, Search, Settings, Status,
    SuggestedBy, Suggestion,
};

fn all() -> Heuristics {
    Heuristics { rounding: true, trip: true, diving: true, pump: true }
}

fn none() -> Heuristics {
    Heuristics { rounding: false, trip: false, diving: false, pump: false }
}

fn origins(events: &[Event]) -> Vec<String> {
    let of = |event: &Event| match event {
        Event::Incumbent { origin: Origin::Heuristic(name), .. } => Some(name.clone()),
        Event::Incumbent { origin, .. } => Some(format!("{origin:?}")),
        _ => None,
    };
    events.iter().filter_map(of).collect()
}

#[test]
fn dives_and_the_pump_find_plans_and_the_optimum_stays() {
    let mut found = std::collections::BTreeSet::new();
    for seed in 0..40 {
        let model = random_model(seed, 10, usize::from(seed % 3 == 0) * 3);
        let best = enumerated(&model);
        for (diving, pump) in [(true, false), (false, true), (true, true)] {
            let heuristics = Heuristics { diving, pump, ..none() };
            let (events, summary) =
                run(&model, &Settings { heuristics, ..Settings::default() }, 1_000);
            found.extend(origins(&events));
            match best {
                Some(best) => assert!((summary.incumbent.unwrap() - best).abs() < 1e-6, "{seed}"),
                None => assert_eq!(summary.status, Status::Infeasible, "{seed}"),
            }
        }
    }
    for name in ["fractional diving", "feasibility pump"] {
        assert!(found.contains(name), "{name} never found a plan: {found:?}");
    }
}

/// Guided diving needs a plan to be guided by: a poor one is handed in.
#[test]
fn a_guided_dive_finds_better_than_its_guide() {
    let mut found = 0;
    for seed in 0..12 {
        let costs = Random(seed).distances(9);
        let model = round_trip(&costs, Form::Subtours, Sense::Minimise);
        let heuristics = Heuristics { diving: true, ..none() };
        let mut search =
            Search::new(Rc::clone(&model), Settings { heuristics, ..Settings::default() });
        search.suggest(Suggestion { origin: SuggestedBy::Person, values: in_order(&model, 9) });
        finish(&mut search, 500);
        let events = search.take_events();
        assert_eq!(search.summary().incumbent, Some(best_trip(&costs) as f64));
        if search.summary().nodes == 1 {
            continue;
        }
        assert_eq!(origins(&events)[0], "Given");
        found += u32::from(origins(&events).iter().any(|name| name.contains("diving")));
        assert!(search.given_plan().unwrap().value.is_some());
    }
    assert!(found > 0, "no dive ever found a plan");
}

/// The round trip over the stops in their order.
fn in_order(model: &Model, stops: usize) -> Vec<(ColumnId, f64)> {
    let mut values = Vec::new();
    for (place, _) in model.columns().iter().enumerate() {
        let column = ColumnId::from_index(place);
        let [tail, head] = *model.column_tuple(column) else { continue };
        let next = (tail.index() + 1) % stops == head.index();
        values.push((column, f64::from(u8::from(next))));
    }
    values
}

#[test]
fn a_suggestion_that_is_no_plan_is_not_taken() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    let settings = Settings { heuristics: none(), ..Settings::default() };
    let mut search = Search::new(Rc::clone(&model), settings.clone());
    let all_zero = in_order(&model, 7).into_iter().map(|(column, _)| (column, 0.0)).collect();
    search.suggest(Suggestion { origin: SuggestedBy::Person, values: all_zero });
    finish(&mut search, 1_000);
    assert_eq!(search.given_plan().unwrap().value, None);
    assert!(!origins(&search.take_events()).contains(&"Given".to_owned()));
    // The labels are solved for where only the arcs are given.
    let mut search = Search::new(Rc::clone(&model), settings);
    search.suggest(Suggestion { origin: SuggestedBy::Person, values: in_order(&model, 7) });
    finish(&mut search, 1_000);
    assert!(search.given_plan().unwrap().value.is_some());
    assert_eq!(origins(&search.take_events())[0], "Given");
}

#[test]
fn nothing_is_looked_for_where_nothing_is_asked_for() {
    let model = round_trip(&Random(3).distances(7), Form::Labels, Sense::Minimise);
    let (events, _) = run(&model, &Settings { heuristics: none(), ..Settings::default() }, 1_000);
    assert!(origins(&events).iter().all(|origin| origin == "Relaxation"), "{events:?}");
}

#[test]
fn slices_and_pauses_do_not_change_what_heuristics_find() {
    for form in [Form::Labels, Form::Flow, Form::Subtours] {
        let model = round_trip(&Random(11).distances(8), form, Sense::Minimise);
        let node_work = NodeWork { propagation: true, fixing: true, lattice: true };
        let settings = Settings { heuristics: all(), node_work, ..Settings::default() };
        let whole = run(&model, &settings, u64::MAX);
        for slice in [1, 97, 5_000] {
            assert_eq!(run(&model, &settings, slice), whole, "{slice}");
        }
        let mut search = Search::new(Rc::clone(&model), settings);
        let mut events = Vec::new();
        loop {
            // A pause after every single step, and on again.
            let progress = search.advance(1);
            events.extend(search.take_events());
            if progress == crate::Progress::Finished {
                break;
            }
            search.pause();
            search.run(None);
        }
        assert_eq!(events, whole.0, "paused at every step");
    }
}

/// With everything on, against enumeration, and each finished search proved again.
#[test]
fn everything_on_agrees_with_enumeration() {
    let cuts = Cuts { classes: Classes::all(), every: 2, rounds: 1 };
    let node_work = NodeWork { propagation: true, fixing: true, lattice: true };
    let settings = Settings { heuristics: all(), node_work, cuts, ..Settings::default() };
    for seed in 0..2_000 {
        let model = random_model(10_000 + seed, 7, usize::from(seed % 4 == 0) * 2);
        let mut search = Search::new(Rc::clone(&model), settings.clone());
        finish(&mut search, 1_000_000);
        let summary = search.summary();
        let Some(best) = enumerated(&model) else {
            assert_eq!(summary.status, Status::Infeasible, "{seed}");
            continue;
        };
        assert_eq!(summary.status, Status::Optimal, "{seed}");
        // A plan that breaks a row by rounding, which it says, may cost so much less.
        let near = if summary.checked { 1e-6 } else { 1e-5 };
        assert!((summary.incumbent.unwrap() - best).abs() < near, "{seed}: {summary:?}");
        assert!(summary.checked || seed % 4 == 0, "{seed}: {summary:?}");
        if seed % 10 == 0 && summary.checked {
            let mut audit = Audit::new(Rc::clone(&model), search.testimony()).unwrap();
            while !audit.advance(1_000_000) {}
            assert_eq!(audit.result().judgement, Judgement::Proved, "{seed}: {:?}", audit.result());
        }
    }
}
