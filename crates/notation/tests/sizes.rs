//! A formulation that would be too large is refused before it is written: with its family, its
//! size in closed form, and a mend.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use crate::common::kitchen;
use hullward_notation::{Diagnostic, Expansion, Limits, bind, check, parse};
use instance::Instance;
use model::Model;

fn text(quantifier: &str) -> String {
    let index = ["i", "j", "k", "l"].iter().filter(|name| quantifier.contains(**name));
    let terms: Vec<String> = index.map(|name| format!("z_{name}")).collect();
    format!(
        "data\n  V\n  A ⊆ V × V\n  r ∈ V\nminimise\n  Σ_{{i ∈ V}} z_i\nsubject to\n  z_i ≥ 0 ∀ i ∈ V\n  \
         {} + z_r ≥ 1 ∀ {quantifier} (rows)\n",
        terms.join(" + ")
    )
}

fn expanded(
    text: &str,
    instance: &Instance,
    nonzeros: usize,
) -> Result<(Model, Vec<Diagnostic>), Vec<Diagnostic>> {
    let bound = bind(&check(&parse(text).tree).0, instance, &Default::default())?;
    Expansion::new(bound, &Default::default(), Limits { nonzeros }).finish()
}

/// The number after "= " in a refusal, with its words before.
fn refusal(found: &[Diagnostic]) -> (String, u64) {
    let message = &found[0].message;
    let (words, rest) = message.split_once(" = ").expect("a closed form");
    let digits: String = rest.chars().take_while(|c| c.is_ascii_digit() || *c == ',').collect();
    (words.to_owned(), digits.replace(',', "").parse().expect("a count"))
}

#[test]
fn the_closed_form_is_the_number_of_rows_or_less() {
    for (quantifier, words) in [
        ("i ∈ V, j ∈ V", "|V|·|V|"),
        ("i, j ∈ V : i ≠ j", "|V|·(|V| − 1)"),
        ("i, j, k ∈ V : i ≠ j, j ≠ k, i ≠ k", "|V|·(|V| − 1)·(|V| − 2)"),
        ("i, j, k ∈ V : i ≠ j, i ≠ k", "|V|·(|V| − 1)·(|V| − 1)"),
        ("i, j, k ∈ V : i ≠ k, j ≠ k", "at least |V|·|V|·(|V| − 2)"),
        ("i, j ∈ V : i ≠ r, j ≠ r, i ≠ j", "at least (|V| − 1)·(|V| − 2)"),
        ("i, j ∈ V : i < j", "at least C(|V|, 2)"),
        ("i, j, k ∈ V : i < j, j < k", "at least C(|V|, 3)"),
        ("i, j, k ∈ V : i < j, k ≠ i", "at least C(|V|, 2)·(|V| − 1)"),
        ("(i,j) ∈ A, k ∈ V", "|A|·|V|"),
    ] {
        let text = text(quantifier);
        let (told, count) = refusal(&expanded(&text, &kitchen(), 5).unwrap_err());
        assert!(told.ends_with(&format!("would have {words}")), "{quantifier}: {told}");
        let model = expanded(&text, &kitchen(), 100_000).expect("small").0;
        let rows = u64::from(model.families()[0].rows.end - model.families()[0].rows.start);
        let exact = !words.starts_with("at least");
        assert!(count == rows || (!exact && count <= rows), "{quantifier}: {count}, {rows} rows");
    }
}

/// A thousand stops, three indices: a milliard of rows less a little.
#[test]
fn a_milliard_of_rows_is_refused_before_the_first() {
    let labels: Vec<String> = (0..1_000).map(|k| format!("P{k}")).collect();
    let blocks = format!("V\n{}\n\nA by i, j\nP0 P1\n\nr = P0\n", labels.join("\n"));
    let reading = instance::read(&blocks, Some(instance::Reader::Blocks));
    let instance = reading.instance.unwrap_or_else(|| panic!("{:?}", reading.complaints));
    let found =
        expanded(&text("i, j, k ∈ V : i ≠ j, j ≠ k, i ≠ k"), &instance, 2_000_000).unwrap_err();
    assert_eq!(
        found[0].message,
        "(rows) would have |V|·(|V| − 1)·(|V| − 2) = 997,002,000 rows; 2,000,000 can be written"
    );
    assert!(found[0].mends.iter().any(|mend| mend.label.contains("on demand")));
    assert!(found[0].span.start > 0, "it has a place");
    // So are columns, and the terms of an objective.
    let columns =
        text("i ∈ V").replace("z_i ≥ 0 ∀ i ∈ V", "z_i ≥ 0 ∀ i ∈ V\n  y_{i,j,k} ≥ 0 ∀ i, j, k ∈ V");
    let found = expanded(&columns, &instance, 2_000_000).unwrap_err();
    assert!(found[0].message.starts_with("(y) would have |V|·|V|·|V| = 1,000,000,000 columns"));
    let terms = text("i ∈ V").replace("Σ_{i ∈ V} z_i", "Σ_{i ∈ V, j ∈ V, k ∈ V} z_i");
    let found = expanded(&terms, &instance, 2_000_000).unwrap_err();
    assert!(found[0].message.contains("|V|·|V|·|V| = 1,000,000,000 terms"), "{found:?}");
}

/// The form over radii (Elloumi, Labbé & Pochet 2004) of a hundred sites: which pairs are the
/// first of their distance asks of each pair whether none before it is as long, and the answer
/// used to be counted to its end, ten thousand steps for each of ten thousand pairs.
#[test]
fn radii_of_a_hundred_sites_are_told_apart_in_time() {
    let text = "data\n  I\n  J\n  p\n  d_{i,j} ∀ i ∈ I, j ∈ J\ndefinitions\n  \
        b = max_{i ∈ I, j ∈ J} d_{i,j}\n  K = {(i,j) ∈ I × J : d_{i,j} < b, \
        |{(h,k) ∈ I × J : d_{h,k} = d_{i,j}, h < i ∨ h = i ∧ k < j}| = 0}\nminimise\n  \
        Σ_{(i,j) ∈ K} z_{i,j}\nsubject to\n  z_{i,j} + Σ_{h ∈ I : d_{h,k} ≤ d_{i,j}} y_h ≥ 1 \
        ∀ (i,j) ∈ K, k ∈ J (reach)\n  Σ_{i ∈ I} y_i = p (open)\n  y_i ∈ {0,1} ∀ i ∈ I\n  \
        z_{i,j} ∈ {0,1} ∀ (i,j) ∈ K\n";
    let labels: Vec<String> = (0..100).map(|at| format!("v{at}")).collect();
    let mut instance = Instance::new(instance::Reader::Blocks);
    let mut cells = std::collections::BTreeMap::new();
    for (i, from) in labels.iter().enumerate() {
        for (j, to) in labels.iter().enumerate() {
            let distance = i.abs_diff(j).pow(2) % 97;
            cells.insert(vec![from.clone(), to.clone()], model::Number::from(distance));
        }
    }
    instance.set("I", instance::Datum::Labels(labels.clone()));
    instance.set("J", instance::Datum::Labels(labels));
    instance.set("p", instance::Datum::Number(model::Number::from(5)));
    instance.set("d", instance::Datum::Table { arity: 2, cells });
    // squares modulo 97: 48 besides 0, and the largest of them is not asked for
    let (model, _) = expanded(text, &instance, 2_000_000).unwrap();
    assert_eq!(model.columns().len(), 100 + 48);
    assert_eq!(model.row_count(), 48 * 100 + 1);
}
