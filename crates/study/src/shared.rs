//! The variables in which two rivals are compared: found by name and index, or chosen.

use std::collections::BTreeMap;

use model::{ColumnId, Model};

use crate::subject::Subject;

/// Columns that two models share.
#[derive(Debug, Clone, Default)]
pub struct Shared {
    /// The same column in both.
    pub pairs: Vec<(ColumnId, ColumnId)>,
    /// Columns of the shared variables that only one of the models has: 0 in the other.
    pub only: [Vec<ColumnId>; 2],
    /// The variables with the number of columns that both have.
    pub variables: Vec<(String, u32)>,
}

type Place = (String, Vec<String>);

/// The columns that two rivals share: of the variables that are chosen, else of their family's
/// natural one where that must be whole, else of every variable that both name.
#[must_use]
pub fn shared(a: &Subject, b: &Subject, chosen: &[String]) -> Shared {
    let natural = natural(a, b);
    let wanted = if chosen.is_empty() { natural.as_slice() } else { chosen };
    let found = common(&a.model, &b.model, wanted);
    if !chosen.is_empty() || found.decides(&a.model, &b.model) {
        return found;
    }
    // Plans cannot be told apart by what may be fractional alone.
    let all = common(&a.model, &b.model, &[]);
    let better = found.pairs.is_empty() || all.decides(&a.model, &b.model);
    if better { all } else { found }
}

/// The natural variable of the family that both come from.
fn natural(a: &Subject, b: &Subject) -> Vec<String> {
    match (&a.entry, &b.entry) {
        (Some(a), Some(b)) if a.family == b.family && a.natural == b.natural => {
            vec![a.natural.clone()]
        }
        _ => Vec::new(),
    }
}

/// The common columns of these variables; of all where none are named.
fn common(a: &Model, b: &Model, wanted: &[String]) -> Shared {
    let (left, right) = (places(a, wanted), places(b, wanted));
    let mut shared = Shared::default();
    let mut counts: BTreeMap<String, u32> = BTreeMap::new();
    for (place, &column) in &left {
        if let Some(&other) = right.get(place) {
            shared.pairs.push((column, other));
            *counts.entry(place.0.clone()).or_default() += 1;
        }
    }
    shared.pairs.sort_unstable();
    let rest = |mine: &BTreeMap<Place, ColumnId>, other: &BTreeMap<Place, ColumnId>| {
        let rest = mine.iter().filter(|(place, _)| !other.contains_key(*place));
        let rest = rest.filter(|(place, _)| counts.contains_key(&place.0));
        let mut rest: Vec<ColumnId> = rest.map(|(_, &column)| column).collect();
        rest.sort_unstable();
        rest
    };
    shared.only = [rest(&left, &right), rest(&right, &left)];
    shared.variables = counts.into_iter().collect();
    shared
}

fn places(model: &Model, wanted: &[String]) -> BTreeMap<Place, ColumnId> {
    let mut places = BTreeMap::new();
    for (index, column) in model.columns().iter().enumerate() {
        let name = &model.variables()[column.variable.index()].name;
        if wanted.is_empty() || wanted.contains(name) {
            let id = ColumnId::from_index(index);
            let labels = model.column_tuple(id).iter();
            let labels = labels.map(|&label| model.labels().name(label).to_owned());
            places.insert((name.clone(), labels.collect()), id);
        }
    }
    places
}

impl Shared {
    /// Whether some of it must be whole.
    fn decides(&self, a: &Model, b: &Model) -> bool {
        self.pairs.iter().any(|&pair| is_whole(a, b, pair))
    }

    /// The pairs that must be whole in either model: a plan is what they are. All pairs where
    /// none must be.
    #[must_use]
    pub fn deciding(&self, a: &Model, b: &Model) -> Vec<(ColumnId, ColumnId)> {
        let deciding: Vec<_> =
            self.pairs.iter().copied().filter(|&pair| is_whole(a, b, pair)).collect();
        if deciding.is_empty() { self.pairs.clone() } else { deciding }
    }
}

fn is_whole(a: &Model, b: &Model, (left, right): (ColumnId, ColumnId)) -> bool {
    a.columns()[left.index()].integer || b.columns()[right.index()].integer
}

/// Whether a column lies between two finite bounds.
pub(crate) fn is_boxed(model: &Model, column: ColumnId) -> bool {
    let column = &model.columns()[column.index()];
    column.lower.is_some() && column.upper.is_some()
}
