//! The notation's specification, sentence by sentence: what is written, and what comes of it.
//! Each case stands on the same small instance; all that fail are told at once.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use std::collections::BTreeMap;

use crate::common::{kitchen, rows_of, shown};
use hullward_notation::{check, parse};

/// What a text must come to.
enum Wanted {
    /// The same model as another text.
    Same(&'static str),
    /// So many rows of the family `fam`, the first of which reads so.
    Rows(usize, &'static str),
    /// This code among what is said, as error or as warning.
    Code(&'static str),
}
use Wanted::{Code, Rows, Same};

/// Data and definitions before `¦`, statements behind it; `z` is declared over `V`.
fn text(case: &str) -> String {
    let (described, statements) = case.split_once('¦').unwrap_or(("", case));
    let (data, definitions) = described.split_once("where").unwrap_or((described, ""));
    let lines =
        |part: &str| part.split(';').map(|line| format!("  {}\n", line.trim())).collect::<String>();
    format!(
        "data\n  V\n{}definitions\n{}minimise\n  Σ_{{i ∈ V}} z_i\nsubject to\n  z_i ≥ 0  ∀ i ∈ V\n{}",
        lines(data),
        lines(definitions),
        statements.split(';').map(|line| format!("  {}\n\n", line.trim())).collect::<String>()
    )
}

fn outcome(case: &str) -> Result<(model::Model, String), String> {
    let text = text(case);
    let none = BTreeMap::new();
    match hullward_notation::model(&text, &kitchen(), &none, &BTreeMap::new()) {
        Ok((model, found)) => Ok((model, shown(&text, &found))),
        Err(found) => Err(shown(&text, &found)),
    }
}

fn wrong((sentence, case, wanted): &(&str, &str, Wanted)) -> Option<String> {
    let told = |what: String| Some(format!("{sentence}\n  {case}\n  {what}\n"));
    match (outcome(case), wanted) {
        (Ok((_, said)) | Err(said), Code(code)) => {
            let there = said.lines().any(|line| line.starts_with(code));
            if there { None } else { told(format!("says {said}")) }
        }
        (Err(said), _) => told(said),
        (Ok((model, _)), Same(other)) => match outcome(other) {
            Ok((same, _)) if same == model => None,
            Ok(_) => told(format!("is not {other}")),
            Err(said) => told(format!("{other}: {said}")),
        },
        (Ok((model, _)), Rows(count, first)) => {
            let rows = rows_of(&model, "fam");
            let fits = rows.len() == *count && rows.first().is_some_and(|row| row == first);
            if fits { None } else { told(format!("{} rows, {:?}", rows.len(), rows.first())) }
        }
    }
}

fn all(cases: &[(&str, &str, Wanted)]) {
    let failures: Vec<String> = cases.iter().filter_map(wrong).collect();
    assert!(failures.is_empty(), "{} of {}\n{}", failures.len(), cases.len(), failures.concat());
}

#[test]
fn three_spellings() {
    let plain = "¦ Σ_{j ∈ V} z_j ≥ z_i  ∀ i ∈ V  (fam)";
    all(&[
        (
            "Unicode, TeX and plain words are equal",
            "¦ sum_{j in V} z_j >= z_i forall i in V (fam)",
            Same(plain),
        ),
        ("… freely mixed", "¦ \\sum_{j ∈ V} z_j >= z_i \\forall i in V  (fam)", Same(plain)),
        (
            "plain words: union, inter, cross, notin, subseteq",
            "where W = V union V inter V ¦ z_i ≥ 1 for all i in W (fam)",
            Rows(5, "z[Ash] ≥ 1"),
        ),
        (
            "`\\` between sets for ∖",
            "r ∈ V ¦ z_i ≥ 1 ∀ i ∈ V \\ {r} (fam)",
            Rows(4, "z[Birch] ≥ 1"),
        ),
        (
            "floor, ceil, min, max in words",
            "where m = floor(7/2) + ceil(7/2) + min(1, 2) + max(1, 2) ¦ m z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "10 z[Ash] ≥ 1"),
        ),
        (
            "and, or, not",
            "¦ z_i ≥ z_j ∀ i, j ∈ V : not i = j and i < j or i < j (fam)",
            Rows(10, "z[Ash] − z[Birch] ≥ 0"),
        ),
        ("!= and ->", "¦ z_i ≥ z_j ∀ i, j ∈ V : i != j (fam)", Rows(20, "z[Ash] − z[Birch] ≥ 0")),
    ]);
}

#[test]
fn parts() {
    all(&[
        (
            "a datum: a set of tuples",
            "A ⊆ V × V ¦ z_i ≥ z_j ∀ (i,j) ∈ A (fam)",
            Rows(20, "z[Ash] − z[Birch] ≥ 0"),
        ),
        ("an integer set", "T ⊆ ℤ ¦ t z_i ≥ 1 ∀ t ∈ T, i ∈ V (fam)", Rows(20, "z[Ash] ≥ 1")),
        ("a number over a set", "q_i ∀ i ∈ V ¦ z_i ≥ q_i ∀ i ∈ V (fam)", Rows(5, "z[Ash] ≥ 0")),
        ("an element of a set", "r ∈ V ¦ z_r ≥ 1 (fam)", Rows(1, "z[Ash] ≥ 1")),
        (
            "an indexed set",
            "N_i ⊆ V ∀ i ∈ V ¦ Σ_{j ∈ N_i} z_j ≥ 1 ∀ i ∈ V : |N_i| ≥ 1 (fam)",
            Rows(2, "z[Birch] + z[Cedar] ≥ 1"),
        ),
        (
            "a default by cell",
            "K; p_k = 1 ∀ k ∈ K ¦ Σ_{k ∈ K} p_k z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "4 z[Ash] ≥ 1"),
        ),
        (
            "a default as a whole",
            "B = {(i,j) ∈ V × V : i ≠ j} ¦ z_i ≥ z_j ∀ (i,j) ∈ B (fam)",
            Rows(20, "z[Ash] − z[Birch] ≥ 0"),
        ),
        (
            "a missing cell without a default is an error that names it",
            "K; p_k ∀ k ∈ K ¦ Σ_{k ∈ K} p_k z_i ≥ 1 ∀ i ∈ V (fam)",
            Code("data.cell"),
        ),
        ("derived numbers", "where n = |V| ¦ n z_i ≥ 1 ∀ i ∈ V (fam)", Rows(5, "5 z[Ash] ≥ 1")),
        (
            "derived sets",
            "where F = {(i,j) ∈ V × V : i < j} ¦ z_i ≥ z_j ∀ (i,j) ∈ F (fam)",
            Rows(10, "z[Ash] − z[Birch] ≥ 0"),
        ),
        (
            "a table by definition",
            "q_i ∀ i ∈ V where M_{i,j} = max(0, q_i − q_j) ∀ i ∈ V, j ∈ V ¦ z_i ≥ M_{i,j} ∀ i, j ∈ V : i > j (fam)",
            Rows(10, "z[Birch] ≥ 4"),
        ),
        (
            "{1..h}",
            "where h = 3; H = {1..h} ¦ t z_i ≥ 1 ∀ t ∈ H, i ∈ V (fam)",
            Rows(15, "z[Ash] ≥ 1"),
        ),
        (
            "constraints or domain lines only behind a part word",
            "¦ z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "z[Ash] ≥ 1"),
        ),
    ]);
}

#[test]
fn part_words_and_titles() {
    let model = |text: &str| {
        let none = BTreeMap::new();
        hullward_notation::model(text, &kitchen(), &none, &BTreeMap::new())
            .map_err(|found| shown(text, &found))
    };
    let body = "∑_{i ∈ V} z_i";
    let first =
        model(&format!("data\n V\nminimise\n {body}\nsubject to\n z_i ≥ 1 ∀ i ∈ V\n")).unwrap().0;
    for text in [
        format!("data\n V\nminimize {body}\nsubject to\n z_i ≥ 1 ∀ i ∈ V\n"),
        format!("data\n V\nmin {body}\ns.t. z_i ≥ 1 ∀ i ∈ V\n"),
        format!("data\n V\nmin {body} \\text{{ s.t. }} z_i ≥ 1 ∀ i ∈ V\n"),
        format!("data\n V\nmin {body}\nsuch that\n z_i ≥ 1 ∀ i ∈ V\n"),
        format!(
            "data\n V\n\\begin{{align}}\\min \\quad & {body} \\\\ & \\text{{s.t.}} & z_i ≥ 1 & \\quad ∀ i ∈ V\\end{{align}}\n"
        ),
    ] {
        assert_eq!(model(&text).map(|(made, _)| made), Ok(first.clone()), "{text}");
    }
    let title = |text: &str| parse(text).tree.title;
    assert_eq!(
        title("Rounds (Miller, Tucker & Zemlin 1960)\nminimise z").as_deref(),
        Some("Rounds (Miller, Tucker & Zemlin 1960)")
    );
    assert_eq!(title("z ≥ 1\nminimise z"), None, "a relation is no title");
    assert_eq!(title("\\begin{align}\nminimise z"), None, "an environment is no title");
}

#[test]
#[expect(clippy::too_many_lines, reason = "a table, a sentence a line")]
fn statements() {
    let plain = "¦ z_i ≥ 1  ∀ i ∈ V  (fam)";
    let two = "¦ z_i ≥ 1 ∀ i ∈ V (fam); z_i ≤ 9 ∀ i ∈ V (other)";
    all(&[
        (
            "a statement ends at a newline unless an operator stands beside the break",
            "¦ z_i +\n z_i ≥ 2\n ∀ i ∈ V (fam)",
            Rows(5, "2 z[Ash] ≥ 2"),
        ),
        ("… or at \\\\", "¦ z_i ≥ 1 ∀ i ∈ V (fam) \\\\ z_i ≤ 9 ∀ i ∈ V (other)", Same(two)),
        (
            "& and spacing commands vanish",
            "¦ z_i & \\ge \\, 1 \\quad \\forall i \\in V \\nonumber \\tag{fam}",
            Same(plain),
        ),
        (
            "{i,j} ∈ E holds whichever end E names first",
            "E ⊆ V × V ¦ y_{i,j} ∈ {0,1} ∀ (i,j) ∈ E; \
             Σ_{j : {i,j} ∈ E} z_j ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "z[Birch] + z[Elm] ≥ 1"),
        ),
        (
            "[n] is {1..n} behind ∈",
            "n = 3 ¦ Σ_{k ∈ [n]} z_i ≥ 3 ∀ i ∈ V (fam)",
            Rows(5, "3 z[Ash] ≥ 3"),
        ),
        (
            "a sentence says nothing",
            "¦ z_i ≥ 1 ∀ i ∈ V (fam)\n\nHere z_i = 1 if stop i is called at, else nothing",
            Same(plain),
        ),
        ("% and # start a comment", "¦ z_i ≥ 1 ∀ i ∈ V (fam) # so it is", Same(plain)),
        ("\\label vanishes", "¦ z_i ≥ 1 \\label{eq} ∀ i ∈ V (fam)", Same(plain)),
        ("a label is a final bracket behind white space", "¦ z_i ≥ 1 ∀ i ∈ V (fam)", Same(plain)),
        ("or \\tag, which wins", "¦ z_i ≥ 1 ∀ i ∈ V (other) \\tag{fam}", Same(plain)),
        ("for all, for each, for", "¦ z_i ≥ 1 for each i ∈ V (fam)", Same(plain)),
        ("behind the relation a comma and a membership", "¦ z_i ≥ 1, i ∈ V (fam)", Same(plain)),
        ("… or \\quad", "¦ z_i ≥ 1 \\quad i ∈ V (fam)", Same(plain)),
        ("… or spaces alone", "¦ z_i ≥ 1       i ∈ V (fam)", Same(plain)),
        ("i ∈ I, j ∈ J", "K ¦ z_i ≥ 1, i ∈ V, k ∈ K (fam)", Rows(10, "z[Ash] ≥ 1")),
        ("i = 1,…,n", "¦ t z_i ≥ 1, i ∈ V, t = 1,…,3 (fam)", Rows(15, "z[Ash] ≥ 1")),
        (
            "1 ≤ i < j ≤ n",
            "¦ (s + t) z_i ≥ 1, i ∈ V, 1 ≤ s < t ≤ 3 (fam)",
            Rows(15, "3 z[Ash] ≥ 1"),
        ),
        (
            "a set that is missing is told from what carries the index",
            "¦ z_i ≥ 1 ∀ i (fam)",
            Rows(5, "z[Ash] ≥ 1"),
        ),
        ("… and reported", "¦ z_i ≥ 1 ∀ i (fam)", Code("name.inferred")),
        ("… else an error", "¦ z_i ≥ l ∀ i ∈ V, l (fam)", Code("name.no-set")),
        (
            "binders scope from left to right",
            "¦ (s + t) z_i ≥ 1, i ∈ V, s ∈ {1..3}, t ∈ {1..s} (fam)",
            Rows(30, "2 z[Ash] ≥ 1"),
        ),
        (
            "the body of a sum ends at the next +",
            "¦ Σ_{j ∈ V} z_j + z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "2 z[Ash] + z[Birch] + z[Cedar] + z[Dogwood] + z[Elm] ≥ 1"),
        ),
        (
            "Σ_{i<j}",
            "¦ Σ_{i<j} (z_i + z_j) ≥ 1 (fam)",
            Rows(1, "4 z[Ash] + 4 z[Birch] + 4 z[Cedar] + 4 z[Dogwood] + 4 z[Elm] ≥ 1"),
        ),
        (
            "Σ_{i,j ∈ V : i ≠ j}",
            "¦ Σ_{i,j ∈ V : i ≠ j} z_i ≥ 1 (fam)",
            Rows(1, "4 z[Ash] + 4 z[Birch] + 4 z[Cedar] + 4 z[Dogwood] + 4 z[Elm] ≥ 1"),
        ),
        ("Σ_{i=1}^{n}", "¦ Σ_{t=1}^{3} t z_i ≥ 1 ∀ i ∈ V (fam)", Rows(5, "6 z[Ash] ≥ 1")),
        (
            "\\substack",
            "¦ \\sum_{\\substack{j ∈ V \\\\ j ≠ i}} z_j ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "z[Birch] + z[Cedar] + z[Dogwood] + z[Elm] ≥ 1"),
        ),
        (
            "a chain with constants at both ends is one ranged row",
            "¦ 1 ≤ 2 z_i + z_j ≤ 3 ∀ i, j ∈ V : i < j (fam)",
            Rows(10, "1 ≤ 2 z[Ash] + z[Birch] ≤ 3"),
        ),
        (
            "otherwise its links are split",
            "¦ z_i ≤ z_j ≤ 3 z_i ∀ i, j ∈ V : i < j (fam)",
            Rows(20, "z[Ash] − z[Birch] ≤ 0"),
        ),
    ]);
}

#[test]
fn variables() {
    all(&[
        (
            "a variable has a domain line",
            "¦ w ≥ 0; w ≥ z_i ∀ i ∈ V (fam)",
            Rows(5, "−z[Ash] + w ≥ 0"),
        ),
        (
            "𝔹 is {0,1}",
            "¦ w ∈ 𝔹; w ≥ z_i ∀ i ∈ V (fam)",
            Same("¦ w ∈ {0,1}; w ≥ z_i ∀ i ∈ V (fam)"),
        ),
        (
            "ℤ_{≥0} and ℕ are ℤ_+",
            "¦ w ∈ ℕ; w ≥ z_i ∀ i ∈ V (fam)",
            Same("¦ w ∈ ℤ_{≥0}; w ≥ z_i ∀ i ∈ V (fam)"),
        ),
        ("ℝ_+ is ≥ 0", "¦ w ∈ ℝ_+; w ≥ z_i ∀ i ∈ V (fam)", Same("¦ w ≥ 0; w ≥ z_i ∀ i ∈ V (fam)")),
        (
            "[a,b] and a ≤ w ≤ b",
            "¦ w ∈ [1,4]; w ≥ z_i ∀ i ∈ V (fam)",
            Same("¦ 1 ≤ w ≤ 4; w ≥ z_i ∀ i ∈ V (fam)"),
        ),
        ("free is ℝ", "¦ w free; w ≥ z_i ∀ i ∈ V (fam)", Same("¦ w ∈ ℝ; w ≥ z_i ∀ i ∈ V (fam)")),
        (
            "a list: x, y ≥ 0",
            "¦ w, v ≥ 0; w + v ≥ z_i ∀ i ∈ V (fam)",
            Same("¦ w ≥ 0; v ≥ 0; w + v ≥ z_i ∀ i ∈ V (fam)"),
        ),
        (
            "the index set is the union over the domain lines",
            "¦ s_t ≥ 0 ∀ t ∈ {1..3}; s_0 = 0; s_{t−1} + s_t ≥ 1 ∀ t ∈ {1..3} (fam)",
            Rows(3, "s[1] + s[0] ≥ 1"),
        ),
        (
            "several intersect their bounds",
            "¦ w ≥ 1; w ≥ 0; w ≤ 4; w ≥ z_i ∀ i ∈ V (fam)",
            Same("¦ 1 ≤ w ≤ 4; w ≥ z_i ∀ i ∈ V (fam)"),
        ),
        ("with a label they are rows", "¦ z_i ≤ 4 ∀ i ∈ V (fam)", Rows(5, "z[Ash] ≤ 4")),
        (
            "only an upper bound: the lower is −∞, with a warning",
            "¦ w ≤ 4; w ≥ z_i ∀ i ∈ V (fam)",
            Code("row.no-lower"),
        ),
        ("an undeclared name is an error", "¦ z_i ≥ w ∀ i ∈ V (fam)", Code("name.undeclared")),
        (
            "a use outside the index set is an error",
            "¦ s_t ≥ 0 ∀ t ∈ {1..3}; s_{t+1} ≥ s_t ∀ t ∈ {1..3} (fam)",
            Code("row.outside"),
        ),
        (
            "… unless a condition excludes it",
            "¦ s_t ≥ 0 ∀ t ∈ {1..3}; s_{t+1} ≥ s_t ∀ t ∈ {1..3} : t < 3 (fam)",
            Rows(2, "−s[1] + s[2] ≥ 0"),
        ),
    ]);
}

#[test]
#[expect(clippy::too_many_lines, reason = "a table, a sentence a line")]
fn expressions() {
    all(&[
        ("∪ and listed sets", "r ∈ V ¦ z_i ≥ 1 ∀ i ∈ {r} ∪ {r} (fam)", Rows(1, "z[Ash] ≥ 1")),
        (
            "{1,…,T}",
            "¦ t z_i ≥ 1 ∀ i ∈ V, t ∈ {1,…,3} (fam)",
            Same("¦ t z_i ≥ 1 ∀ i ∈ V, t ∈ {1..3} (fam)"),
        ),
        (
            "δ⁺(S) and ⊂ proper",
            "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; x(δ⁺(S)) ≥ 1 ∀ S ⊂ V : |S| ≥ 1 (fam)",
            Same(
                "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; Σ_{(i,j) ∈ A : i ∈ S, j ∉ S} x_{ij} ≥ 1 ∀ S ⊊ V : |S| ≥ 1 (fam)",
            ),
        ),
        (
            "E(S): pairs inside",
            "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; x(A(S)) ≤ |S| − 1 ∀ S ⊂ V : |S| ≥ 2 (fam)",
            Same(
                "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; Σ_{(i,j) ∈ A : i ∈ S, j ∈ S} x_{ij} ≤ |S| − 1 ∀ S ⊂ V : |S| ≥ 2 (fam)",
            ),
        ),
        (
            "|S| odd, mod 2 = 1, ≡ 1 (mod 2)",
            "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; x(A(S)) ≤ |S| − 1 ∀ S ⊂ V : |S| odd, |S| ≥ 3 (fam)",
            Same(
                "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; x(A(S)) ≤ |S| − 1 ∀ S ⊂ V : |S| ≡ 1 (mod 2), |S| ≥ 3 (fam)",
            ),
        ),
        (
            "the empty subset is a member unless excluded",
            "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; x(A(S)) ≤ |S| − 1 ∀ S ⊂ V (fam)",
            Code("subset.empty"),
        ),
        (
            "a comma is “and”",
            "¦ z_i ≥ z_j ∀ i, j ∈ V : i < j, j ≠ i (fam)",
            Rows(10, "z[Ash] − z[Birch] ≥ 0"),
        ),
        (
            "numbers: + − · / ^ and fractions",
            "where m = 2 · 3 + 8 / 4 − 2^2 + \\frac{4}{2} ¦ m z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "6 z[Ash] ≥ 1"),
        ),
        (
            "⌊ ⌋ ⌈ ⌉ |a| mod",
            "where m = ⌊7/2⌋ + ⌈7/2⌉ + |−2| + 7 mod 4 ¦ m z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "12 z[Ash] ≥ 1"),
        ),
        (
            "Σ and ∏ over data",
            "T ⊆ ℤ; d_t ∀ t ∈ T where m = ∏_{t ∈ T : t ≤ 2} d_t ¦ m z_i ≥ 1 ∀ i ∈ V (fam)",
            Rows(5, "15 z[Ash] ≥ 1"),
        ),
        (
            "a product of two variables is an error",
            "¦ z_i z_j ≥ 1 ∀ i, j ∈ V (fam)",
            Code("shape.product"),
        ),
        (
            "integers compare by value, labels by their listing",
            "¦ z_i ≥ z_j ∀ i, j ∈ V : i < j (fam)",
            Rows(10, "z[Ash] − z[Birch] ≥ 0"),
        ),
        (
            "labels with no common set cannot be compared",
            "K ¦ z_i ≥ 1 ∀ i ∈ V, k ∈ K : i < k (fam)",
            Code("shape.order"),
        ),
        ("juxtaposition is product", "Q ¦ 2 Q z_i ≥ 1 ∀ i ∈ V (fam)", Rows(5, "20 z[Ash] ≥ 1")),
        (
            "x_{ij} is split to fit",
            "A ⊆ V × V ¦ x_{ij} ∈ {0,1} ∀ (i,j) ∈ A; x_{ij} ≤ z_i ∀ (i,j) ∈ A (fam)",
            Rows(20, "−z[Ash] + x[Ash → Birch] ≤ 0"),
        ),
        (
            "x_{12} stays twelve",
            "¦ s_t ≥ 0 ∀ t ∈ {1..12}; s_{12} ≥ z_i ∀ i ∈ V (fam)",
            Rows(5, "−z[Ash] + s[12] ≥ 0"),
        ),
        (
            "a superscript is an index where the name lacks one",
            "K ¦ y_i^k ≥ 0 ∀ i ∈ V, k ∈ K; y_i^k ≥ z_i ∀ i ∈ V, k ∈ K (fam)",
            Same("K ¦ y_{i,k} ≥ 0 ∀ i ∈ V, k ∈ K; y_{i,k} ≥ z_i ∀ i ∈ V, k ∈ K (fam)"),
        ),
        ("else a power", "Q ¦ Q^2 z_i ≥ 1 ∀ i ∈ V (fam)", Rows(5, "100 z[Ash] ≥ 1")),
        (
            "decorations belong to names",
            "¦ \\bar w ≥ 0; c_{\\max} ≥ 0; w^+ ≥ 0; \\bar w + c_{\\max} + w^+ ≥ z_i ∀ i ∈ V (fam)",
            Rows(5, "−z[Ash] + \\bar w + c_{\\max} + w^+ ≥ 0"),
        ),
    ]);
}

#[test]
fn diagnostics() {
    all(&[
        ("an index from the wrong set", "K ¦ z_k ≥ 1 ∀ k ∈ K (fam)", Code("shape.wrong-set")),
        (
            "a missing index",
            "A ⊆ V × V ¦ x_{i,j} ∈ {0,1} ∀ (i,j) ∈ A; x_i ≥ z_i ∀ i ∈ V (fam)",
            Code("shape.indices"),
        ),
        ("an unused datum", "Q ¦ z_i ≥ 1 ∀ i ∈ V (fam)", Code("name.unused")),
        ("a variable in no row", "¦ w ≥ 0; z_i ≥ 1 ∀ i ∈ V (fam)", Code("name.")),
        (
            "a family that is empty on this instance",
            "¦ z_i ≥ 1 ∀ i ∈ V : i ≠ i (fam)",
            Code("row.empty-family"),
        ),
        ("a row that can never bind", "¦ z_i ≥ −1 ∀ i ∈ V (fam)", Code("row.never-binds")),
        ("a row that can never hold", "¦ z_i ≤ −1 ∀ i ∈ V (fam)", Code("row.never-holds")),
        ("an unbounded direction", "¦ w ≤ 4; w ∈ ℝ; w ≥ 1 ∀ i ∈ V : i ≠ i (fam)", Code("row.")),
    ]);
    // all errors of a text are reported, each with its place
    let text = text("¦ z_i ≥ w ∀ i ∈ V (fam); z_i ≥ v ∀ i ∈ V (other)");
    let found = check(&parse(&text).tree).1;
    let undeclared = found.iter().filter(|d| d.code == "name.undeclared");
    let places: Vec<&str> = undeclared.map(|d| &text[d.span.clone()]).collect();
    assert_eq!(places, ["w", "v"]);
}
