//! The court over the catalogue: every deliberately wrong variant is caught, and no right rival is
//! accused.

#![allow(clippy::expect_used, clippy::panic, reason = "the helpers of these tests fail loudly")]

use std::collections::BTreeMap;
use std::fs;
use std::path::Path;
use std::rc::Rc;

use catalogue::{Class, Entry, entries, generate};
use hullward_study::{Plan, Running, Source, Subject, court, model_of};
use instance::{Instance, read};
use model::{ColumnId, Model, Number, RowId};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use record::study::{Equivalence, EquivalenceKind, EquivalenceLevel};

fn subject(letter: &str, text: &str, entry: Option<Entry>, data: &Rc<Instance>) -> Option<Subject> {
    let states = BTreeMap::new();
    let model = model_of(text, data, &BTreeMap::new(), &states)?;
    Some(Subject {
        letter: letter.to_owned(),
        title: model.title().to_owned(),
        model: Rc::new(model),
        relaxation: false,
        source: Some(Source {
            text: Rc::from(text),
            instance: Rc::clone(data),
            bind: BTreeMap::new(),
            states,
        }),
        entry,
    })
}

fn verdict(subjects: [Subject; 2]) -> Equivalence {
    let plan = Plan {
        mutants: false,
        duels: 4,
        plans: 40,
        sizes: vec![2, 3, 4],
        nodes: 2_000,
        ..Plan::default()
    };
    let mut running = Running::new(|desk| court::court(desk, Vec::from(subjects), plan));
    while !running.advance(1_000_000) {}
    running.take().expect("it is at its end").remove(0)
}

fn data(family: &str, size: u32, class: Class, seed: u64) -> Option<Rc<Instance>> {
    Some(Rc::new(read(&generate(family, size, class, seed)?, None).instance?))
}

/// Rivals of a family that are compared for their optimum.
fn rivals(family: &str) -> Vec<Entry> {
    entries().into_iter().filter(|entry| entry.family == family && !entry.relaxation).collect()
}

/// Family, text, class, size and seed of each wrong variant.
fn wrong() -> Vec<(String, String, Class, u32, u64)> {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("../catalogue/tests/wrong");
    let mut out = Vec::new();
    let mut families: Vec<_> = fs::read_dir(folder)
        .expect("a folder")
        .map(|entry| entry.expect("an entry").path())
        .collect();
    families.sort();
    for family in families.into_iter().filter(|path| path.is_dir()) {
        let name = family.file_name().expect("a name").to_string_lossy().into_owned();
        for file in fs::read_dir(&family).expect("a folder") {
            let text = fs::read_to_string(file.expect("an entry").path()).expect("text");
            let head = text.lines().next().unwrap_or_default();
            let seen = head.split("Seen on ").nth(1).unwrap_or_default();
            let words: Vec<&str> = seen.trim_end_matches('.').split([',', ' ']).collect();
            let [class, _, "size", size, _, "seed", seed] = words.as_slice() else {
                panic!("{head}")
            };
            let class = Class::ALL.into_iter().find(|known| format!("{known:?}") == *class);
            out.push((
                name.clone(),
                text.clone(),
                class.expect("a class"),
                size.parse().expect("a size"),
                seed.parse().expect("a seed"),
            ));
        }
    }
    out
}

#[test]
fn every_wrong_variant_is_caught() {
    let mut missed = Vec::new();
    let all = wrong();
    assert!(all.len() >= 30, "{}", all.len());
    for (family, text, class, size, seed) in all {
        let instance = data(&family, size, class, seed).expect("an instance");
        let right = rivals(&family).remove(0);
        let a = subject("A", right.text, Some(right.clone()), &instance).expect("a model");
        let b = subject("B", &text, Some(right), &instance).expect("a model");
        let verdict = verdict([a, b]);
        let caught = verdict.equivalent == Some(false) || verdict.counterexample.is_some();
        if !caught {
            missed.push((family, text.lines().next().map(str::to_owned), verdict));
        }
    }
    assert!(missed.is_empty(), "{missed:#?}");
}

/// Instances of each family; more where `HULLWARD_SEEDS` says so.
fn seeds() -> u64 {
    let more = std::env::var("HULLWARD_SEEDS").ok().and_then(|word| word.parse().ok());
    more.unwrap_or(3)
}

#[test]
fn no_right_rival_is_accused() {
    let mut families: Vec<String> = entries().into_iter().map(|entry| entry.family).collect();
    families.dedup();
    let (mut accused, mut heard, mut sets) = (Vec::new(), 0, 0);
    for family in families {
        let rivals = rivals(&family);
        let Some((first, others)) = rivals.split_first() else { continue };
        for seed in 11..11 + seeds() {
            let Some(instance) = data(&family, 4, Class::Uniform, seed) else { continue };
            for other in others {
                let a = subject("A", first.text, Some(first.clone()), &instance);
                let b = subject("B", other.text, Some(other.clone()), &instance);
                let (Some(a), Some(b)) = (a, b) else { continue };
                let verdict = verdict([a, b]);
                heard += 1;
                sets += u64::from(verdict.kind == EquivalenceKind::Sets);
                if verdict.equivalent == Some(false) {
                    accused.push((other.id.clone(), seed, verdict));
                }
            }
        }
    }
    assert!(heard >= 70 * seeds(), "{heard} pairs were heard");
    // Most rivals of the catalogue describe the very same plans.
    assert!(2 * sets > heard, "{sets} of {heard}");
    assert!(accused.is_empty(), "{accused:#?}");
}

/// A row dropped, a coefficient or a side shifted, a sign or a sense turned, or an index moved to
/// another column.
fn mutated(model: &Model, random: &mut Pcg32) -> Option<Model> {
    let mut below = |bound: usize| {
        let wide = u64::from(random.next_u32()) * bound as u64;
        usize::try_from(wide >> 32).expect("below the bound")
    };
    let rows: Vec<RowId> =
        (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row)).collect();
    let id = *rows.get(below(rows.len().max(1)))?;
    let mut row = model.row(id);
    let place = below(row.entries.len());
    let one = if below(2) == 0 { Number::ONE } else { -Number::ONE };
    match below(6) {
        0 => (row.lower, row.upper) = (None, None),
        1 => row.entries.get_mut(place)?.1 += one,
        2 => row.entries.get_mut(place)?.1 *= -Number::ONE,
        3 => {
            row.lower = row.lower.map(|side| side + &one);
            row.upper = row.upper.map(|side| side + &one);
        }
        4 => std::mem::swap(&mut row.lower, &mut row.upper),
        _ => row.entries.get_mut(place)?.0 = ColumnId::from_index(below(model.columns().len())),
    }
    model.rewritten(&BTreeMap::from([(id, row)])).ok()
}

/// Copies of right rivals with one thing changed: of 300, each is told apart from the original by a
/// plan or by the optimum, or every plan of it was compared and is the same at the same value.
#[test]
fn of_three_hundred_mutants_each_is_caught_or_proved_to_be_the_same() {
    let mut random = Pcg32::seed_from_u64(300);
    let (mut caught, mut same, mut open) = (0, 0, Vec::new());
    let kinds = [
        ("atsp/labels", 4),
        ("atsp/lifted-labels", 4),
        ("atsp/one-commodity", 4),
        ("tsp/subtours", 5),
        ("ufl/split", 3),
        ("ufl/joined", 3),
        ("knapsack/plain", 6),
        ("gap/plain", 4),
    ];
    for number in 0..300 {
        let (id, size) = kinds[number % kinds.len()];
        let entry = catalogue::find(id).unwrap_or_else(|| panic!("no {id}"));
        let instance = data(&entry.family, size, Class::Uniform, 5).expect("an instance");
        let mut a = subject("A", entry.text, Some(entry.clone()), &instance).expect("a model");
        let broken = loop {
            if let Some(broken) = mutated(&a.model, &mut random) {
                break broken;
            }
        };
        a.source = None;
        let b = Subject { letter: "B".to_owned(), model: Rc::new(broken), ..a.clone() };
        let plan = Plan { mutants: false, duels: 3, plans: 600, nodes: 5_000, ..Plan::default() };
        let mut running = Running::new(|desk| court::court(desk, vec![a, b], plan));
        while !running.advance(1_000_000) {}
        let verdict = running.take().expect("it is at its end").remove(0);
        match (verdict.equivalent, verdict.level, &verdict.counterexample) {
            (Some(false), ..) | (_, _, Some(_)) => caught += 1,
            (Some(true), EquivalenceLevel::Proved, None) => same += 1,
            _ => open.push((number, id, verdict)),
        }
    }
    assert!(open.is_empty(), "{caught} caught, {same} the same; open: {open:#?}");
    assert!(caught >= 150, "{caught} caught, {same} the same");
}
