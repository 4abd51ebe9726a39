//! Variables that nothing holds, and directions that nothing ends.

use model::{ColumnId, Number, Sense};

use super::Subject;
use super::bounds::Bounds;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};

pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let facts = &subject.facts;
    let open = |column: &ColumnId| matches!(facts.bounds(*column), (None, None));
    let mut implied = None;
    let mut found = Vec::new();
    for (number, variable) in subject.model().variables().iter().enumerate() {
        let columns: Vec<ColumnId> = variable.columns.clone().map(ColumnId).collect();
        let span = subject.variable_span(number);
        if !columns.is_empty() && columns.iter().all(open) {
            let bounds = implied.get_or_insert_with(|| Bounds::implied(facts, None));
            let free = |c: &ColumnId| bounds.lower(*c).is_none() && bounds.upper(*c).is_none();
            let known = |c: &ColumnId| {
                !facts.by_column[c.index()].is_empty() && !facts.separated[c.index()]
            };
            if columns.iter().all(|c| free(c) && known(c)) {
                found.push(message::free(&variable.name, columns.len(), span));
            }
        }
        if let Some((column, up)) = columns.iter().find_map(|&c| Some((c, endless(facts, c)?))) {
            let rows = facts.by_column[column.index()].len();
            let name = subject.model().column_name(column);
            found.push(message::endless(&name, (rows, up), span));
        }
    }
    found
}

/// Whether the objective improves as a column grows (`true`) or falls without any of its rows
/// stopping it; a column in no row is told by the expansion.
fn endless(facts: &Facts<'_>, column: ColumnId) -> Option<bool> {
    let rows = &facts.by_column[column.index()];
    let cost = facts.number(facts.model.columns()[column.index()].cost);
    if rows.is_empty() || facts.separated[column.index()] || cost.is_zero() {
        return None;
    }
    let up = (*cost < Number::ZERO) == (facts.model.sense() == Sense::Minimise);
    let (lower, upper) = facts.bounds(column);
    if (if up { upper } else { lower }).is_some() {
        return None;
    }
    let stops = rows.iter().any(|&(row, a)| {
        let (lower, upper) = facts.sides(row);
        let grows = (*facts.number(a) > Number::ZERO) == up;
        if grows { upper.is_some() } else { lower.is_some() }
    });
    (!stops).then_some(up)
}
