//! Tables over two sets whose rows and columns stand the other way round than the `data` line names
//! them: a sheet has depots in rows where the paper writes `c_{ij}` with clients first.

use std::collections::BTreeMap;

use model::Number;

use crate::plan::Root;

/// What is written behind a table's name to take it turned round.
pub(crate) const MARK: &str = ", turned round";

/// How many cells are looked at.
const LOOKED_AT: usize = 10_000;

/// In which order the labels of a table's cells fit two sets.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Order {
    /// As declared, or in neither.
    Declared,
    /// Only the other way round.
    Turned,
    /// In both, though the sets are two.
    Either,
}

/// The name of the table that a person chose, turned round or not.
#[must_use]
pub fn table_named(given: &str) -> &str {
    named(given).0
}

/// The name of the table, and whether it is to be turned round.
pub(crate) fn named(given: &str) -> (&str, bool) {
    given.strip_suffix(MARK).map_or((given, false), |name| (name, true))
}

/// The order in which cells fit the sets of two indices; `holds` tells whether a label belongs to
/// one. The first of many cells tell for all. `O(cells)`.
pub(crate) fn order(
    roots: &[Root],
    cells: &BTreeMap<Vec<String>, Number>,
    mut holds: impl FnMut(Root, &str) -> bool,
) -> Order {
    let &[first, second] = roots else { return Order::Declared };
    if first == second || [first, second].contains(&Root::Unknown) {
        return Order::Declared;
    }
    let (mut declared, mut turned, mut all) = (0, 0, 0);
    for key in cells.keys().take(LOOKED_AT) {
        let [one, other] = &key[..] else { return Order::Declared };
        declared += usize::from(holds(first, one) && holds(second, other));
        turned += usize::from(holds(first, other) && holds(second, one));
        all += 1;
    }
    match (declared, turned) {
        (0, 1..) => Order::Turned,
        _ if all > 1 && declared == all && turned == all => Order::Either,
        _ => Order::Declared,
    }
}
