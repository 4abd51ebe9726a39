//! `V_0` beside `V`, `c^1_{ij}` beside `c^2_{ij}`: a datum with a number for an index, or raised,
//! is a name of its own.

use std::collections::BTreeSet;

use crate::syntax::{Expression, Formulation, Kind, each_name, each_outermost};

/// Names with the numbers that belong to them.
type Own = BTreeSet<(String, String)>;

/// Joins a number to its name where a line of data or definitions declares one like that: an
/// index where none declares the same name with indices that run, what is raised everywhere.
/// `O(tree)`.
pub(super) fn joined(tree: &mut Formulation) {
    let (mut below, mut above) = (Own::new(), Own::new());
    let mut running = BTreeSet::new();
    for line in tree.data.iter().chain(&tree.definitions) {
        for expression in &line.left {
            let Kind::Name(name) = &expression.kind else { continue };
            if let Some(raised) = name.superscript.as_deref().and_then(whole) {
                above.insert((name.text.clone(), raised));
            }
            match only(&name.indices) {
                Some(index) if line.clauses.is_empty() && name.superscript.is_none() => {
                    below.insert((name.text.clone(), index));
                }
                _ if !name.indices.is_empty() => {
                    running.insert(name.text.clone());
                }
                _ => {}
            }
        }
    }
    below.retain(|(name, _)| !running.contains(name));
    if below.is_empty() && above.is_empty() {
        return;
    }
    each_outermost(tree, &mut |expression| {
        each_name(expression, &mut |name| {
            let own =
                |set: &Own, number: &String| set.contains(&(name.text.clone(), number.clone()));
            if let Some(raised) = name.superscript.as_deref().and_then(whole)
                && own(&above, &raised)
            {
                name.text = format!("{}^{raised}", name.text);
                name.superscript = None;
            } else if let Some(index) = only(&name.indices)
                && own(&below, &index)
            {
                name.text = format!("{}_{index}", name.text);
                name.indices.clear();
            }
        });
    });
}

/// The only index, where it is a whole number.
fn only(indices: &[Expression]) -> Option<String> {
    let [only] = indices else { return None };
    whole(only)
}

/// A whole number as it is written behind `_` or `^`.
fn whole(expression: &Expression) -> Option<String> {
    let Kind::Number(value) = &expression.kind else { return None };
    let whole = value.is_int() && *value >= model::Number::ZERO;
    whole.then(|| crate::print::number(value))
}
