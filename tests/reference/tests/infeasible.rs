//! Conflicts against HiGHS: what is said to be in conflict has no point, without any one row it has
//! one, and the cheapest way to relax is as cheap as HiGHS finds it.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use hullward_tests_reference::agree;
use hullward_tests_reference::independent::{Verdict, highs};
use model::{
    ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, RowId, Sense, nearest_f64,
};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use record::study::{Repair, RivalInfeasibility, Standing};
use study::{Plan, Running, Subject};

/// A random system in three families, often without a point or without a whole one.
fn random(seed: u64, integer: bool) -> Model {
    let mut random = Pcg32::seed_from_u64(seed);
    let mut between = |low: i32, high: i32| {
        let width = u32::try_from(high - low + 1).unwrap();
        low + i32::try_from(random.next_u32() % width).unwrap()
    };
    let mut builder = ModelBuilder::new("random", Sense::Minimise);
    builder.variable("x", false);
    let mut columns = Vec::new();
    for place in 0..5 {
        let label = builder.label(&format!("{place}"));
        let spec = ColumnSpec {
            lower: Some(Number::ZERO),
            upper: Some(Number::from(3)),
            cost: Number::ONE,
            integer,
        };
        columns.push(builder.column(&[label], &spec).unwrap());
    }
    for family in ["p", "q", "r"] {
        builder.family(family, FamilyState::In, false);
        // Even coefficients: an odd side has points, but no whole ones.
        let scale = if integer && family == "q" { 2 } else { 1 };
        for place in 0..1 + seed % 4 {
            let label = builder.label(&format!("{place}"));
            let entries: Vec<(ColumnId, Number)> = columns
                .iter()
                .map(|&column| (column, Number::from(scale * between(-2, 3))))
                .collect();
            let side = Number::from(between(0, 9));
            let (lower, upper) = match between(0, 3) {
                0 => (Some(side.clone()), Some(side)),
                1 => (None, Some(side)),
                _ => (Some(side), None),
            };
            builder.row(&[label], Row { entries, lower, upper }).unwrap();
        }
    }
    builder.build()
}

fn found(model: &Model) -> RivalInfeasibility {
    let subject = Subject {
        letter: "A".to_owned(),
        title: String::new(),
        model: Rc::new(model.clone()),
        entry: None,
        relaxation: false,
        source: None,
    };
    let mut running = Running::new(|desk| {
        study::infeasibility::infeasibility(desk, vec![subject], Plan::default())
    });
    while !running.advance(100_000) {}
    running.take().unwrap().rivals.remove(0)
}

/// Whether HiGHS finds a point that meets these rows alone.
fn holds(model: &Model, rows: &BTreeSet<RowId>, whole: bool) -> bool {
    let all = (0..model.row_count()).map(RowId::from_index);
    let free = Row { entries: Vec::new(), lower: None, upper: None };
    let out: BTreeMap<RowId, Row> =
        all.filter(|row| !rows.contains(row)).map(|row| (row, free.clone())).collect();
    match highs(&model.rewritten(&out).unwrap(), &[], whole) {
        Verdict::Optimal(_) => true,
        Verdict::Infeasible => false,
        other => panic!("{other:?}"),
    }
}

/// The least sum of violations by HiGHS, from its own rows.
fn least(model: &Model, way: &Repair, whole: bool) -> Option<f64> {
    let mut problem = highs::RowProblem::default();
    let columns: Vec<highs::Col> = model
        .columns()
        .iter()
        .map(|column| {
            let bound = |id: Option<model::NumberId>| model.numbers().float(id.unwrap());
            let bounds = bound(column.lower)..=bound(column.upper);
            problem.add_column_with_integrality(0.0, bounds, whole && column.integer)
        })
        .collect();
    for row in (0..model.row_count()).map(RowId::from_index) {
        let family = &model.families()[model.row_family(row).index()];
        let written = model.row(row);
        let mut entries: Vec<(highs::Col, f64)> =
            written.entries.iter().map(|(c, a)| (columns[c.index()], nearest_f64(a))).collect();
        if way.families.contains(&family.name) {
            let weighed = way.families.len() > 1;
            let largest = family.rows.clone().map(RowId).flat_map(|row| {
                let row = model.row(row);
                [row.lower, row.upper].into_iter().flatten().map(|side| nearest_f64(&side).abs())
            });
            let largest = largest.fold(0.0, |most, side| if side > most { side } else { most });
            let price = if weighed && largest > 0.0 { 1.0 / largest } else { 1.0 };
            entries.push((problem.add_column(price, 0.0..), 1.0));
            entries.push((problem.add_column(price, 0.0..), -1.0));
        }
        let lower = written.lower.as_ref().map_or(f64::NEG_INFINITY, nearest_f64);
        let upper = written.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
        problem.add_row(lower..=upper, entries);
    }
    let mut solver = problem.optimise(highs::Sense::Minimise);
    solver.make_quiet();
    solver.set_option("mip_rel_gap", 0.0);
    solver.set_option("mip_abs_gap", 1e-9);
    let solved = solver.solve();
    (solved.status() == highs::HighsModelStatus::Optimal).then(|| solved.objective_value())
}

#[test]
fn a_conflict_has_no_point_and_each_part_of_it_has_one() {
    let (mut without_point, mut without_whole, mut ways) = (0, 0, 0_u32);
    for seed in 0..200 {
        let model = random(seed, seed % 2 == 0);
        let found = found(&model);
        let whole = match found.standing {
            Standing::NoPoint => false,
            Standing::NoWholePoint => true,
            Standing::Feasible => {
                let rows = (0..model.row_count()).map(RowId::from_index).collect();
                assert!(holds(&model, &rows, true), "seed {seed}");
                continue;
            }
            Standing::Open => panic!("seed {seed} was left open"),
        };
        without_point += u32::from(!whole);
        without_whole += u32::from(whole);
        assert!(found.irreducible && found.checked, "seed {seed}: {found:?}");
        let names: BTreeSet<&str> = found.rows.iter().map(|row| row.row.as_str()).collect();
        let rows = (0..model.row_count()).map(RowId::from_index);
        let rows: BTreeSet<RowId> =
            rows.filter(|&row| names.contains(model.row_name(row).as_str())).collect();
        assert_eq!(rows.len(), names.len());
        assert!(!holds(&model, &rows, whole), "seed {seed}: HiGHS finds a point");
        for row in &rows {
            let mut rest = rows.clone();
            rest.remove(row);
            assert!(holds(&model, &rest, whole), "seed {seed}: {} is idle", model.row_name(*row));
        }
        for way in &found.repairs {
            let theirs = least(&model, way, true);
            assert_eq!(way.hopeless, theirs.is_none(), "seed {seed}: {way:?} {theirs:?}");
            if let (Some(ours), Some(theirs)) = (way.violation, theirs) {
                assert!(way.proved && agree(ours, theirs, 1e-6), "seed {seed}: {way:?} {theirs}");
                ways += 1;
            }
        }
    }
    assert!(
        without_point > 30 && without_whole > 3 && ways > 60,
        "{without_point} {without_whole} {ways}"
    );
}
