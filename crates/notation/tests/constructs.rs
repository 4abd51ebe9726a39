//! One construct after another: what the rows and bounds are.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use crate::common::{exact_row_text, kitchen, made, rows_of};
use model::{Model, SubsetCondition, nearest_f64};

/// A text around some lines: data `V, A, c, r, T, K, Q, d, q, E` and a trivial objective.
fn around(data: &str, definitions: &str, lines: &str) -> String {
    format!(
        "data\n{data}\ndefinitions\n{definitions}\nminimise\n  Σ_{{i ∈ V}} z_i\nsubject to\n  z_i ≥ 0 ∀ i ∈ V\n  Σ_{{i ∈ V}} z_i ≥ 1 (some)\n{lines}\n"
    )
}

/// The rows of the family `f` of a text around some lines.
fn rows(data: &str, definitions: &str, lines: &str) -> Vec<String> {
    let data = format!("  V\n{data}");
    rows_of(&made(&around(&data, definitions, lines), &kitchen()), "rows")
}

fn bounds(model: &Model, name: &str, tuple: &[&str]) -> String {
    let column = &model.columns()[model.find_column(name, tuple).expect("no such column").index()];
    let value = |id: Option<_>, none: &str| {
        id.map_or(none.to_owned(), |id| nearest_f64(model.numbers().exact(id)).to_string())
    };
    let whole = if column.integer { " whole" } else { "" };
    format!("[{}, {}]{whole}", value(column.lower, "−∞"), value(column.upper, "∞"))
}

#[test]
fn lot_sizing_with_arithmetic_subscripts() {
    let data = "  T   ⊆ ℤ\n  d_t ∀ t ∈ T  demand";
    let lines = "
  s_{t−1} + y_t = d_t + s_t  ∀ t ∈ T  (rows)
  s_t ≥ 0  ∀ t ∈ T
  s_0 = 0
  y_t ≥ 0  ∀ t ∈ T";
    let model = made(&around(&format!("  V\n{data}"), "", lines), &kitchen());
    assert_eq!(rows_of(&model, "rows")[0], "−s[1] + s[0] + y[1] = 5");
    assert_eq!(rows_of(&model, "rows")[1], "s[1] − s[2] + y[2] = 3");
    assert_eq!(bounds(&model, "s", &["0"]), "[0, 0]");
    assert_eq!(bounds(&model, "s", &["4"]), "[0, ∞]");
}

#[test]
fn data_arithmetic() {
    let data = "  T ⊆ ℤ\n  d_t ∀ t ∈ T\n  Q";
    let found = rows(
        data,
        "  D_{t,l} = Σ_{k=t}^{l} d_k ∀ t ∈ T, l ∈ T : t ≤ l\n  M = max_{t ∈ T} d_t\n  h = |T|",
        "  (D_{1,4} + ⌈Q / 4⌉ + ⌊7/2⌋ + min(2, M) + max{Q, 3} + |−2| + 2^{3} + h mod 3) z_i \\le \\frac{1}{2} ∀ i ∈ V (rows)",
    );
    // 18 + 3 + 3 + 2 + 10 + 2 + 8 + 1
    assert_eq!(found[0], "47 z[Ash] ≤ 1/2");
    assert_eq!(found.len(), 5);
    let product = rows(data, "", "  z_i ∏_{t ∈ T} d_t ≤ Q^2 ∀ i ∈ V (rows)");
    assert_eq!(product[0], "360 z[Ash] ≤ 100");
}

#[test]
fn defaults_fill_cells_and_whole_sets() {
    let found = rows("  K\n  p_k = 1 ∀ k ∈ K", "", "  Σ_{k ∈ K} p_k z_i ≤ 9 ∀ i ∈ V (rows)");
    assert_eq!(found[0], "4 z[Ash] ≤ 9", "3 for red from the instance, 1 for blue by default");
    let found = rows("  B = {(i,j) ∈ V × V : i < j}", "", "  z_i + z_j ≤ 1 ∀ (i,j) ∈ B (rows)");
    assert_eq!(found.len(), 10);
    assert_eq!(found[0], "z[Ash] + z[Birch] ≤ 1");
    let found = rows("  B = {1, …, 3}", "", "  k z_i ≤ 1 ∀ i ∈ V, k ∈ B (rows)");
    assert_eq!(found[..3], ["z[Ash] ≤ 1", "2 z[Ash] ≤ 1", "3 z[Ash] ≤ 1"]);
}

#[test]
fn binders_in_many_spellings() {
    let pairs = rows("", "", "  z_i + z_j ≤ 1 ∀ i, j ∈ V : i < j (rows)");
    assert_eq!(pairs.len(), 10);
    assert_eq!(rows("", "", "  z_i + z_j ≤ 1, i ∈ V, j ∈ V, i < j (rows)"), pairs);
    assert_eq!(rows("", "", "  z_i + z_j ≤ 1 ∀ i ∈ V ∀ j ∈ V : i < j (rows)"), pairs);
    assert_eq!(rows("", "", "  z_i + z_j ≤ 1 \\quad i ∈ V, \\quad j ∈ V : ¬(j ≤ i) (rows)"), pairs);
    assert_eq!(
        rows("", "  H = {(i,j) : i ∈ V, j ∈ V, i < j}", "  z_i + z_j ≤ 1 ∀ ij ∈ H (rows)"),
        pairs
    );
    assert_eq!(rows("", "", "  z_i + z_j ≤ 1 ∀ (i,j) ∈ V × V : i < j and i ≠ j (rows)"), pairs);
    let whole = rows("", "  n = |V|", "  (k + l) z_i ≤ 1 ∀ i ∈ V, 1 ≤ k < l ≤ n (rows)");
    assert_eq!(whole.len(), 50);
    assert_eq!(whole[0], "3 z[Ash] ≤ 1");
    let counted = rows("", "  n = |V|", "  k z_i ≤ 1 ∀ i ∈ V, k = 1,…,n (rows)");
    assert_eq!(counted.len(), 25);
    assert_eq!(rows("", "  n = |V|", "  k z_i ≤ 1 ∀ i ∈ V, k ∈ {1..n} (rows)"), counted);
    assert_eq!(rows("", "  n = |V|", "  k z_i ≤ 1 ∀ i ∈ V, k = 1, 2, \\ldots, n (rows)"), counted);
    let sums = rows("", "  n = |V|", "  Σ_{k=1}^{n} k z_i ≤ 1 ∀ i ∈ V (rows)");
    assert_eq!(sums[0], "15 z[Ash] ≤ 1");
    let halves = rows("", "", "  Σ_{\\substack{i ∈ V \\\\ i ≠ j}} z_i ≤ z_j ∀ j ∈ V (rows)");
    assert_eq!(halves[0], "−z[Ash] + z[Birch] + z[Cedar] + z[Dogwood] + z[Elm] ≤ 0");
}

#[test]
fn missing_sets_are_told_from_the_carrier() {
    let data = "  A ⊆ V × V\n  c_{ij} ∀ (i,j) ∈ A";
    let lines = "  x_{ij} ∈ {0,1} ∀ (i,j) ∈ A\n  Σ_j x_{ij} = 1 ∀ i (rows)";
    let found = rows("  A ⊆ V × V", "", lines);
    assert_eq!(found[0], "x[Ash → Birch] + x[Ash → Cedar] + x[Ash → Dogwood] + x[Ash → Elm] = 1");
    assert_eq!(found.len(), 5);
    let found = rows(data, "", "  x_{ij} ∈ {0,1} ∀ (i,j) ∈ A\n  Σ_i Σ_j c_{ij} x_{ij} ≥ 1 (rows)");
    assert_eq!(found[0].matches("x[").count(), 20);
    assert_eq!(rows("", "", "  z_i ≤ 1 ∀ i (rows)").len(), 5);
    let lines = "  x_{ij} ∈ {0,1} ∀ (i,j) ∈ A\n  \\sum_{ij} c_{ij} x_{ij} ≥ 1 (rows)";
    assert_eq!(rows(data, "", lines), found);
    let pairs = rows("", "", "  z_i + z_j ≤ 1, i ≠ j ∈ V (rows)");
    assert_eq!(pairs.len(), 20);
    assert_eq!(pairs, rows("", "", "  z_i + z_j ≤ 1 ∀ i, j ∈ V : i ≠ j (rows)"));
}

#[test]
fn chains_split_or_stay() {
    assert_eq!(
        rows("", "", "  1 ≤ Σ_{i ∈ V} z_i ≤ 3 (rows)"),
        ["1 ≤ z[Ash] + z[Birch] + z[Cedar] + z[Dogwood] + z[Elm] ≤ 3"]
    );
    let split = rows("", "", "  2 − z_i ≤ 2 z_i ≤ w_i ∀ i ∈ V (rows)\n  w_i ≥ 0 ∀ i ∈ V");
    assert_eq!(split[..2], ["−3 z[Ash] ≤ -2", "2 z[Ash] − w[Ash] ≤ 0"]);
    let lines = "  0 ≤ w_i ≤ 3 z_i ∀ i ∈ V (rows)";
    let model = made(&around("  V", "", lines), &kitchen());
    assert_eq!(rows_of(&model, "rows")[0], "−3 z[Ash] + w[Ash] ≤ 0");
    assert_eq!(bounds(&model, "w", &["Ash"]), "[0, ∞]");
    let equal = rows("", "", "  z_i = w_i = v_i ∀ i ∈ V (rows)\n  v_i, w_i ≥ 0 ∀ i ∈ V");
    assert_eq!(equal[..2], ["z[Ash] − w[Ash] = 0", "−v[Ash] + w[Ash] = 0"]);
    assert_eq!(
        rows("", "", "  1 ≤ 2 z_i ∀ i ∈ V (rows)")[0],
        "2 z[Ash] ≥ 1",
        "terms stay on the side they are on"
    );
}

#[test]
fn domain_lines_of_every_form() {
    let lines = "
  a_i ∈ {0,1} ∀ i ∈ V
  b_i ∈ 𝔹 ∀ i ∈ V
  e_i ∈ ℤ_+ ∀ i ∈ V
  f_i ∈ ℤ_{≥0} ∀ i ∈ V
  g_i ∈ ℕ ∀ i ∈ V
  h_i ∈ ℝ ∀ i ∈ V
  k_i ∈ \\mathbb{R}_+ ∀ i ∈ V
  l_i ∈ [2, 5] ∀ i ∈ V
  m_i ∈ {0..7} ∀ i ∈ V
  o_i free ∀ i ∈ V
  −1 ≤ p_i ≤ Q ∀ i ∈ V
  r_i ∈ ℤ ∀ i ∈ V
  r_i ≤ 4 ∀ i ∈ V
  s_i ≥ 1 ∀ i ∈ V
  s_i ≥ 2 ∀ i ∈ V : i ≠ g0
  t ≥ 0
  a_i + b_i + e_i + f_i + g_i + h_i + k_i + l_i + m_i + o_i + p_i + r_i + s_i + t ≤ 9 ∀ i ∈ V (rows)";
    let text = around("  V\n  Q\n  g0 ∈ V", "", lines).replace("g0", "w");
    let mut instance = kitchen();
    instance.set("w", instance::Datum::Element("Elm".into()));
    let model = made(&text, &instance);
    let all: Vec<String> =
        "abefghklmopr".chars().map(|c| bounds(&model, &c.to_string(), &["Ash"])).collect();
    assert_eq!(
        all,
        [
            "[0, 1] whole",
            "[0, 1] whole",
            "[0, ∞] whole",
            "[0, ∞] whole",
            "[0, ∞] whole",
            "[−∞, ∞]",
            "[0, ∞]",
            "[2, 5]",
            "[0, 7] whole",
            "[−∞, ∞]",
            "[-1, 10]",
            "[−∞, 4] whole",
        ]
    );
    assert_eq!(
        (bounds(&model, "s", &["Ash"]), bounds(&model, "s", &["Elm"])),
        ("[2, ∞]".into(), "[1, ∞]".into())
    );
    assert_eq!(bounds(&model, "t", &[]), "[0, ∞]");
}

#[test]
fn indexed_sets_and_graph_words() {
    let found = rows("  N_i ⊆ V ∀ i ∈ V", "", "  Σ_{j ∈ N_i} z_j ≤ |N_i| ∀ i ∈ V : N_i ≠ ∅ (rows)");
    assert_eq!(found, ["z[Birch] + z[Cedar] ≤ 2", "z[Ash] ≤ 1"]);
    let edges = "  E ⊆ V × V";
    let lines = "  x_{ij} ∈ {0,1} ∀ (i,j) ∈ E\n  x(δ(i)) = 2 ∀ i ∈ V (rows)";
    assert_eq!(rows(edges, "", lines)[0], "x[Ash → Birch] + x[Ash → Elm] = 2");
}

/// The conditions and members of a family over subsets.
fn subsets(data: &str, line: &str) -> (Vec<SubsetCondition>, Vec<String>) {
    let lines = format!("  x_{{ij}} ∈ {{0,1}} ∀ (i,j) ∈ E\n  x(E) ≤ n  (most)\n{line}");
    let model =
        made(&around(&format!("  V\n  E ⊆ V × V\n{data}"), "  n = |V|", &lines), &kitchen());
    let family = &model.subset_families()[0];
    let mut members = Vec::new();
    for mask in 0..1_u32 << family.ground.len() {
        let chosen = family.ground.iter().enumerate().filter(|(i, _)| mask >> i & 1 == 1);
        let subset = chosen.map(|(_, &label)| label).collect();
        if family.admits(&subset) {
            members.push(exact_row_text(&model, &family.member(&subset)));
        }
    }
    (family.conditions.clone(), members)
}

#[test]
fn odd_sets_in_their_spellings() {
    let (conditions, members) = subsets(
        "",
        "  Σ_{(i,j) ∈ E : i ∈ S, j ∈ S} x_{ij} ≤ (|S| − 1) / 2 ∀ S ⊆ V : |S| ≥ 3, |S| odd (rows)",
    );
    assert_eq!(members.len(), 11);
    assert_eq!(
        conditions,
        [SubsetCondition::Size { at_least: 3, at_most: 5 }, SubsetCondition::Odd(true)]
    );
    for line in [
        "  x(E(S)) ≤ (|S| − 1) / 2 ∀ S ⊆ V : |S| ≥ 3, |S| \\text{ odd} (rows)",
        "  x(E(S)) ≤ \\frac{|S| − 1}{2} ∀ S ⊆ V : |S| > 2, |S| mod 2 = 1 (rows)",
        "  2 x(E(S)) ≤ |S| − 1 ∀ S ⊆ V : 3 ≤ |S|, |S| ≡ 1 (mod 2) (rows)",
    ] {
        assert_eq!(subsets("", line).1.len(), 11, "{line}");
    }
    assert_eq!(members[0], "x[Ash → Birch] + x[Birch → Cedar] ≤ 1");
}

#[test]
fn crossing_weights_covers_and_cliques() {
    let (_, members) = subsets("", "  x(δ(S)) ≥ 2 ∀ S ⊂ V : S ≠ ∅ (rows)");
    assert_eq!(members.len(), 30);
    assert_eq!(members[0], "x[Ash → Birch] + x[Ash → Elm] ≥ 2");
    let data = "  q_i ∀ i ∈ V\n  Q";
    let (conditions, members) =
        subsets(data, "  x(δ(S)) ≥ Σ_{i ∈ S} q_i / Q ∀ S ⊆ V : S ≠ ∅ (rows)");
    assert_eq!(members.len(), 31);
    assert_eq!(members[1], "x[Ash → Birch] + x[Birch → Cedar] ≥ 2/5");
    assert_eq!(conditions.len(), 1);
    let cover = "  Σ_{i ∈ C} z_i ≤ |C| − 1 ∀ C ⊆ V : Σ_{i ∈ C} q_i > Q (rows)";
    let (conditions, members) = subsets(data, cover);
    assert!(matches!(conditions[..], [SubsetCondition::WeightOver { .. }]));
    assert_eq!(members[0], "z[Cedar] + z[Dogwood] ≤ 1");
    let at_least = cover.replace("> Q", "≥ Q + 1");
    assert_eq!(subsets(data, &at_least).1, members, "whole weights: at least 11 is more than 10");
    let (conditions, members) =
        subsets("", "  Σ_{i ∈ C} z_i ≤ 1 ∀ C ⊆ V : |C| ≥ 2, C clique in E (rows)");
    assert!(matches!(conditions[..], [SubsetCondition::Size { .. }, SubsetCondition::Clique(_)]));
    assert_eq!(members.len(), 5, "a cycle of five has its edges as cliques");
}

#[test]
fn subsets_of_a_set_that_an_outer_index_gives() {
    let data = "  V\n  T ⊆ ℤ\n  d_t ∀ t ∈ T";
    let lines = "
  y_t ∈ {0,1} ∀ t ∈ T
  p_t ≥ 0 ∀ t ∈ T
  Σ_{t ∈ {1..l} ∖ S} p_t + Σ_{t ∈ S} (Σ_{k=t}^{l} d_k) y_t ≥ Σ_{k=1}^{l} d_k  ∀ l ∈ T, S ⊆ {1..l}  (rows)";
    let model = made(&around(data, "", lines), &kitchen());
    assert_eq!(model.subset_families().len(), 4);
    let family = &model.subset_families()[1];
    let two: std::collections::BTreeSet<_> = family.ground[1..].iter().copied().collect();
    assert_eq!(exact_row_text(&model, &family.member(&two)), "3 y[2] + p[1] ≥ 8");
    let names: Vec<&str> = family.tuple.iter().map(|&l| model.labels().name(l)).collect();
    assert_eq!(names, ["2"]);
}

#[test]
fn decorated_names_and_small_characters() {
    let data = "  V\n  T ⊆ ℤ\n  \\bar d_t = 2 ∀ t ∈ T\n  c_{\\max} = 7";
    let lines = "  x^+_{t} ≥ 0 ∀ t ∈ T\n  \\hat{y}_t^{\\text{in}} ≥ 0 ∀ t ∈ T\n  \\bar{d}_t xᵗ_t + x^+_t + \\hat y^{\\text{in}}_{t} ≤ c_{\\max}^2 ∀ t ∈ T (rows)";
    let lines = lines.replace(" xᵗ_t", " x^+_t");
    let model = made(&around(data, "", &lines), &kitchen());
    assert_eq!(rows_of(&model, "rows")[0], "3 x^+[1] + \\hat y^{\\text{in}}[1] ≤ 49");
    let found =
        rows("  A ⊆ V × V", "", "  xᵢⱼ ∈ {0,1} ∀ (i,j) ∈ A\n  xᵢⱼ + zᵢ ≤ 2² ∀ (i,j) ∈ A (rows)");
    assert_eq!(found[0], "z[Ash] + x[Ash → Birch] ≤ 4");
}

#[test]
fn slices_do_not_change_the_model() {
    use hullward_notation::{Expansion, Limits, Progress, bind, check, parse};
    let text = around(
        "  V\n  A ⊆ V × V",
        "",
        "  x_{ij} ∈ {0,1} ∀ (i,j) ∈ A\n  Σ_j x_{ij} = 1 ∀ i (rows)\n  x(A(S)) ≤ |S| − 1 ∀ S ⊂ V : |S| ≥ 2 (g)",
    );
    let whole = made(&text, &kitchen());
    for ticks in [1, 7, 1000] {
        let (checked, _) = check(&parse(&text).tree);
        let bound = bind(&checked, &kitchen(), &Default::default()).unwrap();
        let mut expansion = Expansion::new(bound, &Default::default(), Limits::default());
        let mut slices = 1;
        while expansion.advance(ticks) == Progress::Working {
            slices += 1;
        }
        assert!(ticks > 7 || slices > 5);
        assert_eq!(expansion.finish().unwrap().0, whole, "{ticks}");
    }
}

#[test]
fn leaving_and_entering_arcs() {
    let (_, out) = subsets("", "  x(δ⁺(S)) ≥ 1 ∀ S ⊂ V : S ≠ ∅ (rows)");
    assert_eq!(out[1], "x[Birch → Cedar] ≥ 1", "Birch alone");
    assert_eq!(
        subsets(
            "",
            "  x(\\delta^+(S)) \\ge 1 \\quad \\forall S \\subset V : S \\ne \\emptyset \\tag{rows}"
        )
        .1,
        out
    );
    let (_, into) = subsets("", "  x(δ^-(S)) ≥ 1 ∀ S ⊂ V : S ≠ ∅ (rows)");
    assert_eq!(into[1], "x[Ash → Birch] ≥ 1");
    let (_, written) = subsets("", "  Σ_{(i,j) ∈ δ^+(S)} x_{i,j} ≥ 1 ∀ S ⊂ V : S ≠ ∅ (rows)");
    assert_eq!(written, out);
    let (_, across) =
        subsets("", "  Σ_{i ∈ S, j ∉ S : (i,j) ∈ E} x_{ij} ≥ 1 ∀ S ⊂ V : S ≠ ∅ (rows)");
    assert_eq!(across, out);
    let (_, across) =
        subsets("", "  Σ_{i ∈ S} Σ_{j ∈ V ∖ S : (i,j) ∈ E} x_{ij} ≥ 1 ∀ S ⊂ V : S ≠ ∅ (rows)");
    assert_eq!(across, out);
}

#[test]
fn elements_that_an_index_gives() {
    let mut instance = kitchen();
    let pair = |a: &str, b: &str| vec![a.to_owned(), b.to_owned()];
    let rows = vec![pair("red", "Cedar"), pair("blue", "Ash")];
    instance.set("o", instance::Datum::Tuples { arity: 2, rows });
    let text = around(
        "  V\n  K\n  o_k ∈ V ∀ k ∈ K",
        "",
        "  z_{o_k} ≤ 1 + z_i ∀ k ∈ K, i ∈ V : i ≠ o_k (rows)",
    );
    let model = made(&text, &instance);
    assert_eq!(rows_of(&model, "rows").len(), 8);
    assert_eq!(rows_of(&model, "rows")[0], "−z[Ash] + z[Cedar] ≤ 1");
}

/// Labels compare by their place in the listing, also when they look like numbers; whole
/// numbers by value.
#[test]
fn order_of_labels_and_of_numbers() {
    let own = |names: &[&str]| names.iter().map(|&n| n.to_owned()).collect::<Vec<_>>();
    let mut instance = instance::Instance::new(instance::Reader::Blocks);
    let text = "data\n  V\nminimise\n  Σ_{i ∈ V} z_i\nsubject to\n  z_i ≥ 0 ∀ i ∈ V\n  z_i ≥ z_j ∀ i, j ∈ V : i < j (rows)\n";
    instance.set("V", instance::Datum::Labels(own(&["10", "9", "x"])));
    assert_eq!(rows_of(&made(text, &instance), "rows")[0], "z[10] − z[9] ≥ 0");
    instance.set("V", instance::Datum::Integers(vec![10, 9]));
    assert_eq!(rows_of(&made(text, &instance), "rows"), ["−z[10] + z[9] ≥ 0"]);
}

/// The mends of an undeclared name: either makes the text say what the name is.
#[test]
fn mends_can_be_applied() {
    use hullward_notation::{check, parse};
    let text = around("  V", "", "  z_i ≤ 2 w_i ∀ i ∈ V (rows)");
    let (_, found) = check(&parse(&text).tree);
    let labels: Vec<&str> = found[0].mends.iter().map(|m| m.label.as_str()).collect();
    assert_eq!(labels, ["make it a variable", "make it a datum"]);
    for mend in &found[0].mends {
        let edit = mend.edit.as_ref().unwrap();
        let mut mended = text.clone();
        mended.replace_range(edit.span.clone(), &edit.text);
        let (_, found) = check(&parse(&mended).tree);
        let codes: Vec<_> = found.iter().map(|d| d.code).collect();
        assert!(!codes.contains(&"name.undeclared"), "{mended}\n{codes:?}");
    }
}

/// The mend of a name without indices was a line that held the name alone, an error of its own.
#[test]
fn a_name_without_indices_is_mended_to_a_domain_line() {
    use hullward_notation::{check, parse};
    let text = "minimise\n  3 z\nsubject to\n  2 z ≥ 1  (one)\n";
    let (_, found) = check(&parse(text).tree);
    let edit = found[0].mends[0].edit.as_ref().unwrap();
    let mut mended = text.to_owned();
    mended.replace_range(edit.span.clone(), &edit.text);
    let parse = parse(&mended);
    let found = [parse.diagnostics, check(&parse.tree).1].concat();
    assert!(found.is_empty(), "{mended}\n{found:?}");
}

/// Unit commitment as it is printed: `∀ g, t` after rows over `t ∈ T ∖ {1}`.
#[test]
fn an_index_that_sometimes_skips_an_element_runs_over_all() {
    use hullward_notation::{check, parse};
    let text = "data\n  G\n  T = {1..4}\n  a_g ∀ g ∈ G\nminimise\n  Σ_{g ∈ G} Σ_{t ∈ T} a_g u_{g,t}\n\
        subject to\n  u_{g,t} − u_{g,t−1} ≤ v_{g,t}  ∀ g ∈ G, t ∈ T ∖ {1}  (start)\n  \
        Σ_g u_{g,t} ≥ 1  ∀ t  (on)\n  u_{g,t}, v_{g,t} ∈ {0,1}  ∀ g, t\n";
    let (_, found) = check(&parse(text).tree);
    assert!(!found.iter().any(hullward_notation::Diagnostic::is_error), "{found:?}");
}

/// Precedence variables (Gouveia & Pires 1999) were told that their M is too small by one.
#[test]
fn precedence_between_0_and_1_is_no_position() {
    let codes = |most: u32| {
        let text = format!(
            "data\n  V\nminimise\n  Σ_{{i ∈ V}} Σ_{{j ∈ V}} x_{{i,j}}\nsubject to\n  \
             Σ_{{j ∈ V}} x_{{i,j}} = 1 ∀ i ∈ V (leave)\n  \
             v_i − v_j + {most} x_{{i,j}} ≤ {most} ∀ i, j ∈ V : i ≠ j (order)\n  \
             x_{{i,j}} ∈ {{0,1}} ∀ i, j ∈ V\n  0 ≤ v_i ≤ {most} ∀ i ∈ V\n"
        );
        let mut instance = instance::Instance::new(instance::Reader::Blocks);
        let labels = ["a", "b", "c"].iter().map(|&name| name.to_owned()).collect();
        instance.set("V", instance::Datum::Labels(labels));
        let none = std::collections::BTreeMap::new();
        let (_, found) =
            hullward_notation::model(&text, &instance, &none, &std::collections::BTreeMap::new())
                .unwrap();
        found.iter().map(|one| one.code).collect::<Vec<_>>()
    };
    assert!(!codes(1).contains(&"lint.order-step"), "{:?}", codes(1));
    assert!(codes(3).contains(&"lint.order-step"), "{:?}", codes(3));
}

#[test]
fn edges_named_by_one_letter() {
    let edges = "  E ⊆ V × V\n  w_e = 2 ∀ e ∈ E";
    let lines = "  x_e ∈ {0,1} ∀ e ∈ E\n  Σ_{e ∈ δ(i)} w_e x_e = 2 ∀ i ∈ V (rows)";
    assert_eq!(rows(edges, "", lines)[0], "2 x[Ash → Birch] + 2 x[Ash → Elm] = 2");
    let lines = "  x_e ∈ {0,1} ∀ e ∈ E\n  2 x_e ≤ w_e ∀ e ∈ E : e ∉ ∅ (rows)";
    assert_eq!(rows(edges, "", lines).len(), 5);
    let pairs = subsets("", "  Σ_{e ∈ E(S)} x_e ≤ |S| − 1 ∀ S ⊂ V : |S| ≥ 2 (rows)");
    assert_eq!(pairs.1, subsets("", "  x(E(S)) ≤ |S| − 1 ∀ S ⊂ V : |S| ≥ 2 (rows)").1);
    let cut = subsets(
        "",
        "  \\sum_{e \\in \\delta(S)} x_e \\ge 2 \\quad \\forall\\, \\emptyset \\ne S \\subset V \\tag{rows}",
    );
    assert_eq!(cut.1, subsets("", "  x(δ(S)) ≥ 2 ∀ S ⊂ V : S ≠ ∅ (rows)").1);
}

#[test]
fn names_are_mapped_and_states_are_by_label() {
    let text = "data\n  N\n  w_i ∀ i ∈ N\nminimise\n  Σ_{i ∈ N} w_i z_i\nsubject to\n  z_i ≥ 1 ∀ i ∈ N\n  z_i ≤ 2 w_i + 3 ∀ i ∈ N (most)\n";
    let names = [("N".to_owned(), "V".to_owned()), ("w".to_owned(), "q".to_owned())].into();
    let states = [("msot".to_owned(), model::FamilyState::Out)].into();
    let (model, found) = hullward_notation::model(text, &kitchen(), &names, &states).unwrap();
    assert_eq!(model.columns().len(), 5);
    let codes: Vec<_> = found.iter().map(|d| d.code).collect();
    assert_eq!(codes, ["data.no-family"]);
    let lacks =
        hullward_notation::model(text, &kitchen(), &Default::default(), &states).unwrap_err();
    assert!(
        lacks.iter().any(|d| d.code == "data.lacks"
            && d.message.starts_with("the instance lacks w; it offers V, c"))
    );
}

#[test]
fn the_limit_names_the_family_that_would_exceed_it() {
    use hullward_notation::{Expansion, Limits, bind, check, parse};
    let text = around(
        "  V",
        "",
        "  Σ_{j ∈ V} z_j ≥ z_i ∀ i ∈ V (all pairs)\n  z_i ≥ z_j ∀ i, j ∈ V : i ≠ j (order)",
    );
    let made = |nonzeros: usize| {
        let bound = bind(&check(&parse(&text).tree).0, &kitchen(), &Default::default()).unwrap();
        Expansion::new(bound, &Default::default(), Limits { nonzeros }).finish()
    };
    assert!(made(65).is_ok());
    let found = made(40).unwrap_err();
    assert_eq!(found[0].code, "size.nonzeros");
    assert_eq!(found[0].message, "with (order) the model has more than 40 non-zeros");
    assert_eq!(
        made(20).unwrap_err()[0].message,
        "with (all pairs) the model has more than 20 non-zeros"
    );
}

/// A text with a line that cannot be read is never bound, whatever the rest says.
#[test]
fn a_text_with_an_unread_line_is_not_bound() {
    use hullward_notation::{bind, check, parse};
    let text = around("  V", "", "  z_i + ≤ 1 ∀ i ∈ V (broken)");
    let parsed = parse(&text);
    assert_eq!(parsed.diagnostics.len(), 1);
    let (checked, _) = check(&parsed.tree);
    assert!(!checked.is_sound());
    assert_eq!(
        bind(&checked, &kitchen(), &Default::default()).unwrap_err()[0].code,
        "data.unsound"
    );
}

#[test]
fn rounded_sums_over_the_subset() {
    let data = "  q_i ∀ i ∈ V\n  Q\n";
    let (_, members) =
        subsets(data, "  x(δ(S)) ≥ 2 ⌈Σ_{i ∈ S} q_i / Q⌉ ∀ S ⊆ V : |S| = 3 (rounded)");
    // Cedar, Dogwood and Elm carry 5 + 6 + 7 = 18 of 10 a vehicle: two vehicles, so four edges
    assert!(members.iter().any(|row| row.ends_with("≥ 4")), "{members:?}");
    assert!(members.iter().all(|row| row.ends_with("≥ 4") || row.ends_with("≥ 2")), "{members:?}");
    let (_, floor) = subsets("", "  x(E(S)) ≤ ⌊|S| / 2⌋ ∀ S ⊆ V : |S| = 3 (rows)");
    let (_, plain) = subsets("", "  x(E(S)) ≤ 1 ∀ S ⊆ V : |S| = 3 (rows)");
    assert_eq!(floor, plain);
}

/// A named row of one variable was taken for a domain line when the other side was a datum, and
/// an index on the other side for a variable.
#[test]
fn a_named_row_with_a_datum_or_an_index_beside_one_variable_is_a_row() {
    for right in ["q_i", "2 q_i"] {
        let text = format!(
            "data\n  V\n  q_i ∀ i ∈ V\nminimise\n  Σ_{{i ∈ V}} z_i\nsubject to\n  \
             z_i ≥ {right} ∀ i ∈ V (demand)\n  z_i ≥ −1 ∀ i ∈ V\n"
        );
        assert_eq!(made(&text, &kitchen()).row_count(), 5, "{text}");
    }
    let text = "minimise\n  Σ_{k ∈ {1..3}} z_k\nsubject to\n  z_k ≥ k ∀ k ∈ {1..3}\n";
    assert_eq!(made(text, &kitchen()).columns().len(), 3);
}

/// What papers write and the parser did not take.
#[test]
fn unions_powers_groups_and_cases_inside_sums() {
    let data = "  N_i ⊆ V ∀ i ∈ V\n";
    let union = rows(data, "  U = ⋃_{k ∈ V} N_k", "  z_i ≥ 1 ∀ i ∈ U (rows)");
    let listed = "  U = {i ∈ V : |{k ∈ V : i ∈ N_k}| ≥ 1}";
    let sorted = |mut rows: Vec<String>| {
        rows.sort_unstable();
        rows
    };
    let listed = rows(data, listed, "  z_i ≥ 1 ∀ i ∈ U (rows)");
    assert!(union.len() > 1);
    assert_eq!(sorted(union), listed);
    let both = "  z_i ≥ z_j ∀ j ∈ V, i ∈ \\bigcap_{k \\in V : k \\le j} N_k (rows)";
    let counted =
        "  z_i ≥ z_j ∀ j ∈ V, i ∈ V : |{k ∈ V : k ≤ j, i ∈ N_k}| = |{k ∈ V : k ≤ j}| (rows)";
    assert!(!rows(data, "", both).is_empty());
    assert_eq!(sorted(rows(data, "", both)), sorted(rows(data, "", counted)));
    let data = "  q\n  h \\in \\mathbb{Z}_+  a remark behind the sign\n  1 ≤ g ∈ ℤ_+\n";
    let (model, _) = {
        let text = format!(
            "data\n  V\n{data}minimise\n  Σ_{{i ∈ V}} z_i\nsubject to\n  z_i ≥ 0 ∀ i ∈ V\n  \
             h z_i ≥ 2^(q − 1) + g ∀ i ∈ V (rows)\n"
        );
        let mut instance = kitchen();
        for (name, value) in [("q", 4), ("h", 2), ("g", 1)] {
            instance.set(name, instance::Datum::Number(model::Number::from(value)));
        }
        hullward_notation::model(&text, &instance, &Default::default(), &Default::default())
            .unwrap()
    };
    assert_eq!(rows_of(&model, "rows")[0], "2 z[Ash] ≥ 9");
    assert_eq!(rows("", "", "  {z}_{i} + {z_j} ≤ 1 ∀ i, j ∈ V : i < j (rows)").len(), 10);
    let cases = "  z_i + \\begin{cases} 2 & \\text{if } i = j \\\\ 3 & \\text{otherwise} \\end{cases} ≤ 9 ∀ i, j ∈ V (rows)";
    let found = rows("", "", cases);
    // the label is that of the first case
    assert_eq!(found.len(), 5);
    assert!(found.iter().all(|row| row.ends_with("≤ 7")), "{found:?}");
    let brace = "  \\left. z_i ≤ 9 \\\\ z_i ≤ 4 \\right\\} \\quad ∀ i ∈ V";
    assert_eq!(bounds(&made(&around("  V", "", brace), &kitchen()), "z", &["Ash"]), "[0, 4]");
    // ⌈⌉ of a minimum times a sum: the product is the body
    let least = rows("", "", "  z_i ≤ min_{k ∈ {2..3}} k · Σ_{l ∈ {1..2}} l ∀ i ∈ V (rows)");
    assert_eq!(least[0], "z[Ash] ≤ 6");
}

/// As the text layer of a PDF gives sums and subscripts.
#[test]
fn sums_and_subscripts_as_a_pdf_gives_them() {
    let text = |sum: &str| {
        format!(
            "data\n  n\n  a_j ∀ j ∈ {{1..n}}\n\nminimise {sum}\nsubject to\nxj ≥ 1,  j = 1, …, n\nxj ∈ {{0,1}},  j = 1, …, n\n"
        )
    };
    let mut instance = instance::Instance::new(instance::Reader::Blocks);
    instance.set("n", instance::Datum::Number(model::Number::from(3)));
    let cells = (1..=3).map(|j| (vec![j.to_string()], model::Number::from(2 * j))).collect();
    instance.set("a", instance::Datum::Table { arity: 1, cells });
    let plain = made(&text("∑_{j=1}^{n} a_j x_j").replace("xj", "x_j"), &instance);
    for sum in [
        "n∑j=1 aj xj",
        "∑nj=1 ajxj",
        "∑n\nj=1 ajxj",
        "n\n∑\nj=1\najxj",
        "∑ n j=1 aj xj",
        "∑j=1^n aj xj",
        "∑ j=1^n ajxj",
        "0+n∑j=1 ajxj",
    ] {
        assert_eq!(made(&text(sum), &instance), plain, "{sum}");
    }
    let parsed = hullward_notation::parse(&text("∑ j=1 aj xj"));
    assert_eq!(parsed.diagnostics[0].code, "syntax.upper-limit");
}
