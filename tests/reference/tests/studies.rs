//! Studies against direct re-computation with HiGHS: bounds without families, what a switch needs,
//! and violations over another relaxation.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;
use std::rc::Rc;

use catalogue::find;
use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs};
use hullward_tests_reference::seeded::{extent, seeded};
use instance::Instance;
use model::{ColumnId, FamilyId, Model, Number, Row, RowId, Sense, nearest_f64};
use record::study::{FamilyTightening, OrderLevel, RivalTightening};
use study::{Desk, Plan, Running, Source, Subject, model_of};

fn subject(letter: &str, id: &str, data: &Instance) -> Subject {
    let entry = find(id).unwrap();
    let states = BTreeMap::new();
    let model = model_of(entry.text, data, &BTreeMap::new(), &states).unwrap();
    Subject {
        letter: letter.to_owned(),
        title: model.title().to_owned(),
        model: Rc::new(model),
        relaxation: entry.relaxation,
        source: Some(Source {
            text: Rc::from(entry.text),
            instance: Rc::new(data.clone()),
            bind: BTreeMap::new(),
            states,
        }),
        entry: Some(entry),
    }
}

fn driven<T, F, W>(study: F) -> T
where
    F: FnOnce(Rc<Desk>) -> W,
    W: Future<Output = T> + 'static,
{
    let mut running = Running::new(study);
    while !running.advance(1_000_000) {}
    running.take().unwrap()
}

/// The value of a relaxation by HiGHS; none where it is unbounded or has no point.
fn value(model: &Model) -> Option<f64> {
    match highs(model, &[], false) {
        Verdict::Optimal(value) => Some(value),
        _ => None,
    }
}

fn same(ours: Option<f64>, theirs: Option<f64>) -> bool {
    match (ours, theirs) {
        (Some(ours), Some(theirs)) => agree(ours, theirs, 1e-7),
        (None, None) => true,
        _ => false,
    }
}

/// Rivals that are written out, one of each kind of trouble: factors, flows, split links, lots.
const WRITTEN: [&str; 5] =
    ["atsp/labels", "atsp/one-commodity", "ufl/joined", "ufl/split", "lot/big-m"];

fn small(id: &str) -> Vec<(String, Instance)> {
    let family = id.split('/').next().unwrap();
    seeded(family, &extent(family).optima[..1], 2)
}

#[test]
fn bounds_without_families_are_those_of_highs() {
    let mut compared = 0;
    for id in WRITTEN {
        for (name, data) in small(id) {
            let one = subject("A", id, &data);
            let model = Rc::clone(&one.model);
            let found = driven(|desk| study::families::families(desk, vec![one], Plan::default()));
            let rival = &found.rivals[0];
            let all: Vec<FamilyId> =
                (0..model.families().len()).map(FamilyId::from_index).collect();
            assert_eq!(rival.families.len(), all.len(), "{id}");
            assert!(same(rival.bound, value(&model)), "{id} on {name}");
            assert!(same(rival.bare, value(&model.left_out(&all))), "{id} on {name}");
            for (place, share) in rival.families.iter().enumerate() {
                let others: Vec<FamilyId> =
                    all.iter().copied().filter(|f| f.index() != place).collect();
                let without = value(&model.left_out(&[all[place]]));
                let alone = value(&model.left_out(&others));
                assert!(same(share.without, without), "{id} on {name}: {share:?} {without:?}");
                assert!(same(share.alone, alone), "{id} on {name}: {share:?} {alone:?}");
                compared += 2;
            }
        }
    }
    assert!(compared > 40, "{compared}");
}

/// What the rest of a row reaches over the relaxation with its switch open, by HiGHS, and from it
/// the coefficient that is needed.
fn needed(model: &Model, row: RowId, switch: ColumnId) -> Option<f64> {
    let whole = model.row(row);
    let turned = whole.upper.is_none();
    let sign = if turned { -Number::ONE } else { Number::ONE };
    let side = &sign * whole.upper.as_ref().or(whole.lower.as_ref())?;
    let entries: Vec<(ColumnId, Number)> =
        whole.entries.iter().map(|(column, a)| (*column, &sign * a)).collect();
    let own = entries.iter().find(|(column, _)| *column == switch)?.1.clone();
    let rest: Vec<(ColumnId, Number)> =
        entries.into_iter().filter(|(column, _)| *column != switch).collect();
    let open = if own < Number::ZERO { Number::ONE } else { Number::ZERO };
    let priced = model.priced(Sense::Maximise, &rest);
    let reach = value(&priced.bounded(&[(switch, Some(open.clone()), Some(open))]))?;
    let (own, side) = (nearest_f64(&own), nearest_f64(&side));
    let least = if own < 0.0 { reach - side } else { own - (side - reach) };
    Some(if least > 1e-9 && least < own.abs() { least } else { own.abs() })
}

#[test]
fn the_factor_that_a_switch_needs_is_that_of_highs() {
    let mut compared = 0;
    for (id, variable) in [("lot/big-m", "y"), ("ufl/joined", "y")] {
        for (name, data) in small(id) {
            let one = subject("A", id, &data);
            let model = Rc::clone(&one.model);
            let found =
                driven(|desk| study::tightening::tightening(desk, vec![one], Plan::default()));
            let rival = &found.rivals[0];
            // Data of 0 and 1 leave factors of 1, which switch nothing.
            for share in &rival.families {
                compared += 1;
                let theirs = largest(&model, share, variable);
                // Where the bounds alone are tighter, the study takes them.
                let ours = share.largest_by_relaxation;
                assert!(
                    agree(ours, theirs, 1e-6) || ours <= share.largest_by_data + 1e-9,
                    "{id} on {name}: {share:?}, {theirs}"
                );
                assert!(ours <= theirs + 1e-6, "{id} on {name}: {share:?}, {theirs}");
            }
            // Smaller coefficients lose no plan: the bound stays below the optimum.
            let Verdict::Optimal(optimum) = highs(&model, &[], true) else { panic!("{id}") };
            let bound = rival.bound_by_relaxation.unwrap();
            assert!(bound <= optimum + 1e-6 && bound >= rival.bound.unwrap() - 1e-6, "{id}");
        }
    }
    assert!(compared >= 10, "{compared}");
}

/// The row of that name, and the column of the binary that switches it.
fn placed(model: &Model, row: &str, switch: &str) -> (RowId, ColumnId) {
    let mut rows = (0..model.row_count()).map(RowId::from_index);
    let mut columns = (0..model.columns().len()).map(ColumnId::from_index);
    let row = rows.find(|&id| model.row_name(id) == row).unwrap();
    (row, columns.find(|&id| model.column_name(id) == switch).unwrap())
}

/// The model with a row that keeps its objective at an optimum, as far as a printed value goes.
fn no_worse_than(model: &Model, optimum: f64) -> Model {
    let cost = |place: usize| model.numbers().exact(model.columns()[place].cost).clone();
    let entries =
        (0..model.columns().len()).map(|place| (ColumnId::from_index(place), cost(place)));
    let side = Number::try_from(optimum + 1e-6 * (1.0 + optimum.abs())).unwrap() - model.offset();
    let row = Row { entries: entries.collect(), lower: None, upper: Some(side) };
    model.with_rows("no worse", vec![row]).unwrap()
}

/// Row by row: by the relaxation, and with the optimum as a cut-off; and the row that is said to be
/// too small to switch alone cuts off a plan, by the most that HiGHS reaches without it.
#[test]
fn each_switch_needs_what_highs_says_with_and_without_a_cutoff() {
    let (mut compared, mut smaller, mut shown) = (0, 0, 0);
    for id in ["lot/big-m", "ufl/joined"] {
        for (name, data) in small(id) {
            let one = subject("A", id, &data);
            let model = Rc::clone(&one.model);
            let found =
                driven(|desk| study::tightening::tightening(desk, vec![one], Plan::default()));
            let rival = &found.rivals[0];
            let Verdict::Optimal(optimum) = highs(&model, &[], true) else { panic!("{id}") };
            if rival.switches.is_empty() {
                continue;
            }
            assert!(agree(rival.cutoff.unwrap(), optimum, 1e-6), "{id} on {name}");
            let good = no_worse_than(&model, optimum);
            for row in &rival.switches {
                let at = placed(&model, &row.row, &row.switch);
                let least = |a: f64, b: f64| if a < b { a } else { b };
                let relaxed = least(needed(&model, at.0, at.1).unwrap(), row.by_data);
                assert!(
                    agree(row.by_relaxation, relaxed, 1e-6),
                    "{id} on {name}: {row:?} {relaxed}"
                );
                // With no point at least as good where the switch is open nothing is claimed.
                if let Some(need) = needed(&good, at.0, at.1) {
                    let need = least(need, relaxed);
                    assert!(agree(row.by_cutoff, need, 1e-4), "{id} on {name}: {row:?} {need}");
                    smaller += usize::from(row.by_cutoff < row.by_relaxation - 1e-6);
                }
                compared += 1;
            }
            shown += usize::from(too_small(&model, rival));
            assert!(rival.bound_by_cutoff.unwrap() <= optimum + 1e-6 * (1.0 + optimum.abs()));
        }
    }
    assert!(compared >= 40 && smaller > 0, "{compared} rows, {smaller} smaller by the cut-off");
    // The factors of both are as large as they must be.
    assert_eq!(shown, 0);
}

/// Whether a row is said to cut off a plan; then HiGHS finds one as well.
fn too_small(model: &Model, rival: &RivalTightening) -> bool {
    let Some(found) = rival.too_small.first() else { return false };
    let (row, switch) = placed(model, &found.row, &found.switch);
    let open = Number::try_from(found.open).unwrap();
    let none = Row { entries: Vec::new(), lower: None, upper: None };
    let free = model.rewritten(&BTreeMap::from([(row, none)])).unwrap();
    let rest: Vec<(ColumnId, Number)> =
        model.row(row).entries.into_iter().filter(|(column, _)| *column != switch).collect();
    let sense = if model.row(row).upper.is_some() { Sense::Maximise } else { Sense::Minimise };
    let free = free.priced(sense, &rest).bounded(&[(switch, Some(open.clone()), Some(open))]);
    let Verdict::Optimal(most) = highs(&free, &[], true) else { panic!("{found:?}") };
    assert!(most.abs() >= found.reaches.abs() - 1e-6, "{found:?} {most}");
    true
}

/// A factor cut by a third switches too early, which a plan proves.
#[test]
fn a_factor_that_is_too_small_is_shown_by_a_plan_that_highs_finds_as_well() {
    let (name, data) = small("lot/big-m").remove(0);
    let one = subject("A", "lot/big-m", &data);
    let id = (0..one.model.row_count()).map(RowId::from_index).find(|&row| {
        one.model.row_entries(row).iter().any(|(column, _)| one.model.is_binary(*column))
    });
    let id = id.unwrap();
    let mut row = one.model.row(id);
    for (column, a) in &mut row.entries {
        if one.model.is_binary(*column) {
            *a = &*a * Number::from(2) / Number::from(3);
        }
    }
    let model = Rc::new(one.model.rewritten(&BTreeMap::from([(id, row)])).unwrap());
    let one = Subject { model: Rc::clone(&model), source: None, entry: None, ..one };
    let found = driven(|desk| study::tightening::tightening(desk, vec![one], Plan::default()));
    assert!(too_small(&model, &found.rivals[0]), "{name}: {found:?}");
    let shown = &found.rivals[0].too_small[0];
    assert!(agree(shown.needs - shown.coefficient, shown.reaches - shown.allows, 1e-9));
}

/// The largest coefficient that the rows of a family need, by HiGHS.
fn largest(model: &Model, share: &FamilyTightening, variable: &str) -> f64 {
    let rows = (0..model.row_count()).map(RowId::from_index);
    let own =
        rows.filter(|&row| model.families()[model.row_family(row).index()].name == share.name);
    let needs = own.filter_map(|row| {
        let switch = model.row_entries(row).iter().map(|(column, _)| *column).find(|column| {
            let column = &model.columns()[column.index()];
            model.variables()[column.variable.index()].name == variable
        })?;
        needed(model, row, switch)
    });
    needs.fold(0.0, |most, need| if need > most { need } else { most })
}

#[test]
fn the_violation_that_refutes_an_order_is_the_largest_by_highs() {
    for (name, data) in small("ufl/joined") {
        let subjects = vec![subject("A", "ufl/split", &data), subject("B", "ufl/joined", &data)];
        let (split, joined) = (Rc::clone(&subjects[0].model), Rc::clone(&subjects[1].model));
        let order = driven(|desk| study::order::order(desk, subjects, Plan::default())).remove(0);
        assert_eq!(order.level, OrderLevel::Theorem, "{name}");
        let [forth, back] = &order.certificates;
        assert_eq!((forth.holds, back.holds), (Some(true), Some(false)), "{name}");
        let rows = (0..split.row_count()).map(RowId::from_index);
        let row = rows.into_iter().find(|&row| split.row_name(row) == back.witness).unwrap();
        let row = split.row(row);
        // The columns of both rivals have the same names.
        let mapped: Vec<(ColumnId, Number)> = row
            .entries
            .iter()
            .map(|(column, a)| {
                let wanted = split.column_name(*column);
                let columns = (0..joined.columns().len()).map(ColumnId::from_index);
                let found =
                    columns.into_iter().find(|&column| joined.column_name(column) == wanted);
                (found.unwrap(), a.clone())
            })
            .collect();
        let most = value(&joined.priced(Sense::Maximise, &mapped)).unwrap();
        let side = nearest_f64(row.upper.as_ref().unwrap());
        assert!(same(back.violation, Some(most - side)), "{name}: {most} {side} {back:?}");
    }
}
