//! Rows that order labels along a drive: `u_i − u_j + M x_{i,j} ≤ M − d` (Miller, Tucker & Zemlin
//! 1960). Two things go wrong with them: they are written for the depot too, and their M is too
//! small by one.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Number, RowId};

use super::Subject;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};
use crate::place::Span;
use crate::plan::{Root, Shape};
use crate::print;
use crate::rewrite;
use crate::syntax::{Additive, Expression, Kind, Line, Multiplicative, Relation};

/// A row as `from − to + M x ≤ side`, further binaries aside.
struct Order {
    row: RowId,
    family: usize,
    from: ColumnId,
    to: ColumnId,
    switch: ColumnId,
    /// By how much the label rises at least when the switch is 1.
    step: Number,
    side: Number,
}

pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let facts = &subject.facts;
    let orders: Vec<Order> = facts.rows.iter().filter_map(|&row| order(facts, row)).collect();
    let mut found: Vec<Diagnostic> = depot(subject, &orders).into_iter().collect();
    let families: BTreeSet<usize> = orders.iter().map(|order| order.family).collect();
    for family in families {
        let own: Vec<&Order> = orders.iter().filter(|order| order.family == family).collect();
        if own.len() == subject.model().families()[family].rows.len() {
            found.extend(too_small(subject, family, &own));
        }
    }
    found
}

fn order(facts: &Facts<'_>, row: RowId) -> Option<Order> {
    if facts.model.row_entries(row).len() > 8 {
        return None;
    }
    let (entries, side) = facts.at_most(row)?;
    let (switches, labels): (Vec<_>, Vec<_>) =
        entries.iter().partition(|(column, _)| facts.is_binary(*column));
    let [(p, a), (q, b)] = labels[..] else { return None };
    if facts.variable(*p) != facts.variable(*q) || *a != -b.clone() {
        return None;
    }
    let (from, to, unit) = if *a > Number::ZERO { (*p, *q, a) } else { (*q, *p, b) };
    let scaled: Vec<(ColumnId, Number)> = switches.iter().map(|(c, a)| (*c, a / unit)).collect();
    let (switch, m) =
        scaled.iter().filter(|(_, a)| *a > Number::ZERO).max_by(|x, y| x.1.cmp(&y.1))?;
    let others = scaled.iter().filter(|(c, a)| c != switch && *a < Number::ZERO);
    let worst = others.fold(Number::ZERO, |sum, (_, a)| sum + a);
    let side = side / unit;
    let step = m - &side + worst;
    Some(Order { row, family: facts.family(row), from, to, switch: *switch, step, side })
}

/// Stops each of which must be left by a drive to another of them along which the label rises:
/// those drives hold a circle, on which the label cannot rise all the way round.
fn depot(subject: &Subject<'_>, orders: &[Order]) -> Option<Diagnostic> {
    let rising = orders.iter().filter(|order| order.step > Number::ZERO);
    let drives: BTreeMap<ColumnId, &Order> = rising.map(|order| (order.switch, order)).collect();
    let mut left: BTreeMap<ColumnId, (RowId, BTreeSet<ColumnId>)> = BTreeMap::new();
    for &row in &subject.facts.rows {
        if let Some((from, to)) = leaving(&subject.facts, row, &drives) {
            left.entry(from).or_insert((row, to));
        }
    }
    while let Some(gone) =
        left.iter().find(|(_, (_, to))| to.iter().any(|to| !left.contains_key(to)))
    {
        let gone = *gone.0;
        left.remove(&gone);
    }
    let (_, (row, _)) = left.iter().next()?;
    let one = orders.iter().find(|order| left.contains_key(&order.from))?;
    let name = &subject.model().families()[one.family].name;
    let example = subject.model().row_name(*row);
    let found = message::depot_order(name, (left.len(), &example), subject.family_span(one.family));
    Some(without_depot(subject, one, found))
}

/// A row that asks for one of the drives from a stop: that stop and where they lead.
fn leaving(
    facts: &Facts<'_>,
    row: RowId,
    drives: &BTreeMap<ColumnId, &Order>,
) -> Option<(ColumnId, BTreeSet<ColumnId>)> {
    let (lower, _) = facts.sides(row);
    if lower.is_none_or(|lower| *lower <= Number::ZERO) {
        return None;
    }
    let mut from = None;
    let mut to = BTreeSet::new();
    for &(column, a) in facts.model.row_entries(row) {
        if *facts.number(a) < Number::ZERO && facts.is_binary(column) {
            continue;
        }
        let drive = drives.get(&column)?;
        if from.is_some_and(|from| from != drive.from) {
            return None;
        }
        from = Some(drive.from);
        to.insert(drive.to);
    }
    from.map(|from| (from, to))
}

/// The mend: the depot is left out by a condition.
fn without_depot(subject: &Subject<'_>, one: &Order, found: Diagnostic) -> Diagnostic {
    let by_hand =
        "leave one stop out of the rows, such as the depot r, by the condition i ≠ r, j ≠ r";
    let depot = subject.plan.symbols.iter().find(|symbol| {
        symbol.datum
            && matches!(symbol.shape, Shape::Element(Root::Set(_)))
            && symbol.indices.is_empty()
    });
    let (Some(depot), Some(line)) = (depot, subject.line(one.family)) else {
        return found.mend(by_hand);
    };
    let variable = &subject.model().variables()[subject.facts.variable(one.from)].name;
    let mut indices: Vec<String> = Vec::new();
    for operand in line.left.iter().chain(line.links.iter().map(|(_, operand)| operand)) {
        collect(operand, variable, &mut indices);
    }
    let Some(clause) = line.clauses.last().filter(|_| indices.len() == 2) else {
        return found.mend(by_hand);
    };
    let start = if clause.such_that.is_empty() { " : " } else { ", " };
    let name = &depot.name;
    let condition = format!("{start}{} ≠ {name}, {} ≠ {name}", indices[0], indices[1]);
    let at = Span { start: clause.span.end, end: clause.span.end };
    found.mend_by("leave the depot out of the rows", at, condition)
}

/// The single indices with which a variable stands in an expression, each once.
fn collect(expression: &Expression, variable: &str, found: &mut Vec<String>) {
    if let Kind::Name(name) = &expression.kind
        && name.text == variable
        && let [index] = &name.indices[..]
    {
        let index = print::expression(index);
        if !found.contains(&index) {
            found.push(index);
        }
    }
    for child in crate::check::children(expression) {
        collect(child, variable, found);
    }
}

/// An M that is one less than the labels' bounds and steps ask for, in all rows of a family.
fn too_small(subject: &Subject<'_>, family: usize, own: &[&Order]) -> Option<Diagnostic> {
    let facts = &subject.facts;
    let name = &subject.model().families()[family].name;
    let difference = |order: &Order| {
        let (_, most) = facts.bounds(order.from);
        let (least, _) = facts.bounds(order.to);
        Some(most? - least?)
    };
    let short =
        |order: &&Order, by: &Number| difference(order).is_some_and(|d| &d - &order.side == *by);
    let first = own.first()?;
    let (row, span) = (subject.model().row_name(first.row), subject.family_span(family));
    let variable = &subject.model().variables()[facts.variable(first.switch)].name;
    if own.iter().all(|order| order.step == Number::ONE && short(order, &Number::ONE)) {
        let (allowed, possible) = (print::number(&first.side), print::number(&difference(first)?));
        let found = message::order_m(name, (&row, &allowed, &possible), span);
        return Some(with_more(subject.line(family), (variable, true), found));
    }
    // Between 0 and 1 stands who comes before whom, and no position: `v_k ≤ v_l` is what is meant.
    let positions = difference(first)? > Number::ONE;
    if positions && own.iter().all(|order| order.step.is_zero() && short(order, &Number::ZERO)) {
        let found = message::order_step(name, &row, span);
        return Some(with_more(subject.line(family), (variable, false), found));
    }
    None
}

/// The mend: the coefficient of the switch grows by one; the side too where asked.
fn with_more(line: Option<&Line>, (switch, side): (&str, bool), found: Diagnostic) -> Diagnostic {
    let by_hand = "take M one larger, or let the labels begin where M counts from";
    let Some(line) = line.filter(|line| line.left.len() == 1 && line.links.len() == 1) else {
        return found.mend(by_hand);
    };
    let mut direct = None;
    let mut new = line.clone();
    for operand in new.left.iter_mut().chain(new.links.iter_mut().map(|(_, operand)| operand)) {
        *operand = rewrite::map(operand, &mut |e| larger(e, switch, &mut direct));
    }
    let Some(direct) = direct else { return found.mend(by_hand) };
    if direct && side {
        let (relation, right) = &mut new.links[0];
        let minus = *relation == Relation::AtLeast;
        *right = settled(rewrite::add(right.clone(), minus, rewrite::number(&Number::ONE)));
    }
    if !direct && !side {
        return found.mend(by_hand);
    }
    found.mend_by("take M one larger", line.span, rewrite::line(&new))
}

/// `M x` with M + 1, and `M (1 − x)` likewise; `direct` says which it was.
fn larger(expression: &Expression, switch: &str, direct: &mut Option<bool>) -> Option<Expression> {
    let Kind::Multiplicative(first, rest) = &expression.kind else { return None };
    let [(Multiplicative::Times, last)] = &rest[..] else { return None };
    if !rewrite::mentions(last, switch) || rewrite::mentions(first, switch) {
        return None;
    }
    let m = match &first.kind {
        Kind::Additive(..) | Kind::Name(_) | Kind::Number(_) => {
            rewrite::add(Expression::clone(first), false, rewrite::number(&Number::ONE))
        }
        _ => return None,
    };
    let m = settled(m);
    *direct = Some(matches!(last.kind, Kind::Name(_)));
    let kind = Kind::Multiplicative(Box::new(m), vec![(Multiplicative::Times, last.clone())]);
    Some(Expression { kind, span: expression.span })
}

/// `n − 2 + 1` as `n − 1`.
fn settled(expression: Expression) -> Expression {
    let Kind::Additive(first, rest) = &expression.kind else { return expression };
    let [before @ .., a, b] = &rest[..] else { return expression };
    let (Some(a), Some(b)) = (signed(a), signed(b)) else { return expression };
    let start = match before {
        [] => Expression::clone(first),
        _ => {
            let kind = Kind::Additive(first.clone(), before.to_vec());
            Expression { kind, span: expression.span }
        }
    };
    let sum = a + b;
    let size = if sum < Number::ZERO { -sum.clone() } else { sum.clone() };
    rewrite::add(start, sum < Number::ZERO, rewrite::number(&size))
}

/// A number behind its sign.
fn signed((sign, term): &(Additive, Expression)) -> Option<Number> {
    let value = rewrite::value(term)?;
    match sign {
        Additive::Plus => Some(value),
        Additive::Minus => Some(-value),
        Additive::Union | Additive::Difference => None,
    }
}
