//! General cuts: they take no solution away and leave every proof whole.

use std::rc::Rc;

use model::{Model, Number, Sense};

use super::support::{Form, Random, best_trip, enumerated, finish, random_model, round_trip, run};
use crate::{ByClass, Class, Classes, Cuts, CutsResult, Event, Progress, Search, Settings, Status};

/// Every class alone, and all together, at the root and at every node.
fn ways() -> Vec<Cuts> {
    let one = |(class, _)| Cuts::at_root([class].into_iter().collect());
    let all = Cuts::at_root(Classes::all());
    let mut ways: Vec<Cuts> = Class::ALL.into_iter().map(one).collect();
    ways.extend([all, Cuts { every: 1, rounds: 2, ..all }, Cuts { every: 2, rounds: 1, ..all }]);
    ways
}

/// The search with these cuts agrees with enumeration; what they gave, and whether they raised the
/// bound.
fn agrees(model: &Rc<Model>, expected: Option<f64>, cuts: Cuts) -> (CutsResult, bool) {
    let sign = if model.sense() == Sense::Minimise { 1.0 } else { -1.0 };
    let mut search = Search::new(Rc::clone(model), Settings { cuts, ..Settings::default() });
    finish(&mut search, u64::MAX);
    let summary = search.summary();
    let place = format!("{cuts:?}: {summary:?}, expected {expected:?}, {:?}", search.cuts());
    let none = CutsResult::default();
    let Some(value) = expected else {
        assert_eq!(summary.status, Status::Infeasible, "{place}");
        return (none, false);
    };
    assert_eq!(summary.status, Status::Optimal, "{place}");
    assert!((summary.incumbent.unwrap() - value).abs() < 1e-6, "{place}");
    assert!(summary.checked, "{place}");
    let Some(result) = search.cuts() else { return (none, false) };
    assert_eq!(result.refused, 0, "{place}");
    let root = search.root().and_then(|root| root.bound).unwrap();
    let bound = result.bound.unwrap();
    assert!(sign * (bound - root) >= -1e-6 && sign * (value - bound) >= -1e-6, "{place}");
    let moved: f64 = result.moved.iter().sum();
    assert!(moved <= sign * (bound - root) + 1e-6, "{place}");
    (result, sign * (bound - root) > 1e-6)
}

/// 200 random models with all classes together, at the root and below, 50 with each alone: the value is that of
/// enumeration, and the bound with cuts is between the relaxation's and it.
#[test]
fn random_models_keep_their_value() {
    let mut added: ByClass<u32> = [0; Class::ALL.len()];
    let (mut raised, mut below, mut purged, mut returned) = (0, 0, 0, 0);
    for seed in 0..200 {
        let (binaries, continuous) = if seed % 2 == 0 { (8, 0) } else { (6, 3) };
        let model = random_model(seed, binaries, continuous);
        let expected = enumerated(&model);
        let alone = if seed < 50 { 0 } else { Class::ALL.len() };
        for cuts in ways().into_iter().skip(alone) {
            let (own, rose) = agrees(&model, expected, cuts);
            added.iter_mut().zip(own.added).for_each(|(all, one)| *all += one);
            raised += u32::from(rose);
            below += own.below;
            purged += own.purged;
            returned += own.returned;
        }
    }
    let general = [Class::Gomory, Class::Mir, Class::Cover, Class::ZeroHalf];
    assert!(general.iter().all(|class| added[class.index()] > 10), "{added:?}");
    assert!(raised > 100 && below > 20, "{raised} {below}");
    assert!(purged > 20 && returned > 0, "{purged} {returned}");
}

/// The events are the same for every slicing, at the root and below, and a round trip keeps its
/// length.
#[test]
fn slices_and_trips() {
    let costs = Random(3).distances(6);
    for form in [Form::Labels, Form::Subtours] {
        let model = round_trip(&costs, form, Sense::Minimise);
        for every in [0, 1] {
            let cuts = Cuts { classes: Classes::all(), every, rounds: 2 };
            let settings = Settings { cuts, ..Settings::default() };
            let (events, summary) = run(&model, &settings, u64::MAX);
            assert_eq!(summary.incumbent, Some(best_trip(&costs) as f64));
            assert!(summary.checked);
            for ticks in [40 + 500 * u64::from(every), 5000] {
                assert_eq!(run(&model, &settings, ticks), (events.clone(), summary.clone()));
            }
        }
    }
}

/// A pause after every few slices changes nothing.
#[test]
fn a_pause_changes_nothing() {
    let model = random_model(4, 10, 2);
    let cuts = Cuts { classes: Classes::all(), every: 1, rounds: 3 };
    let settings = Settings { cuts, ..Settings::default() };
    let (events, summary) = run(&model, &settings, u64::MAX);
    let mut search = Search::new(Rc::clone(&model), settings);
    while search.advance(40) != Progress::RootSolved {}
    search.run(None);
    let mut slices = 0_u32;
    while search.advance(40) != Progress::Finished {
        slices += 1;
        if slices.is_multiple_of(3) {
            search.pause();
            search.advance(40);
            search.run(None);
        }
    }
    assert!(slices > 10);
    assert_eq!((search.take_events(), search.summary()), (events, summary));
}

/// Cuts are wrong on purpose: the next solution breaks them, and the search ends with an error and
/// no claim.
#[test]
fn a_wrong_cut_stops_the_search() {
    let mut stopped = 0;
    for seed in 0..100 {
        let cuts = Cuts::at_root([Class::Cover].into_iter().collect());
        let model = random_model(seed, 14, 0);
        let mut search = Search::new(model, Settings { cuts, ..Settings::default() });
        while !matches!(search.advance(1), Progress::RootSolved | Progress::Finished) {}
        search.run(None);
        while search.cuts().is_none() && search.advance(1) == Progress::Working {}
        let Some(relaxation) = &mut search.relaxation else { continue };
        for row in &mut relaxation.cuts {
            row.upper = Some(Number::from(-1_000_000));
        }
        let wrong = !relaxation.cuts.is_empty();
        search.take_events();
        while search.advance(1000) != Progress::Finished {}
        let events = search.take_events();
        let found = events.iter().any(|event| matches!(event, Event::Incumbent { .. }));
        assert!(!(wrong && found), "seed {seed}: a solution was taken that breaks a cut");
        let why = search.summary().stopped.unwrap_or_default();
        if why == "internal error: a solution breaks a general cut" {
            assert_eq!(search.summary().status, Status::Limit);
            stopped += 1;
        }
    }
    assert!(stopped > 2, "{stopped}");
}

/// Every whole point of a model of binaries that keeps all of its rows.
fn points(model: &model::Model) -> Vec<Vec<f64>> {
    let rows: Vec<model::Row> =
        (0..model.row_count()).map(|k| model.row(model::RowId::from_index(k))).collect();
    let count = model.columns().len();
    let point = |bits: u32| (0..count).map(|k| f64::from(bits >> k & 1)).collect::<Vec<f64>>();
    let holds = |x: &Vec<f64>| {
        rows.iter().all(|row| {
            let value = row.activity(x);
            row.lower.as_ref().is_none_or(|l| value >= model::nearest_f64(l))
                && row.upper.as_ref().is_none_or(|u| value <= model::nearest_f64(u))
        })
    };
    (0..1 << count).map(point).filter(holds).collect()
}

/// Rows of the tableau rounded at the root and below it: none takes a whole point of 200 small random
/// models away. What is asked of a whole point are whole sums, so floats say it exactly but for the
/// fractions of a cut.
#[test]
fn cuts_of_the_tableau_hold_at_every_whole_point() {
    let mut held = 0;
    for seed in 0..200 {
        let model = random_model(seed, 9, 0);
        let classes: Classes = [Class::Gomory].into_iter().collect();
        let cuts = Cuts { classes, every: 1, rounds: 2 };
        let mut search = Search::new(Rc::clone(&model), Settings { cuts, ..Settings::default() });
        super::support::finish(&mut search, 10_000);
        let points = points(&model);
        for cut in &search.testimony().cuts {
            let most = cut.row.upper.as_ref().map_or(f64::INFINITY, model::nearest_f64);
            let size =
                cut.row.entries.iter().fold(1.0, |sum, (_, a)| sum + model::nearest_f64(a).abs());
            for x in &points {
                assert!(cut.row.activity(x) <= most + 1e-12 * size, "seed {seed}: {cut:?}");
            }
            held += 1;
        }
    }
    assert!(held > 200, "{held} cuts");
}
