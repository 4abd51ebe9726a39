//! Linearisations: where a text writes a product of variables, an absolute value, a least or
//! greatest of several, or an implication, the rows that say the same are offered as a mend that
//! writes them. How large an M must be is computed from the bounds of the domain lines, as an
//! expression over the data, so that it is right on every instance.
//!
//! | file | does |
//! |---|---|
//! | `site.rs` | finds the place and the quantifiers above it |
//! | `ranges.rs` | least and greatest value of an expression, by the domain lines |
//! | `product.rs` | products (McCormick 1976) |
//! | `kinks.rs` | `|a|`, min, max |
//! | `implication.rs` | `y = 1 ⟹ a ≤ b` |

mod implication;
mod kinks;
mod product;
mod ranges;
mod site;

use std::collections::BTreeSet;

use crate::check::Checked;
use crate::diagnostic::Diagnostic;
use crate::parse::Parse;
use crate::place::Span;
use crate::print;
use crate::rewrite;
use crate::syntax::{Clause, Expression, Formulation, Kind, Line, Name, Relation};
use ranges::Ranges;
use site::Site;

/// The diagnostics of a text with the linearisations that mend them. `found` is what [`crate::parse()`]
/// and [`crate::check()`] said.
#[must_use]
pub fn offers(
    text: &str,
    parsed: &Parse,
    checked: &Checked,
    found: Vec<Diagnostic>,
) -> Vec<Diagnostic> {
    let found = implication::offers(text, found);
    let tree = &parsed.tree;
    let words = Words::new(tree, checked);
    let offered = found.into_iter().map(|diagnostic| match diagnostic.code {
        "shape.product" | "shape.not-constant" => offer(text, tree, &words, diagnostic),
        _ => diagnostic,
    });
    offered.collect()
}

fn offer(text: &str, tree: &Formulation, words: &Words, diagnostic: Diagnostic) -> Diagnostic {
    let Some(site) = site::find(tree, words, &diagnostic) else { return diagnostic };
    let ranges = Ranges { tree, words };
    let rows = match &site.what.kind {
        Kind::Function(..) | Kind::Big(..) => kinks::rows(&site, &ranges),
        _ => product::rows(&site, &ranges),
    };
    match (rows, tree.ends.statements) {
        (Some(rows), Some(end)) => rows.mend(text, &site, end, diagnostic),
        _ if diagnostic.code == "shape.product" => diagnostic.mend(
            "it can be written with rows where one factor is a binary and the other has a lower \
             and an upper bound",
        ),
        _ => {
            diagnostic.mend("it can be written with rows where every variable in it has two bounds")
        }
    }
}

/// What a linearisation writes.
struct Rows {
    /// What stands in the place of the site.
    new: Expression,
    /// Rows and domain lines, without their quantifiers and labels.
    rows: Vec<(String, Vec<Clause>)>,
    domains: Vec<(String, Vec<Clause>)>,
    /// The first word of the labels.
    label: &'static str,
}

impl Rows {
    /// The mend: the new expression at its place and the lines behind the last statement, as one
    /// replacement.
    fn mend(self, text: &str, site: &Site<'_>, end: Span, found: Diagnostic) -> Diagnostic {
        let shown: Vec<&str> = self.rows.iter().map(|(row, _)| row.as_str()).collect();
        let new = print::expression(&self.new);
        let with = if shown.is_empty() { "" } else { ", with " };
        let label = bare_indices(&format!("write {new} for it{with}{}", shown.join("; ")));
        let mut lines = String::new();
        let rows = self.rows.iter().zip(site.labels(self.label));
        for ((row, clauses), label) in rows {
            lines += &format!("\n  {row}{}  ({label})", rewrite::quantifier(clauses));
        }
        for (domain, clauses) in &self.domains {
            lines += &format!("\n  {domain}{}", rewrite::quantifier(clauses));
        }
        let (at, end) = (site.what.span.range(), end.end as usize);
        let part = |from: usize, to: usize| text.get(from..to).unwrap_or("");
        if at.end <= end {
            let replaced = format!("{new}{}{lines}", part(at.end, end));
            found.mend_by(label, Span::new(at.start, end), replaced)
        } else {
            let replaced = format!("{lines}{}{new}", part(end, at.start));
            found.mend_by(label, Span::new(end, at.end), replaced)
        }
    }
}

/// `w_i` for `w_{i}`, as on a button.
fn bare_indices(text: &str) -> String {
    let mut out = String::new();
    let mut rest = text;
    while let Some(at) = rest.find("_{") {
        let (before, after) = (&rest[..at + 1], &rest[at + 2..]);
        out.push_str(before);
        let mut letters = after.chars();
        rest = match (letters.next(), letters.next()) {
            (Some(letter), Some('}')) => {
                out.push(letter);
                letters.as_str()
            }
            _ => {
                out.push('{');
                after
            }
        };
    }
    out + rest
}

/// `left ≤ right` and its like as text.
fn relation(left: &Expression, sign: Relation, right: &Expression) -> String {
    format!("{} {} {}", print::expression(left), print::sign(sign), print::expression(right))
}

/// `1 − z`.
fn complement(z: &Expression) -> Expression {
    rewrite::add(rewrite::number(&model::Number::ONE), true, z.clone())
}

/// The names of a text.
struct Words {
    /// Data and definitions.
    data: BTreeSet<String>,
    variables: BTreeSet<String>,
    /// Every word.
    all: BTreeSet<String>,
}

impl Words {
    fn new(tree: &Formulation, checked: &Checked) -> Self {
        let own = |names: Vec<&str>| names.into_iter().map(str::to_owned).collect::<BTreeSet<_>>();
        let mut all = BTreeSet::new();
        let lines = tree.data.iter().chain(&tree.definitions).chain(&tree.statements);
        for expression in lines.flat_map(of_line) {
            words(expression, &mut all);
        }
        if let Some(objective) = &tree.objective {
            words(&objective.expression, &mut all);
        }
        let data = [checked.data(), checked.definitions()].concat();
        Self { data: own(data), variables: own(checked.variables()), all }
    }

    /// Whether a variable stands in an expression.
    fn hold(&self, expression: &Expression) -> bool {
        let own = matches!(&expression.kind, Kind::Name(name) | Kind::Call(name, _)
            if self.variables.contains(&name.text));
        own || crate::check::children(expression).into_iter().any(|child| self.hold(child))
    }

    /// The first of some names that the text does not use, each used once.
    fn fresh(&self, names: &[&str], count: usize) -> Option<Vec<String>> {
        let free = names.iter().filter(|name| {
            !self.all.contains(**name)
                && !self.all.iter().any(|word| word.chars().count() > 1 && word.contains(**name))
        });
        let found: Vec<String> = free.take(count).map(|name| (*name).to_owned()).collect();
        (found.len() == count).then_some(found)
    }

    /// A name for a new quantity.
    fn quantity(&self) -> Option<String> {
        self.fresh(&["w", "v", "g", "h", "ω", "η", "θ", "φ"], 1)?.pop()
    }

    /// A name for a new index.
    fn index(&self) -> Option<String> {
        self.fresh(&["k", "l", "m", "o", "e", "ι", "λ", "μ"], 1)?.pop()
    }

    /// Names for new binaries.
    fn binaries(&self, count: usize) -> Option<Vec<String>> {
        self.fresh(&["z", "y", "b", "β", "γ", "ζ", "ξ", "κ"], count)
    }
}

fn of_line(line: &Line) -> impl Iterator<Item = &Expression> {
    let clauses = line.clauses.iter().flat_map(|c| c.items.iter().chain(&c.such_that));
    line.left.iter().chain(line.links.iter().map(|(_, operand)| operand)).chain(clauses)
}

fn words(expression: &Expression, found: &mut BTreeSet<String>) {
    if let Kind::Name(Name { text, .. }) | Kind::Call(Name { text, .. }, _) = &expression.kind {
        found.insert(text.clone());
    }
    for child in crate::check::children(expression) {
        words(child, found);
    }
}
