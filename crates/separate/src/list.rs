//! Listing all members of a family that has few.

use std::collections::{BTreeMap, BTreeSet};

use model::{LabelId, SubsetCondition, SubsetFamily};

use crate::conditions::{Conditions, Fixed};

/// The most members that are listed.
pub(crate) const MOST_MEMBERS: usize = 4_096;
/// The most partial sets that are looked at to list them.
const MOST_STEPS: usize = 1 << 19;

/// All sets that give a member, as places in the ground set; `None` when there are over
/// 2^12, or when finding them takes too long.
pub(crate) fn members(family: &SubsetFamily, conditions: &Conditions) -> Option<Vec<Vec<usize>>> {
    if conditions.empty {
        return Some(Vec::new());
    }
    let size = conditions.fixed.len();
    let mut open_after = vec![0; size + 1];
    for place in (0..size).rev() {
        let open = usize::from(conditions.fixed[place] != Fixed::Out);
        open_after[place] = open_after[place + 1] + open;
    }
    let cliques = cliques(family);
    let mut listing = Listing { conditions, open_after, cliques, chosen: Vec::new(), steps: 0 };
    listing.run()
}

/// The pairs of places that each clique condition joins.
fn cliques(family: &SubsetFamily) -> Vec<BTreeSet<(usize, usize)>> {
    let places: BTreeMap<LabelId, usize> =
        family.ground.iter().enumerate().map(|(place, &label)| (label, place)).collect();
    let joined = |edges: &Vec<(LabelId, LabelId)>| {
        let ends = edges.iter().filter_map(|(i, j)| Some((*places.get(i)?, *places.get(j)?)));
        ends.flat_map(|(i, j)| [(i, j), (j, i)]).collect()
    };
    let conditions = family.conditions.iter().filter_map(|condition| match condition {
        SubsetCondition::Clique(edges) => Some(joined(edges)),
        _ => None,
    });
    conditions.collect()
}

struct Listing<'a> {
    conditions: &'a Conditions,
    /// How many elements from a place on can be in a set.
    open_after: Vec<usize>,
    cliques: Vec<BTreeSet<(usize, usize)>>,
    /// The elements of the partial set, by rising place.
    chosen: Vec<usize>,
    steps: usize,
}

impl Listing<'_> {
    /// Walks the sets depth first, each set before those that extend it.
    fn run(&mut self) -> Option<Vec<Vec<usize>>> {
        let size = self.conditions.fixed.len();
        let mut sets = Vec::new();
        let mut next = 0;
        loop {
            if next == 0 || self.chosen.last().is_some_and(|last| last + 1 == next) {
                let mut set = vec![false; size];
                self.chosen.iter().for_each(|&place| set[place] = true);
                if self.conditions.admits(&set) {
                    sets.push(self.chosen.clone());
                }
            }
            next = self.step(next)?;
            if sets.len() > MOST_MEMBERS {
                return None;
            }
            if next > size {
                return Some(sets);
            }
        }
    }

    /// Takes the next element that can be taken at or after `place`, or goes back; the place
    /// to go on from, over the number of elements at the end. `None`: too long.
    fn step(&mut self, place: usize) -> Option<usize> {
        let size = self.conditions.fixed.len();
        let mut place = place;
        loop {
            self.steps += 1;
            if self.steps > MOST_STEPS {
                return None;
            }
            let enough = self.chosen.len() + self.open_after[place.min(size)];
            let go_on = place < size
                && self.chosen.len() < self.conditions.most
                && enough >= self.conditions.least;
            if go_on && self.can_take(place) {
                self.chosen.push(place);
                return Some(place + 1);
            }
            if go_on && self.conditions.fixed[place] != Fixed::In {
                place += 1;
                continue;
            }
            match self.chosen.pop() {
                None => return Some(size + 1),
                // An element that every set holds cannot be left out.
                Some(last) if self.conditions.fixed[last] == Fixed::In => place = size,
                Some(last) => place = last + 1,
            }
        }
    }

    fn can_take(&self, place: usize) -> bool {
        let joined = |pairs: &BTreeSet<(usize, usize)>| {
            self.chosen.iter().all(|&other| pairs.contains(&(other, place)))
        };
        self.conditions.fixed[place] != Fixed::Out && self.cliques.iter().all(joined)
    }
}

#[cfg(test)]
mod tests {
    use model::Number;
    use model::{FamilyId, Relation};

    use super::*;

    fn family(size: u32, conditions: Vec<SubsetCondition>) -> SubsetFamily {
        SubsetFamily {
            family: FamilyId(0),
            tuple: Vec::new(),
            ground: (0..size).map(LabelId).collect(),
            conditions,
            terms: Vec::new(),
            weights: vec![Number::ZERO; size as usize],
            constant: Number::ZERO,
            rounded: None,
            relation: Relation::AtMost,
        }
    }

    fn listed(family: &SubsetFamily) -> Option<BTreeSet<Vec<usize>>> {
        let sets = members(family, &Conditions::new(family))?;
        let distinct: BTreeSet<Vec<usize>> = sets.iter().cloned().collect();
        assert_eq!(distinct.len(), sets.len());
        Some(distinct)
    }

    /// Against all 2^n sets.
    #[test]
    fn every_admitted_set_is_listed() {
        let label = LabelId;
        let size = |at_least, at_most| SubsetCondition::Size { at_least, at_most };
        let edges = vec![(label(0), label(1)), (label(1), label(2)), (label(0), label(2))];
        let weights = (0..6).map(|i| (label(i), Number::from(i))).collect();
        let cases = vec![
            vec![],
            vec![size(2, 4)],
            vec![size(2, 4), SubsetCondition::Contains(label(3)), SubsetCondition::Odd(true)],
            vec![SubsetCondition::Contains(label(0)), SubsetCondition::Avoids(label(5))],
            vec![SubsetCondition::Contains(label(9))],
            vec![SubsetCondition::Clique(edges), size(1, 9)],
            vec![SubsetCondition::WeightOver { weights, over: Number::from(7) }],
            vec![SubsetCondition::Meets(vec![label(1), label(4)])],
        ];
        for conditions in cases {
            let family = family(6, conditions);
            let admitted = (0..64_usize).filter_map(|mask| {
                let set: Vec<usize> = (0..6).filter(|i| mask >> i & 1 == 1).collect();
                let labels = set.iter().map(|&i| family.ground[i]).collect();
                family.admits(&labels).then_some(set)
            });
            assert_eq!(listed(&family), Some(admitted.collect()), "{:?}", family.conditions);
        }
    }

    #[test]
    fn the_limit_holds() {
        assert_eq!(listed(&family(12, vec![])).map(|sets| sets.len()), Some(4096));
        assert!(listed(&family(13, vec![])).is_none());
        let pairs = vec![SubsetCondition::Size { at_least: 2, at_most: 2 }];
        assert_eq!(listed(&family(90, pairs)).map(|sets| sets.len()), Some(4005));
    }
}
