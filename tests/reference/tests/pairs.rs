//! MIPLIB 3 holds rival formulations of one instance: pasted as MPS, each pair gives a decision record
//! that states the published bounds and optima, and says how far the two are the same problem and
//! which relaxation is stronger.
//!
//! Bounds and optima: the catalogue of MIPLIB 3 (Bixby, Ceria, McZeal, Savelsbergh, Optima 58 (1998)
//! 12-15), columns "LP SOLN" and "BEST SOLN"; what the pairs are to each other stands at the head of
//! their files: `gesa2` is "same as gesa2_o, except that surrogate knapsacks have been added".
//! `HULLWARD_RECORDS` names a folder into which the records are written.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;

use engine::StudyRun;
use engine::native::{USUAL_SLICE, Watch, result, run_rival};
use hullward_tests_reference::{agree, open_data};
use record::results::{RivalResult, Status};
use record::scenario::{Field, Preset, Rival, Run, Scenario, Study};
use record::study::{Equivalence, EquivalenceKind, Order, OrderLevel, Relation, Report};
use report::decision::{Evidence, html, json, markdown};

const MIPLIB: &str = "MIPLIB 3";

/// A pair: files, published bounds of the relaxations, the best value known, and half a unit of the
/// last digit printed.
struct Pair {
    files: [&'static str; 2],
    bounds: [f64; 2],
    best: f64,
    digit: f64,
    /// Whether our own search closes both.
    closes: bool,
}

fn study(kind: &str) -> Study {
    let fields = [
        ("nodes", Field::Whole(40)),
        ("duels", Field::Whole(2)),
        ("mutants", Field::Flag(false)),
        ("rows", Field::Whole(2_000)),
    ];
    let fields = fields.map(|(name, field)| (name.to_owned(), field));
    Study { kind: kind.to_owned(), fields: BTreeMap::from(fields) }
}

/// The scenario as a person pastes it; `None` where a file lacks.
fn scenario(pair: &Pair) -> Option<Scenario> {
    let rival = |file: &str| {
        let text = open_data(file, MIPLIB)?;
        Some(Rival { mps: Some(text), ..Rival::default() })
    };
    let [a, b] = pair.files;
    Some(Scenario {
        title: format!("{a} or {b}?"),
        rivals: vec![rival(a)?, rival(b)?],
        run: Run { nodes: 20, best_known: Some(pair.best), ..Run::default() },
        studies: ["equivalence", "order", "ladder"].map(study).to_vec(),
        ..Scenario::default()
    })
}

/// What came out.
struct Found {
    results: Vec<RivalResult>,
    equivalence: Equivalence,
    order: Order,
    words: String,
}

fn found(pair: &Pair) -> Option<Found> {
    let mut scenario = scenario(pair)?;
    if pair.closes {
        // Production's settings, no limit of nodes.
        scenario.run = Run { nodes: 0, ..scenario.run.with(Preset::Production) };
    }
    let scenario = scenario;
    let run = |rival: usize| {
        let run = run_rival(&scenario, (0, rival), USUAL_SLICE, &mut |_| Watch::GoOn);
        result(&scenario, (0, rival), &run)
    };
    let results = vec![run(0), run(1)];
    let mut studies = Vec::new();
    for study in &scenario.studies {
        let mut run = StudyRun::new(&scenario, 0, study);
        while !run.advance(USUAL_SLICE) {}
        studies.extend(run.take().into_iter().map(|report| (String::new(), report)));
    }
    let evidence = Evidence {
        scenario: &scenario,
        results: &results,
        studies: &studies,
        facts: &[],
        statements: &[],
        typeset: &[],
        unit: "",
        engine: engine::VERSION,
        link: "",
    };
    let (words, page, object) = (markdown(&evidence), html(&evidence), json(&evidence));
    keep(pair, &[("md", &words), ("html", &page), ("json", &object)]);
    stated(pair, &results, [&words, &page, &object]);
    let (mut equivalence, mut order) = (None, None);
    for (_, report) in studies {
        match report {
            Report::Equivalence(found) => equivalence = Some(*found),
            Report::Order(found) => order = Some(*found),
            _ => {}
        }
    }
    Some(Found { results, equivalence: equivalence?, order: order?, words })
}

/// Writes the records where a folder is named.
fn keep(pair: &Pair, forms: &[(&str, &String)]) {
    let Some(folder) = std::env::var_os("HULLWARD_RECORDS") else { return };
    let name = pair.files[0].rsplit('/').next().unwrap().trim_end_matches(".mps");
    for (form, text) in forms {
        let path = std::path::Path::new(&folder).join(format!("{name}.{form}"));
        std::fs::write(path, text).unwrap();
    }
}

/// Published bounds and the best value stand in every form of the record, as they were computed.
fn stated(pair: &Pair, results: &[RivalResult], forms: [&String; 3]) {
    for (one, published) in results.iter().zip(pair.bounds) {
        let bound = one.root.as_ref().unwrap().bound.unwrap();
        let near = (bound - published).abs() <= pair.digit || agree(bound, published, 1e-9);
        assert!(near, "{:?}: {bound} for {published}", pair.files);
        for form in forms {
            let sentence = format!("{}: root bound {}", one.rival, ten(bound));
            assert!(form.contains(&sentence), "{sentence}\n{form}");
        }
    }
    let object: serde_json::Value = serde_json::from_str(forms[2]).unwrap();
    assert!(object["record"].as_array().unwrap().len() > 10);
    for form in forms {
        let sentence = format!("The best value known is {}", ten(pair.best));
        assert!(form.contains(&sentence), "{sentence}\n{form}");
    }
}

/// Ten significant digits and commas between thousands, as records print a value.
fn ten(value: f64) -> String {
    let rounded: f64 = format!("{value:.9e}").parse().unwrap();
    let text = rounded.to_string();
    let (whole, part) = text.split_once('.').map_or((text.as_str(), None), |(a, b)| (a, Some(b)));
    let digits: Vec<char> = whole.chars().collect();
    let mut out = String::new();
    for (place, digit) in digits.iter().enumerate() {
        if place > 0 && (digits.len() - place).is_multiple_of(3) {
            out.push(',');
        }
        out.push(*digit);
    }
    part.map_or(out.clone(), |part| format!("{out}.{part}"))
}

/// `a` is never weaker than `b`, which is certified by its rows.
fn stronger(found: &Found, [a, b]: [&str; 2]) {
    let order = &found.order;
    let relation =
        if order.rivals[0] == a { Relation::NeverWeaker } else { Relation::NeverStronger };
    assert_eq!((order.relation, order.level), (relation, OrderLevel::Certified), "{order:?}");
    let sentence = format!("{a} ⪰ {b}: {a} is never weaker than {b}");
    assert!(found.words.contains(&sentence), "{sentence}\n{}", found.words);
}

#[test]
fn pp08a_and_its_cuts() {
    let pair = Pair {
        files: ["miplib3/pp08a.mps", "miplib3/pp08aCUTS.mps"],
        bounds: [2_748.345_238_1, 5_480.606_156_3],
        best: 7_350.0,
        digit: 5e-8,
        closes: true,
    };
    let Some(found) = found(&pair) else { return };
    stronger(&found, ["B", "A"]);
    assert_ne!(found.equivalence.equivalent, Some(false));
    assert!(found.words.contains("Nothing that was tried tells A and B apart"), "{}", found.words);
    // Every column of the one is a column of the other.
    let columns: u32 = found.equivalence.shared.iter().map(|(_, columns)| columns).sum();
    assert_eq!((columns, found.results[0].columns), (240, 240));
    assert!(found.words.contains("the 240 columns that both name"), "{}", found.words);
    // The value known is a cut-off: a plan as good as it need not be found to prove it.
    for one in &found.results {
        let search = one.search.as_ref().unwrap();
        assert_eq!((one.status, search.bound), (Status::Optimal, Some(7_350.0)), "{}", one.rival);
        assert!(search.incumbent.is_none_or(|value| (value - 7_350.0).abs() < 1e-6));
        let sentence = format!("; optimum 7350 after {} nodes", search.nodes);
        assert!(found.words.replace(',', "").contains(&sentence), "{sentence}\n{}", found.words);
    }
    let sentence = "The best possible plan costs 7,350: proved.";
    assert!(found.words.contains(sentence), "{}", found.words);
}

#[test]
fn qnet1_and_as_it_came() {
    let pair = Pair {
        files: ["miplib3/pairs/qnet1.mps", "miplib3/pairs/qnet1_o.mps"],
        bounds: [14_274.102_667, 12_095.571_667],
        best: 16_029.692_681,
        digit: 5e-7,
        closes: false,
    };
    let Some(found) = found(&pair) else { return };
    stronger(&found, ["A", "B"]);
    assert_ne!(found.equivalence.equivalent, Some(false));
    let columns: u32 = found.equivalence.shared.iter().map(|(_, columns)| columns).sum();
    assert_eq!(columns, 1_541);
}

/// The two name no column alike: nothing is claimed of their plans, and the bounds are the same.
fn named_apart(pair: &Pair) {
    let Some(found) = found(pair) else { return };
    let verdict = &found.equivalence;
    assert!(verdict.shared.is_empty() && verdict.counterexample.is_none(), "{verdict:?}");
    assert_ne!(verdict.equivalent, Some(false));
    if verdict.equivalent == Some(true) {
        assert_eq!(verdict.kind, EquivalenceKind::ThisObjective);
    }
    let order = &found.order;
    assert_eq!((order.relation, order.level), (Relation::Equal, OrderLevel::Observed));
    for sentence in ["they name no column alike", "A and B have the same bound"] {
        assert!(found.words.contains(sentence), "{sentence}\n{}", found.words);
    }
}

#[test]
fn gesa2_and_as_it_came() {
    named_apart(&Pair {
        files: ["miplib3/pairs/gesa2.mps", "miplib3/pairs/gesa2_o.mps"],
        bounds: [25_476_489.678; 2],
        best: 25_779_856.372,
        digit: 5e-4,
        closes: false,
    });
}

#[test]
fn gesa3_and_as_it_came() {
    named_apart(&Pair {
        files: ["miplib3/pairs/gesa3.mps", "miplib3/pairs/gesa3_o.mps"],
        bounds: [27_833_632.451; 2],
        best: 27_991_042.648,
        digit: 5e-4,
        closes: false,
    });
}
