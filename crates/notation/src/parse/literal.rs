//! `V_0` beside `V`: a datum whose index is a number is a name of its own.

use std::collections::BTreeSet;

use crate::syntax::{Clause, Expression, Formulation, Kind, Line, each_name};

/// Joins the index to the name where a line of data or definitions declares one like that, and
/// none declares the same name with indices that run. `O(tree)`.
pub(super) fn joined(tree: &mut Formulation) {
    let mut own = BTreeSet::new();
    let mut running = BTreeSet::new();
    for line in tree.data.iter().chain(&tree.definitions) {
        for expression in &line.left {
            let Kind::Name(name) = &expression.kind else { continue };
            match literal(&name.indices) {
                Some(index) if line.clauses.is_empty() && name.superscript.is_none() => {
                    own.insert((name.text.clone(), index));
                }
                _ if !name.indices.is_empty() => {
                    running.insert(name.text.clone());
                }
                _ => {}
            }
        }
    }
    own.retain(|(name, _)| !running.contains(name));
    if !own.is_empty() {
        every(tree, &own);
    }
}

/// The only index, where it is a whole number.
fn literal(indices: &[Expression]) -> Option<String> {
    let [only] = indices else { return None };
    let Kind::Number(value) = &only.kind else { return None };
    (value.is_int() && *value >= model::Number::ZERO).then(|| crate::print::number(value))
}

fn every(tree: &mut Formulation, own: &BTreeSet<(String, String)>) {
    let mut join = |expression: &mut Expression| {
        each_name(expression, &mut |name| {
            if let Some(index) = literal(&name.indices)
                && own.contains(&(name.text.clone(), index.clone()))
            {
                name.text = format!("{}_{index}", name.text);
                name.indices.clear();
            }
        });
    };
    let clause = |clause: &mut Clause, join: &mut dyn FnMut(&mut Expression)| {
        clause.items.iter_mut().chain(&mut clause.such_that).for_each(join);
    };
    let line = |line: &mut Line, join: &mut dyn FnMut(&mut Expression)| {
        line.left.iter_mut().for_each(&mut *join);
        line.links.iter_mut().for_each(|(_, operand)| join(operand));
        line.clauses.iter_mut().for_each(|one| clause(one, join));
    };
    if let Some(objective) = &mut tree.objective {
        join(&mut objective.expression);
    }
    let lines = tree.data.iter_mut().chain(&mut tree.definitions).chain(&mut tree.statements);
    lines.for_each(|one| line(one, &mut join));
}
