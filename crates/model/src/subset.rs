//! Families quantified over subsets, in a neutral form: terms, sets and conditions.
//!
//! A member is one row for one subset `S` of the ground set:
//!
//! ```text
//! Σ_{terms whose scope S meets} a·x  +  (per element) Σ_{i∈S} w_i  +  constant   ⋛   0
//! ```
//!
//! so `x(A(S)) ≤ |S| − 1` has a term of scope [`Scope::Inside`] for each arc, weight −1
//! for each element, constant +1 and relation ≤. A rounded sum of weights, as in the capacity
//! cuts `x(δ(S)) ≥ 2⌈d(S)/Q⌉`, stands beside it as [`RoundedUp`].

use std::collections::BTreeSet;

use crate::{ColumnId, FamilyId, LabelId, Number, Row};

/// How the left-hand side of a member stands to 0.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Relation {
    /// At most 0.
    AtMost,
    /// At least 0.
    AtLeast,
    /// Equal to 0.
    Equal,
}

/// When a term belongs to the member for `S`.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Scope {
    /// Always.
    Always,
    /// When the element is in `S`.
    Element(LabelId),
    /// When the element is not in `S`.
    Outside(LabelId),
    /// When both ends are in `S`.
    Inside(LabelId, LabelId),
    /// When the first is in `S` and the second is not (also for members of `V` that are
    /// not in the ground set, which count as not in `S`).
    Leaving(LabelId, LabelId),
    /// When exactly one of the two ends is in `S` (an undirected edge).
    Crossing(LabelId, LabelId),
}

impl Scope {
    /// Whether the term belongs to the member for `subset`.
    #[must_use]
    pub fn holds(self, subset: &BTreeSet<LabelId>) -> bool {
        let has = |l: LabelId| subset.contains(&l);
        match self {
            Self::Always => true,
            Self::Element(i) => has(i),
            Self::Outside(i) => !has(i),
            Self::Inside(i, j) => has(i) && has(j),
            Self::Leaving(i, j) => has(i) && !has(j),
            Self::Crossing(i, j) => has(i) != has(j),
        }
    }
}

/// One term: a coefficient on a column where its scope holds.
#[derive(Debug, Clone, PartialEq)]
pub struct SubsetTerm {
    /// The column.
    pub column: ColumnId,
    /// Its exact coefficient.
    pub coefficient: Number,
    /// When it belongs to the member.
    pub scope: Scope,
}

/// A condition that `S` must meet to give a member.
#[derive(Debug, Clone, PartialEq)]
pub enum SubsetCondition {
    /// `at_least ≤ |S| ≤ at_most`.
    Size {
        /// Fewest elements.
        at_least: u32,
        /// Most elements.
        at_most: u32,
    },
    /// The element is in `S`.
    Contains(LabelId),
    /// The element is not in `S`.
    Avoids(LabelId),
    /// `|S|` is odd (`true`) or even.
    Odd(bool),
    /// `Σ_{i∈S} w_i > b` (covers).
    WeightOver {
        /// The weights by element.
        weights: Vec<(LabelId, Number)>,
        /// The number `b`.
        over: Number,
    },
    /// `S` shares at least one of these elements (`S ∩ T ≠ ∅`).
    Meets(Vec<LabelId>),
    /// Every two elements of `S` are joined in this graph (cliques).
    Clique(Vec<(LabelId, LabelId)>),
}

impl SubsetCondition {
    /// Whether `subset` meets the condition.
    #[must_use]
    pub fn holds(&self, subset: &BTreeSet<LabelId>) -> bool {
        match self {
            Self::Size { at_least, at_most } => {
                let size = u32::try_from(subset.len()).unwrap_or(u32::MAX);
                *at_least <= size && size <= *at_most
            }
            Self::Contains(i) => subset.contains(i),
            Self::Avoids(i) => !subset.contains(i),
            Self::Odd(odd) => (subset.len() % 2 == 1) == *odd,
            Self::WeightOver { weights, over } => {
                let inside = weights.iter().filter(|(i, _)| subset.contains(i));
                inside.fold(Number::ZERO, |sum, (_, w)| sum + w) > *over
            }
            Self::Meets(elements) => elements.iter().any(|i| subset.contains(i)),
            Self::Clique(edges) => {
                let joined: BTreeSet<(LabelId, LabelId)> =
                    edges.iter().flat_map(|&(i, j)| [(i, j), (j, i)]).collect();
                subset.iter().all(|i| subset.iter().all(|j| i == j || joined.contains(&(*i, *j))))
            }
        }
    }
}

/// What a rounded sum of weights adds to the member for `S`: `factor · ⌈Σ_{i∈S} w_i + constant⌉`.
/// `⌊a⌋` is `−⌈−a⌉`.
#[derive(Debug, Clone, PartialEq)]
pub struct RoundedUp {
    /// What the rounded sum is multiplied by.
    pub factor: Number,
    /// `w_i` for each element of the ground set, in its order.
    pub weights: Vec<Number>,
    /// What stands in every sum.
    pub constant: Number,
}

/// A family over subsets, for one tuple of its outer index.
#[derive(Debug, Clone, PartialEq)]
pub struct SubsetFamily {
    /// The family whose members these are.
    pub family: FamilyId,
    /// The outer index tuple (`l ∈ T` in `∀ l ∈ T, S ⊆ {1..l}`); mostly empty.
    pub tuple: Vec<LabelId>,
    /// The ground set in the order of its listing.
    pub ground: Vec<LabelId>,
    /// What `S` must meet; all of them.
    pub conditions: Vec<SubsetCondition>,
    /// The terms.
    pub terms: Vec<SubsetTerm>,
    /// `w_i` for each element of the ground set, in its order: what an element of `S` adds.
    pub weights: Vec<Number>,
    /// What stands in every member.
    pub constant: Number,
    /// A rounded sum of weights.
    pub rounded: Option<RoundedUp>,
    /// How the member stands to 0.
    pub relation: Relation,
}

impl SubsetFamily {
    /// Whether `subset` (of the ground set) gives a member.
    #[must_use]
    pub fn admits(&self, subset: &BTreeSet<LabelId>) -> bool {
        self.conditions.iter().all(|condition| condition.holds(subset))
    }

    /// The member for `subset` as an exact row: terms on the left, the rest on the right.
    /// `O(terms)` exact operations.
    #[must_use]
    pub fn member(&self, subset: &BTreeSet<LabelId>) -> Row {
        let mut entries: Vec<(ColumnId, Number)> = Vec::new();
        for term in self.terms.iter().filter(|term| term.scope.holds(subset)) {
            entries.push((term.column, term.coefficient.clone()));
        }
        let inside: Vec<bool> = self.ground.iter().map(|i| subset.contains(i)).collect();
        let right = self.right_side(&inside);
        let (lower, upper) = match self.relation {
            Relation::AtMost => (None, Some(right)),
            Relation::AtLeast => (Some(right), None),
            Relation::Equal => (Some(right.clone()), Some(right)),
        };
        Row { entries: crate::builder::merged(entries), lower, upper }
    }

    /// The right side of the member for the elements of the ground set that are `inside`.
    /// `O(elements)` exact operations.
    #[must_use]
    pub fn right_side(&self, inside: &[bool]) -> Number {
        let sum = |weights: &[Number]| {
            let chosen = weights.iter().zip(inside).filter(|(_, inside)| **inside);
            chosen.fold(Number::ZERO, |sum, (weight, _)| sum + weight)
        };
        let mut right = -(&self.constant + sum(&self.weights));
        if let Some(rounded) = &self.rounded {
            let whole = Number::from((&rounded.constant + sum(&rounded.weights)).ceil());
            right -= &rounded.factor * whole;
        }
        right
    }
}
