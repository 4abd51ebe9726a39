//! `D(t)` for `D_t`, `x(i,j)` for `x_{i,j}`: names that are declared with their indices in
//! brackets.

use std::collections::BTreeSet;

use crate::syntax::{
    Clause, Expression, Formulation, Kind, Line, NumberSet, Relation, children_mut, each_outermost,
};

/// The longest list that is looked at, of names and of indices.
const LIST_LIMIT: usize = 24;

/// Writes the indices of such names as subscripts, wherever they stand. `O(tree)`.
pub(super) fn settled(tree: &mut Formulation) {
    let mut own = BTreeSet::new();
    for line in tree.data.iter().chain(&tree.definitions) {
        own.extend(line.left.iter().filter_map(|one| declared(one, line)));
    }
    for line in tree.statements.iter().filter(|line| is_domain(line)) {
        own.extend(line.left.iter().filter_map(|one| declared(one, line)));
    }
    if !own.is_empty() {
        each_outermost(tree, &mut |expression| subscripted(expression, &own));
    }
}

/// The name that `D(t)` declares, where `t` is an index: bound by the quantifier of the line.
fn declared(expression: &Expression, line: &Line) -> Option<String> {
    let Kind::Call(name, items) = &expression.kind else { return None };
    if line.left.len() > LIST_LIMIT || items.len() > LIST_LIMIT {
        return None;
    }
    let index = |item: &Expression| match &item.kind {
        Kind::Name(index) => line.clauses.iter().any(|clause| binds(clause, &index.text)),
        _ => false,
    };
    let all = !items.is_empty() && items.iter().all(index);
    all.then(|| name.text.clone())
}

/// Whether a quantifier draws a name from a set, alone, in a list or in a tuple.
fn binds(clause: &Clause, wanted: &str) -> bool {
    let is = |e: &Expression| matches!(&e.kind, Kind::Name(name) if name.text == wanted);
    clause.items.iter().any(|item| match &item.kind {
        Kind::Name(_) => is(item),
        Kind::Chain(first, links) if matches!(links[..], [(Relation::In, _)]) => {
            match &first.kind {
                Kind::Tuple(items) => items.iter().any(is),
                _ => is(first),
            }
        }
        _ => false,
    })
}

/// `∈ {0,1}`, `∈ ℝ`, `≥ 0` without a label.
pub(super) fn is_domain(line: &Line) -> bool {
    let zero = |e: &Expression| matches!(&e.kind, Kind::Number(n) if n.is_zero());
    let domain = |(relation, operand): &(Relation, Expression)| match (relation, &operand.kind) {
        (Relation::In, Kind::NumberSet(set)) => *set != NumberSet::IntegerPositive,
        (Relation::In, Kind::Set(_) | Kind::Range(..) | Kind::Interval(..)) => true,
        (Relation::AtLeast, _) => zero(operand),
        _ => false,
    };
    line.label.is_none() && !line.links.is_empty() && line.links.iter().all(domain)
}

fn subscripted(expression: &mut Expression, own: &BTreeSet<String>) {
    if let Kind::Call(name, items) = &mut expression.kind
        && own.contains(&name.text)
        && name.indices.is_empty()
    {
        name.indices = std::mem::take(items);
        expression.kind = Kind::Name(name.clone());
    }
    for child in children_mut(&mut expression.kind) {
        subscripted(child, own);
    }
}
