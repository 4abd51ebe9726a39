//! Binaries over ordered pairs: pairs without their reverse where rows leave and enter each node,
//! and both orders of a pair without a row that chooses one.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, FamilyId, LabelId, Number, RowId, Sense};

use super::Subject;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};
use crate::print;
use crate::rewrite;
use crate::syntax::{Expression, Kind, Line, Relation};

/// The label of the row that a mend adds.
const LABEL: &str = "one order";

/// The binaries of a variable over ordered pairs.
struct Pairs {
    variable: usize,
    at: BTreeMap<(LabelId, LabelId), ColumnId>,
}

pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let variables = 0..subject.model().variables().len();
    let pairs = variables.filter_map(|variable| pairs(&subject.facts, variable));
    pairs
        .flat_map(|pairs| one_way(subject, &pairs).into_iter().chain(both(subject, &pairs)))
        .collect()
}

fn pairs(facts: &Facts<'_>, variable: usize) -> Option<Pairs> {
    let found = &facts.model.variables()[variable];
    if !found.arrow {
        return None;
    }
    let mut at = BTreeMap::new();
    for column in found.columns.clone().map(ColumnId) {
        let [a, b] = facts.model.column_tuple(column) else { return None };
        if a == b || !facts.is_binary(column) {
            return None;
        }
        at.insert((*a, *b), column);
    }
    (at.len() >= 2).then_some(Pairs { variable, at })
}

/// Which end the pairs of a row share.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
enum Shared {
    First,
    Second,
}

fn one_way(subject: &Subject<'_>, pairs: &Pairs) -> Option<Diagnostic> {
    if pairs.at.keys().any(|&(a, b)| pairs.at.contains_key(&(b, a))) {
        return None;
    }
    let families = subject.model().families();
    let sharing = |end| {
        let number = (0..families.len()).find(|&f| shares(subject, pairs, f, end))?;
        Some(families[number].name.as_str())
    };
    let (leave, enter) = (sharing(Shared::First)?, sharing(Shared::Second)?);
    let name = &subject.model().variables()[pairs.variable].name;
    let span = subject.variable_span(pairs.variable);
    Some(message::one_way(name, pairs.at.len(), (leave, enter), span))
}

/// Whether each row of a family asks for one of the pairs that share an end, and some row has
/// several to choose from. A row of a single pair, as where big-M orders two jobs, shares nothing.
fn shares(subject: &Subject<'_>, pairs: &Pairs, family: usize, end: Shared) -> bool {
    let facts = &subject.facts;
    let mut largest = 0;
    for row in subject.model().families()[family].rows.clone().map(RowId) {
        let entries = subject.model().row_entries(row);
        let asks = facts.sides(row).0.is_some_and(|lower| *lower > Number::ZERO);
        let own = entries.iter().filter(|(column, a)| {
            facts.variable(*column) == pairs.variable && *facts.number(*a) > Number::ZERO
        });
        let ends: BTreeSet<LabelId> = own
            .clone()
            .map(|(column, _)| {
                subject.model().column_tuple(*column)[usize::from(end == Shared::Second)]
            })
            .collect();
        if !asks || ends.len() > 1 || (ends.is_empty() && !entries.is_empty()) {
            return false;
        }
        largest = largest.max(own.count());
    }
    largest > 1
        && facts
            .rows
            .iter()
            .any(|row| subject.model().row_family(*row) == FamilyId::from_index(family))
}

/// Pairs both orders of which can always be 0, since every row wants them small.
fn both(subject: &Subject<'_>, pairs: &Pairs) -> Option<Diagnostic> {
    let facts = &subject.facts;
    for (&(a, b), &column) in &pairs.at {
        let &other = pairs.at.get(&(b, a))?;
        if !only_switches(facts, column) {
            return None;
        }
        let rows = |column: ColumnId| facts.by_column[column.index()].iter().map(|(row, _)| *row);
        let own: BTreeSet<RowId> = rows(column).collect();
        if rows(other).any(|row| own.contains(&row)) {
            return None;
        }
    }
    let (&(a, b), &one) = pairs.at.iter().next()?;
    let other = pairs.at.get(&(b, a))?;
    let model = subject.model();
    let shown = (pairs.at.len() / 2, model.column_name(one), model.column_name(*other));
    let name = &model.variables()[pairs.variable].name;
    let figures = (shown.0, shown.1.as_str(), shown.2.as_str());
    let found = message::both_orders(name, figures, subject.variable_span(pairs.variable));
    Some(choosing(subject, pairs.variable, found))
}

/// Whether a binary stands only in rows of other variables that it switches on by being 1.
fn only_switches(facts: &Facts<'_>, column: ColumnId) -> bool {
    let model = facts.model;
    let cost = facts.number(model.columns()[column.index()].cost);
    let dear = if model.sense() == Sense::Minimise {
        *cost >= Number::ZERO
    } else {
        *cost <= Number::ZERO
    };
    let rows = &facts.by_column[column.index()];
    let switches = |row: RowId| {
        let Some((entries, _)) = facts.at_most(row) else { return false };
        let own = entries.iter().any(|(c, a)| *c == column && *a > Number::ZERO);
        own && entries.iter().any(|(c, _)| !facts.is_binary(*c))
    };
    dear && !rows.is_empty()
        && !facts.separated[column.index()]
        && rows.iter().all(|(row, _)| switches(*row))
}

/// The mend: a row that chooses one order of each pair.
fn choosing(subject: &Subject<'_>, variable: usize, found: Diagnostic) -> Diagnostic {
    let by_hand = "add a row that the two orders add up to 1";
    let line = subject.plan.variables[variable].domains.first().and_then(|domain| {
        subject.tree.statements.iter().find(|line| line.span.start == domain.span.start)
    });
    let name = &subject.model().variables()[variable].name;
    let row = line.and_then(|line| chosen(line, name));
    match (row, subject.tree.ends.statements) {
        (Some(mut row), Some(end)) => {
            let at = crate::place::Span { start: end.end, end: end.end };
            if subject.plan.families.iter().all(|family| family.name != LABEL) {
                row = format!("{row}  ({LABEL})");
            }
            found.mend_by("add the row that chooses one order", at, format!("\n  {row}"))
        }
        _ => found.mend(by_hand),
    }
}

/// `z_{i,j} + z_{j,i} = 1  ∀ (i,j) ∈ P : i < j` from the domain line of `z`.
fn chosen(line: &Line, name: &str) -> Option<String> {
    let own = line.left.iter().find_map(|e| match &e.kind {
        Kind::Name(found) if found.text == name => Some(&found.indices),
        _ => None,
    });
    let [a, b] = &own?[..] else { return None };
    let (one, other) = (
        rewrite::name(name, vec![a.clone(), b.clone()]),
        rewrite::name(name, vec![b.clone(), a.clone()]),
    );
    let sum = print::expression(&rewrite::add(one, false, other));
    let mut clauses = line.clauses.clone();
    let kind = Kind::Chain(Box::new(a.clone()), vec![(Relation::Less, b.clone())]);
    clauses.last_mut()?.such_that.push(Expression { kind, span: a.span });
    Some(format!("{sum} = 1{}", rewrite::quantifier(&clauses)))
}
