//! Logs of searches with general cuts: each cut is proved by its derivation and then used.

use std::collections::BTreeSet;
use std::rc::Rc;

use model::{Model, Number, Sense};

use super::audit::{audited, falsified, holds_nothing, models, names, searched};
use super::support::{Form, Random, random_model, round_trip};
use crate::{Class, Classes, Cuts, Derivation, Judgement, NodeId, Settings, Source, Testimony};

fn with_cuts(classes: Classes) -> Settings {
    let cuts = Cuts { classes, every: 2, rounds: 1 };
    Settings { cuts, ..Settings::default() }
}

/// Models whose searches with cuts use many, and leave something to branch on: with all classes
/// little is left, so some searches have few.
fn searches() -> Vec<(String, Rc<Model>, Testimony)> {
    let few = [&[Class::Mir][..], &[Class::Cover, Class::Clique], &[Class::ZeroHalf]];
    let labels = round_trip(&Random(5).distances(6), Form::Labels, Sense::Minimise);
    let mut all = Vec::new();
    for classes in few {
        let classes: Classes = classes.iter().copied().collect();
        all.push((format!("labels with {classes:?}"), Rc::clone(&labels), classes));
        all.push((format!("random with {classes:?}"), random_model(20, 12, 0), classes));
    }
    let more = [3, 8, 21, 55].map(|seed| ("random", random_model(seed, 10, 2)));
    let whole = models().into_iter().chain(more);
    all.extend(whole.map(|(name, model)| (name.to_owned(), model, Classes::all())));
    let told = all.into_iter().map(|(name, model, classes)| {
        let (_, told) = searched(&model, &with_cuts(classes));
        (name, model, told)
    });
    told.filter(|(.., told)| !told.cuts.is_empty()).collect()
}

#[test]
fn cuts_are_proved_and_close_the_leaves_that_they_closed() {
    let (mut kinds, mut parts) = (BTreeSet::new(), (0, 0));
    let mut chained = 0;
    for (name, model, told) in searches() {
        kinds.extend(told.cuts.iter().map(|cut| kind(&cut.derivation)));
        let result = audited(&model, told.clone(), 1_000_000);
        assert_eq!(result.judgement, Judgement::Proved, "{name}: {result:?}");
        assert_eq!(result.cuts as usize, told.cuts.len(), "{name}");
        chained += told.sources.iter().filter(|row| matches!(row, Source::Cut(_))).count();
        parts.0 += result.parts;
        parts.1 += audited(&model, without_cuts(&told), u64::MAX).parts;
        assert_eq!(audited(&model, told, 1), result, "{name}: slices");
    }
    assert!(kinds.len() >= 3, "{kinds:?}");
    assert!(chained > 0, "no cut rests on another");
    assert!(10 * parts.0 < parts.1, "further parts with and without cuts: {parts:?}");
}

fn kind(derivation: &Derivation) -> &'static str {
    match derivation {
        Derivation::Rounding { .. } => "rounding",
        Derivation::Knapsack(_) => "knapsack",
        Derivation::Conflicts { .. } => "conflicts",
        Derivation::Cases { .. } => "cases",
        Derivation::Paths { .. } => "paths",
    }
}

/// A log as an engine wrote it that told no cuts.
fn without_cuts(told: &Testimony) -> Testimony {
    let (cuts, sources) = (Vec::new(), Vec::new());
    Testimony { cuts, sources, own_bounds: false, ..told.clone() }
}

#[test]
fn leaves_are_proved_without_cuts_where_none_are_told() {
    for (name, model, told) in searches() {
        let result = audited(&model, without_cuts(&told), 1_000_000);
        assert_eq!(result.judgement, Judgement::Proved, "{name}: {result:?}");
    }
}

/// Each way to falsify one cut, so that it would take the best plan away or hang on nothing.
fn falsified_cuts(told: &Testimony, place: usize) -> Vec<(&'static str, Testimony)> {
    let changed = |what: &'static str, change: &dyn Fn(&mut Testimony)| {
        let mut other = told.clone();
        change(&mut other);
        (what, other)
    };
    let plan = told.plan.iter().map(|value| Number::try_from(*value).unwrap_or_default());
    let plan: Vec<Number> = plan.collect();
    let entries = &told.cuts[place].row.entries;
    let activity = entries.iter().fold(Number::ZERO, |sum, (c, a)| sum + a * &plan[c.index()]);
    let over = &activity - Number::ONE;
    let nothing =
        Derivation::Rounding { sum: Vec::new(), divisor: Number::ONE, upper: BTreeSet::new() };
    let missing = told.sources.len();
    vec![
        changed("takes the plan away", &|told| told.cuts[place].row.upper = Some(over.clone())),
        changed("rests on nothing", &|told| told.cuts[place].derivation = nothing.clone()),
        changed("rests on itself", &|told| {
            told.sources.push(Source::Cut(place));
            told.cuts[place].derivation.renumber(&mut |_| missing);
        }),
        changed("rests on a row that is not there", &|told| {
            told.cuts[place].derivation.renumber(&mut |_| missing);
        }),
        changed("is no upper side", &|told| told.cuts[place].row.upper = None),
    ]
}

#[test]
fn every_cut_that_is_tampered_with_is_named() {
    for (name, model, told) in searches() {
        for place in 0..told.cuts.len() {
            for (what, other) in falsified_cuts(&told, place) {
                let result = audited(&model, other, u64::MAX);
                let number = place + 1;
                let found = format!("{name}: cut {number} {what}: {result:?}");
                assert_eq!(result.judgement, Judgement::Refused, "{found}");
                let named = result.faults.iter().any(|fault| {
                    fault.node == NodeId::ROOT && fault.why.contains(&format!("cut {number} "))
                });
                assert!(named, "{found}");
            }
        }
    }
}

/// A source that another row takes the place of makes what rests on it fall, or it still holds.
#[test]
fn no_change_of_a_source_takes_the_plan_away() {
    for (name, model, told) in searches() {
        for place in 0..told.sources.len() {
            let mut other = told.clone();
            other.sources[place] = other.sources[(place + 1) % told.sources.len()].clone();
            let result = audited(&model, other, u64::MAX);
            let proved = result.judgement == Judgement::Proved;
            let value = result.value.as_ref().map(model::nearest_f64);
            let right = told.incumbent.map(|(_, value)| value);
            assert!(!proved || value == right, "{name}, source {place}: {result:?}");
        }
        let mut none = told.clone();
        none.sources.clear();
        assert_eq!(audited(&model, none, u64::MAX).judgement, Judgement::Refused, "{name}");
    }
}

#[test]
fn every_leaf_that_is_tampered_with_is_named_also_with_cuts() {
    let mut leaves = 0;
    for (name, model, told) in searches() {
        for (what, node, other) in falsified(&told, model.sense() == Sense::Maximise) {
            leaves += 1;
            let result = audited(&model, other, u64::MAX);
            let empty = what.starts_with("said to") && result.judgement == Judgement::Proved;
            assert!(empty || result.judgement != Judgement::Proved, "{name}: {what}");
            assert!(empty || names(&result, node), "{name}: {what}: {result:?}");
            assert!(
                !empty || holds_nothing(&model, &without_cuts(&told), &told.path(node)),
                "{name}: {what}"
            );
        }
    }
    assert!(leaves > 50, "{leaves}");
}
