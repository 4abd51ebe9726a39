//! Pitfalls of a model that comes as MPS, without a text: each code that such a model can give, on
//! a small file that has the pitfall, and silence on the same file without it.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

use std::collections::BTreeSet;

use hullward_notation::lint_rows;

/// What is said of a model of these sections.
fn said(rows: &str, columns: &str, right: &str, bounds: &str) -> Vec<(&'static str, String)> {
    let lines =
        |text: &str| text.split(';').map(|line| format!(" {}\n", line.trim())).collect::<String>();
    let text = format!(
        "NAME TRIAL\nROWS\n N COST\n{}COLUMNS\n{}RHS\n{}BOUNDS\n{}ENDATA\n",
        lines(rows),
        lines(columns),
        lines(right),
        lines(bounds)
    );
    let (model, _) = model::mps::read(&text).unwrap_or_else(|found| panic!("{text}{found:?}"));
    lint_rows(&model).into_iter().map(|found| (found.code, found.message)).collect()
}

/// Rows, columns, right-hand sides and bounds, first with the pitfall and then without it.
struct Case {
    code: &'static str,
    with: [&'static str; 4],
    without: [&'static str; 4],
    message: &'static str,
}

const CASES: [Case; 7] = [
    Case {
        code: "lint.empty-rows",
        with: ["L A; L B", "X COST 1 A 1; Y COST 2 A 1", "R A 4 B 3", "UP D X 4; UP D Y 4"],
        without: ["L A; L B", "X COST 1 A 1; Y COST 2 A 1 B 1", "R A 4 B 3", "UP D X 4; UP D Y 4"],
        message: "the row B has no entry",
    },
    Case {
        code: "lint.big-m",
        with: ["L A", "X COST 1 A 1; Y COST 2 A -50000", "R A 0", "UP D X 40; BV D Y"],
        without: ["L A", "X COST 1 A 1; Y COST 2 A -40", "R A 0", "UP D X 40; BV D Y"],
        message: "40",
    },
    Case {
        code: "lint.endless",
        with: ["G A", "X COST -1 A 1; Y COST 2 A 1", "R A 2", "PL D X; UP D Y 3"],
        without: ["G A", "X COST -1 A 1; Y COST 2 A 1", "R A 2", "UP D X 9; UP D Y 3"],
        message: "X grows",
    },
    Case {
        code: "lint.free",
        with: [
            "E A",
            "X COST 0 A 1; Y COST 1 A 1; Z COST 1 A 2",
            "R A 2",
            "FR D X; MI D Y; PL D Z",
        ],
        without: [
            "E A",
            "X COST 0 A 1; Y COST 1 A 1; Z COST 1 A 2",
            "R A 2",
            "UP D X 5; UP D Y 5; UP D Z 5",
        ],
        message: "X is bounded nowhere",
    },
    Case {
        code: "lint.twin-rows",
        with: ["L A; L B", "X COST 1 A 1 B 2; Y COST 2 A 1 B 2", "R A 4 B 8", "UP D X 4; UP D Y 4"],
        without: [
            "L A; L B",
            "X COST 1 A 1 B 2; Y COST 2 A 1 B 3",
            "R A 4 B 8",
            "UP D X 4; UP D Y 4",
        ],
        message: "say what another row says",
    },
    Case {
        code: "lint.twin-columns",
        with: [
            "L A; G B",
            "X COST 1 A 1 B 2; Y COST 1 A 1 B 2; Z COST 3 A 5 B 1",
            "R A 9 B 2",
            "BV D X; BV D Y; BV D Z",
        ],
        without: [
            "L A; G B",
            "X COST 1 A 1 B 2; Y COST 4 A 1 B 2; Z COST 3 A 5 B 1",
            "R A 9 B 2",
            "BV D X; BV D Y; BV D Z",
        ],
        message: "has a twin",
    },
    Case {
        code: "lint.within-clique",
        with: [
            "L A; L B",
            "X COST 1 A 1 B 1; Y COST 2 A 1 B 1; Z COST 3 B 1",
            "R A 1 B 1",
            "BV D X; BV D Y; BV D Z",
        ],
        without: [
            "L A; L B",
            "X COST 1 A 1 B 1; Y COST 2 A 1; Z COST 3 B 1",
            "R A 1 B 1",
            "BV D X; BV D Y; BV D Z",
        ],
        message: "A within B",
    },
];

#[test]
fn each_pitfall_of_an_mps_model_is_told() {
    let mut wrong = String::new();
    for case in &CASES {
        let [with, without] = [case.with, case.without]
            .map(|[rows, columns, right, bounds]| said(rows, columns, right, bounds));
        let found =
            with.iter().any(|(code, text)| *code == case.code && text.contains(case.message));
        let silent = without.iter().all(|(code, _)| *code != case.code);
        if !found || !silent {
            wrong += &format!("{}: {with:?} and without it {without:?}\n", case.code);
        }
    }
    assert!(wrong.is_empty(), "{wrong}");
}

/// The codes that `lint_rows` can give are those of its parts, and each has a case above; a model
/// that is too large is told of instead.
#[test]
fn no_pitfall_of_mps_is_without_a_case() {
    let source = include_str!("../src/lint/mod.rs");
    let rows = source.split("pub fn lint_rows").nth(1).unwrap().split("\n}\n").next().unwrap();
    let parts: BTreeSet<&str> =
        rows.split("::lint(").filter_map(|p| p.rsplit(' ').next()).collect();
    let parts: Vec<&str> = parts
        .into_iter()
        .filter(|p| p.chars().all(|c| c == '_' || c.is_ascii_lowercase()))
        .collect();
    assert_eq!(parts, ["big_m", "cliques", "columns", "empty", "twins"]);
    let codes: BTreeSet<&str> = CASES.iter().map(|case| case.code).collect();
    assert_eq!(codes.len(), 7);
}
