//! The printer to LaTeX: the model section as a paper prints it, in `align*` environments of
//! amsmath. What it prints reads back as the same tree.
//!
//! Data and definitions stand in one environment, objective and constraints in another; labels
//! become `\tag`s. A name of several letters is set upright as a whole where it is declared or
//! carries indices; elsewhere letters side by side are left to stand as they were written.

mod expression;
mod letters;
mod name;
mod reserved;

use std::fmt::Write as _;

use crate::lists::Place;
use crate::syntax::{Expression, Formulation, Kind, Line};
use expression::Printer;
pub(crate) use expression::{FACTOR, PRIMARY, PRODUCT, RANGE, SUM, level};
use reserved::escaped;
pub(crate) use reserved::{read_verbatim, remark, unescaped};

/// The whole text, parts in their usual order. `O(tree · log)`.
///
/// It needs `\usepackage{amsmath,amssymb}` and is set by pdfTeX as well as by its successors:
/// lines at the top say how characters are set that pdfTeX does not know. The title is a line of
/// its own before the first environment.
#[must_use]
pub fn latex(tree: &Formulation) -> String {
    let printer = Printer::new(tree);
    let mut out = String::new();
    if let Some(title) = &tree.title {
        let _ = writeln!(out, "{}\n", escaped(title));
    }
    let mut described = part(&printer, "data", &tree.data);
    described.extend(part(&printer, "definitions", &tree.definitions));
    let mut model = Vec::new();
    if let Some(objective) = &tree.objective {
        let sense = if objective.maximise { "maximise" } else { "minimise" };
        let printed = first_of_objective(printer.operand(&objective.expression));
        model.push(format!("\\text{{{sense}}}\\quad & {printed}"));
    }
    model.extend(part(&printer, "subject to", &tree.statements));
    for rows in [described, model] {
        if !rows.is_empty() {
            let _ = write!(out, "\\begin{{align*}}\n{}\n\\end{{align*}}\n", rows.join(" \\\\\n"));
        }
    }
    format!("{}{out}", letters::told(&out))
}

/// `\min` at the start of an objective would open a second one.
fn first_of_objective(printed: String) -> String {
    if printed.starts_with("\\min") || printed.starts_with("\\max") {
        return format!("({printed})");
    }
    printed
}

/// The rows of a part; its word stands in the first.
fn part(printer: &Printer<'_>, word: &str, lines: &[Line]) -> Vec<String> {
    let place = if word == "subject to" { Place::Statement } else { Place::Described };
    let rows = lines.iter().enumerate().map(|(at, one)| {
        let row = line(printer, one, place);
        if at == 0 { format!("\\text{{{word}}}\\quad & {row}") } else { format!("& {row}") }
    });
    rows.collect()
}

/// One line with its quantifier, tag and remark. Single spaces: two begin a remark.
fn line(printer: &Printer<'_>, line: &Line, place: Place) -> String {
    let mut out = printer.operands(&line.left, place, !line.links.is_empty());
    for (relation, operand) in &line.links {
        let _ = write!(out, " {}", printer.link(*relation, operand));
    }
    for (at, clause) in line.clauses.iter().enumerate() {
        let apart = if at == 0 { "&&" } else { "\\ " };
        let _ = write!(out, " {apart} \\forall {}", printer.quantifier(clause, place));
    }
    if let Some(label) = &line.label {
        let _ = write!(out, " \\tag{{{}}}", tag(&label.text));
    }
    if let Some(remark) = &line.remark {
        let apart = if line.clauses.is_empty() { "&& " } else { "\\quad " };
        let _ = write!(out, " {apart}{}", reserved::remark(remark));
    }
    out
}

/// The text of a tag; what only mathematics can set stands between dollar signs.
fn tag(text: &str) -> String {
    let mathematics = text.contains(['\\', '_', '^']) && !text.contains('$');
    if mathematics { format!("${text}$") } else { text.to_owned() }
}

/// The names that are declared or carry indices: they are one name, however many letters.
pub(crate) fn whole_names(tree: &Formulation) -> std::collections::BTreeSet<&str> {
    let mut names = std::collections::BTreeSet::new();
    for line in tree.data.iter().chain(&tree.definitions).chain(&tree.statements) {
        let operands = line.left.iter().chain(line.links.iter().map(|(_, operand)| operand));
        for operand in operands {
            if let Kind::Name(name) = &operand.kind {
                names.insert(name.text.as_str());
            }
        }
    }
    let mut work: Vec<&Expression> = tree.objective.iter().map(|o| &o.expression).collect();
    work.extend(
        tree.statements
            .iter()
            .flat_map(|line| line.left.iter().chain(line.links.iter().map(|(_, operand)| operand))),
    );
    while let Some(expression) = work.pop() {
        match &expression.kind {
            Kind::Name(name) if !name.indices.is_empty() => {
                names.insert(&name.text);
            }
            Kind::Call(name, _) => {
                names.insert(&name.text);
            }
            _ => {}
        }
        work.extend(crate::check::children(expression));
    }
    names
}

#[cfg(test)]
mod tests;
