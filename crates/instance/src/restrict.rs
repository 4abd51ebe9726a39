//! A part of an instance: fewer stops, sites, items or periods, everything else as it is.

use std::collections::{BTreeMap, BTreeSet};

use crate::instance::{Datum, Instance, Points};

impl Instance {
    /// The instance with the first `count` elements of each of its sets, and of those only what
    /// is said of them. A set that lies within another one keeps what is left of it; an element
    /// that the instance names (a depot) stays. Labels that stand in no set are taken as one,
    /// in the order in which they come. Numbers stay as they are.
    #[must_use]
    pub fn first(&self, count: usize) -> Self {
        self.part(count, None)
    }

    /// As [`Self::first`], of elements that a seed chooses; they keep their order.
    #[must_use]
    pub fn part(&self, count: usize, seed: Option<u64>) -> Self {
        self.restricted(&Kept::of(self, count, seed))
    }

    /// The instance with these elements of its sets alone, and of those only what is said of them; an
    /// element that the instance names (a depot) stays. `O(size of the instance)`.
    #[must_use]
    pub fn keeping(&self, elements: &BTreeSet<String>) -> Self {
        let mut kept = Kept(elements.clone());
        kept.name(self);
        self.restricted(&kept)
    }

    /// The elements that [`Self::part`] keeps for each count and seed; two parts that keep the same are the
    /// same instance. `O(size of the instance)` and of each part.
    #[must_use]
    pub fn kept_by(&self, parts: &[(usize, u64)]) -> Vec<BTreeSet<String>> {
        let sets = sets(self);
        let kept = |&(count, seed): &(usize, u64)| Kept::within(&sets, self, count, Some(seed)).0;
        parts.iter().map(kept).collect()
    }

    fn restricted(&self, kept: &Kept) -> Self {
        let mut part = self.clone();
        for (_, datum) in &mut part.data {
            kept.restrict(datum);
        }
        part.points = self.points.as_ref().map(|points| Points {
            places: (self.stops().iter().zip(&points.places))
                .filter(|(stop, _)| kept.has(stop))
                .map(|(_, place)| *place)
                .collect(),
            geographic: points.geographic,
        });
        part
    }

    /// The elements of its sets, each once, in the order in which they come.
    #[must_use]
    pub fn elements(&self) -> Vec<String> {
        let mut seen = BTreeSet::new();
        let all = sets(self).into_iter().flatten();
        all.filter(|label| seen.insert(label.clone())).collect()
    }

    /// The number of elements of the largest set.
    #[must_use]
    pub fn extent(&self) -> usize {
        sets(self).iter().map(Vec::len).max().unwrap_or(0)
    }
}

/// Labels that stay.
struct Kept(BTreeSet<String>);

impl Kept {
    fn of(instance: &Instance, count: usize, seed: Option<u64>) -> Self {
        Self::within(&sets(instance), instance, count, seed)
    }

    fn within(sets: &[Vec<String>], instance: &Instance, count: usize, seed: Option<u64>) -> Self {
        let mut kept = BTreeSet::new();
        for (place, set) in sets.iter().enumerate() {
            let within = |other: usize| {
                let larger = sets[other].len() > set.len()
                    || (sets[other].len() == set.len() && other < place);
                larger && set.iter().all(|label| sets[other].contains(label))
            };
            if !(0..sets.len()).any(|other| other != place && within(other)) {
                kept.extend(chosen(set, count, seed));
            }
        }
        let mut kept = Self(kept);
        kept.name(instance);
        kept
    }

    /// Keeps the elements that the instance names.
    fn name(&mut self, instance: &Instance) {
        for (_, datum) in instance.data() {
            if let Datum::Element(label) = datum {
                self.0.insert(label.clone());
            }
        }
    }

    fn has(&self, label: &str) -> bool {
        self.0.contains(label)
    }

    fn all(&self, tuple: &[String]) -> bool {
        tuple.iter().all(|label| self.has(label))
    }

    fn restrict(&self, datum: &mut Datum) {
        match datum {
            Datum::Labels(labels) => labels.retain(|label| self.has(label)),
            Datum::Integers(integers) => integers.retain(|integer| self.has(&integer.to_string())),
            Datum::Tuples { rows, .. } => rows.retain(|row| self.all(row)),
            Datum::Table { cells, .. } => cells.retain(|tuple, _| self.all(tuple)),
            Datum::Number(_) | Datum::Element(_) => {}
        }
    }
}

/// The first elements of a set, or as many that a seed chooses.
fn chosen(set: &[String], count: usize, seed: Option<u64>) -> Vec<String> {
    let Some(seed) = seed else { return set.iter().take(count).cloned().collect() };
    let mut places: Vec<(u64, usize)> =
        (0..set.len()).map(|place| (mixed(seed, place as u64), place)).collect();
    places.sort_unstable();
    places.truncate(count);
    places.into_iter().map(|(_, place)| set[place].clone()).collect()
}

/// A number that looks random, of a seed and a place (the mixer of SplitMix64: Steele, Lea, Flood
/// 2014).
fn mixed(seed: u64, place: u64) -> u64 {
    let mut z = seed.wrapping_add(place.wrapping_add(1).wrapping_mul(0x9e37_79b9_7f4a_7c15));
    z = (z ^ (z >> 30)).wrapping_mul(0xbf58_476d_1ce4_e5b9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94d0_49bb_1331_11eb);
    z ^ (z >> 31)
}

/// The sets of an instance, and last the labels that stand in tuples and in no set.
fn sets(instance: &Instance) -> Vec<Vec<String>> {
    let named = instance.data().filter_map(|(_, datum)| match datum {
        Datum::Labels(labels) => Some(labels.clone()),
        Datum::Integers(integers) => Some(integers.iter().map(i64::to_string).collect()),
        _ => None,
    });
    let mut sets: Vec<Vec<String>> = named.collect();
    let mut known: BTreeMap<String, ()> =
        sets.iter().flatten().map(|label| (label.clone(), ())).collect();
    let mut further = Vec::new();
    let mut note = |label: &String| {
        if known.insert(label.clone(), ()).is_none() {
            further.push(label.clone());
        }
    };
    for (_, datum) in instance.data() {
        match datum {
            Datum::Tuples { rows, .. } => rows.iter().flatten().for_each(&mut note),
            Datum::Table { cells, .. } => cells.keys().flatten().for_each(&mut note),
            _ => {}
        }
    }
    sets.push(further);
    sets
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::{Reader, read};

    #[test]
    fn a_round_trip_keeps_its_first_stops_and_its_depot() {
        let text = "\tA\tB\tC\tD\nA\t\t1\t2\t3\nB\t4\t\t5\t6\nC\t7\t8\t\t9\nD\t1\t2\t3\t\n";
        let instance = read(text, None).instance.unwrap_or_else(|| Instance::new(Reader::Matrix));
        assert_eq!(instance.extent(), 4);
        let mut part = instance.first(3);
        assert_eq!(part.stops(), ["A", "B", "C"]);
        let matrix = part.matrix();
        assert_eq!((matrix.len(), matrix.iter().flatten().count()), (9, 6));
        let drives = |part: &Instance| match part.get("A") {
            Some(Datum::Tuples { rows, .. }) => rows.len(),
            _ => 0,
        };
        assert_eq!(drives(&part), 6);
        // The depot stays where it is not among the first.
        let mut last = instance.clone();
        last.set("r", Datum::Element("D".to_owned()));
        part = last.first(2);
        assert_eq!(part.stops(), ["A", "B", "D"]);
        // A seed chooses others, always the same, in their order.
        let seeded: Vec<Vec<String>> =
            (0..20).map(|seed| instance.part(3, Some(seed)).stops().to_vec()).collect();
        let again: Vec<Vec<String>> =
            (0..20).map(|seed| instance.part(3, Some(seed)).stops().to_vec()).collect();
        assert_eq!(seeded, again);
        assert!(seeded.iter().all(|stops| stops.len() >= 3 && stops.is_sorted()), "{seeded:?}");
        assert!(seeded.iter().any(|stops| *stops != seeded[0]), "{seeded:?}");
    }

    #[test]
    fn a_set_within_another_keeps_what_is_left_and_periods_are_cut() {
        let mut instance = Instance::new(Reader::Blocks);
        let labels = |names: &[&str]| Datum::Labels(names.iter().map(|&n| n.to_owned()).collect());
        instance.set("V", labels(&["a", "b", "c", "d"]));
        instance.set("K", labels(&["d", "b"]));
        instance.set("T", Datum::Integers((1..=9).collect()));
        let part = instance.first(3);
        assert_eq!(part.get("K"), Some(&labels(&["b"])));
        assert_eq!(part.get("T"), Some(&Datum::Integers(vec![1, 2, 3])));
    }
}
