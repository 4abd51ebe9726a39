//! What is measured and said of a tree: for each diagnosis a model that has it and one that has not.

use std::rc::Rc;

use model::{ColumnId, FamilyState, Model, ModelBuilder, Sense};

use super::support::{Form, Random, finish, random_model, round_trip, row, spec};
use crate::{Diagnosis, Event, Progress, Search, Selection, Settings};

fn searched(model: &Rc<Model>, settings: &Settings) -> Search {
    let mut search = Search::new(Rc::clone(model), settings.clone());
    finish(&mut search, 100_000);
    search
}

fn found(model: &Rc<Model>, settings: &Settings) -> Vec<Diagnosis> {
    let search = searched(model, settings);
    search.diagnosis(&search.measures())
}

fn has(found: &[Diagnosis], wanted: impl Fn(&Diagnosis) -> bool) -> bool {
    found.iter().any(wanted)
}

fn trip(form: Form) -> Rc<Model> {
    round_trip(&Random(7).distances(8), form, Sense::Minimise)
}

/// Items into bins that the model does not tell apart unless `ordered`: as few bins as may be.
fn bins(sizes: &[i64], bins: usize, capacity: i64, ordered: bool) -> Rc<Model> {
    let mut builder = ModelBuilder::new("bins", Sense::Minimise);
    let items: Vec<_> = (0..sizes.len()).map(|i| builder.label(&format!("item {i}"))).collect();
    let names: Vec<_> = (0..bins).map(|b| builder.label(&format!("bin {b}"))).collect();
    builder.variable("x", true);
    let mut x = Vec::new();
    for &item in &items {
        let line = names.iter().map(|&bin| builder.column(&[item, bin], &spec((0, 1), 0, true)));
        x.push(line.collect::<Result<Vec<ColumnId>, _>>().unwrap());
    }
    builder.variable("y", true);
    let cost = |b: usize| 100 + if ordered { i64::try_from(b).unwrap() } else { 0 };
    let y: Vec<ColumnId> = (0..bins)
        .map(|b| builder.column(&[names[b]], &spec((0, 1), cost(b), true)).unwrap())
        .collect();
    builder.family("each", FamilyState::In, false);
    for (line, &item) in x.iter().zip(&items) {
        let entries: Vec<_> = line.iter().map(|&c| (c, 1)).collect();
        builder.row(&[item], row(&entries, Some(1), Some(1))).unwrap();
    }
    builder.family("room", FamilyState::In, false);
    for (b, &bin) in names.iter().enumerate() {
        let mut entries: Vec<_> = x.iter().zip(sizes).map(|(line, &s)| (line[b], s)).collect();
        entries.push((y[b], -capacity));
        builder.row(&[bin], row(&entries, None, Some(0))).unwrap();
    }
    Rc::new(builder.build())
}

/// Jeroslow 1974: 2 Σ x = n with n odd has no plan, and every leaf shows it by itself.
fn jeroslow(n: i64) -> Rc<Model> {
    let mut builder = ModelBuilder::new("Jeroslow", Sense::Minimise);
    let columns: Vec<ColumnId> =
        (0..n).map(|_| builder.column(&[], &spec((0, 1), 1, true)).unwrap()).collect();
    let entries: Vec<_> = columns.into_iter().map(|c| (c, 2)).collect();
    builder.row(&[], row(&entries, Some(n), Some(n))).unwrap();
    Rc::new(builder.build())
}

/// Depots of one size and nearly one price: leaving one out costs next to nothing, opening one that
/// is half empty costs half of it.
fn lopsided() -> Rc<Model> {
    let mut random = Random(5);
    let mut builder = ModelBuilder::new("depots", Sense::Minimise);
    let mut supply = Vec::new();
    for _ in 0..20 {
        let x = builder.column(&[], &spec((0, 10), 0, false)).unwrap();
        let y = builder.column(&[], &spec((0, 1), 1000 + random.below(9), true)).unwrap();
        builder.row(&[], row(&[(x, 1), (y, -10)], None, Some(0))).unwrap();
        supply.push((x, 1));
    }
    builder.row(&[], row(&supply, Some(45), None)).unwrap();
    Rc::new(builder.build())
}

#[test]
fn a_weak_root_is_told_from_a_strong_one() {
    let weak = |d: &Diagnosis| matches!(d, Diagnosis::WeakRoot { gap, .. } if *gap > 0.05);
    assert!(has(&found(&trip(Form::Labels), &Settings::default()), weak));
    assert!(!has(&found(&trip(Form::Subtours), &Settings::default()), weak));
}

/// Against the events themselves: both happen among these models.
#[test]
fn a_plan_that_came_late_is_told_from_one_that_was_there_early() {
    let mut seen = [0, 0];
    for seed in 0..60 {
        let settings = Settings { selection: Selection::DepthFirst, ..Settings::default() };
        let mut search = searched(&random_model(seed, 14, 0), &settings);
        let (mut nodes, mut last) = (0, None);
        for event in search.take_events() {
            match event {
                Event::Solved { .. } => nodes += 1,
                Event::Incumbent { .. } => last = Some(nodes),
                _ => {}
            }
        }
        let late = nodes >= 30 && last.is_some_and(|last| 2 * last >= nodes);
        let told = search.diagnosis(&search.measures());
        assert_eq!(has(&told, |d| matches!(d, Diagnosis::IncumbentLate { .. })), late, "{seed}");
        seen[usize::from(late)] += u32::from(nodes >= 30);
    }
    assert!(seen[0] > 0 && seen[1] > 0, "{seen:?}");
}

#[test]
fn a_bound_that_stands_still_is_told_from_one_that_rises() {
    let flat = |d: &Diagnosis| matches!(d, Diagnosis::Plateau { .. });
    assert!(has(&found(&bins(&[6; 9], 6, 10, false), &Settings::default()), flat));
    assert!(!has(&found(&trip(Form::Labels), &Settings::default()), flat));
}

#[test]
fn one_sided_branching_is_told_from_even_branching() {
    let uneven = |d: &Diagnosis| matches!(d, Diagnosis::Unbalanced { .. });
    let settings = Settings { node_limit: Some(120), ..Settings::default() };
    let lopsided = found(&lopsided(), &settings);
    assert!(has(&lopsided, uneven), "{lopsided:?}");
    assert!(!has(&found(&trip(Form::Labels), &settings), uneven));
}

#[test]
fn labels_that_are_alike_are_told_from_labels_in_order() {
    let copies = |d: &Diagnosis| matches!(d, Diagnosis::Copies { labels, .. } if labels.len() == 6);
    let alike = found(&bins(&[6; 9], 6, 10, false), &Settings::default());
    let any = |d: &Diagnosis| matches!(d, Diagnosis::Copies { .. });
    assert!(has(&alike, any), "{alike:?}");
    let sizes = [34, 29, 27, 26, 22, 21, 19, 18];
    let some = found(&bins(&sizes, 6, 51, false), &Settings::default());
    assert!(has(&some, copies), "{some:?}");
    let ordered = found(&bins(&sizes, 6, 51, true), &Settings::default());
    assert!(!has(&ordered, any), "{ordered:?}");
}

#[test]
fn many_leaves_without_a_point_are_told_from_few() {
    let empty = |d: &Diagnosis| matches!(d, Diagnosis::Infeasible { .. });
    assert!(has(&found(&jeroslow(9), &Settings::default()), empty));
    assert!(!has(&found(&trip(Form::Labels), &Settings::default()), empty));
}

/// Machines that run only where they are switched on: `x ≤ M y` with a flow that must be at least
/// `least`. With M = 10⁷ and a flow of 10⁻¹⁰ each leaks through a switch that is off by less than any
/// tolerance, and no point with the switch off holds exactly.
fn switches(big: i64, least: &str) -> Rc<Model> {
    let mut builder = ModelBuilder::new("switches", Sense::Minimise);
    for _ in 0..4 {
        let whole = model::Number::from;
        let least = match least.split_once("e-") {
            None => whole(least.parse::<i64>().unwrap()),
            Some((digits, tens)) => {
                let tens = 10_i64.pow(tens.parse().unwrap());
                whole(digits.parse::<i64>().unwrap()) / whole(tens)
            }
        };
        let flow = model::ColumnSpec {
            lower: Some(least),
            upper: Some(whole(5)),
            cost: whole(0),
            integer: false,
        };
        let x = builder.column(&[], &flow).unwrap();
        let y = builder.column(&[], &spec((0, 1), 1, true)).unwrap();
        builder.row(&[], row(&[(x, 1), (y, -big)], None, Some(0))).unwrap();
    }
    Rc::new(builder.build())
}

/// What leaks is not called a plan: the search says that it could not tell.
#[test]
fn flows_that_leak_through_large_switches_are_told_from_those_that_do_not() {
    let numerics = |d: &Diagnosis| matches!(d, Diagnosis::Numerics { .. });
    let leaking = searched(&switches(10_000_000, "1e-10"), &Settings::default());
    let told = leaking.diagnosis(&leaking.measures());
    assert!(has(&told, numerics), "{told:?} {:?}", leaking.summary());
    assert!(!leaking.summary().checked);
    let tight = searched(&switches(10, "1"), &Settings::default());
    assert!(!has(&tight.diagnosis(&tight.measures()), numerics));
    assert_eq!((tight.summary().incumbent, tight.summary().checked), (Some(4.0), true));
}

#[test]
fn measures_count_every_node_and_leaf() {
    for form in [Form::Labels, Form::Flow] {
        let search = searched(&trip(form), &Settings::default());
        let (measures, summary) = (search.measures(), search.summary());
        assert_eq!(measures.depths.iter().sum::<u32>(), summary.nodes);
        let leaves = summary.leaves_checked + summary.leaves_unchecked;
        assert_eq!(measures.leaves.all(), leaves);
        let last = measures.found.last().unwrap();
        assert_eq!(Some(last.value), summary.incumbent);
        assert!(measures.found.iter().all(|found| found.work <= summary.work));
        let (primal, dual) = (measures.primal_integral.unwrap(), measures.dual_integral.unwrap());
        assert!(primal >= 0.0 && dual > 0.0 && dual < summary.work as f64, "{primal} {dual}");
        assert_eq!(search.estimate(), None, "the tree is known");
    }
}

/// The band holds the size that the tree came to, or misses it by less than four times, on most of
/// the seeded trees when a third of them is solved.
#[test]
fn the_estimate_is_of_the_size_of_the_tree() {
    let (mut held, mut near, mut all) = (0, 0, 0);
    for seed in 0..24 {
        let model = round_trip(&Random(seed).distances(7), Form::Labels, Sense::Minimise);
        let settings = Settings { selection: Selection::DepthFirst, ..Settings::default() };
        let whole = searched(&model, &settings).summary().nodes;
        if whole < 60 {
            continue;
        }
        let mut search = Search::new(Rc::clone(&model), settings);
        while search.advance(100_000) == Progress::Working {}
        search.run(Some(whole / 3));
        while search.advance(100_000) == Progress::Working {}
        let Some(band) = search.estimate() else { continue };
        let size = f64::from(whole);
        assert!(band.low <= band.middle && band.middle <= band.high);
        all += 1;
        held += u32::from(band.low <= size && size <= band.high);
        near += u32::from(band.low <= 4.0 * size && size <= 4.0 * band.high);
    }
    assert!(all >= 10 && near * 10 >= all * 9 && held * 2 >= all, "{held} and {near} of {all}");
}

/// A basis beside the record of its node: a difference to the parent's is a few bytes, and one of
/// sixteen is whole.
#[test]
fn bases_of_nodes_take_few_bytes() {
    let model = round_trip(&Random(9).distances(30), Form::Flow, Sense::Minimise);
    let search = searched(&model, &Settings { node_limit: Some(120), ..Settings::default() });
    let (bytes, count) = search.tree.basis_bytes();
    let whole = (model.columns().len() + model.row_count()).div_ceil(4);
    assert!(count == 120 && whole > 600, "{count} of {whole} bytes");
    assert!(bytes <= 400 * count, "{} bytes a node", bytes / count);
}
