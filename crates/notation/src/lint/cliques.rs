//! Rows that choose at most one of some binaries, of which another such row has all and more: what they
//! forbid is forbidden already (a row of an edge within the row of a clique, Padberg 1973).

use std::collections::BTreeMap;

use model::{ColumnId, Number, RowId};

use super::Subject;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};

/// Steps of comparing after which no further row is looked at, which is told: the same on every machine.
const LIMIT: usize = 2_000_000;

/// Families half of whose rows, or more, lie within others, each with an example.
pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let (facts, model) = (&subject.facts, subject.model());
    let choices: BTreeMap<RowId, Vec<ColumnId>> =
        facts.rows.iter().filter_map(|&row| Some((row, chosen(facts, row)?))).collect();
    let mut within: BTreeMap<usize, Vec<(RowId, RowId)>> = BTreeMap::new();
    let mut steps = 0;
    for (&row, columns) in &choices {
        if let Some(larger) = larger(facts, &choices, (row, columns), &mut steps) {
            within.entry(facts.family(row)).or_default().push((row, larger));
        }
        if steps > LIMIT {
            break;
        }
    }
    // few such rows come from the ends of an index
    let most = |family: usize, pairs: usize| 2 * pairs >= model.families()[family].rows.len();
    within
        .into_iter()
        .filter(|(family, pairs)| most(*family, pairs.len()))
        .map(|(family, pairs)| {
            let all = model.families()[family].rows.len();
            let (one, other) = (model.row_name(pairs[0].0), model.row_name(pairs[0].1));
            let name = &model.families()[family].name;
            let rows = match steps > LIMIT {
                true => format!("at least {}", pairs.len()),
                false => pairs.len().to_string(),
            };
            let span = subject.family_span(family);
            let told = message::within_clique(name, (&rows, &one, &other), span);
            let elsewhere = pairs.iter().all(|(_, larger)| facts.family(*larger) != family);
            match subject.line(family) {
                Some(line) if pairs.len() == all && elsewhere => {
                    told.mend_by("delete the line", line.span, "")
                }
                _ => told,
            }
        })
        .collect()
}

/// The binaries of a row that takes at most one of them, in order; of two or more.
fn chosen(facts: &Facts<'_>, row: RowId) -> Option<Vec<ColumnId>> {
    let (entries, upper) = facts.at_most(row)?;
    let plain = entries.iter().all(|(column, a)| *a == upper && facts.is_binary(*column));
    if entries.len() < 2 || upper <= Number::ZERO || !plain {
        return None;
    }
    let mut columns: Vec<ColumnId> = entries.into_iter().map(|(column, _)| column).collect();
    columns.sort_unstable();
    Some(columns)
}

/// A row with all of these binaries and more: sought among the rows of the one that fewest rows have.
fn larger(
    facts: &Facts<'_>,
    choices: &BTreeMap<RowId, Vec<ColumnId>>,
    (row, columns): (RowId, &[ColumnId]),
    steps: &mut usize,
) -> Option<RowId> {
    let rare = columns.iter().min_by_key(|column| facts.by_column[column.index()].len())?;
    facts.by_column[rare.index()].iter().map(|entry| entry.0).find(|other| {
        let Some(all) = choices.get(other).filter(|all| *other != row && all.len() > columns.len())
        else {
            return false;
        };
        *steps += columns.len();
        columns.iter().all(|column| all.binary_search(column).is_ok())
    })
}
