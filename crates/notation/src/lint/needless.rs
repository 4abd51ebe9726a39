//! Variables that need not be whole, for the others make them so.
//!
//! With all other whole variables fixed at whole numbers, the rows of a variable are a matrix of its own. Where each of
//! its entries is 1 or −1 (the row divided by their common size leaves whole numbers), no continuous variable stands
//! beside it, and either each column has at most two entries beside bounds, or each row has two, and the rows (the
//! columns) fall into two classes, the matrix is totally unimodular (Heller & Tompkins 1956; Hoffman & Kruskal 1956):
//! among the best plans is one in which the variable is whole, whatever the costs. Where each column stands alone in
//! an equation of whole variables it is whole in every plan.

use std::collections::btree_map::Entry;
use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, Number, RowId};

use super::Subject;
use super::facts::Facts;
use crate::diagnostic::{Diagnostic, lints as message};

/// The largest first; each is judged with those already found taken as continuous, so that all of them
/// together need not be whole.
pub(super) fn lint(subject: &Subject<'_>) -> Vec<Diagnostic> {
    let (facts, model) = (&subject.facts, subject.model());
    let whole = |c: usize| model.columns()[c].integer;
    let mut variables: Vec<usize> = (0..model.variables().len())
        .filter(|&v| {
            let columns = model.variables()[v].columns.clone();
            columns.len() > 1 && columns.clone().all(|c| whole(c as usize))
        })
        .collect();
    variables.sort_by_key(|&v| std::cmp::Reverse(model.variables()[v].columns.len()));
    let mut relaxed = BTreeSet::new();
    let mut found = Vec::new();
    for variable in variables {
        let Some(part) = Part::new(facts, variable, &relaxed) else { continue };
        let follows = part.follows();
        if !follows && !two_classes(&part.by_column()) && !two_classes(&part.by_row()) {
            continue;
        }
        relaxed.insert(variable);
        let name = &model.variables()[variable].name;
        let columns = model.variables()[variable].columns.len();
        let others = model
            .columns()
            .iter()
            .any(|column| column.integer && !relaxed.contains(&column.variable.index()));
        let span = subject.variable_span(variable);
        found.push(message::needless(name, (columns, others, follows), span));
    }
    found
}

/// The rows of one variable, with the signs of its entries.
struct Part<'f, 'm> {
    facts: &'f Facts<'m>,
    rows: BTreeMap<RowId, Vec<(ColumnId, bool)>>,
    columns: Vec<ColumnId>,
}

impl<'f, 'm> Part<'f, 'm> {
    /// `None` where a row has a continuous variable, or does not come out whole.
    fn new(facts: &'f Facts<'m>, variable: usize, relaxed: &BTreeSet<usize>) -> Option<Self> {
        let columns: Vec<ColumnId> =
            facts.model.variables()[variable].columns.clone().map(ColumnId).collect();
        let mut rows = BTreeMap::new();
        for &column in &columns {
            let entries = &facts.by_column[column.index()];
            if entries.is_empty() || facts.separated[column.index()] {
                return None;
            }
            let (lower, upper) = facts.bounds(column);
            if [lower, upper].into_iter().flatten().any(|end| !end.is_int()) {
                return None;
            }
            for &(row, _) in entries {
                if let Entry::Vacant(new) = rows.entry(row) {
                    new.insert(signs(facts, row, variable, relaxed)?);
                }
            }
        }
        Some(Self { facts, rows, columns })
    }

    /// Whether each column stands alone in an equation.
    fn follows(&self) -> bool {
        let alone = |row: &RowId| {
            let (lower, upper) = self.facts.sides(*row);
            self.rows[row].len() == 1 && lower.is_some() && lower == upper
        };
        let told = |column: &ColumnId| {
            self.facts.by_column[column.index()].iter().any(|(row, _)| alone(row))
        };
        self.columns.iter().all(told)
    }

    /// Rows that are no bounds, numbered.
    fn proper(&self) -> impl Iterator<Item = (usize, &Vec<(ColumnId, bool)>)> {
        self.rows.values().filter(|entries| entries.len() > 1).enumerate()
    }

    /// Each column as the rows that it joins.
    fn by_column(&self) -> Vec<Vec<(usize, bool)>> {
        let mut joined: BTreeMap<ColumnId, Vec<(usize, bool)>> = BTreeMap::new();
        for (row, entries) in self.proper() {
            for &(column, sign) in entries {
                joined.entry(column).or_default().push((row, sign));
            }
        }
        joined.into_values().collect()
    }

    /// Each row as the columns that it joins.
    fn by_row(&self) -> Vec<Vec<(usize, bool)>> {
        let indexed = |&(column, sign): &(ColumnId, bool)| (column.index(), sign);
        self.proper().map(|(_, entries)| entries.iter().map(indexed).collect()).collect()
    }
}

/// The entries of a variable in a row, all of one size by which all else can be divided, with their signs.
fn signs(
    facts: &Facts<'_>,
    row: RowId,
    variable: usize,
    relaxed: &BTreeSet<usize>,
) -> Option<Vec<(ColumnId, bool)>> {
    let entries = facts.model.row_entries(row);
    let own = |column: ColumnId| facts.variable(column) == variable;
    let size = absolute(facts.number(entries.iter().find(|(column, _)| own(*column))?.1));
    let divides = |a: &Number| (a / &size).is_int();
    let (lower, upper) = facts.sides(row);
    if ![lower, upper].into_iter().flatten().all(divides) {
        return None;
    }
    let mut signs = Vec::new();
    for &(column, a) in entries {
        let a = facts.number(a);
        if own(column) {
            if absolute(a) != size {
                return None;
            }
            signs.push((column, *a > Number::ZERO));
        } else {
            let continuous = !facts.model.columns()[column.index()].integer;
            if continuous || relaxed.contains(&facts.variable(column)) || !divides(a) {
                return None;
            }
        }
    }
    Some(signs)
}

fn absolute(a: &Number) -> Number {
    if *a < Number::ZERO { -a } else { a.clone() }
}

/// Whether each link joins at most two things and the things fall into two classes: those joined with the same
/// sign into different ones, those with different signs into one. O(links + things).
fn two_classes(links: &[Vec<(usize, bool)>]) -> bool {
    let mut beside: BTreeMap<usize, Vec<(usize, bool)>> = BTreeMap::new();
    for link in links {
        match link[..] {
            [] | [_] => {}
            [(a, one), (b, other)] => {
                beside.entry(a).or_default().push((b, one == other));
                beside.entry(b).or_default().push((a, one == other));
            }
            _ => return false,
        }
    }
    let mut class: BTreeMap<usize, bool> = BTreeMap::new();
    for &start in beside.keys() {
        if class.contains_key(&start) {
            continue;
        }
        class.insert(start, false);
        let mut open = vec![start];
        while let Some(at) = open.pop() {
            let own = class[&at];
            for &(next, differs) in &beside[&at] {
                let wanted = own ^ differs;
                match class.get(&next) {
                    Some(found) if *found != wanted => return false,
                    Some(_) => {}
                    None => {
                        class.insert(next, wanted);
                        open.push(next);
                    }
                }
            }
        }
    }
    true
}
