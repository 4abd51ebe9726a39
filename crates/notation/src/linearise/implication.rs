//! `y = 1 ⟹ a ≤ b` and "if y = 1 then a ≤ b": a row that a binary switches on,
//! `a ≤ b + M (1 − y)`, with the smallest M that the bounds prove.

use std::ops::Range;

use model::Number;

use super::ranges::Ranges;
use super::{Words, complement};
use crate::check::check;
use crate::diagnostic::{Diagnostic, shapes};
use crate::parse::parse;
use crate::place::Span;
use crate::rewrite::{self, add, times};
use crate::syntax::{Expression, Formulation, Line, Relation};

const ARROWS: [&str; 7] = ["⟹", "⇒", "\\implies", "\\Longrightarrow", "\\Rightarrow", "=>", "⟶"];

/// Implications of which a text may have more than are looked at.
const MOST: usize = 20;

/// A line that says what holds where a binary has a value.
struct Implication {
    /// From the condition to the end of the line.
    line: Range<usize>,
    condition: Range<usize>,
    /// Where the row begins.
    row: usize,
}

/// What was said of a text, with one diagnostic for each implication in the place of what the
/// parser made of it.
pub(super) fn offers(text: &str, found: Vec<Diagnostic>) -> Vec<Diagnostic> {
    let lines = implications(text);
    if lines.is_empty() {
        return found;
    }
    // the rows alone, each at its place
    let mut rows = text.as_bytes().to_vec();
    for one in &lines {
        rows[one.line.start..one.row].fill(b' ');
    }
    let Ok(rows) = String::from_utf8(rows) else { return found };
    let tree = parse(&rows).tree;
    let words = Words::new(&tree, &check(&tree).0);
    let inside = |d: &Diagnostic| {
        lines.iter().any(|one| one.line.start <= d.span.start && d.span.start <= one.line.end)
    };
    let mut said: Vec<Diagnostic> = found.into_iter().filter(|d| !inside(d)).collect();
    for one in &lines {
        let diagnostic = shapes::implication(Span::new(one.line.start, one.line.end));
        let ranges = Ranges { tree: &tree, words: &words };
        said.push(match mend(text, &tree, &ranges, one) {
            Some((span, label, new)) => diagnostic.mend_by(label, span, new),
            None => diagnostic.mend(
                "say “binary = 1 ⟹ row”, with bounds on every variable of the row, then it can be written with an M",
            ),
        });
    }
    crate::diagnostic::tidy(said)
}

fn implications(text: &str) -> Vec<Implication> {
    let mut found = Vec::new();
    let mut at = 0;
    for line in text.split_inclusive('\n') {
        let start = at;
        at += line.len();
        let shown = line.split(['#', '%']).next().unwrap_or("");
        let own = start + (line.len() - line.trim_start().len());
        let end = start + shown.trim_end().trim_end_matches("\\\\").trim_end().len();
        let piece = text.get(own..end).unwrap_or("");
        if let Some((condition, row)) = split(piece)
            && found.len() < MOST
        {
            let condition = own + condition.start..own + condition.end;
            found.push(Implication { line: own..end, condition, row: own + row });
        }
    }
    found
}

/// The condition of a line and where its row begins.
fn split(line: &str) -> Option<(Range<usize>, usize)> {
    for arrow in ARROWS {
        if let Some(at) = line.find(arrow) {
            return Some((0..at, at + arrow.len()));
        }
    }
    let opened = line.strip_prefix("if ").or_else(|| line.strip_prefix("\\text{if}"))?;
    let start = line.len() - opened.len();
    for word in [" then ", "\\text{then}"] {
        if let Some(at) = opened.find(word) {
            return Some((start..start + at, start + at + word.len()));
        }
    }
    None
}

/// The mend: its place, its words, the rows.
fn mend(
    text: &str,
    tree: &Formulation,
    ranges: &Ranges<'_>,
    one: &Implication,
) -> Option<(Span, String, String)> {
    let line = tree.statements.iter().find(|line| {
        let start = line.span.range().start;
        start >= one.row && start <= one.line.end
    })?;
    let off = switched_off(text.get(one.condition.clone())?.trim(), ranges)?;
    let [a] = &line.left[..] else { return None };
    let [(sign, b)] = &line.links[..] else { return None };
    let ((low_a, high_a), (low_b, high_b)) = (ranges.of(a)?, ranges.of(b)?);
    let above = || {
        let m = add(high_a.clone(), true, low_b.clone());
        (Relation::AtMost, add(b.clone(), false, times(m, off.clone())))
    };
    let below = || {
        let m = add(high_b.clone(), true, low_a.clone());
        (Relation::AtLeast, add(b.clone(), true, times(m, off.clone())))
    };
    let sides = match sign {
        Relation::AtMost => vec![above()],
        Relation::AtLeast => vec![below()],
        Relation::Equal => vec![above(), below()],
        _ => return None,
    };
    let two = sides.len() == 2;
    let rows: Vec<Line> = sides
        .into_iter()
        .enumerate()
        .map(|(k, side)| row(line, a, side, two.then_some(k)))
        .collect();
    let in_tex = text.get(one.line.end..)?.trim_start_matches([' ', '\t']).starts_with("\\\\");
    let between = if in_tex { " \\\\\n  " } else { "\n  " };
    let new: Vec<String> = rows.iter().map(rewrite::line).collect();
    let bare =
        |row: &Line| rewrite::line(&Line { label: None, clauses: Vec::new(), ..row.clone() });
    let shown: Vec<String> = rows.iter().map(bare).collect();
    let span = Span::new(one.line.start, line.span.range().end);
    let label = super::bare_indices(&format!("write {}", shown.join("; ")));
    Some((span, label, new.join(between)))
}

/// One row of an implication; the second of two has a label of its own.
fn row(line: &Line, a: &Expression, side: (Relation, Expression), number: Option<usize>) -> Line {
    let mut new = Line { left: vec![a.clone()], links: vec![side], ..line.clone() };
    if let (Some(label), Some(number)) = (&mut new.label, number) {
        label.text += [" above", " below"].get(number).unwrap_or(&"");
    }
    new
}

/// What is 1 where the condition does not hold: `1 − y` of `y = 1`, `y` of `y = 0`.
fn switched_off(condition: &str, ranges: &Ranges<'_>) -> Option<Expression> {
    let condition = condition.trim_end_matches([',', '&', ' ', '\\']);
    let parsed = parse(&format!("minimise\n  0\nsubject to\n  {condition}  (condition)\n"));
    let line =
        parsed.tree.statements.into_iter().next().filter(|_| parsed.diagnostics.is_empty())?;
    let (mut left, links) = (line.left, line.links);
    let [(Relation::Equal, right)] = &links[..] else { return None };
    let (y, value) = (left.pop()?, rewrite::value(right)?);
    if !ranges.is_binary(&y) {
        return None;
    }
    match value {
        value if value == Number::ONE => Some(complement(&y)),
        value if value.is_zero() => Some(y),
        _ => None,
    }
}
