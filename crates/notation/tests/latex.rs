//! The LaTeX of every shipped formulation and fixture reads back as the same tree, and so does
//! that of random texts.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use crate::common::shown;
use hullward_notation::{latex, parse, print};
use proptest::prelude::*;
use std::path::Path;

/// All texts under a folder.
fn texts(folder: &Path, found: &mut Vec<(String, String)>) {
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            texts(&path, found);
        } else if path.extension().is_some_and(|ending| ending == "txt") {
            found.push((path.display().to_string(), std::fs::read_to_string(&path).unwrap()));
        }
    }
}

fn reads_back(text: &str) -> Result<(), TestCaseError> {
    let parsed = parse(text);
    if parsed.diagnostics.is_empty() {
        let printed = latex(&parsed.tree);
        let again = parse(&printed);
        let found = shown(&printed, &again.diagnostics);
        prop_assert!(again.diagnostics.is_empty(), "{}\n{}", printed, found);
        prop_assert_eq!(&parsed.tree, &again.tree, "{}", printed);
        prop_assert_eq!(latex(&again.tree), printed);
        prop_assert_eq!(print(&again.tree), print(&parsed.tree));
    }
    Ok(())
}

#[test]
fn shipped_texts_and_fixtures_read_back() {
    let here = Path::new(env!("CARGO_MANIFEST_DIR"));
    let mut found = Vec::new();
    texts(&here.join("../catalogue/formulations"), &mut found);
    let shipped = found.len();
    texts(&here.join("tests/fixtures/ok"), &mut found);
    assert!(shipped >= 17 && found.len() > shipped, "{} texts", found.len());
    for (name, text) in found {
        assert!(parse(&text).diagnostics.is_empty(), "{name}");
        if let Err(error) = reads_back(&text) {
            panic!("{name}: {error}");
        }
    }
}

/// A text whose lines are put together from small grammars.
fn formulations() -> impl Strategy<Value = String> {
    let atom = prop::sample::select(
        &[
            "x_{i,j}",
            "c_{ij} x_{ij}",
            "dist_{i,j}",
            "2",
            "(n − 1)",
            "λ_i",
            "\\bar μ_{t−1}",
            "c_{\\max}",
            "x^+",
            "y_i^k",
            "Σ_{j : (i,j) ∈ A} x_{i,j}",
            "Σ_{t ∈ {1..n}} (y_t + 1)",
            "∏_{t ∈ T} a_t",
            "|S ∖ {r}|",
            "⌈n / 2⌉",
            "⌊a⌋",
            "max(1, n)",
            "−u_j",
            "n^{2}",
            "(a / b)^2",
            "3.25",
            "x(δ⁺(S))",
            "(a mod 2)",
        ][..],
    );
    let operator = prop::sample::select(&[" + ", " − ", " ", " · ", " / "][..]);
    let expression = (atom.clone(), prop::collection::vec((operator, atom), 0..4));
    let expression = expression.prop_map(|(first, rest)| {
        rest.iter().fold(first.to_owned(), |all, (operator, next)| all + operator + next)
    });
    let grouped = (expression.clone(), prop::sample::select(&["", "2 ", "f − ", "a / "][..]))
        .prop_map(|(inner, before)| format!("{before}({inner})"));
    let expression = prop_oneof![expression, grouped];
    let relation = prop::sample::select(&[" ≤ ", " = ", " ≥ ", " ∈ "][..]);
    let quantifier = prop::sample::select(
        &[
            "",
            "  ∀ i ∈ V",
            "  ∀ (i,j) ∈ A : i ≠ r ∧ ¬ j = r",
            ", i, k ∈ V",
            "  ∀ S ⊂ V : S ≠ ∅, |S| odd ∨ r ∈ S",
            "  ∀ t ∈ {1..n}, s ∈ {q ∈ T : q < t}",
            "  ∀ C ⊆ V : C clique in E",
        ][..],
    );
    let label = prop::sample::select(&["", "  (leave)", "  \\tag{7}", "  \\tag{a_1}"][..]);
    let line = (expression.clone(), relation, expression.clone(), quantifier, label)
        .prop_map(|(a, relation, b, q, l)| format!("  {a}{relation}{b}{q}{l}\n\n"));
    (expression, prop::collection::vec(line, 1..6)).prop_map(|(objective, lines)| {
        format!(
            "Cuts & flows\n\ndata\n  V  stops\n  A ⊆ V × V \\text{{a_b}}\nminimise\n  2 + {objective}\nsubject to\n{}",
            lines.concat()
        )
    })
}

proptest! {
    #![proptest_config(ProptestConfig {
        cases: 400,
        failure_persistence: None,
        ..ProptestConfig::default()
    })]

    #[test]
    fn random_formulations_read_back(text in formulations()) {
        reads_back(&text)?;
    }
}
