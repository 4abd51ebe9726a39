//! Symmetries against every permutation of small models, and against what is known of bins.

use std::collections::BTreeMap;
use std::rc::Rc;

use model::{ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use record::study::RivalSymmetry;

use super::{driven, instance, shipped, stops};
use crate::{Plan, Subject};

fn found(subject: Subject) -> RivalSymmetry {
    driven(50_000, |desk| crate::symmetry::symmetry(desk, vec![subject], Plan::default()))
        .rivals
        .remove(0)
}

fn of_model(model: Model) -> Subject {
    Subject {
        letter: "A".to_owned(),
        title: String::new(),
        model: Rc::new(model),
        entry: None,
        relaxation: false,
        source: None,
    }
}

/// A small model with coefficients of few values, so that copies are likely.
fn random(seed: u64) -> Model {
    let mut random = Pcg32::seed_from_u64(seed);
    let mut below = |bound: u32| random.next_u32() % bound;
    let mut builder = ModelBuilder::new("r", Sense::Minimise);
    builder.variable("x", false);
    let mut columns = Vec::new();
    for place in 0..6 {
        let label = builder.label(&format!("e{place}"));
        let spec = ColumnSpec {
            lower: Some(Number::ZERO),
            upper: Some(Number::ONE),
            cost: Number::from(below(2)),
            integer: true,
        };
        columns.push(builder.column(&[label], &spec).expect("few columns"));
    }
    builder.family("r", FamilyState::In, false);
    for _ in 0..1 + below(6) {
        let entries = columns.iter().map(|&column| (column, Number::from(below(2)))).collect();
        builder.row(&[], Row { entries, lower: Some(Number::ONE), upper: None }).expect("a row");
    }
    builder.build()
}

/// The orbits by trying every permutation of the columns: rows as sets of columns, no library.
fn orbits(model: &Model) -> usize {
    let n = model.columns().len();
    let rows = |image: &[usize]| {
        let mut rows: Vec<Vec<usize>> = (0..model.row_count())
            .map(model::RowId::from_index)
            .map(|row| {
                let entries = model.row_entries(row).iter();
                let mut own: Vec<usize> = entries.map(|(c, _)| image[c.index()]).collect();
                own.sort_unstable();
                own
            })
            .collect();
        rows.sort_unstable();
        rows
    };
    let plain: Vec<usize> = (0..n).collect();
    let mut least = plain.clone();
    for image in permutations(n) {
        let same_cost = (0..n).all(|c| model.columns()[c].cost == model.columns()[image[c]].cost);
        if same_cost && rows(&image) == rows(&plain) {
            for (from, &to) in image.iter().enumerate() {
                let (a, b) = (least[from], least[to]);
                let (low, high) = (a.min(b), a.max(b));
                least.iter_mut().filter(|own| **own == high).for_each(|own| *own = low);
            }
        }
    }
    (0..n).filter(|&c| least[c] == c).count()
}

/// Every permutation, by rising index of what is left.
fn permutations(n: usize) -> Vec<Vec<usize>> {
    let mut out = vec![Vec::new()];
    for _ in 0..n {
        out = out
            .iter()
            .flat_map(|head: &Vec<usize>| {
                let rest = (0..n).filter(|next| !head.contains(next));
                rest.map(|next| [head.as_slice(), &[next]].concat()).collect::<Vec<_>>()
            })
            .collect();
    }
    out
}

#[test]
fn orbits_are_those_of_all_permutations() {
    let mut symmetric = 0;
    for seed in 0..60 {
        let model = random(seed);
        let expected = orbits(&model);
        let found = found(of_model(model));
        assert_eq!(found.orbits as usize, expected, "seed {seed}: {found:?}");
        symmetric += usize::from(expected < 6);
    }
    assert!(symmetric > 20, "{symmetric}");
}

#[test]
fn bins_are_interchangeable_and_an_order_of_them_keeps_the_optimum() {
    let data = catalogue::generate("bins", 5, catalogue::Class::Uniform, 2).expect("an instance");
    let data = instance(&data);
    let plain = shipped("A", "bins/assignment", &data);
    let (before, again) = (Rc::clone(&plain.model), plain.clone());
    let found = found(plain);
    let largest = found.interchangeable.iter().max_by_key(|class| class.labels.len());
    let class = largest.expect("bins can be exchanged");
    assert!(class.labels.len() >= 3 && found.log10_copies > 0.0, "{found:?}");
    assert_eq!(class.order.len() + 1, class.labels.len());
    let (ordered, _) = model::mps::read(&found.with_order).expect("it is MPS");
    assert_eq!(ordered.row_count(), before.row_count() + class.order.len());
    let optimum = |model: Rc<Model>| {
        driven(50_000, |desk| async move { desk.solve(&model, Plan::default().search()).await })
    };
    let (with, without) = (optimum(Rc::new(ordered)), optimum(again.model));
    assert_eq!(with.incumbent, without.incumbent, "{with:?}");
}

#[test]
fn a_model_with_rows_on_demand_is_left_and_says_so() {
    let found = found(shipped("A", "atsp/subtours", &stops(5)));
    assert!(found.open.contains("rows on demand") && found.interchangeable.is_empty());
}

#[test]
fn equal_distances_both_ways_are_a_round_that_can_be_turned() {
    let data = instance("\ta\tb\tc\td\na\t\t1\t2\t3\nb\t1\t\t4\t5\nc\t2\t4\t\t6\nd\t3\t5\t6\t\n");
    let found = found(shipped("A", "atsp/assignment", &data));
    assert!(found.generators.iter().any(|one| one.words.contains("turned round")), "{found:?}");
    let counts: BTreeMap<_, _> = [("columns", found.columns), ("orbits", found.orbits)].into();
    assert_eq!((counts["columns"], counts["orbits"]), (12, 6));
}
