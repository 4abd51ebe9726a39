//! Trees changed and written again: what a mend puts into the text.

use crate::place::Span;
use crate::print;
use crate::syntax::{Additive, Clause, Expression, Kind, Line, Multiplicative, Name};
use model::Number;

/// A copy in which `change` has replaced what it gives something for, from the outside in.
/// `O(tree)`; as deep as the parser lets a tree be.
pub(crate) fn map(
    expression: &Expression,
    change: &mut dyn FnMut(&Expression) -> Option<Expression>,
) -> Expression {
    if let Some(changed) = change(expression) {
        return changed;
    }
    Expression { kind: map_kind(&expression.kind, change), span: expression.span }
}

type Change<'c> = &'c mut dyn FnMut(&Expression) -> Option<Expression>;

fn map_kind(kind: &Kind, change: Change<'_>) -> Kind {
    let mut one = |inner: &Expression| Box::new(map(inner, change));
    match kind {
        Kind::Negative(inner) => Kind::Negative(one(inner)),
        Kind::Not(inner) => Kind::Not(one(inner)),
        Kind::Parity(inner, odd) => Kind::Parity(one(inner), *odd),
        Kind::Power(a, b) => Kind::Power(one(a), one(b)),
        Kind::Range(a, b) => Kind::Range(one(a), one(b)),
        Kind::Interval(a, b) => Kind::Interval(one(a), one(b)),
        Kind::Clique(a, b) => Kind::Clique(one(a), one(b)),
        Kind::Additive(first, rest) => Kind::Additive(one(first), pairs(rest, change)),
        Kind::Multiplicative(first, rest) => Kind::Multiplicative(one(first), pairs(rest, change)),
        Kind::Chain(first, rest) => Kind::Chain(one(first), pairs(rest, change)),
        Kind::Name(inner) => Kind::Name(map_name(inner, change)),
        Kind::Call(inner, items) => Kind::Call(map_name(inner, change), list(items, change)),
        Kind::Function(function, items) => Kind::Function(*function, list(items, change)),
        Kind::Tuple(items) => Kind::Tuple(list(items, change)),
        Kind::Set(items) => Kind::Set(list(items, change)),
        Kind::All(items) => Kind::All(list(items, change)),
        Kind::Any(items) => Kind::Any(list(items, change)),
        Kind::Builder(member, conditions) => {
            let member = one(member);
            Kind::Builder(member, list(conditions, change))
        }
        Kind::Big(big, under, body) => {
            let body = one(body);
            Kind::Big(*big, map_clause(under, change), body)
        }
        Kind::Number(_) | Kind::Infinity | Kind::EmptySet | Kind::NumberSet(_) => kind.clone(),
    }
}

fn list(items: &[Expression], change: Change<'_>) -> Vec<Expression> {
    items.iter().map(|item| map(item, change)).collect()
}

fn pairs<T: Copy>(items: &[(T, Expression)], change: Change<'_>) -> Vec<(T, Expression)> {
    items.iter().map(|(operator, operand)| (*operator, map(operand, change))).collect()
}

fn map_name(name: &Name, change: Change<'_>) -> Name {
    let superscript = name.superscript.as_ref().map(|inner| Box::new(map(inner, change)));
    Name { text: name.text.clone(), indices: list(&name.indices, change), superscript }
}

/// A clause changed in the same way.
pub(crate) fn map_clause(clause: &Clause, change: Change<'_>) -> Clause {
    let items = list(&clause.items, change);
    Clause { items, such_that: list(&clause.such_that, change), span: clause.span }
}

/// The line as text: relation, quantifier, label in brackets where that reads back.
pub(crate) fn line(line: &Line) -> String {
    let left: Vec<String> = line.left.iter().map(print::expression).collect();
    let mut out = left.join(", ");
    for (relation, operand) in &line.links {
        out.push_str(&format!(" {} {}", print::sign(*relation), print::expression(operand)));
    }
    out.push_str(&quantifier(&line.clauses));
    if let Some(label) = &line.label {
        let plain = |c: char| c.is_alphanumeric() || matches!(c, ' ' | '-');
        let shown = if label.text.chars().all(plain) {
            format!("  ({})", label.text)
        } else {
            format!("  \\tag{{{}}}", label.text)
        };
        out.push_str(&shown);
    }
    out
}

/// `  ∀ i ∈ V  ∀ j ∈ V : i ≠ j`; nothing for no clause.
pub(crate) fn quantifier(clauses: &[Clause]) -> String {
    clauses.iter().map(|clause| format!("  ∀ {}", print::clause(clause))).collect()
}

fn bare(kind: Kind) -> Expression {
    Expression { kind, span: Span::default() }
}

/// A number; a negative one as `−a`.
pub(crate) fn number(value: &Number) -> Expression {
    if *value < Number::ZERO {
        return bare(Kind::Negative(Box::new(number(&-value.clone()))));
    }
    bare(Kind::Number(value.clone()))
}

/// A name with indices.
pub(crate) fn name(text: &str, indices: Vec<Expression>) -> Expression {
    bare(Kind::Name(Name { text: text.to_owned(), indices, superscript: None }))
}

/// `a + b` (or `a − b`); numbers are added up, and nothing is added to zero.
pub(crate) fn add(a: Expression, minus: bool, b: Expression) -> Expression {
    match (value(&a), value(&b)) {
        (Some(x), Some(y)) => return number(&if minus { x - y } else { x + y }),
        (_, Some(y)) if y.is_zero() => return a,
        (Some(x), None) if x.is_zero() && !minus => return b,
        (Some(x), None) if x.is_zero() => return negative(b),
        _ => {}
    }
    let sign = if minus { Additive::Minus } else { Additive::Plus };
    let (sign, b) = match b.kind {
        Kind::Negative(inner) if !minus => (Additive::Minus, *inner),
        kind => (sign, Expression { kind, ..b }),
    };
    match (a.kind, b.kind) {
        (Kind::Additive(first, mut rest), kind) => {
            rest.push((sign, bare(kind)));
            bare(Kind::Additive(first, rest))
        }
        (kind, Kind::Additive(first, rest)) if sign == Additive::Plus => {
            let rest = std::iter::once((sign, *first)).chain(rest).collect();
            bare(Kind::Additive(Box::new(bare(kind)), rest))
        }
        (a, b) => bare(Kind::Additive(Box::new(bare(a)), vec![(sign, bare(b))])),
    }
}

/// `a b`; one and zero are not written.
pub(crate) fn times(a: Expression, b: Expression) -> Expression {
    match (value(&a), value(&b)) {
        (Some(x), Some(y)) => return number(&(x * y)),
        (Some(x), _) if x == Number::ONE => return b,
        (_, Some(y)) if y == Number::ONE => return a,
        (Some(x), _) | (_, Some(x)) if x.is_zero() => return number(&Number::ZERO),
        _ => {}
    }
    bare(Kind::Multiplicative(Box::new(a), vec![(Multiplicative::Times, b)]))
}

/// `−a`.
pub(crate) fn negative(a: Expression) -> Expression {
    match (value(&a), a.kind) {
        (Some(x), _) => number(&-x),
        (None, Kind::Negative(inner)) => *inner,
        (None, kind) => bare(Kind::Negative(Box::new(bare(kind)))),
    }
}

/// The value of a number as it is written.
pub(crate) fn value(expression: &Expression) -> Option<Number> {
    match &expression.kind {
        Kind::Number(value) => Some(value.clone()),
        Kind::Negative(inner) => value(inner).map(|value| -value),
        _ => None,
    }
}

/// Whether a name stands anywhere in an expression.
pub(crate) fn mentions(expression: &Expression, word: &str) -> bool {
    let own =
        matches!(&expression.kind, Kind::Name(name) | Kind::Call(name, _) if name.text == word);
    own || crate::check::children(expression).into_iter().any(|child| mentions(child, word))
}
