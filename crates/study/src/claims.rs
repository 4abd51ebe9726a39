//! The rows and bounds of one rival as claims about the other, in its columns.

use std::collections::{BTreeMap, BTreeSet};

use model::{ColumnId, FamilyState, LabelId, Model, Number, NumberId, Row, RowId, SubsetFamily};

use crate::propagate::sides_of;
use crate::shared::Shared;
use crate::subject::Subject;

/// A row or bound of one rival in the columns of the other: `Σ a x ≤ side`.
#[derive(Debug, Clone)]
pub(crate) struct Claim {
    pub(crate) name: String,
    pub(crate) entries: Vec<(ColumnId, Number)>,
    pub(crate) side: Number,
}

/// Why the rows of `outer`, which lives in the shared variables, cannot be held against the other.
pub(crate) fn obstacle(inner: &Subject, outer: &Subject, shared: &Shared) -> Option<String> {
    if shared.pairs.len() < outer.model.columns().len() && !shared.pairs.is_empty() {
        return Some(format!("{} has variables of its own", outer.letter));
    }
    incomparable(inner, outer, shared)
}

/// Why two relaxations cannot be compared in the shared variables at all.
pub(crate) fn incomparable(inner: &Subject, outer: &Subject, shared: &Shared) -> Option<String> {
    if shared.pairs.is_empty() {
        return Some("they share no variable".to_owned());
    }
    if inner.model.sense() != outer.model.sense() || !same_costs(inner, outer, shared) {
        return Some("their objectives differ in the shared variables".to_owned());
    }
    None
}

/// Whether both have the same objective, and it is in the shared variables alone.
fn same_costs(inner: &Subject, outer: &Subject, shared: &Shared) -> bool {
    let cost = |model: &Model, column: ColumnId| -> Number {
        model.numbers().exact(model.columns()[column.index()].cost).clone()
    };
    let equal = shared
        .pairs
        .iter()
        .all(|&(left, right)| cost(&inner.model, left) == cost(&outer.model, right));
    let paired: BTreeSet<ColumnId> = shared.pairs.iter().map(|&(left, _)| left).collect();
    let columns = (0..inner.model.columns().len()).map(ColumnId::from_index);
    let mut rest = columns.filter(|column| !paired.contains(column));
    equal
        && rest
            .all(|column| cost(&inner.model, column).is_zero() || shared.only[0].contains(&column))
}

/// Every row and bound of `outer` that does not follow from the other's bounds alone, members of
/// families over subsets among them.
///
/// # Errors
/// There are more than `most`; the reason in words.
pub(crate) fn claims(
    outer: &Subject,
    shared: &Shared,
    inner: &Model,
    most: u32,
) -> Result<Vec<Claim>, String> {
    let to: BTreeMap<ColumnId, ColumnId> =
        shared.pairs.iter().map(|&(inner, outer)| (outer, inner)).collect();
    let turned = |claim: Claim| {
        let entries = claim.entries.into_iter().filter_map(|(c, a)| Some((*to.get(&c)?, a)));
        let mut entries: Vec<(ColumnId, Number)> = entries.collect();
        entries.sort_by_key(|(column, _)| *column);
        Claim { entries, ..claim }
    };
    let mut out: Vec<Claim> = halves(&outer.model, most)?.into_iter().map(turned).collect();
    bounds(&mut out, &outer.model, &to, inner);
    if out.len() > most as usize { Err(too_many(most)) } else { Ok(out) }
}

pub(crate) fn too_many(most: u32) -> String {
    format!("more than {most} rows to maximise")
}

/// Every row of a model, a claim for each of its sides, in its own columns; members of families over
/// subsets among them.
///
/// # Errors
/// A family has more members than `most`; the reason in words.
pub(crate) fn halves(model: &Model, most: u32) -> Result<Vec<Claim>, String> {
    let mut out = Vec::new();
    let meant =
        |row: &RowId| model.families()[model.row_family(*row).index()].state != FamilyState::Out;
    for row in (0..model.row_count()).map(RowId::from_index).filter(meant) {
        push(&mut out, &model.row_name(row), &model.row(row));
    }
    for family in model.subset_families() {
        for (name, row) in members(model, family, most).ok_or_else(|| too_many(most))? {
            push(&mut out, &name, &row);
        }
    }
    Ok(out)
}

fn push(out: &mut Vec<Claim>, name: &str, row: &Row) {
    for (half, _) in sides_of(row.clone()) {
        out.push(Claim { name: name.to_owned(), entries: half.entries, side: half.side });
    }
}

/// Every member of a family over subsets by name; `None` where there are too many subsets.
fn members(model: &Model, family: &SubsetFamily, most: u32) -> Option<Vec<(String, Row)>> {
    let size = family.ground.len();
    let subsets = u32::try_from(size).ok().and_then(|size| 1_u32.checked_shl(size));
    let subsets = subsets.filter(|subsets| *subsets <= most.saturating_mul(4))?;
    let name = |label: &LabelId| model.labels().name(*label).to_owned();
    let own = &model.families()[family.family.index()].name;
    let outer: Vec<String> = family.tuple.iter().map(name).collect();
    let outer = if outer.is_empty() { String::new() } else { format!("[{}]", outer.join(", ")) };
    let mut out = Vec::new();
    for number in 1..subsets {
        let chosen = family.ground.iter().enumerate().filter(|(place, _)| number >> place & 1 == 1);
        let subset: BTreeSet<LabelId> = chosen.map(|(_, label)| *label).collect();
        if family.admits(&subset) {
            let words: Vec<String> = subset.iter().map(name).collect();
            out.push((format!("{own}{outer}{{{}}}", words.join(", ")), family.member(&subset)));
        }
    }
    (out.len() <= most as usize).then_some(out)
}

fn bounds(out: &mut Vec<Claim>, outer: &Model, to: &BTreeMap<ColumnId, ColumnId>, inner: &Model) {
    let exact = |model: &Model, id: NumberId| model.numbers().exact(id).clone();
    for (index, column) in outer.columns().iter().enumerate() {
        let id = ColumnId::from_index(index);
        let Some(&own) = to.get(&id) else { continue };
        let mine = &inner.columns()[own.index()];
        let name = outer.column_name(id);
        if let Some(upper) = column.upper.map(|id| exact(outer, id))
            && mine.upper.is_none_or(|id| exact(inner, id) > upper)
        {
            let entries = vec![(own, Number::ONE)];
            out.push(Claim { name: format!("upper bound of {name}"), entries, side: upper });
        }
        if let Some(lower) = column.lower.map(|id| exact(outer, id))
            && mine.lower.is_none_or(|id| exact(inner, id) < lower)
        {
            let entries = vec![(own, -Number::ONE)];
            out.push(Claim { name: format!("lower bound of {name}"), entries, side: -lower });
        }
    }
}
