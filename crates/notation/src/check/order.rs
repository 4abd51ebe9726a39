//! The order of the memberships of a quantifier: one whose set mentions what another one binds
//! comes after that one (`i ∈ N ∖ {o_p}, p ∈ P`).

use std::collections::BTreeSet;

use super::binders::INDEX_LIMIT;
use super::usage::words;
use crate::syntax::{Expression, Kind, Relation};

/// The items so that none needs a later one, as far as that can be; else in their own order.
/// Names that share a set stay with it. `O(items²)` for a quantifier of usual length.
pub(super) fn in_order_of_need(items: &[Expression]) -> Vec<&Expression> {
    let mut groups: Vec<Vec<&Expression>> = vec![Vec::new()];
    for item in items {
        if let Some(last) = groups.last_mut() {
            last.push(item);
        }
        if !matches!(item.kind, Kind::Name(_)) {
            groups.push(Vec::new());
        }
    }
    let mut ordered = Vec::with_capacity(items.len());
    while !groups.is_empty() {
        let long = groups.len() > INDEX_LIMIT;
        let next = if long { None } else { (0..groups.len()).find(|at| is_free(&groups, *at)) };
        ordered.extend(groups.remove(next.unwrap_or(0)));
    }
    ordered
}

/// Whether a group needs nothing that another one binds.
fn is_free(groups: &[Vec<&Expression>], at: usize) -> bool {
    let mut wanted = BTreeSet::new();
    for (_, set) in groups[at].iter().copied().filter_map(membership) {
        words(set, &mut wanted);
    }
    let mut later = BTreeSet::new();
    for (_, group) in groups.iter().enumerate().filter(|(other, _)| *other != at) {
        for item in group {
            match (membership(item), &item.kind) {
                (Some((pattern, _)), _) => words(pattern, &mut later),
                (None, Kind::Name(_)) => words(item, &mut later),
                _ => {}
            }
        }
    }
    wanted.is_disjoint(&later)
}

/// The pattern and the set of a membership.
fn membership(item: &Expression) -> Option<(&Expression, &Expression)> {
    match &item.kind {
        Kind::Chain(first, links) => match &links[..] {
            [(Relation::In, set)] => Some((first, set)),
            _ => None,
        },
        _ => None,
    }
}
