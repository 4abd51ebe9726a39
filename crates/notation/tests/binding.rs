//! Names bound by hand: whatever a reader supplies can be given to a `data` line of another name,
//! and what is missing or has another shape is told with that line, the name it was given, and
//! the cell.
#![allow(clippy::unwrap_used, clippy::panic, reason = "a test ends where it fails")]

use std::collections::{BTreeMap, BTreeSet};

use hullward_notation::{
    Binding, Diagnostic, Expansion, Limits, Progress, bind, check, matches, parse,
};
use instance::{Datum, Instance, Reader};

/// A small text for each reader; all numbers are invented.
const TEXTS: [(Reader, &str); 18] = [
    (Reader::Matrix, "\tA\tB\nA\t\t1\nB\t2\t\n"),
    (Reader::Points, "name,x,y\nA,0,0\nB,3,4\n"),
    (Reader::Geographic, "name,lat,lon\nA,52.5,13.4\nB,53.5,10.0\n"),
    (Reader::Arcs, "from,to,minutes\nA,B,3\nB,A,4\n"),
    (Reader::Table, "client demand\na 3\nb 4\n\nclient depot cost\na p 3\nb q 4\n"),
    (
        Reader::Tsplib,
        "NAME: two\nTYPE: TSP\nDIMENSION: 3\nEDGE_WEIGHT_TYPE: EUC_2D\nNODE_COORD_SECTION\n1 0 0\n2 3 4\n3 6 8\nEOF\n",
    ),
    (Reader::Blocks, "V\na b\n\nq by i\na 1\nb 2\n\nQ = 4\n"),
    (Reader::Knapsack, "3 6\n5 4\n4 3\n3 2\n"),
    (Reader::MultiKnapsack, "1\n2 1 0\n3 4\n1 2\n2\n"),
    (Reader::Assignment, "1\n2 2\n1 2\n3 4\n1 1\n1 1\n2 2\n"),
    (Reader::Sites, "2 2\n9 4\n9 5\n3\n1 2\n4\n2 1\n"),
    (Reader::Medians, "3 2 1\n1 2 4\n2 3 5\n"),
    (Reader::Tardiness, "2\n3 4\n1 2\n5 6\n"),
    (Reader::JobShop, "2 2\n0 5 1 6\n1 7 0 8\n"),
    (Reader::Quadratic, "2\n0 3\n3 0\n0 4\n4 0\n"),
    (Reader::Graph, "p edge 3 2\ne 1 2\ne 2 3\n"),
    (
        Reader::Steiner,
        "33D32945 STP\nSECTION Graph\nNodes 3\nEdges 2\nE 1 2 4\nE 2 3 5\nEND\nSECTION Terminals\nTerminals 2\nT 1\nT 3\nEND\nEOF\n",
    ),
    (Reader::Routing, "3 1 10\n0 0 0\n4 3 4\n5 6 8\n"),
];

fn read(reader: Reader, text: &str) -> Instance {
    let reading = instance::read(text, Some(reader));
    reading.instance.unwrap_or_else(|| panic!("{}: {:?}", reader.name(), reading.complaints))
}

/// A formulation that asks for one datum of the shape, under a name that no reader gives.
fn asking(datum: &Datum) -> String {
    let index = ["i", "j", "k"];
    let over = |arity: usize| {
        let sets: Vec<String> = index[..arity].iter().map(|i| format!("{i} ∈ S{i}")).collect();
        let given: String = index[..arity].iter().map(|i| format!("  S{i}\n")).collect();
        (given, index[..arity].join(","), sets.join(", "))
    };
    let line = match datum {
        Datum::Labels(_) | Datum::Integers(_) => "  own\n".to_owned(),
        Datum::Number(_) => "  own\n".to_owned(),
        Datum::Element(_) => "  Si\n  own ∈ Si\n".to_owned(),
        Datum::Tuples { arity, .. } => {
            let (given, _, _) = over(*arity);
            let sets: Vec<String> = index[..*arity].iter().map(|i| format!("S{i}")).collect();
            format!("{given}  own ⊆ {}\n", sets.join(" × "))
        }
        Datum::Table { arity, .. } => {
            let (given, indices, sets) = over(*arity);
            format!("{given}  own_{{{indices}}} = 0 ∀ {sets}\n")
        }
    };
    let used = match datum {
        Datum::Labels(_) | Datum::Integers(_) => "  x ≥ 1 ∀ i ∈ own (rows)".to_owned(),
        Datum::Number(_) => "  x ≥ own (rows)".to_owned(),
        Datum::Element(_) => "  x ≥ 1 ∀ i ∈ Si : i ≠ own (rows)".to_owned(),
        Datum::Tuples { arity, .. } => {
            format!("  x ≥ 1 ∀ ({}) ∈ own (rows)", index[..*arity].join(","))
        }
        Datum::Table { arity, .. } => {
            let (_, indices, sets) = over(*arity);
            format!("  x ≥ own_{{{indices}}} ∀ {sets} (rows)")
        }
    };
    format!("data\n{line}minimise\n  x\nsubject to\n  x ≥ 0\n{used}\n")
}

/// The sets that `asking` names beside its datum: all labels of the instance.
fn with_sets(mut instance: Instance) -> Instance {
    let mut labels = BTreeSet::new();
    let data: Vec<Datum> = instance.data().map(|(_, datum)| datum.clone()).collect();
    for datum in &data {
        match datum {
            Datum::Labels(own) => labels.extend(own.iter().cloned()),
            Datum::Integers(own) => labels.extend(own.iter().map(ToString::to_string)),
            Datum::Element(one) => {
                labels.insert(one.clone());
            }
            Datum::Tuples { rows, .. } => labels.extend(rows.iter().flatten().cloned()),
            Datum::Table { cells, .. } => labels.extend(cells.keys().flatten().cloned()),
            Datum::Number(_) => {}
        }
    }
    for set in ["Si", "Sj", "Sk"] {
        instance.set(set, Datum::Labels(labels.iter().cloned().collect()));
    }
    instance
}

#[test]
fn whatever_a_reader_supplies_can_be_bound_by_hand() {
    let all: Vec<Reader> = Reader::all().collect();
    assert_eq!(all, TEXTS.map(|(reader, _)| reader).to_vec(), "a text for each reader");
    for (reader, text) in TEXTS {
        let own = read(reader, text);
        let data: Vec<(String, Datum)> =
            own.data().map(|(name, datum)| (name.to_owned(), datum.clone())).collect();
        let instance = with_sets(own);
        for (name, datum) in &data {
            let text = asking(datum);
            let (checked, found) = check(&parse(&text).tree);
            assert!(checked.is_sound(), "{text}{found:?}");
            let names = BTreeMap::from([("own".to_owned(), name.clone())]);
            let lines = matches(&text, &checked, &instance, &names);
            let line = lines.iter().find(|line| line.name == "own").unwrap();
            assert!(line.is_well(), "{} {name}: {line:?}", reader.name());
            let bound = bind(&checked, &instance, &names);
            assert!(bound.is_ok(), "{} {name}: {:?}\n{text}", reader.name(), bound.err());
        }
    }
}

/// What is told of a binding that does not work: at the `data` line, by both names, with the cell.
#[test]
fn what_does_not_fit_is_told_at_its_line() {
    let text =
        "data\n  V\n  w_i ∀ i ∈ V\nminimise\n  Σ_{i ∈ V} w_i z_i\nsubject to\n  z_i ≥ 1 ∀ i ∈ V\n";
    let (checked, _) = check(&parse(text).tree);
    let mut instance = read(Reader::Blocks, "V\na b\n\nheight by i\na 1\n\nQ = 4\n");
    let told = |instance: &Instance, name: &str| -> Vec<Diagnostic> {
        let names = BTreeMap::from([("w".to_owned(), name.to_owned())]);
        bind(&checked, instance, &names).err().unwrap_or_default()
    };
    for (name, code, words) in [
        ("height", "data.cell", ["w[b]", "height"]),
        ("Q", "data.shape", ["w (as Q)", "a number"]),
        ("nowhere", "data.lacks", ["w (as nowhere)", "height"]),
    ] {
        let found = told(&instance, name);
        assert_eq!(found.len(), 1, "{found:?}");
        assert_eq!(found[0].code, code);
        assert!(words.iter().all(|word| found[0].message.contains(word)), "{}", found[0].message);
        let line = text[..found[0].span.start].lines().count();
        assert_eq!(line, 3, "the line that declares w");
    }
    let cells = [("a", 1), ("b", 2)].map(|(label, n)| (vec![label.to_owned()], n.into()));
    instance.set("height", Datum::Table { arity: 1, cells: cells.into_iter().collect() });
    assert_eq!(told(&instance, "height"), []);
}

/// Binding a matrix of a thousand stops took two seconds in one step, in which nobody could stop
/// it. In slices it gives the same, to the last bit and to the last complaint.
#[test]
fn slices_of_any_size_bind_the_same() {
    let text = "data\n  V\n  A ⊆ V × V\n  c_{i,j} ≥ 3 ∀ (i,j) ∈ A\n  q_i = Σ_{j : (i,j) ∈ A} c_{i,j} \
        ∀ i ∈ V\nminimise\n  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}\nsubject to\n  \
        Σ_{j : (i,j) ∈ A} x_{i,j} ≥ q_i ∀ i ∈ V (leave)\n  x_{i,j} ≥ 0 ∀ (i,j) ∈ A\n";
    let (checked, _) = check(&parse(text).tree);
    let labels: Vec<String> = (0..40).map(|i| format!("stop {i}")).collect();
    let cells: Vec<_> = (0..1600).map(|i| Some(model::Number::from(2 + i % 17))).collect();
    let instance = Instance::round_trip(labels, &cells);
    let run = |ticks: u64| {
        let mut binding = Binding::new(&checked, &BTreeMap::new());
        let mut slices = 1;
        while binding.advance(ticks, &instance) == Progress::Working {
            slices += 1;
        }
        let bound = binding.finish().unwrap();
        let limits = Limits { nonzeros: 100_000 };
        let (model, told) = Expansion::new(bound, &BTreeMap::new(), limits).finish().unwrap();
        (slices, model::mps::write(&model).unwrap().text, told)
    };
    let (once, whole, told) = run(u64::MAX);
    assert_eq!(once, 1);
    assert!(told.iter().filter(|one| one.code == "data.range").count() > 40, "some are told");
    for ticks in [1, 97, 1_000] {
        let (slices, text, all) = run(ticks);
        // 1,560 cells that are read, and as many keys that are walked
        assert!(slices >= 3_000 / ticks, "{slices} slices of {ticks}");
        assert_eq!((text, all), (whole.clone(), told.clone()));
    }
}
