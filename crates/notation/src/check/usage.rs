//! What the text as a whole tells about a name that is declared without a shape: whether it
//! is used as a set, and of how many places.

use std::collections::{BTreeMap, BTreeSet};

use crate::syntax::{
    Additive, Clause, Expression, Formulation, Function, Kind, Line, Multiplicative, Relation,
};

/// All expressions directly inside one.
pub(crate) fn children(expression: &Expression) -> Vec<&Expression> {
    match &expression.kind {
        Kind::Number(_) | Kind::Infinity | Kind::EmptySet | Kind::NumberSet(_) => Vec::new(),
        Kind::Name(name) => name.indices.iter().chain(name.superscript.as_deref()).collect(),
        Kind::Call(_, items)
        | Kind::Function(_, items)
        | Kind::Tuple(items)
        | Kind::Set(items)
        | Kind::All(items)
        | Kind::Any(items) => items.iter().collect(),
        Kind::Negative(inner) | Kind::Parity(inner, _) | Kind::Not(inner) => vec![inner],
        Kind::Additive(first, rest) => pairs(first, rest),
        Kind::Multiplicative(first, rest) => pairs(first, rest),
        Kind::Chain(first, rest) => pairs(first, rest),
        Kind::Power(a, b) | Kind::Range(a, b) | Kind::Interval(a, b) | Kind::Clique(a, b) => {
            vec![a, b]
        }
        Kind::Big(_, clause, body) => {
            clause.items.iter().chain(&clause.such_that).chain([body.as_ref()]).collect()
        }
        Kind::Builder(member, conditions) => {
            [member.as_ref()].into_iter().chain(conditions).collect()
        }
    }
}

fn pairs<'e, T>(first: &'e Expression, rest: &'e [(T, Expression)]) -> Vec<&'e Expression> {
    [first].into_iter().chain(rest.iter().map(|(_, operand)| operand)).collect()
}

/// All expressions of a line, the quantifier's included.
pub(super) fn of_line(line: &Line) -> Vec<&Expression> {
    let links = line.links.iter().map(|(_, operand)| operand);
    let clauses = line.clauses.iter().flat_map(of_clause);
    line.left.iter().chain(links).chain(clauses).collect()
}

pub(super) fn of_clause(clause: &Clause) -> impl Iterator<Item = &Expression> {
    clause.items.iter().chain(&clause.such_that)
}

/// Every word in an expression.
pub(crate) fn words<'e>(expression: &'e Expression, found: &mut BTreeSet<&'e str>) {
    if let Kind::Name(name) | Kind::Call(name, _) = &expression.kind {
        found.insert(&name.text);
    }
    for child in children(expression) {
        words(child, found);
    }
}

/// The names that are used as sets, with the size of the tuples that are sought in them.
pub(super) fn sets(tree: &Formulation) -> BTreeMap<&str, usize> {
    let mut found = BTreeMap::new();
    let lines = tree.data.iter().chain(&tree.definitions).chain(&tree.statements);
    for line in lines {
        for expression in of_line(line) {
            visit(expression, &mut found);
        }
        let last = line.left.last();
        for (i, (relation, operand)) in line.links.iter().enumerate() {
            let left = if i == 0 { last } else { line.links.get(i - 1).map(|(_, e)| e) };
            related(left, *relation, operand, &mut found);
        }
    }
    if let Some(objective) = &tree.objective {
        visit(&objective.expression, &mut found);
    }
    found
}

fn visit<'t>(expression: &'t Expression, found: &mut BTreeMap<&'t str, usize>) {
    match &expression.kind {
        Kind::Chain(first, links) => {
            let mut left: &Expression = first;
            for (relation, operand) in links {
                related(Some(left), *relation, operand, found);
                left = operand;
            }
        }
        Kind::Additive(first, rest)
            if rest.iter().any(|(op, _)| matches!(op, Additive::Union | Additive::Difference)) =>
        {
            mark(first, 1, found);
            rest.iter().for_each(|(_, operand)| mark(operand, 1, found));
        }
        Kind::Multiplicative(first, rest)
            if rest.iter().any(|(op, _)| matches!(op, Multiplicative::Intersection)) =>
        {
            mark(first, 1, found);
            rest.iter().for_each(|(_, operand)| mark(operand, 1, found));
        }
        Kind::Function(Function::Bars, items) => {
            if let Some(Expression { kind: Kind::Name(name), .. }) = items.first()
                && name.text.starts_with(char::is_uppercase)
            {
                mark(&items[0], 1, found);
            }
        }
        _ => {}
    }
    for child in children(expression) {
        visit(child, found);
    }
}

fn related<'t>(
    left: Option<&'t Expression>,
    relation: Relation,
    right: &'t Expression,
    found: &mut BTreeMap<&'t str, usize>,
) {
    match relation {
        Relation::In | Relation::NotIn => {
            let size = match left.map(|e| &e.kind) {
                Some(Kind::Tuple(items) | Kind::Set(items)) => items.len(),
                _ => 1,
            };
            mark(right, size, found);
        }
        Relation::Subset | Relation::SubsetOrEqual => {
            mark(right, 1, found);
        }
        _ => {}
    }
}

/// Marks the names of which a set expression is made.
fn mark<'t>(expression: &'t Expression, size: usize, found: &mut BTreeMap<&'t str, usize>) {
    match &expression.kind {
        Kind::Name(name) => {
            let known = found.entry(name.text.as_str()).or_insert(size);
            *known = size.max(*known);
        }
        Kind::Additive(first, rest) => {
            mark(first, size, found);
            rest.iter().for_each(|(_, operand)| mark(operand, size, found));
        }
        Kind::Multiplicative(first, rest) => {
            mark(first, 1, found);
            rest.iter().for_each(|(_, operand)| mark(operand, 1, found));
        }
        _ => {}
    }
}
