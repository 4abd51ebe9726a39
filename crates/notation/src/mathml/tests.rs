//! What is set for what is typed, and what holds for every tree.

use super::expression::{DEPTH, MOST};
use super::*;
use crate::parse;

/// An element on one line: `sub[x; i , j]`; `*` is the invisible product, `~` a thin space.
fn shown(element: &Element) -> String {
    let children: Vec<String> = element.children.iter().map(shown).collect();
    match element.tag {
        Tag::Row => format!("⟨{}⟩", children.join(" ")),
        Tag::Thin => "~".to_owned(),
        _ if children.is_empty() => element.text.replace('\u{2062}', "*").replace('\u{a0}', "_"),
        tag => format!("{}[{}]", format!("{tag:?}").to_lowercase(), children.join("; ")),
    }
}

fn cells(row: &TypesetRow) -> [String; 3] {
    let cell = |cell: &[Element]| cell.iter().map(shown).collect::<Vec<_>>().join(" ");
    [cell(&row.left), cell(&row.right), cell(&row.quantifier)]
}

/// The row of one statement.
fn row(statement: &str) -> TypesetRow {
    let text = format!("data\n  demand\nminimise\n  0\nsubject to\n  {statement}\n");
    let parsed = parse(&text);
    assert!(parsed.diagnostics.is_empty(), "{statement}: {:?}", parsed.diagnostics);
    typeset(&parsed.tree, &text).rows.pop().unwrap()
}

fn is(statement: &str, wanted: [&str; 3]) {
    assert_eq!(cells(&row(statement)), wanted, "{statement}");
}

#[test]
fn a_row_aligns_at_its_relation_and_has_its_quantifier_and_label_apart() {
    is(
        "Σ_{j : (i,j) ∈ A} c_{i,j} x_{i,j} = 1  ∀ i ∈ V : i ≠ r  (leave)",
        [
            "⟨under[∑; ⟨j : ⟨⟨( i , j )⟩ ∈ A⟩⟩] ⟨sub[c; ⟨i , j⟩] * sub[x; ⟨i , j⟩]⟩⟩",
            "= 1",
            "∀ ⟨i ∈ V⟩ ~ : ⟨i ≠ r⟩",
        ],
    );
    assert_eq!(row("x ≤ 1  (leave)").words, "leave");
}

#[test]
fn sums_have_limits_or_stacked_conditions() {
    is("Σ_{t=1}^n x_t ≤ 1", ["⟨underover[∑; ⟨t = 1⟩; n] sub[x; t]⟩", "≤ 1", ""]);
    is(
        "Σ_{(i,j) ∈ A : i ∈ S, j ∈ S} x_{ij} ≤ 1",
        [
            "⟨under[∑; table[tablerow[cell[⟨⟨⟨( i , j )⟩ ∈ A⟩ :⟩]]; \
             tablerow[cell[⟨⟨i ∈ S⟩ , ⟨j ∈ S⟩⟩]]]] sub[x; ⟨i j⟩]⟩",
            "≤ 1",
            "",
        ],
    );
}

#[test]
fn names_are_italic_letters_or_upright_words_with_their_decorations() {
    is(
        "demand_t y + \\bar d_t + c_{\\max} + x_i^k ≤ y^{\\text{in}}",
        [
            "⟨⟨sub[demand; t] ~ y⟩ + sub[accent[d; ¯]; t] + sub[c; max] + subsup[x; i; k]⟩",
            "≤ sup[y; in]",
            "",
        ],
    );
    is("x^+ ≤ \\mathcal{B} + \\mathbf{b} + x'", ["sup[x; +]", "≤ ⟨ℬ + 𝐛 + sup[x; ′]⟩", ""]);
}

#[test]
fn fractions_brackets_and_powers_say_what_was_typed() {
    is(
        "(a + b) c ≤ ⌈n/2⌉ − 3 · 2 + (a_i)^2",
        ["⟨⟨( ⟨a + b⟩ )⟩ * c⟩", "≤ ⟨⟨⌈ fraction[n; 2] ⌉⟩ − ⟨3 ⋅ 2⟩ + sup[sub[a; i]; 2]⟩", ""],
    );
    is("−x ≤ 0.5 − (a − b)", ["⟨− x⟩", "≤ ⟨0.5 − ⟨( ⟨a − b⟩ )⟩⟩", ""]);
}

#[test]
fn domains_and_sets_read_as_in_a_paper() {
    is("x_i ∈ {0,1}  ∀ i ∈ {1..n}", ["sub[x; i]", "∈ ⟨{ 0 , 1 }⟩", "∀ ⟨i ∈ ⟨{ 1 , … , n }⟩⟩"]);
    is("x, y ∈ ℤ_{>0}", ["x , y", "∈ sub[ℤ; ⟨> 0⟩]", ""]);
    is(
        "x(δ^+(S)) ≥ 1  ∀ S ⊂ V : |S| odd",
        ["⟨x ⟨( ⟨sup[δ; +] ⟨( S )⟩⟩ )⟩⟩", "≥ 1", "∀ ⟨S ⊂ V⟩ ~ : ⟨⟨| S |⟩ _odd⟩"],
    );
}

#[test]
fn a_line_that_cannot_be_read_stands_as_typed_among_the_others() {
    let text = "minimise\n  x\nsubject to\n  x ≥ 1 (one)\n  x ≤ ≤ <b>&2  (two)\n  x ≤ 3 (three)\n";
    let parsed = parse(text);
    let rows = typeset(&parsed.tree, text).rows;
    let words: Vec<&str> = rows.iter().map(|row| row.words.as_str()).collect();
    assert_eq!(words, ["", "one", "", "three"]);
    assert_eq!(rows[2].unread, "x ≤ ≤ <b>&2 (two)");
    assert!(rows[2].left.is_empty() && rows[3].unread.is_empty());
    let heads: Vec<&str> = rows.iter().map(|row| row.head).collect();
    assert_eq!(heads, ["minimise", "subject to", "", ""]);
    assert_eq!(rows[3].span.of(text), "x ≤ 3 (three)");
}

#[test]
fn what_is_too_deep_or_too_long_ends_in_an_ellipsis() {
    let deep = format!("minimise\n  {}x{}\n", "⌊".repeat(80), "⌋".repeat(80));
    let depth = |element: &Element| {
        let mut depth = 0;
        let mut work = vec![(element, 1)];
        while let Some((one, at)) = work.pop() {
            depth = depth.max(at);
            work.extend(one.children.iter().map(|child| (child, at + 1)));
        }
        depth
    };
    let rows = typeset(&parse(&deep).tree, &deep).rows;
    let deepest = depth(&rows[0].right[0]);
    assert!(deepest > 20 && deepest <= 3 * DEPTH as usize, "{deepest}");
    let long = format!("minimise\n  x{}\nsubject to\n  x ≤ 1\n", " + x".repeat(20_000));
    let set = typeset(&parse(&long).tree, &long);
    assert!(set.rows[0].size() <= 3 * MOST as usize);
    assert_eq!((set.rows.len(), set.further), (1, 1));
    let many = format!("minimise\n  x\nsubject to\n{}", "  x ≤ 1\n".repeat(1_000));
    let set = typeset(&parse(&many).tree, &many);
    assert_eq!((set.rows.len(), set.further), (MOST_ROWS, 601));
}
