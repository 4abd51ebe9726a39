//! The most violated sets that meet the conditions: one minimum cut after another.
//!
//! A cut over what is left open gives the most violated sets there. When one of them meets
//! the conditions it is recorded; when the violation is too small the part is done; else the
//! part is split into parts in which the failing condition is forced a little more, as in the
//! ranking method of Lawler 1972. For 1 ≤ |S| ≤ n − 1 that takes about 2n cuts.
//!
//! Where a set and its complement are equally violated only the sets that avoid the first
//! element are searched, and what is recorded is the smaller side that is admitted.

use std::collections::BTreeMap;

use crate::conditions::{Conditions, Failure, Fixed, Part};
use crate::method::halves;
use crate::quadratic::{Minimum, Quadratic};
use crate::{components, tolerance};

/// The most sets that a round keeps.
const MOST_SETS: usize = 400;

/// How a search decides.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Rules {
    /// Scaled violations up to this are none.
    pub(crate) threshold: f64,
    /// The most by which nodes may be out of balance (scaled).
    pub(crate) balance: f64,
    /// The most cuts.
    pub(crate) limit: Option<u32>,
    /// Residual capacities up to this count as none (scaled).
    pub(crate) residual: f64,
    /// Whether to stop at the first violated set.
    pub(crate) first_only: bool,
}

/// Which sides of an element the sets that were found have it on.
#[derive(Debug, Clone, Copy, Default)]
struct Covered {
    inside: bool,
    outside: bool,
}

/// A search at one point.
#[derive(Debug, Clone)]
pub(crate) struct Search {
    quadratic: Quadratic,
    rules: Rules,
    /// The conditions in force: those of the family, or, in balance, weaker ones.
    conditions: Conditions,
    balanced: bool,
    open: Vec<Part>,
    /// Sets by places in rising order, and their scaled violation.
    pub(crate) found: BTreeMap<Vec<usize>, f64>,
    covered: Vec<Covered>,
    cuts: u32,
    /// Whether the limit ended the search.
    pub(crate) cut_short: bool,
}

impl Search {
    /// Prepares a search and looks at the connected components; if they give violated sets
    /// the search is finished with them.
    pub(crate) fn new(quadratic: Quadratic, conditions: &Conditions, rules: Rules) -> Self {
        let size = conditions.fixed.len();
        let balanced = can_halve(&quadratic, conditions, rules);
        let mut search = Self {
            rules,
            conditions: conditions.clone(),
            balanced,
            open: Vec::new(),
            found: BTreeMap::new(),
            covered: vec![Covered::default(); size],
            cuts: 0,
            cut_short: false,
            quadratic,
        };
        if conditions.empty {
            return search;
        }
        for set in components::candidates(&search.quadratic, conditions) {
            search.record(&set, conditions);
        }
        if !search.found.is_empty() {
            return search;
        }
        let mut fixed = conditions.fixed.clone();
        if balanced {
            fixed[0] = Fixed::Out;
            search.conditions.least = 2;
            search.conditions.most = size.saturating_sub(2);
        }
        search.open.push(Part { fixed, forced: None });
        search
    }

    /// Whether nothing is left to do.
    pub(crate) fn is_finished(&self) -> bool {
        self.open.is_empty()
    }

    /// One cut; the work done. `family` holds the family's own conditions.
    pub(crate) fn step(&mut self, family: &Conditions) -> u64 {
        let Some(part) = self.open.pop() else { return 0 };
        if self.is_covered(&part) {
            return 1;
        }
        if self.rules.limit.is_some_and(|limit| self.cuts >= limit) {
            self.cut_short = true;
            self.open.clear();
            return 1;
        }
        self.cuts += 1;
        let minimum = self.quadratic.minimise(&part.fixed);
        if self.quadratic.violation(&minimum.smallest) <= self.rules.threshold {
            return minimum.ticks;
        }
        let recorded = self.take_both(&minimum, family);
        if recorded && (self.rules.first_only || self.found.len() >= MOST_SETS) {
            self.open.clear();
        } else if let (false, Some(failure)) = (recorded, self.failure(&minimum.smallest)) {
            let parts = self.conditions.parts(&part.fixed, &minimum.smallest, failure);
            self.open.extend(parts.into_iter().rev());
        }
        minimum.ticks
    }

    fn failure(&self, set: &[bool]) -> Option<Failure> {
        self.conditions.failure(set)
    }

    /// Records the smallest and the largest most violated set, as far as they meet the
    /// conditions in force. Elements in the smallest, and those out of the largest, count as
    /// covered.
    fn take_both(&mut self, minimum: &Minimum, family: &Conditions) -> bool {
        let mut taken = Vec::new();
        for set in [&minimum.smallest, &minimum.largest] {
            if self.failure(set).is_none() && self.record(set, family) {
                taken.push(set);
            }
        }
        let (Some(smallest), Some(largest)) = (taken.first(), taken.last()) else { return false };
        for (i, covered) in self.covered.iter_mut().enumerate() {
            covered.inside |= smallest[i];
            covered.outside |= !largest[i];
        }
        true
    }

    /// Records a set if it gives a member and is violated; in balance the smaller of it and
    /// its complement that does (its row has fewer entries), and not both.
    fn record(&mut self, set: &[bool], family: &Conditions) -> bool {
        if self.quadratic.violation(set) <= self.rules.threshold {
            return false;
        }
        let mut sides = vec![set.to_vec()];
        if self.balanced {
            sides.push(set.iter().map(|inside| !inside).collect());
            sides.sort_by_key(|side| (size(side), side[0]));
        }
        let Some(side) = sides.into_iter().find(|side| family.admits(side)) else { return false };
        let places = (0..side.len()).filter(|&i| side[i]).collect();
        self.found.insert(places, self.quadratic.violation(&side));
        true
    }

    /// Whether a set that was found already has what the part forces: it would mostly give
    /// that set again.
    fn is_covered(&self, part: &Part) -> bool {
        match part.forced {
            Some((place, Fixed::In)) => self.covered[place].inside,
            Some((place, _)) => self.covered[place].outside,
            None => false,
        }
    }
}

fn size(set: &[bool]) -> usize {
    set.iter().filter(|inside| **inside).count()
}

/// Whether it is enough to search the sets that avoid the first element. Single elements
/// must not be violated, for their complements may be admitted where they are not.
fn can_halve(quadratic: &Quadratic, conditions: &Conditions, rules: Rules) -> bool {
    let size = conditions.fixed.len();
    let single = |place: usize| {
        let set: Vec<bool> = (0..size).map(|i| i == place).collect();
        quadratic.violation(&set) <= rules.threshold
    };
    halves(conditions) && quadratic.is_balanced(rules.balance) && (0..size).all(single)
}

/// The rules for a point of the relaxation.
pub(crate) fn fractional(scale: f64, limit: Option<u32>) -> Rules {
    Rules {
        threshold: tolerance::VIOLATION * scale,
        balance: tolerance::BALANCE * scale,
        residual: tolerance::RESIDUAL * scale,
        limit,
        first_only: false,
    }
}
