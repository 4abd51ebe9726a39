//! What must hold for every text: no panic, spans on character boundaries, an end in
//! reasonable time, and a printer that the parser reads back.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    reason = "a test ends where it fails"
)]

#[allow(dead_code, unreachable_pub, reason = "each test file uses its own part")]
use crate::common::{kitchen, run_time, shown};
use hullward_notation::mathml::Element;
use hullward_notation::{Diagnostic, check, model, parse, print, typeset};
use proptest::prelude::*;
use std::collections::BTreeMap;
use std::time::Duration;

/// Pieces of which texts are made that often read as formulations.
const PIECES: &[&str] = &[
    "data\n",
    "definitions\n",
    "minimise\n",
    "subject to\n",
    "\\begin{align}",
    "\\begin{cases}",
    "\\end{cases}",
    "\\newcommand{\\m}{\\m x \\m}",
    "\\def\\a{\\m + \\a}",
    "\\m",
    "\\a",
    "{\\rm s.t.}",
    "\\underset{x}{\\min}",
    "\\stackrel{i=1}{j≠i}",
    "$$",
    "\\[",
    ";",
    " and ",
    " integer",
    " for all distinct ",
    "(i ∈ V; j ∈ V)",
    "∑ i ∈ V ",
    "Z^* = \\max\\{",
    "\\end{align}",
    "\\\\",
    "\n",
    "\n\n",
    "  ",
    " ",
    "\t",
    "&",
    "\\quad ",
    "V",
    "A ⊆ V × V",
    "c_{i,j}",
    "x_{ij}",
    "x_i^k",
    "u_i",
    "r",
    "n",
    "T",
    "S",
    "i",
    "j",
    "t",
    "12",
    "0.5",
    "1e3",
    "Σ_{(i,j) ∈ A}",
    "Σ_{j : (i,j) ∈ A}",
    "\\sum_{i=1}^{n}",
    "∏_{t ∈ T}",
    "max_{t ∈ T}",
    " ∀ i ∈ V",
    " ∀ (i,j) ∈ A : i ≠ r",
    " for all ",
    " ∀ S ⊂ V : 2 ≤ |S| ≤ n − 1",
    "∈",
    "∉",
    "⊆",
    "≤",
    "≥",
    "=",
    "<",
    "≠",
    "+",
    "−",
    "-",
    "·",
    "×",
    "/",
    "^",
    "_",
    "^{2}",
    "_{t−1}",
    "(",
    ")",
    "{",
    "}",
    "\\{",
    "\\}",
    "[",
    "]",
    "|",
    "⌊",
    "⌋",
    "⌈",
    "⌉",
    ",",
    ":",
    ";",
    ".",
    "..",
    "…",
    "∅",
    "∞",
    "ℝ_+",
    "ℤ",
    "𝔹",
    "{0,1}",
    "{1..n}",
    "min(",
    "max(",
    "\\frac{a}{b}",
    "\\bar d_t",
    "c_{\\max}",
    "x^+",
    "y^{\\text{in}}",
    "\\text{odd}",
    "\\text{free}",
    " odd",
    " (leave)",
    "\\tag{3}",
    "\\label{q}",
    "# remark\n",
    "% remark\n",
    "\\foo",
    "é",
    "𝒳",
    "\u{0}",
    "xᵢⱼ",
    "y²",
    "∪",
    "∩",
    "∖",
    "\\ ",
    "∧",
    "∨",
    "¬",
    "and",
    "mod 2 = 1",
    "≡ 1 (mod 2)",
    "clique in E",
    "δ(S)",
    "x(A)",
    "E(S)",
    "s.t.",
    "such that",
];

fn texts() -> impl Strategy<Value = String> {
    prop::collection::vec(prop::sample::select(PIECES), 0..40).prop_map(|pieces| pieces.concat())
}

/// A text that mostly reads: parts in order, lines from small grammars.
fn formulations() -> impl Strategy<Value = String> {
    let atom = prop::sample::select(
        &[
            "x_{i,j}",
            "c_{i,j} x_{i,j}",
            "2",
            "(n − 1)",
            "u_i",
            "Σ_{j : (i,j) ∈ A} x_{i,j}",
            "|S|",
            "⌈n / 2⌉",
            "max(1, n)",
            "−u_j",
            "n^{2}",
            "3.25",
            "x(A)",
            "\\bar d_{t−1}",
            "Σ_{t=1}^{n} y_t",
        ][..],
    );
    let operator = prop::sample::select(&[" + ", " − ", " ", " · ", " / "][..]);
    let expression =
        (atom.clone(), prop::collection::vec((operator, atom), 0..4)).prop_map(|(first, rest)| {
            rest.iter().fold(first.to_owned(), |all, (op, next)| all + op + next)
        });
    let relation = prop::sample::select(&[" ≤ ", " = ", " ≥ ", " ∈ "][..]);
    let quantifier = prop::sample::select(
        &[
            "",
            "  ∀ i ∈ V",
            "  ∀ (i,j) ∈ A : i ≠ r",
            ", i, k ∈ V",
            "  ∀ S ⊂ V : S ≠ ∅, |S| odd",
            "  ∀ t ∈ {1..n}",
        ][..],
    );
    let label = prop::sample::select(&["", "  (leave)", "  \\tag{7}"][..]);
    let line = (expression.clone(), relation, expression.clone(), quantifier, label)
        .prop_map(|(a, r, b, q, l)| format!("  {a}{r}{b}{q}{l}\n\n"));
    (expression, prop::collection::vec(line, 1..6)).prop_map(|(objective, lines)| {
        format!("A title\n\ndata\n  V  stops\n  A ⊆ V × V\n  c_{{i,j}} ∀ (i,j) ∈ A  minutes\nminimise\n  {objective}\nsubject to\n{}", lines.concat())
    })
}

fn on_boundaries(text: &str, found: &[Diagnostic]) -> bool {
    let fits = |span: &std::ops::Range<usize>| text.get(span.clone()).is_some();
    found.iter().all(|d| fits(&d.span) && d.also.iter().all(|(span, _)| fits(span)))
}

fn reads_back(text: &str) -> Result<(), TestCaseError> {
    let parsed = parse(text);
    if parsed.diagnostics.iter().all(|d| d.severity == hullward_notation::Severity::Info) {
        let printed = print(&parsed.tree);
        let again = parse(&printed);
        prop_assert!(
            again.diagnostics.is_empty(),
            "{printed}\n{}",
            shown(&printed, &again.diagnostics)
        );
        prop_assert_eq!(&parsed.tree, &again.tree, "{}", printed);
        prop_assert_eq!(&print(&again.tree), &printed);
    }
    Ok(())
}

/// What a text may take of a processor. A second is promised of the page's build; this one checks
/// overflows besides and knows no optimisation across crates, so it is given four.
const LIMIT: Duration = Duration::from_secs(4);

/// Does something with a text and sees that it takes no longer than it may.
fn timed<T>(what: &str, work: impl FnOnce() -> T) -> T {
    let before = run_time();
    let done = work();
    if let (Some(before), Some(after)) = (before, run_time()) {
        let taken = after.saturating_sub(before);
        let shown: String = what.chars().take(80).collect();
        assert!(taken < LIMIT, "{taken:?}: {shown}");
    }
    done
}

/// All that is set of a text, with what holds for every element: a leaf has no children, and
/// others have as many as their layout takes, and no text.
fn typesets(text: &str) -> Result<String, TestCaseError> {
    let set = typeset(&parse(text).tree, text);
    let mut said = String::new();
    for row in &set.rows {
        let cells = [&row.left, &row.right, &row.quantifier];
        for element in cells.into_iter().flatten() {
            say(element, &mut said)?;
        }
        said.push_str(&row.words);
        prop_assert!(text.get(row.span.range()).is_some());
    }
    Ok(said)
}

fn say(element: &Element, said: &mut String) -> Result<(), TestCaseError> {
    let count = element.children.len();
    prop_assert!(element.tag.arity().is_none_or(|arity| arity == count), "{element:?}");
    prop_assert!(count == 0 || element.text.is_empty(), "{element:?}");
    said.push_str(&element.text);
    element.children.iter().try_for_each(|child| say(child, said))
}

proptest! {
    #![proptest_config(ProptestConfig {
        cases: 400,
        failure_persistence: None,
        ..ProptestConfig::default()
    })]

    #[test]
    fn any_text_ends_without_panic(text in "\\PC{0,200}") {
        let parsed = parse(&text);
        prop_assert!(on_boundaries(&text, &parsed.diagnostics));
        let (_, found) = check(&parsed.tree);
        prop_assert!(on_boundaries(&text, &found));
        typesets(&text)?;
    }

    #[test]
    fn pieces_in_any_order_end_without_panic(text in texts()) {
        let made = timed(&text, || model(&text, &kitchen(), &BTreeMap::new(), &BTreeMap::new()));
        let found = match made {
            Ok((_, found)) | Err(found) => found,
        };
        prop_assert!(on_boundaries(&text, &found), "{}", shown(&text, &found));
        reads_back(&text)?;
        typesets(&text)?;
    }

    #[test]
    fn what_reads_prints_and_reads_back(text in formulations()) {
        // that a quantifier was implied is told, and is nothing wrong
        let wrong = |d: &&Diagnostic| d.severity != hullward_notation::Severity::Info;
        let parsed = parse(&text);
        prop_assert_eq!(parsed.diagnostics.iter().find(wrong), None, "{}", &text);
        reads_back(&text)?;
        let said = typesets(&text)?;
        let (checked, _) = check(&parse(&text).tree);
        for name in [checked.data(), checked.definitions(), checked.variables()].concat() {
            let plain = name.chars().all(char::is_alphanumeric);
            prop_assert!(!plain || said.contains(name), "{name} is lost of {text}: {said}");
        }
    }
}

#[test]
fn deep_nesting_is_one_error() {
    for open in ["(", "{", "|", "−", "⌊", "x_{", "(¬", "Σ_{i ∈ V} (", "\\frac{", "2^{", "max("]
    {
        let text = format!("minimise\n{}", open.repeat(100_000));
        let parsed = timed(open, || parse(&text));
        assert_eq!(parsed.diagnostics.len(), 1, "{open}: {}", shown(&text, &parsed.diagnostics));
        assert_eq!(parsed.diagnostics[0].code, "syntax.too-deep", "{open}");
    }
}

#[test]
fn long_flat_texts_are_no_deep_trees() {
    let sum = "x + ".repeat(100_000);
    let text = format!("minimise\n  {sum}x\nsubject to\n  x ≥ 0\n");
    let (model, _) = model(&text, &kitchen(), &BTreeMap::new(), &BTreeMap::new()).unwrap();
    assert_eq!(model.columns().len(), 1);
    let cost = model.numbers().exact(model.columns()[0].cost);
    assert_eq!(*cost, model::Number::from(100_001));
}

#[test]
fn noise_and_long_names_end() {
    let mut state = 12_345_u64;
    let mut noise = String::new();
    let marks: Vec<char> = "Σ∀∈≤(){}[]|_^,;:\\&\n xyabc01 ⊂∖tagtext#%$".chars().collect();
    while noise.len() < 1_900_000 {
        state =
            state.wrapping_mul(6_364_136_223_846_793_005).wrapping_add(1_442_695_040_888_963_407);
        noise.push(marks[(state >> 33) as usize % marks.len()]);
    }
    for prefix in ["", "data\n", "minimise\n", "subject to\n"] {
        let text = format!("{prefix}{noise}");
        let parsed = timed(prefix, || parse(&text));
        assert!(!parsed.diagnostics.is_empty() && parsed.diagnostics.len() <= 200);
        let (_, found) = timed(prefix, || check(&parsed.tree));
        assert!(on_boundaries(&text, &found));
    }
    let huge = "(".repeat(5_000_000);
    assert_eq!(parse(&huge).diagnostics[0].code, "syntax.too-long");
    let name = "q".repeat(600_000);
    let text = format!("minimise\n  2 {name}\nsubject to\n  x_{{{name}}} ≥ 1  ({name})\n");
    let (_, found) = check(&parse(&text).tree);
    let short: Vec<String> = found.iter().map(|d| d.code.to_owned()).collect();
    assert!(short.contains(&"name.undeclared".to_owned()), "{short:?}");
    assert!(found.iter().all(|d| d.message.len() < 400));
}

/// Braces and environments that never close, and small letters in a row, were each looked for to
/// the end of the text, once for every one of them: two million bytes took minutes.
#[test]
fn no_time_grows_with_the_square_of_a_text() {
    let units = [
        "\\text{.) for all ",
        "\\stackrel{a}{",
        "∪\\intertext{.",
        "^{2}\\begin{cases}",
        "\\left\\{\\begin{array}",
        "xᵢⱼ",
        "x(A)",
        "x  (A)",
        "x_i, ",
        "∑ n",
        "n∑j=1",
        "\\left. a \\right\\} ",
        "∀ i ∈ V \\quad ",
        "Let $x = y$ be the first of all of them ",
        "We say of it that\nall of these words go on\n",
        "x^{q} ",
        "[n] × ",
        "{i,j} ∈ E, ",
        "x \\ge 0;\\; ",
    ];
    for unit in units {
        for head in ["minimise\n x\nsubject to\n x ≤ 1 ", "data\n"] {
            let text = format!("{head}{}", unit.repeat(400_000 / unit.len()));
            let parsed = timed(unit, || parse(&text));
            assert!(on_boundaries(&text, &parsed.diagnostics), "{unit}");
        }
    }
}
