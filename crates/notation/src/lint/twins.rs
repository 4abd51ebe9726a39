//! Rows that repeat other rows, up to a factor, and columns that nothing tells apart.

use std::collections::BTreeMap;

use model::{ColumnId, Number, NumberId, RowId};

use super::Subject;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};

pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let mut found = rows(subject);
    found.extend(columns(subject));
    found
}

/// A row divided by the coefficient of its first column.
type Scaled = (Vec<(ColumnId, Number)>, Option<Number>, Option<Number>);

fn scaled(facts: &Facts<'_>, row: RowId) -> Option<Scaled> {
    let entries = facts.model.row_entries(row);
    let first = facts.number(entries.first()?.1);
    let exact = entries.iter().map(|&(column, a)| (column, facts.number(a) / first)).collect();
    let (lower, upper) = facts.sides(row);
    let (lower, upper) = if *first < Number::ZERO { (upper, lower) } else { (lower, upper) };
    let divided = |side: Option<&Number>| side.map(|side| side / first);
    Some((exact, divided(lower), divided(upper)))
}

/// Families half of whose rows, or more, repeat an earlier row.
fn rows(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let (facts, model) = (&subject.facts, subject.model());
    let mut first: BTreeMap<Scaled, RowId> = BTreeMap::new();
    let mut repeated: BTreeMap<usize, Vec<(RowId, RowId)>> = BTreeMap::new();
    for &row in &facts.rows {
        // rows with one entry are alike by the data
        if model.row_entries(row).len() < 2 {
            continue;
        }
        let Some(key) = scaled(facts, row) else { continue };
        match first.get(&key) {
            Some(&earlier) => repeated.entry(facts.family(row)).or_default().push((row, earlier)),
            None => {
                first.insert(key, row);
            }
        }
    }
    let mut found = Vec::new();
    for (family, pairs) in repeated {
        let all = model.families()[family].rows.len();
        if 2 * pairs.len() < all {
            continue;
        }
        let (one, other) = pairs[0];
        let (one, other) = (model.row_name(one), model.row_name(other));
        let (name, span) = (&model.families()[family].name, subject.family_span(family));
        let told = message::twin_rows(name, (pairs.len(), &one, &other), span);
        let elsewhere = pairs.iter().all(|(_, earlier)| facts.family(*earlier) != family);
        let turned = |&(row, earlier): &(RowId, RowId)| {
            let mut own = model.row_tuple(row).to_vec();
            let mut other = model.row_tuple(earlier).to_vec();
            own.sort_unstable();
            other.sort_unstable();
            own == other
        };
        found.push(match subject.line(family) {
            Some(line) if pairs.len() == all && elsewhere => {
                told.mend_by("delete the line", line.span, "")
            }
            // alike because the data are alike: there is nothing to mend in the line
            Some(_) if pairs.iter().all(turned) => {
                told.mend("quantify it over one of each pair, such as i < j")
            }
            _ => told,
        });
    }
    found
}

/// All that is known of a column: rows, cost, bounds, whether it is whole.
type Known<'f> = (&'f [(RowId, NumberId)], NumberId, Option<NumberId>, Option<NumberId>, bool);

/// Variables each of whose columns has a twin of another variable.
fn columns(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let (facts, model) = (&subject.facts, subject.model());
    let mut alike: BTreeMap<Known<'_>, Vec<ColumnId>> = BTreeMap::new();
    for (index, column) in model.columns().iter().enumerate() {
        let rows = facts.by_column[index].as_slice();
        if !rows.is_empty() && !facts.separated[index] {
            let key = (rows, column.cost, column.lower, column.upper, column.integer);
            alike.entry(key).or_default().push(ColumnId::from_index(index));
        }
    }
    let mut twins: BTreeMap<usize, Vec<(ColumnId, ColumnId)>> = BTreeMap::new();
    for group in alike.values().filter(|group| group.len() > 1) {
        for &column in group {
            let own = facts.variable(column);
            // alike within one variable are data, not names
            if let Some(&other) = group.iter().find(|other| facts.variable(**other) != own) {
                twins.entry(own).or_default().push((column, other));
            }
        }
    }
    let whole =
        twins.into_iter().filter(|(v, found)| found.len() == model.variables()[*v].columns.len());
    whole
        .map(|(variable, found)| {
            let (one, other) = (model.column_name(found[0].0), model.column_name(found[0].1));
            let name = &model.variables()[variable].name;
            let figures = (found.len(), one.as_str(), other.as_str());
            message::twin_columns(name, figures, subject.variable_span(variable))
        })
        .collect()
}
