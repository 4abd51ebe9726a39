//! The conditions on S by places, and what to branch on when a set fails one of them.

use std::collections::{BTreeMap, BTreeSet};

use model::{LabelId, Number, SubsetCondition, SubsetFamily};

/// Forced elements up to which the number of cuts counts as bounded.
pub(crate) const MOST_LEVELS: usize = 3;

/// What is decided about an element.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Fixed {
    Free,
    In,
    Out,
}

/// The conditions of a family.
#[derive(Debug, Clone)]
pub(crate) struct Conditions {
    /// Elements that every set holds or avoids.
    pub(crate) fixed: Vec<Fixed>,
    pub(crate) least: usize,
    pub(crate) most: usize,
    /// Lists of which every set holds an element.
    pub(crate) meets: Vec<Vec<usize>>,
    /// Lists of which every set lacks an element.
    pub(crate) lacks: Vec<Vec<usize>>,
    /// The conditions of other kinds: parity, weight, clique.
    pub(crate) others: Vec<SubsetCondition>,
    /// Whether no set can meet them.
    pub(crate) empty: bool,
    ground: Vec<LabelId>,
}

/// Part of the sets: those that agree with `fixed`.
#[derive(Debug, Clone)]
pub(crate) struct Part {
    pub(crate) fixed: Vec<Fixed>,
    /// The element that makes this part another than its siblings.
    pub(crate) forced: Option<(usize, Fixed)>,
}

/// Why a set gives no member.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Failure {
    TooSmall,
    TooLarge,
    /// Holds no element of this list of `meets`.
    Misses(usize),
    /// Holds all elements of this list of `lacks`.
    Fills(usize),
    Other,
}

impl Conditions {
    /// Reads the conditions of a family.
    pub(crate) fn new(family: &SubsetFamily) -> Self {
        let size = family.ground.len();
        let mut out = Self {
            fixed: vec![Fixed::Free; size],
            least: 0,
            most: size,
            meets: Vec::new(),
            lacks: Vec::new(),
            others: Vec::new(),
            empty: false,
            ground: family.ground.clone(),
        };
        let places: BTreeMap<LabelId, usize> =
            family.ground.iter().enumerate().map(|(place, &label)| (label, place)).collect();
        for condition in &family.conditions {
            out.read(condition, &places);
        }
        let held = out.fixed.iter().filter(|f| **f == Fixed::In).count();
        let avoided = out.fixed.iter().filter(|f| **f == Fixed::Out).count();
        out.empty |= out.least > out.most || held > out.most || size - avoided < out.least;
        out
    }

    fn read(&mut self, condition: &SubsetCondition, places: &BTreeMap<LabelId, usize>) {
        match condition {
            SubsetCondition::Size { at_least, at_most } => {
                self.least = self.least.max(*at_least as usize);
                self.most = self.most.min(*at_most as usize);
            }
            SubsetCondition::Contains(label) => self.fix(places.get(label).copied(), Fixed::In),
            SubsetCondition::Avoids(label) => {
                if let Some(&place) = places.get(label) {
                    self.fix(Some(place), Fixed::Out);
                }
            }
            SubsetCondition::Meets(labels) => {
                let list: BTreeSet<usize> =
                    labels.iter().filter_map(|label| places.get(label).copied()).collect();
                self.meets.push(list.into_iter().collect());
            }
            SubsetCondition::WeightOver { weights, over } => match list_of(weights, over, places) {
                Some(List::Meets(list)) => self.meets.push(list),
                Some(List::Lacks(list)) => self.lacks.push(list),
                None => self.others.push(condition.clone()),
            },
            other => self.others.push(other.clone()),
        }
    }

    /// Fixes an element; one that is not in the ground set cannot be held.
    fn fix(&mut self, place: Option<usize>, to: Fixed) {
        let Some(place) = place else {
            self.empty = true;
            return;
        };
        self.empty |= self.fixed[place] != Fixed::Free && self.fixed[place] != to;
        self.fixed[place] = to;
    }

    /// The labels of a set.
    pub(crate) fn labels(&self, set: &[bool]) -> BTreeSet<LabelId> {
        let inside = self.ground.iter().zip(set).filter(|(_, inside)| **inside);
        inside.map(|(label, _)| *label).collect()
    }

    /// Why `set`, which agrees with what is fixed, gives no member; `None` when it gives one.
    pub(crate) fn failure(&self, set: &[bool]) -> Option<Failure> {
        let count = set.iter().filter(|inside| **inside).count();
        if count < self.least {
            return Some(Failure::TooSmall);
        }
        if count > self.most {
            return Some(Failure::TooLarge);
        }
        let misses = |list: &Vec<usize>| !list.iter().any(|&i| set[i]);
        if let Some(list) = self.meets.iter().position(misses) {
            return Some(Failure::Misses(list));
        }
        let fills = |list: &Vec<usize>| list.iter().all(|&i| set[i]);
        if let Some(list) = self.lacks.iter().position(fills) {
            return Some(Failure::Fills(list));
        }
        if self.others.is_empty() {
            return None;
        }
        let labels = self.labels(set);
        let fails = self.others.iter().any(|condition| !condition.holds(&labels));
        fails.then_some(Failure::Other)
    }

    /// Whether `set` gives a member.
    pub(crate) fn admits(&self, set: &[bool]) -> bool {
        let agrees = self.fixed.iter().zip(set).all(|(fixed, &inside)| match fixed {
            Fixed::Free => true,
            Fixed::In => inside,
            Fixed::Out => !inside,
        });
        !self.empty && agrees && self.failure(set).is_none()
    }

    /// How many elements one cut after another must force, at most, until every condition
    /// holds by itself; `None` when there is no such number. `handled`: the one condition of
    /// another kind is met by each set that is found.
    pub(crate) fn levels(&self, handled: bool) -> Option<usize> {
        let held = self.fixed.iter().filter(|f| **f == Fixed::In).count();
        let free = self.fixed.iter().filter(|f| **f == Fixed::Free).count();
        let below = self.least.saturating_sub(held);
        let above = (held + free).saturating_sub(self.most);
        let parity = matches!(self.others[..], [SubsetCondition::Odd(_)]);
        let (below, above) = if handled && parity {
            (below.saturating_sub(1), above.saturating_sub(1))
        } else {
            (below, above)
        };
        (self.others.is_empty() || handled)
            .then_some(below + above + self.meets.len() + self.lacks.len())
    }

    /// Whether few forced elements make every condition hold.
    pub(crate) fn is_bounded(&self) -> bool {
        self.levels(false).is_some_and(|levels| levels <= MOST_LEVELS)
    }

    /// The parts of what `fixed` leaves open in which a set other than `set`, which fails,
    /// can lie. They do not overlap and hold every set that gives a member.
    pub(crate) fn parts(&self, fixed: &[Fixed], set: &[bool], failure: Failure) -> Vec<Part> {
        let open = |i: &usize| fixed[*i] == Fixed::Free;
        let all = 0..fixed.len();
        match failure {
            Failure::TooSmall => {
                split(fixed, all.filter(|&i| !set[i]).filter(open).map(|i| (i, Fixed::In)))
            }
            Failure::TooLarge => {
                split(fixed, all.filter(|&i| set[i]).filter(open).map(|i| (i, Fixed::Out)))
            }
            Failure::Misses(list) => {
                let list = self.meets[list].iter().copied();
                split(fixed, list.filter(open).map(|i| (i, Fixed::In)))
            }
            Failure::Fills(list) => {
                let list = self.lacks[list].iter().copied();
                split(fixed, list.filter(open).map(|i| (i, Fixed::Out)))
            }
            Failure::Other => {
                let other = |i: usize| (i, if set[i] { Fixed::Out } else { Fixed::In });
                split(fixed, all.filter(open).map(other))
            }
        }
    }
}

/// A weight condition that says that a set holds, or lacks, an element of a list.
enum List {
    Meets(Vec<usize>),
    Lacks(Vec<usize>),
}

/// The list behind `Σ_{i∈S} w_i > over` when all weights are 0 or one number w: it is met by
/// one element when w > over ≥ 0, and by all but one when w < 0 and over is the sum of all.
fn list_of(
    weights: &[(LabelId, Number)],
    over: &Number,
    places: &BTreeMap<LabelId, usize>,
) -> Option<List> {
    let mut by_place: BTreeMap<usize, Number> = BTreeMap::new();
    for (label, weight) in weights {
        if let Some(&place) = places.get(label) {
            *by_place.entry(place).or_insert(Number::ZERO) += weight;
        }
    }
    by_place.retain(|_, weight| !weight.is_zero());
    let first = by_place.values().next()?.clone();
    if by_place.values().any(|weight| *weight != first) {
        return None;
    }
    let count = Number::from(by_place.len());
    let list = by_place.into_keys().collect();
    if first > Number::ZERO {
        return (*over >= Number::ZERO && *over < first).then_some(List::Meets(list));
    }
    let all = &first * &count;
    (*over >= all && *over < all - first).then_some(List::Lacks(list))
}

/// Part k takes the k-th choice and the opposite of all before it.
fn split(fixed: &[Fixed], choices: impl Iterator<Item = (usize, Fixed)>) -> Vec<Part> {
    let mut before = fixed.to_vec();
    let mut parts = Vec::new();
    for (place, choice) in choices {
        let mut fixed = before.clone();
        fixed[place] = choice;
        parts.push(Part { fixed, forced: Some((place, choice)) });
        before[place] = if choice == Fixed::In { Fixed::Out } else { Fixed::In };
    }
    parts
}
