//! `I_{k0}` given as datum beside a variable `I_{kt}`: the datum gets a name of its own, and the
//! variable that value at that place, as lot-sizing papers mean it.

use std::collections::BTreeSet;

use super::usage::{children, of_line};
use crate::diagnostic::{Diagnostic, names as message};
use crate::place::Span;
use crate::syntax::{Expression, Formulation, Kind, Line, Name, Relation, each_name};
use model::Number;

/// Tells each such datum from its variable, and adds `I_{k0} = …` to the statements.
/// `O(tree · such data)`.
pub(super) fn part(
    tree: &mut Formulation,
    declared: &BTreeSet<String>,
    notes: &mut Vec<Diagnostic>,
) {
    let mut given = Vec::new();
    for line in &tree.data {
        for datum in &line.left {
            let Kind::Name(name) = &datum.kind else { continue };
            let place = numbered(name, datum.span)
                .or_else(|| holds_number(name, declared).then(|| name.clone()));
            if let Some(place) = place.filter(|place| is_variable(tree, place, declared)) {
                given.push((place, datum.clone(), line.clone()));
            }
        }
    }
    for (place, mut datum, line) in given {
        let shown = crate::print::expression(&datum);
        notes.push(message::initial(&shown, place.shown(), datum.span));
        if let Kind::Name(own) = &mut datum.kind
            && own.text == place.text
        {
            own.text.push('_');
            mark(tree, &place.text, &own.text);
        }
        let left = vec![Expression { kind: Kind::Name(place), span: datum.span }];
        let links = vec![(Relation::Equal, datum)];
        tree.statements.push(Line { left, links, label: None, remark: None, ..line });
    }
}

/// `s_0` of a datum without other indices, whose number stands in its name, as a place of `s`.
fn numbered(name: &Name, span: Span) -> Option<Name> {
    let (text, number) = name.text.split_once('_')?;
    let value = number.parse::<u32>().ok().filter(|_| name.indices.is_empty())?;
    let index = Expression { kind: Kind::Number(Number::from(value)), span };
    Some(Name { text: text.to_owned(), indices: vec![index], superscript: None })
}

/// Gives a name in data and definitions its mark.
fn mark(tree: &mut Formulation, from: &str, to: &str) {
    for line in tree.data.iter_mut().chain(&mut tree.definitions) {
        let operands = line.left.iter_mut().chain(line.links.iter_mut().map(|(_, e)| e));
        for operand in operands {
            each_name(operand, &mut |name| {
                if name.text == from {
                    to.clone_into(&mut name.text);
                }
            });
        }
    }
}

/// Whether one of its indices is a number: `I_{k,0}`, `I_{k0}`, `s_0`.
fn holds_number(name: &Name, declared: &BTreeSet<String>) -> bool {
    name.indices.iter().any(|index| match &index.kind {
        Kind::Number(_) => true,
        Kind::Name(word) if word.indices.is_empty() && !declared.contains(&word.text) => {
            let letters = word.text.trim_end_matches(|c: char| c.is_ascii_digit());
            letters.len() < word.text.len() && letters.chars().all(char::is_alphabetic)
        }
        _ => false,
    })
}

/// Whether a statement is about the name itself, and the statements use it at other places as well.
fn is_variable(tree: &Formulation, name: &Name, declared: &BTreeSet<String>) -> bool {
    let about = |e: &Expression| matches!(&e.kind, Kind::Name(own) if own.text == name.text);
    let operands =
        |line: &Line| line.left.iter().chain(line.links.iter().map(|(_, e)| e)).any(about);
    tree.statements.iter().any(operands)
        && tree.statements.iter().flat_map(of_line).any(|e| elsewhere(e, name, declared))
}

fn elsewhere(expression: &Expression, name: &Name, declared: &BTreeSet<String>) -> bool {
    let here = matches!(&expression.kind, Kind::Name(own)
        if own.text == name.text && !own.indices.is_empty() && !holds_number(own, declared));
    here || children(expression).into_iter().any(|child| elsewhere(child, name, declared))
}
