//! The shipped round-trip formulations on a small instance: rows, columns, and exactly the
//! right integer points, by enumeration.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use std::collections::{BTreeMap, BTreeSet};

use crate::common::{errors, exact_row_text, made, made_with, rows_of, stops};
use model::{FamilyState, Model, Row, RowId, Scope, SubsetCondition, nearest_f64};

fn shipped(name: &str) -> String {
    let path = format!("{}/../catalogue/formulations/atsp/{name}.txt", env!("CARGO_MANIFEST_DIR"));
    std::fs::read_to_string(path).unwrap()
}

/// Rows (of ordinary families), columns, families over subsets.
fn size(model: &Model) -> (usize, usize, usize) {
    (model.row_count(), model.columns().len(), model.subset_families().len())
}

#[test]
fn sizes_are_those_of_the_papers() {
    let instance = stops(5);
    let sizes = |name: &str| size(&made(&shipped(name), &instance));
    assert_eq!(sizes("assignment"), (10, 20, 0));
    assert_eq!(sizes("labels"), (10 + 12, 20 + 4, 0));
    assert_eq!(sizes("lifted-labels"), (10 + 12 + 8, 24, 0));
    assert_eq!(sizes("one-commodity"), (10 + 4 + 20, 40, 0));
    assert_eq!(sizes("multi-commodity"), (10 + 4 + 4 + 12 + 80, 20 + 80, 0));
    assert_eq!(sizes("subtours"), (10, 20, 1));
    assert_eq!(sizes("cuts"), (10, 20, 1));
}

/// Every member of a family over subsets, written out.
fn members(model: &Model, family: usize) -> Vec<Row> {
    let family = &model.subset_families()[family];
    let subsets = (0..1_u32 << family.ground.len()).map(|mask| {
        let chosen = family.ground.iter().enumerate().filter(|(i, _)| mask >> i & 1 == 1);
        chosen.map(|(_, &label)| label).collect::<BTreeSet<_>>()
    });
    subsets.filter(|s| family.admits(s)).map(|s| family.member(&s)).collect()
}

fn holds(row: &Row, x: &[f64]) -> bool {
    let value = row.activity(x);
    let least = row.lower.as_ref().is_none_or(|n| value > nearest_f64(n) - 1e-9);
    let most = row.upper.as_ref().is_none_or(|n| value < nearest_f64(n) + 1e-9);
    least && most
}

/// All rows of a model, families over subsets written out.
fn all_rows(model: &Model) -> Vec<Row> {
    let count = u32::try_from(model.row_count()).unwrap();
    let mut rows: Vec<Row> = (0..count).map(|r| model.row(RowId(r))).collect();
    (0..model.subset_families().len()).for_each(|family| rows.extend(members(model, family)));
    rows
}

/// The 0-1 points of the first `binaries` columns for which some whole values of the other
/// columns, all in 1..=`most`, satisfy every row.
fn points(model: &Model, binaries: usize, most: u32) -> BTreeSet<u32> {
    let rows = all_rows(model);
    let (own, linked): (Vec<&Row>, Vec<&Row>) =
        rows.iter().partition(|r| r.entries.iter().all(|(c, _)| c.index() < binaries));
    let others = u32::try_from(model.columns().len() - binaries).unwrap();
    let mut found = BTreeSet::new();
    for mask in 0..1_u32 << binaries {
        let mut x: Vec<f64> = (0..binaries).map(|i| f64::from(mask >> i & 1)).collect();
        if !own.iter().all(|row| holds(row, &x)) {
            continue;
        }
        let reachable = (0..most.pow(others)).any(|mut code| {
            x.truncate(binaries);
            for _ in 0..others {
                x.push(f64::from(code % most + 1));
                code /= most;
            }
            linked.iter().all(|row| holds(row, &x))
        });
        if reachable {
            found.insert(mask);
        }
    }
    found
}

/// The round trips through all stops, as 0-1 points over the drives of a complete instance.
fn tours(n: usize) -> BTreeSet<u32> {
    let drive = |i: usize, j: usize| i * (n - 1) + if j > i { j - 1 } else { j };
    let mut found = BTreeSet::new();
    let mut stack = vec![vec![0_usize]];
    while let Some(trip) = stack.pop() {
        if trip.len() == n {
            let legs = (0..n).map(|k| drive(trip[k], trip[(k + 1) % n]));
            found.insert(legs.fold(0, |mask, leg| mask | 1 << leg));
        }
        let open = (0..n).filter(|stop| !trip.contains(stop));
        stack.extend(open.map(|stop| [trip.as_slice(), &[stop]].concat()));
    }
    found
}

#[test]
fn integer_points_are_the_round_trips() {
    let instance = stops(4);
    assert_eq!(tours(4).len(), 6);
    for name in ["labels", "lifted-labels", "subtours", "cuts"] {
        let model = made(&shipped(name), &instance);
        assert_eq!(points(&model, 12, 3), tours(4), "{name}");
    }
    let assignment = points(&made(&shipped("assignment"), &instance), 12, 1);
    assert_eq!(assignment.len(), 9, "derangements of four stops");
}

#[test]
fn integer_points_on_five_stops() {
    let instance = stops(5);
    for name in ["labels", "subtours", "cuts"] {
        let model = made(&shipped(name), &instance);
        assert_eq!(points(&model, 20, 4), tours(5), "{name}");
    }
}

#[test]
fn rows_are_those_of_the_paper() {
    let model = made(&shipped("labels"), &stops(4));
    let mut wanted = Vec::new();
    for i in ["Birch", "Cedar", "Dogwood"] {
        for j in ["Birch", "Cedar", "Dogwood"] {
            // columns come by rising number: x before u, and u by stop
            let labels =
                if i < j { format!("u[{i}] − u[{j}]") } else { format!("−u[{j}] + u[{i}]") };
            let row = format!("3 x[{i} → {j}] + {labels} ≤ 2");
            wanted.extend((i != j).then_some(row));
        }
    }
    let signed: Vec<String> = wanted.iter().map(|w| w.replace("+ −", "− ")).collect();
    assert_eq!(rows_of(&model, "order"), signed);
    assert_eq!(
        rows_of(&model, "leave")[0],
        "x[Ash → Birch] + x[Ash → Cedar] + x[Ash → Dogwood] = 1"
    );
    let bounds = |c: u32| {
        let column = &model.columns()[c as usize];
        let value = |id: Option<_>| id.map(|id| nearest_f64(model.numbers().exact(id)));
        (value(column.lower), value(column.upper), column.integer)
    };
    assert_eq!(bounds(0), (Some(0.0), Some(1.0), true));
    assert_eq!(bounds(12), (Some(1.0), Some(3.0), false));
}

/// A drive that is not allowed leaves its column out, and what names it an error.
#[test]
fn missing_drives_have_no_column() {
    let mut cells: Vec<_> = (0..16_i32).map(|i| Some(model::Number::from(i))).collect();
    cells[2] = None;
    let labels = ["a", "b", "c", "d"].map(str::to_owned).to_vec();
    let instance = instance::Instance::round_trip(labels, &cells);
    let model = made(&shipped("lifted-labels"), &instance);
    assert_eq!(model.find_column("x", &["a", "c"]), None);
    assert_eq!(model.columns().len(), 11 + 3);
    assert_eq!(rows_of(&model, "leave")[0], "x[a → b] + x[a → d] = 1");
    let text = shipped("assignment").replace("Σ_{j : (i,j) ∈ A}", "Σ_{j ∈ V : j ≠ i}");
    let found = errors(&text, &instance);
    assert_eq!(found.len(), 1, "{found:?}");
    assert_eq!(found[0].0, "row.outside");
    assert!(found[0].1.starts_with("10:21: x[a → c] is outside its index set"), "{}", found[0].1);
}

/// The terms of the two subset forms.
#[test]
fn subset_families_keep_their_shape() {
    let instance = stops(4);
    let cuts = made(&shipped("cuts"), &instance);
    let family = &cuts.subset_families()[0];
    assert!(family.terms.iter().all(|t| matches!(t.scope, Scope::Leaving(..))));
    assert_eq!(family.terms.len(), 12);
    assert_eq!(family.conditions, [SubsetCondition::Size { at_least: 1, at_most: 3 }]);
    assert_eq!(members(&cuts, 0).len(), 14);

    let subtours = made(&shipped("subtours"), &instance);
    let family = &subtours.subset_families()[0];
    assert!(family.terms.iter().all(|t| matches!(t.scope, Scope::Inside(..))));
    assert_eq!(family.weights, vec![-model::Number::ONE; 4]);
    assert_eq!(family.constant, model::Number::ONE);
    assert_eq!(family.conditions, [SubsetCondition::Size { at_least: 2, at_most: 3 }]);
    assert_eq!(subtours.families()[2].state, FamilyState::OnDemand);
    assert!(subtours.families()[2].over_subsets);
}

/// The cut form with the root outside, in the ways papers write it.
#[test]
fn ground_sets_and_conditions_in_their_spellings() {
    let instance = stops(4);
    let line = "∀ S ⊂ V : S ≠ ∅ ";
    let base = shipped("cuts").replace("minimise", "  r ∈ V    depot\nminimise");
    let with = |quantifier: &str| {
        let text = base.replace(line, quantifier);
        assert!(text != base, "the line to replace is there");
        made(&text, &instance)
    };
    let avoids = with("∀ S ⊂ V : r ∉ S, S ≠ ∅ ");
    let found: BTreeSet<String> =
        members(&avoids, 0).iter().map(|r| exact_row_text(&avoids, r)).collect();
    assert_eq!(found.len(), 7);
    for quantifier in [
        "∀ ∅ ≠ S ⊆ V ∖ {r} ",
        "∀ S ⊆ V \\ {r} : |S| ≥ 1 ",
        "∀ S ⊆ V\\{r}, |S| > 0 ",
        "\\forall S \\subseteq V \\setminus \\{r\\} : S \\ne \\emptyset ",
        "forall S subset V : not (r in S), 1 <= |S| ",
        "∀ S ⊆ V : r ∉ S, S ∩ V ≠ ∅ ",
        "∀ S ⊆ V : {r} ∩ S = ∅, S ≠ ∅ ",
        "∀ S ⊆ V : V ∖ S ≠ ∅, r ∉ S, S ≠ ∅ ",
    ] {
        let model = with(quantifier);
        let same: BTreeSet<String> =
            members(&model, 0).iter().map(|r| exact_row_text(&model, r)).collect();
        assert_eq!(same, found, "{quantifier}");
    }
}

/// A family over subsets that is asked for *in* is written out while it is small.
#[test]
fn a_small_family_over_subsets_can_be_written() {
    let states = [("subtour".to_owned(), FamilyState::In)].into();
    let model = made_with(&shipped("subtours"), &stops(5), &states);
    assert_eq!(model.row_count(), 10 + 10 + 10 + 5);
    assert!(model.subset_families().is_empty());
    assert_eq!(rows_of(&model, "subtour")[0], "x[Ash → Birch] + x[Birch → Ash] ≤ 1");
    assert_eq!(points(&model, 20, 1), tours(5));
    let (model, found) =
        hullward_notation::model(&shipped("subtours"), &stops(15), &BTreeMap::new(), &states)
            .unwrap();
    assert!(found.iter().any(|d| d.code == "subset.on-demand"));
    assert_eq!(
        (model.subset_families().len(), model.families()[2].state),
        (1, FamilyState::OnDemand)
    );
    let out = [("order".to_owned(), FamilyState::Out)].into();
    let model = made_with(&shipped("labels"), &stops(5), &out);
    assert_eq!(model.row_count(), 10);
    assert_eq!(model.families()[2].state, FamilyState::Out);
}

/// Every shipped text reads and checks without a word, and prints back to the same tree.
#[test]
fn every_shipped_text_reads_checks_and_prints() {
    let root = format!("{}/../catalogue/formulations", env!("CARGO_MANIFEST_DIR"));
    let mut seen = 0;
    for family in std::fs::read_dir(root).unwrap() {
        for file in std::fs::read_dir(family.unwrap().path()).unwrap() {
            let path = file.unwrap().path();
            if path.extension().is_none_or(|e| e != "txt") {
                continue;
            }
            let text = std::fs::read_to_string(&path).unwrap();
            let parsed = hullward_notation::parse(&text);
            let (checked, found) = hullward_notation::check(&parsed.tree);
            let all: Vec<_> = parsed.diagnostics.into_iter().chain(found).collect();
            assert!(all.is_empty(), "{}\n{}", path.display(), crate::common::shown(&text, &all));
            assert!(checked.is_sound());
            let printed = hullward_notation::print(&parsed.tree);
            assert_eq!(hullward_notation::parse(&printed).tree, parsed.tree, "{printed}");
            seen += 1;
        }
    }
    assert!(seen >= 7, "{seen}");
}

/// Lot sizing on three periods: the rows of the (l,S) family and of the shortest-path form.
#[test]
fn shipped_lot_sizing_forms() {
    let file = |name: &str| {
        let path =
            format!("{}/../catalogue/formulations/lot/{name}.txt", env!("CARGO_MANIFEST_DIR"));
        std::fs::read_to_string(path).unwrap()
    };
    let mut instance = instance::Instance::new(instance::Reader::Blocks);
    instance.set("T", instance::Datum::Integers(vec![1, 2, 3]));
    for (name, values) in [("d", [4, 0, 5]), ("f", [9, 9, 9]), ("p", [1, 1, 1]), ("h", [1, 1, 1])] {
        let cells = values
            .iter()
            .enumerate()
            .map(|(t, &v)| (vec![(t + 1).to_string()], model::Number::from(v)));
        instance.set(name, instance::Datum::Table { arity: 1, cells: cells.collect() });
    }
    let l_s = made(&file("l-s"), &instance);
    assert_eq!(l_s.subset_families().len(), 3);
    assert_eq!((l_s.row_count(), l_s.columns().len()), (6, 10));
    let all: BTreeSet<String> = members(&l_s, 1).iter().map(|r| exact_row_text(&l_s, r)).collect();
    // D_{1,2} = 4, D_{2,2} = 0
    let wanted = ["4 y[1] + x[2] ≥ 4", "4 y[1] ≥ 4", "x[1] + x[2] ≥ 4", "x[1] ≥ 4"];
    assert_eq!(all, wanted.into_iter().map(str::to_owned).collect());
    let path = made(&file("shortest-path-form"), &instance);
    assert_eq!((path.row_count(), path.columns().len()), (12, 16));
    assert_eq!(
        rows_of(&path, "set-up")[1],
        "−y[2] + z[2, 3] ≤ 0",
        "the step over period 2 makes nothing"
    );
}
