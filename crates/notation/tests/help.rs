//! The help: every code that the sources give has an entry, whose example provokes that code and
//! no other, at the place and with the mends that `fixtures/help.txt` records, and whose mended
//! form provokes nothing. A mend that changes the text removes what it is a mend for.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use std::collections::{BTreeMap, BTreeSet};

use crate::common::{kitchen, shown};
use ::model::FamilyState;
use hullward_notation::{
    Diagnostic, Expansion, Limits, Severity, assumed, bind, check, codes, help, line_column, model,
    parse, utf16_range,
};

/// Codes that no text alone can give, each with what gives it.
const BY_OTHER_MEANS: [(&str, &str); 17] = [
    ("lint.empty-rows", "a model in MPS"),
    ("lint.too-large", "more than 60,000 entries"),
    ("syntax.too-deep", "a hundred brackets"),
    ("syntax.too-long", "two million bytes"),
    ("syntax.number-too-long", "four hundred digits"),
    ("subset.on-demand", "a family that is switched in"),
    ("data.assumed", "a line of the instance's reader"),
    ("data.matched", "an instance with other names"),
    ("data.turned", "a table whose rows are the second index"),
    ("data.either-way", "a table that fits two sets both ways"),
    ("data.whole", "a value that is not whole"),
    ("data.no-family", "a family that is switched and is not there"),
    ("data.unavailable", "a definition whose reason is told elsewhere"),
    ("data.unsound", "a formulation with errors that is bound all the same"),
    ("size.steps", "a family that walks far for few rows, within a small limit"),
    ("size.indices", "a line of two hundred letters"),
    ("size.model", "more than four thousand million columns"),
];

/// Every code in the sources of the crate.
fn in_the_sources() -> BTreeSet<String> {
    let mut found = BTreeSet::new();
    let folder = format!("{}/src/diagnostic", env!("CARGO_MANIFEST_DIR"));
    for entry in std::fs::read_dir(folder).unwrap() {
        let text = std::fs::read_to_string(entry.unwrap().path()).unwrap();
        for piece in text.split('"').skip(1).step_by(2) {
            let code = piece.split_once('.').is_some_and(|(family, rest)| {
                let plain = |c: char| c.is_ascii_lowercase() || c == '-';
                !rest.is_empty() && family.chars().all(plain) && rest.chars().all(plain)
            });
            if code {
                found.insert(piece.to_owned());
            }
        }
    }
    found
}

fn said(text: &str) -> Vec<Diagnostic> {
    match model(text, &kitchen(), &BTreeMap::new(), &BTreeMap::new()) {
        Ok((_, found)) | Err(found) => found,
    }
}

/// What is said but for notes, or with them where the code is a note.
fn codes_said(found: &[Diagnostic], code: &str) -> BTreeSet<&'static str> {
    let notes = found.iter().any(|d| d.code == code && d.severity == Severity::Info);
    found.iter().filter(|d| notes || d.severity != Severity::Info).map(|d| d.code).collect()
}

#[test]
fn every_code_has_an_entry_and_no_entry_lacks_its_code() {
    let written: BTreeSet<String> = codes().map(|entry| entry.code.to_owned()).collect();
    assert_eq!(written, in_the_sources());
    for entry in codes() {
        assert_eq!(help(entry.code), Some(entry));
        assert!(entry.meaning.len() > 40 && !entry.meaning.contains('\n'), "{}", entry.code);
        let shown_by_text = !entry.example.is_empty();
        let other = BY_OTHER_MEANS.iter().any(|(code, _)| *code == entry.code);
        assert!(shown_by_text != other, "{}", entry.code);
    }
    assert_eq!(help("name.nothing"), None);
}

#[test]
fn examples_provoke_their_code_and_mended_ones_do_not() {
    let mut failures = String::new();
    for entry in codes().filter(|entry| !entry.example.is_empty()) {
        let (fails, mended) = (entry.fails(), entry.mended());
        let found = said(&fails);
        if codes_said(&found, entry.code) != BTreeSet::from([entry.code]) {
            failures += &format!("{} fails with\n{}", entry.code, shown(&fails, &found));
        }
        let found = said(&mended);
        if found.iter().any(|d| d.severity != Severity::Info || d.code == entry.code) {
            failures += &format!("{} mended says\n{}", entry.code, shown(&mended, &found));
        }
    }
    assert!(failures.is_empty(), "\n{failures}");
}

/// The codes of [`BY_OTHER_MEANS`], each provoked by them but for those that take minutes or no
/// text at all.
#[test]
fn what_no_short_text_shows_is_told_too() {
    let least = "minimise\n  z\nsubject to\n  z ≥ 0\n";
    let stops = |head: &str, rows: &str| {
        format!(
            "data\n  V\n{head}minimise\n  Σ_{{i ∈ V}} z_i\nsubject to\n{rows}  z_i ≥ 0 ∀ i ∈ V\n"
        )
    };
    let texts = [
        (
            "syntax.too-deep",
            least.replace("≥ 0", &format!("≥ {}0{}", "(".repeat(101), ")".repeat(101))),
        ),
        ("syntax.number-too-long", least.replace("≥ 0", &format!("≥ {}", "9".repeat(401)))),
        ("syntax.too-long", least.replace('z', &"z".repeat(1_000_000))),
        ("data.whole", stops("  p_i ∈ ℤ ∀ i ∈ V\n", "  Σ_{i ∈ V} p_i z_i ≥ 1 (one)\n")),
        ("data.assumed", stops("  A ⊆ V × V\n", "  Σ_{(i,j) ∈ A} z_i ≥ 1 (one)\n")),
        ("size.indices", stops("", &format!("  z_i ≥ 1 ∀ i ∈ V{} (one)\n", many_indices()))),
    ];
    for (code, text) in &texts {
        let mut instance = kitchen();
        instance.set("p", half_prices());
        instance.assumed.insert("A".to_owned());
        let (Ok((_, found)) | Err(found)) =
            model(text, &instance, &BTreeMap::new(), &BTreeMap::new());
        assert!(found.iter().any(|d| d.code == *code), "{code}\n{}", shown(text, &found));
    }
    let subsets = stops("", "  Σ_{i ∈ S} z_i ≥ 1 ∀ S ⊂ V : |S| ≥ 1 (sets)\n");
    let states = |name: &str| BTreeMap::from([(name.to_owned(), FamilyState::In)]);
    let switched = |name: &str, stops: usize| {
        let (Ok((_, found)) | Err(found)) =
            model(&subsets, &crate::common::stops(stops), &BTreeMap::new(), &states(name));
        found.iter().map(|d| d.code).collect::<Vec<_>>()
    };
    assert!(switched("sets", 14).contains(&"subset.on-demand"));
    assert!(!switched("sets", 5).contains(&"subset.on-demand"));
    assert!(switched("others", 5).contains(&"data.no-family"));
    let far = stops("", "  z_i ≥ 1 ∀ i ∈ V, k ∈ {1..1000} : k = 1 (one)\n");
    let (checked, _) = check(&parse(&far).tree);
    let bound = bind(&checked, &kitchen(), &BTreeMap::new()).unwrap();
    let limits = Limits { nonzeros: 10 };
    let stopped = Expansion::new(bound, &BTreeMap::new(), limits).finish().unwrap_err();
    assert_eq!(stopped[0].code, "size.steps", "{stopped:?}");
    let (checked, _) = check(&parse("minimise\n  z\n").tree);
    let unsound = bind(&checked, &kitchen(), &BTreeMap::new()).unwrap_err();
    assert_eq!(unsound[0].code, "data.unsound");
    let drives = "  A ⊆ V × V  drives\n  w_{i,j} ∀ (i,j) ∈ A  minutes\n";
    let other = stops(drives, "  z_i ≥ w_{i,j} ∀ (i,j) ∈ A (one)\n");
    let (checked, _) = check(&parse(&other).tree);
    let (_, matched) = assumed(&other, &checked, &crate::common::stops(5), &BTreeMap::new());
    assert!(matched.iter().any(|d| d.code == "data.matched"), "{matched:?}");
}

/// A table over stops and colours, given by colours and stops; and over two sets of the same labels.
#[test]
fn the_order_of_a_table_is_told() {
    let text = "data\n  V\n  K\n  w_{i,k} ∀ i ∈ V, k ∈ K\nminimise\n  Σ_{i ∈ V} Σ_{k ∈ K} w_{i,k} x_{i,k}\n\
        subject to\n  x_{i,k} ≥ 1 ∀ i ∈ V, k ∈ K (least)\n  x_{i,k} ≥ 0 ∀ i ∈ V, k ∈ K\n";
    let labels = |of: &[&str]| of.iter().map(|&label| label.to_owned()).collect::<Vec<_>>();
    let costs = |sides: [&[&str]; 2], names: &BTreeMap<String, String>| {
        let mut instance = instance::Instance::new(instance::Reader::Blocks);
        instance.set("V", instance::Datum::Labels(labels(&["a", "b"])));
        let colours: &[&str] = if sides[0] == sides[1] { &["b", "a"] } else { &["red", "blue"] };
        instance.set("K", instance::Datum::Labels(labels(colours)));
        let pairs =
            sides[0].iter().flat_map(|one| sides[1].iter().map(move |other| [*one, *other]));
        let cells = pairs.zip(1_u32..).map(|(key, value)| (labels(&key), value.into()));
        instance.set("w", instance::Datum::Table { arity: 2, cells: cells.collect() });
        let (model, found) = model(text, &instance, names, &BTreeMap::new()).unwrap();
        let cost =
            |c: u32| ::model::nearest_f64(model.numbers().exact(model.columns()[c as usize].cost));
        ((0..4).map(cost).collect::<Vec<_>>(), found.iter().map(|d| d.code).collect::<Vec<_>>())
    };
    let none = BTreeMap::new();
    let (stops, colours): (&[&str], &[&str]) = (&["a", "b"], &["red", "blue"]);
    assert_eq!(costs([stops, colours], &none), (vec![1.0, 2.0, 3.0, 4.0], vec![]));
    assert_eq!(costs([colours, stops], &none), (vec![1.0, 3.0, 2.0, 4.0], vec!["data.turned"]));
    // rows a b, columns a b; the columns of the model come as b a
    assert_eq!(costs([stops, stops], &none), (vec![2.0, 1.0, 4.0, 3.0], vec!["data.either-way"]));
    let given = BTreeMap::from([("w".to_owned(), "w, turned round".to_owned())]);
    assert_eq!(costs([stops, stops], &given), (vec![3.0, 1.0, 4.0, 2.0], vec![]));
}

fn many_indices() -> String {
    let pairs = ('a'..='h').flat_map(|a| ('a'..='d').map(move |b| format!(", {a}{b} ∈ V")));
    pairs.collect()
}

fn half_prices() -> instance::Datum {
    let half = ::model::Number::ONE / ::model::Number::from(2);
    let names = ["Ash", "Birch", "Cedar", "Dogwood", "Elm"];
    let cells = names.iter().map(|name| (vec![(*name).to_owned()], half.clone())).collect();
    instance::Datum::Table { arity: 1, cells }
}

/// Code, place in characters and in UTF-16 units, message, mends (those of one click in ‹›).
fn record(text: &str, found: &Diagnostic) -> String {
    let (line, column) = line_column(text, found.span.start);
    let units = utf16_range(text, &found.span);
    let mends: String = found
        .mends
        .iter()
        .map(|mend| match &mend.edit {
            Some(edit) => format!("\n  ‹{}› {}", mend.label, edit.text.trim().replace('\n', " ⏎ ")),
            None => format!("\n  {}", mend.label),
        })
        .collect();
    format!(
        "{} {line}:{column} [{}..{}] {}{mends}\n",
        found.code, units.start, units.end, found.message
    )
}

/// Told by the test when it fails, so that it can be read and put in place.
#[test]
fn places_messages_and_mends_are_as_recorded() {
    let mut told = String::new();
    for entry in codes().filter(|entry| !entry.example.is_empty()) {
        let text = entry.fails();
        let found = said(&text);
        told.extend(found.iter().filter(|d| d.code == entry.code).map(|d| record(&text, d)));
    }
    let path = format!("{}/tests/fixtures/help.txt", env!("CARGO_MANIFEST_DIR"));
    let recorded = std::fs::read_to_string(&path).unwrap_or_default();
    if told != recorded {
        std::fs::write(std::env::temp_dir().join("hullward-help.txt"), &told).unwrap();
        let differs = told.lines().zip(recorded.lines()).find(|(a, b)| a != b);
        panic!("{differs:?}: what is told stands in hullward-help.txt of the temporary folder");
    }
}

/// The text with the edit of a mend made.
fn edited(text: &str, edit: &hullward_notation::Edit) -> String {
    format!("{}{}{}", &text[..edit.span.start], edit.text, &text[edit.span.end..])
}

fn texts() -> Vec<String> {
    // what a limit ends takes its time, and has no mend of one click
    let quick = codes().filter(|entry| !entry.code.starts_with("size."));
    let mut texts: Vec<String> = quick.map(|entry| entry.fails()).collect();
    for folder in ["err", "ok"] {
        let path = format!("{}/tests/fixtures/{folder}", env!("CARGO_MANIFEST_DIR"));
        for entry in std::fs::read_dir(path).unwrap() {
            let path = entry.unwrap().path();
            if !path.ends_with("work.txt") && !path.ends_with("too-large.txt") {
                texts.push(std::fs::read_to_string(path).unwrap());
            }
        }
    }
    texts
}

#[test]
fn a_mend_of_one_click_removes_what_it_mends() {
    let mut clicked = BTreeSet::new();
    for text in texts() {
        let all = said(&text);
        for found in &all {
            for edit in found.mends.iter().filter_map(|mend| mend.edit.as_ref()) {
                let mended = edited(&text, edit);
                let still = said(&mended);
                let times = |all: &[Diagnostic]| {
                    let same = |d: &&Diagnostic| d.code == found.code && d.message == found.message;
                    all.iter().filter(same).count()
                };
                assert!(
                    times(&still) < times(&all),
                    "{}\n{mended}\n{}",
                    found.code,
                    shown(&mended, &still)
                );
                let syntax = parse(&mended).diagnostics.len() <= parse(&text).diagnostics.len();
                assert!(syntax, "{}\n{mended}", found.code);
                clicked.insert(found.code);
            }
        }
    }
    assert!(clicked.len() >= 6, "{clicked:?}");
    assert!(check(&parse("").tree).1.len() == 1);
}
