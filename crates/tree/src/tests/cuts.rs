//! General cuts: they take no solution away and leave every proof whole.

use std::rc::Rc;

use model::{Model, Sense};

use super::support::{Form, Random, best_trip, enumerated, finish, random_model, round_trip, run};
use crate::{Cuts, Search, Settings, Status};

fn classes() -> Vec<Cuts> {
    let none = Cuts::default();
    vec![
        Cuts { gomory: true, ..none },
        Cuts { mir: true, ..none },
        Cuts { cover: true, ..none },
        Cuts { gomory: true, mir: true, cover: true },
    ]
}

/// The search with these cuts agrees with enumeration; how many cuts of each class there were, and
/// whether they raised the bound.
fn agrees(model: &Rc<Model>, expected: Option<f64>, cuts: Cuts) -> ([u32; 3], bool) {
    let sign = if model.sense() == Sense::Minimise { 1.0 } else { -1.0 };
    let mut search = Search::new(Rc::clone(model), Settings { cuts, ..Settings::default() });
    finish(&mut search, u64::MAX);
    let summary = search.summary();
    let place = format!("{cuts:?}: {summary:?}, expected {expected:?}, {:?}", search.cuts());
    let Some(value) = expected else {
        assert_eq!(summary.status, Status::Infeasible, "{place}");
        return ([0; 3], false);
    };
    assert_eq!(summary.status, Status::Optimal, "{place}");
    assert!((summary.incumbent.unwrap() - value).abs() < 1e-6, "{place}");
    assert!(summary.checked || model.columns().iter().any(|c| !c.integer), "{place}");
    let Some(result) = search.cuts() else { return ([0; 3], false) };
    let root = search.root().and_then(|root| root.bound).unwrap();
    let bound = result.bound.unwrap();
    assert!(sign * (bound - root) >= -1e-6 && sign * (value - bound) >= -1e-6, "{place}");
    (result.added, sign * (bound - root) > 1e-6)
}

/// 200 random models with every class alone and all together: the value is that of enumeration, and
/// the bound with cuts is between the relaxation's and it.
#[test]
fn random_models_keep_their_value() {
    let (mut added, mut raised) = ([0; 3], 0);
    for seed in 0..200 {
        let (binaries, continuous) = if seed % 2 == 0 { (8, 0) } else { (6, 3) };
        let model = random_model(seed, binaries, continuous);
        let expected = enumerated(&model);
        for cuts in classes() {
            let (own, rose) = agrees(&model, expected, cuts);
            added.iter_mut().zip(own).for_each(|(all, one)| *all += one);
            raised += u32::from(rose);
        }
    }
    assert!(added.iter().all(|&count| count > 20) && raised > 100, "{added:?} {raised}");
}

/// The events are the same for every slicing, and a round trip keeps its length.
#[test]
fn slices_and_trips() {
    let costs = Random(3).distances(7);
    for form in [Form::Labels, Form::Subtours] {
        let model = round_trip(&costs, form, Sense::Minimise);
        let cuts = Cuts { gomory: true, mir: true, cover: true };
        let settings = Settings { cuts, ..Settings::default() };
        let (events, summary) = run(&model, &settings, u64::MAX);
        assert_eq!(summary.incumbent, Some(best_trip(&costs) as f64));
        assert!(summary.checked);
        for ticks in [7, 1000] {
            assert_eq!(run(&model, &settings, ticks), (events.clone(), summary.clone()));
        }
    }
}
