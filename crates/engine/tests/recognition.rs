//! The table of families over subsets in the specification of the notation, row by row: what is
//! written, the method that is chosen for it, and whether its bound is exact. Fourteen places have
//! 16,384 subsets, so nothing is listed unless its row says so.

#![allow(clippy::expect_used, clippy::panic, reason = "a test's own helpers")]

use std::collections::BTreeMap;
use std::fmt::Write as _;

use model::{FamilyState, SubsetFamilyId};
use separate::{Exactness, Separator};

const PLACES: usize = 14;

/// Labels, arcs, edges, weights and a graph of conflicts.
fn instance() -> instance::Instance {
    let mut text = String::from("V\n");
    let pairs = || (1..=PLACES).flat_map(|i| (1..=PLACES).map(move |j| (i, j)));
    for i in 1..=PLACES {
        let _ = write!(text, "p{i} ");
    }
    text += "\n\nA by i, j\n";
    pairs().filter(|(i, j)| i != j).for_each(|(i, j)| {
        let _ = writeln!(text, "p{i} p{j}");
    });
    text += "\nE by i, j\n";
    pairs().filter(|(i, j)| i < j).for_each(|(i, j)| {
        let _ = writeln!(text, "p{i} p{j}");
    });
    text += "\nd by i\n";
    (1..=PLACES).for_each(|i| {
        let _ = writeln!(text, "p{i} {}", 3 + i % 5);
    });
    text += "\nR\np2 p3 p5\n\nr = p1\nQ = 12\nlarge = 4000000\n";
    instance::read(&text, None).instance.expect("an instance")
}

const HEAD: &str = "data\n  V\n  A ⊆ V × V\n  E ⊆ V × V\n  R ⊆ V\n  r ∈ V\n  Q\n  large\n  d_i ∀ i ∈ V\n\
    minimise\n  Σ_{(i,j) ∈ A} x_{i,j} + Σ_{(i,j) ∈ E} y_{i,j} + Σ_{i ∈ V} z_i\nsubject to\n  \
    x_{i,j} ∈ {0,1}  ∀ (i,j) ∈ A\n  y_{i,j} ∈ {0,1}  ∀ (i,j) ∈ E\n  z_i ∈ {0,1}  ∀ i ∈ V\n";

const DEGREES: &str = "  Σ_{j : (i,j) ∈ A} x_{i,j} = 1  ∀ i ∈ V  (leave)\n  Σ_{i : (i,j) ∈ A} x_{i,j} = 1  ∀ j ∈ V  (enter)\n";

/// The method and the label of the bound of the family that a line writes.
fn method(before: &str, line: &str) -> (String, Option<Exactness>) {
    let text = format!("{HEAD}{before}  {line}  (family)\n");
    let states = BTreeMap::from([("family".to_owned(), FamilyState::OnDemand)]);
    let (model, _) =
        notation::model(&text, &instance(), &BTreeMap::new(), &states).unwrap_or_else(|found| {
            panic!("{line}: {:?}", found.iter().map(|d| d.line(&text)).collect::<Vec<_>>())
        });
    assert!(!model.subset_families().is_empty(), "{line}");
    let separator = Separator::new(&model, SubsetFamilyId(0));
    (separator.description().to_owned(), separator.exactness())
}

fn all(before: &str, cases: &[(&str, &str, Option<Exactness>)]) {
    let mut wrong = String::new();
    for (line, wanted, label) in cases {
        let (found, exactness) = method(before, line);
        if !found.contains(wanted) || exactness != *label {
            let _ = writeln!(wrong, "{line}\n  {found} ({exactness:?}), not {wanted} ({label:?})");
        }
    }
    assert!(wrong.is_empty(), "{wrong}");
}

const EXACT: Option<Exactness> = Some(Exactness::Exact);
const HEURISTIC: Option<Exactness> = Some(Exactness::Heuristic);
const LISTED: Option<Exactness> = Some(Exactness::Enumerated);

/// Leaving ≥ constant: S avoids a named root, holds it, or is free; directed, entering, or
/// undirected with both directions counted.
#[test]
fn what_leaves_a_set() {
    let leaving = "Σ_{(i,j) ∈ A : i ∈ S, j ∉ S} x_{i,j} ≥ 1";
    let entering = "Σ_{(i,j) ∈ A : i ∉ S, j ∈ S} x_{i,j} ≥ 1";
    let cases = [
        format!("{leaving}  ∀ S ⊆ V : S ≠ ∅, r ∉ S"),
        format!("{leaving}  ∀ S ⊂ V : r ∈ S"),
        format!("{leaving}  ∀ S ⊂ V : S ≠ ∅"),
        format!("{entering}  ∀ S ⊆ V : r ∉ S, S ∩ R ≠ ∅"),
        "x(δ⁺(S)) ≥ 1  ∀ S ⊂ V : S ≠ ∅".to_owned(),
        "y(δ(S)) ≥ 2  ∀ S ⊂ V : S ≠ ∅".to_owned(),
        "Σ_{(i,j) ∈ A : i ∈ S, j ∉ S} x_{i,j} + Σ_{(i,j) ∈ A : i ∉ S, j ∈ S} x_{i,j} ≥ 2  ∀ ∅ ≠ S ⊊ V".to_owned(),
    ];
    let cases: Vec<_> =
        cases.iter().map(|line| (line.as_str(), "exact minimum cut", EXACT)).collect();
    all("", &cases);
}

/// Inside ≤ |S| − 1: a cut where the degree equations make it one, else a closure.
#[test]
fn what_stands_inside_a_set() {
    let inside = "Σ_{(i,j) ∈ A : i ∈ S, j ∈ S} x_{i,j} ≤ |S| − 1  ∀ S ⊂ V : 2 ≤ |S| ≤ |V| − 1";
    all(DEGREES, &[(inside, "the degree equations make it one", EXACT)]);
    all(
        "",
        &[
            (inside, "exact", EXACT),
            ("y(E(S)) ≤ |S| − 1  ∀ S ⊂ V : |S| ≥ 2", "exact", EXACT),
            // with node terms
            ("y(E(S)) ≤ Σ_{i ∈ S : i ≠ k} z_i  ∀ S ⊆ V, k ∈ S : |S| ≥ 2", "exact", EXACT),
            ("y(E(S)) ≤ Σ_{i ∈ S} z_i  ∀ S ⊆ V : |S| ≥ 1", "exact", EXACT),
        ],
    );
}

/// Leaving ≥ demand over capacity: exact as it is, heuristic when it is rounded up.
#[test]
fn capacities() {
    all(
        "",
        &[
            (
                "x(δ⁺(S)) ≥ (Σ_{i ∈ S} d_i) / Q  ∀ S ⊆ V : S ≠ ∅, r ∉ S",
                "exact closure: minimum cut with node weights",
                EXACT,
            ),
            (
                "y(δ(S)) ≥ 2 (Σ_{i ∈ S} d_i) / Q  ∀ S ⊆ V : S ≠ ∅, r ∉ S",
                "exact closure: minimum cut with node weights",
                EXACT,
            ),
            (
                "x(δ⁺(S)) ≥ ⌈(Σ_{i ∈ S} d_i) / Q⌉  ∀ S ⊆ V : S ≠ ∅, r ∉ S",
                "heuristic: greedy growth",
                HEURISTIC,
            ),
        ],
    );
}

/// Odd sets: perfect matching by what leaves, matching by what stands inside.
#[test]
fn odd_sets() {
    let odd = "exact minimum odd cut on a cut tree";
    all(
        "",
        &[
            ("y(δ(S)) ≥ 1  ∀ S ⊂ V : |S| odd", odd, EXACT),
            ("y(E(S)) ≤ (|S| − 1) / 2  ∀ S ⊆ V : |S| odd, |S| ≥ 3", odd, EXACT),
            ("y(E(S)) ≤ (|S| − 1) / 2  ∀ S ⊆ V : |S| mod 2 = 1, |S| ≥ 3", odd, EXACT),
        ],
    );
}

/// Terms that split by element, covers and cliques.
#[test]
fn terms_that_split() {
    all(
        "",
        &[
            (
                "Σ_{i ∈ V : i ∉ S} z_i + Σ_{i ∈ S} d_i x_{r,i} ≥ 1  ∀ S ⊆ V ∖ {r}",
                "each element takes its better side",
                EXACT,
            ),
            ("Σ_{i ∈ C} z_i ≤ |C| − 1  ∀ C ⊆ V : Σ_{i ∈ C} d_i > Q", "exact knapsack", EXACT),
            (
                "Σ_{i ∈ C} z_i ≤ |C| − 1  ∀ C ⊆ V : Σ_{i ∈ C} (400000 d_i + 1) > large",
                "greedy knapsack",
                HEURISTIC,
            ),
            (
                "Σ_{i ∈ C} z_i ≤ 1  ∀ C ⊆ V : |C| ≥ 3, C clique in E",
                "greedy cliques, then exact branch and bound",
                EXACT,
            ),
        ],
    );
}

/// No more than 2^12 members are listed, whatever their shape; of more, a shape that no method
/// takes is refused in words.
#[test]
fn what_is_listed_and_what_is_refused() {
    let odd = "Σ_{(i,j) ∈ A : i ∈ S, j ∈ S} x_{i,j} ≥ |S| − 2";
    all(
        "",
        &[
            (&format!("{odd}  ∀ S ⊆ R : |S| ≥ 1"), "members listed", LISTED),
            (&format!("{odd}  ∀ S ⊆ V : |S| ≥ 1"), "no method: the shape is not recognised", None),
            ("Σ_{(i,j) ∈ A : i ∈ S, j ∉ S} x_{i,j} ≤ 3  ∀ S ⊂ V : S ≠ ∅", "no method", None),
            ("Σ_{(i,j) ∈ A : i ∈ S, j ∉ S} x_{i,j} = 1  ∀ S ⊂ V : |S| ≥ 2", "no method", None),
        ],
    );
}
