//! The most violated sets that meet the conditions: one minimum cut after another, or, where one
//! condition asks for it, one minimum odd cut, knapsack or clique after another.
//!
//! A cut over what is left open gives the most violated sets there. When one of them meets
//! the conditions it is recorded; when the violation is too small the part is done; else the
//! part is split into parts in which the failing condition is forced a little more, as in the
//! ranking method of Lawler 1972. For 1 ≤ |S| ≤ n − 1 that takes about 2n cuts.
//!
//! Where the member holds a rounded sum, the cut is that of the weaker form without the rounding:
//! a set that it finds may fail, and others are tried, up to the limit. Before that, sets grown
//! from each element are tried.
//!
//! Where a set and its complement are equally violated only the sets that avoid the first
//! element are searched, and what is recorded is the smaller side that is admitted.

use std::collections::BTreeMap;
use std::ops::Range;

use crate::conditions::{Conditions, Failure, Fixed, Part};
use crate::method::{Oracle, halves};
use crate::parity::ParityMinimum;
use crate::quadratic::{Answer, Minimum, Quadratic};
use crate::{components, growth, tolerance};

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
    oracle: Oracle,
    /// The search for a set of one parity that is under way.
    parity: Option<Box<ParityMinimum>>,
    /// Elements that sets are still to be grown from.
    seeds: Range<usize>,
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
    /// Prepares a search and looks at the connected components (and at greedy cliques); if they
    /// give violated sets the search is finished with them.
    pub(crate) fn new(
        quadratic: Quadratic,
        conditions: &Conditions,
        oracle: Oracle,
        rules: Rules,
    ) -> Self {
        let size = conditions.fixed.len();
        let balanced = can_halve(&quadratic, conditions, rules);
        let mut search = Self {
            rules,
            conditions: conditions.clone(),
            balanced,
            open: Vec::new(),
            found: BTreeMap::new(),
            covered: vec![Covered::default(); size],
            parity: None,
            seeds: 0..if quadratic.is_rounded() { size } else { 0 },
            oracle,
            cuts: 0,
            cut_short: false,
            quadratic,
        };
        if conditions.empty {
            search.seeds = 0..0;
            return search;
        }
        search.try_cheap(conditions);
        if !search.found.is_empty() {
            search.seeds = 0..0;
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

    /// Records what costs no cut.
    fn try_cheap(&mut self, conditions: &Conditions) {
        if let Oracle::Clique(cliques) = self.oracle.clone() {
            for set in cliques.greedy(&self.quadratic, &conditions.fixed) {
                self.record(&set, conditions);
            }
            return;
        }
        for set in components::candidates(&self.quadratic, conditions) {
            self.record(&set, conditions);
        }
    }

    /// Whether nothing is left to do.
    pub(crate) fn is_finished(&self) -> bool {
        self.open.is_empty() && self.parity.is_none() && self.seeds.is_empty()
    }

    /// One cut, or one set grown; the work done. `family` holds the family's own conditions.
    pub(crate) fn step(&mut self, family: &Conditions) -> u64 {
        if let Some(parity) = self.parity.take() {
            return self.step_parity(parity, family);
        }
        if let Some(seed) = self.seeds.next() {
            return self.grow(seed, family);
        }
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
        let threshold = self.rules.threshold;
        let answer = match &self.oracle {
            Oracle::Cut => {
                let (minimum, ticks) = self.quadratic.minimise(&part.fixed);
                Answer { minimum: Some(minimum), ticks, cut_short: false }
            }
            Oracle::Parity(odd) => {
                let slightly = self.rules.balance;
                let search = ParityMinimum::new(&self.quadratic, part.fixed, *odd, slightly);
                self.parity = Some(Box::new(search));
                return 1;
            }
            Oracle::Cover(cover) => cover.minimise(&self.quadratic, &part.fixed, threshold),
            Oracle::Clique(cliques) => cliques.minimise(&self.quadratic, &part.fixed, threshold),
        };
        self.cut_short |= answer.cut_short;
        if let Some(minimum) = answer.minimum {
            self.judge(&minimum, &part.fixed, family);
        }
        answer.ticks
    }

    /// Records a minimum, or splits the part where it fails.
    fn judge(&mut self, minimum: &Minimum, fixed: &[Fixed], family: &Conditions) {
        let most = self.quadratic.violation(&minimum.smallest) + self.quadratic.most_gain();
        if most <= self.rules.threshold {
            return;
        }
        let recorded = self.take_both(minimum, family);
        self.after(recorded, &minimum.smallest, fixed);
    }

    /// Ends the search when enough is found; splits the part when its set is of no use.
    fn after(&mut self, recorded: bool, set: &[bool], fixed: &[Fixed]) {
        if recorded && (self.rules.first_only || self.found.len() >= MOST_SETS) {
            self.open.clear();
        }
        let rounded = self.quadratic.is_rounded().then_some(Failure::Other);
        if let (false, Some(failure)) = (recorded, self.failure(set).or(rounded)) {
            let parts = self.conditions.parts(fixed, set, failure);
            self.open.extend(parts.into_iter().rev());
        }
    }

    /// One flow of the search for a set of one parity; at its end what was found is recorded.
    fn step_parity(&mut self, mut parity: Box<ParityMinimum>, family: &Conditions) -> u64 {
        let ticks = parity.step(&self.quadratic, self.rules.threshold);
        if !parity.is_finished() {
            self.parity = Some(parity);
            return ticks;
        }
        let mut sets = std::mem::take(&mut parity.sets);
        sets.retain(|(violation, _)| *violation > self.rules.threshold);
        sets.sort_by(|a, b| b.0.total_cmp(&a.0).then_with(|| a.1.cmp(&b.1)));
        let mut recorded = false;
        for (_, set) in &sets {
            recorded |= self.failure(set).is_none() && self.record(set, family);
        }
        if let Some((_, set)) = sets.first() {
            self.after(recorded, set, &parity.fixed);
        }
        ticks
    }

    /// Grows a set from one element; after the last, the search ends if it found any.
    fn grow(&mut self, seed: usize, family: &Conditions) -> u64 {
        let (sets, ticks) = growth::grown(&self.quadratic, &self.conditions, seed);
        for set in sets {
            self.record(&set, family);
        }
        if self.seeds.is_empty() && !self.found.is_empty() {
            self.open.clear();
        }
        ticks
    }

    fn failure(&self, set: &[bool]) -> Option<Failure> {
        self.conditions.failure(set)
    }

    /// Records the smallest and the largest most violated set, as far as they meet the
    /// conditions in force. Elements in the smallest, and those out of the largest, count as
    /// covered.
    fn take_both(&mut self, minimum: &Minimum, family: &Conditions) -> bool {
        let mut taken = Vec::new();
        let one = matches!(self.oracle, Oracle::Clique(_));
        let mut sets = [&minimum.smallest, &minimum.largest];
        if one {
            sets.reverse();
        }
        for set in sets {
            if self.failure(set).is_none() && self.record(set, family) {
                taken.push(set);
                if one {
                    break;
                }
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
        if self.quadratic.rounded_violation(set) <= self.rules.threshold {
            return false;
        }
        let mut sides = vec![set.to_vec()];
        if self.balanced {
            sides.push(set.iter().map(|inside| !inside).collect());
            sides.sort_by_key(|side| (size(side), side[0]));
        }
        let Some(side) = sides.into_iter().find(|side| family.admits(side)) else { return false };
        let places = (0..side.len()).filter(|&i| side[i]).collect();
        self.found.insert(places, self.quadratic.rounded_violation(&side));
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
