//! `K` beside `K_i`, `I` beside `I_{it}`: the set and what is indexed are two names.
//!
//! The indexed one is kept with an underscore at its end, which no text can give a name and which
//! is not printed.

use std::collections::BTreeSet;

use super::called::is_domain;
use crate::syntax::{Expression, Formulation, Kind, each_name, each_outermost};

/// Parts such names where data or definitions declare one without indices, and another line (data,
/// a definition or a domain) one with them. `O(tree)`.
pub(super) fn parted(tree: &mut Formulation) {
    let (mut bare, mut indexed) = (BTreeSet::new(), BTreeSet::new());
    for line in tree.data.iter().chain(&tree.definitions) {
        for expression in &line.left {
            let Kind::Name(name) = &expression.kind else { continue };
            let alone = name.indices.is_empty() && name.superscript.is_none();
            let into = if alone { &mut bare } else { &mut indexed };
            into.insert(name.text.clone());
        }
    }
    for line in tree.statements.iter().filter(|line| line.label.is_none()) {
        let number = |e: &Expression| matches!(e.kind, Kind::Number(_));
        let between = matches!(&line.left[..], [only] if number(only));
        let bounded = line.links.iter().map(|(_, operand)| operand).take(usize::from(between));
        let own = line.left.iter().take(if is_domain(line) { line.left.len() } else { 0 });
        for expression in own.chain(bounded) {
            if let Kind::Name(name) = &expression.kind
                && !name.indices.is_empty()
            {
                indexed.insert(name.text.clone());
            }
        }
    }
    bare.retain(|name| indexed.contains(name));
    if !bare.is_empty() {
        each_outermost(tree, &mut |expression| {
            each_name(expression, &mut |name| {
                if !name.indices.is_empty() && bare.contains(&name.text) {
                    name.text.push('_');
                }
            });
        });
    }
}
