//! General cuts of a log, each with how it follows from rows, so that it can be checked without the
//! separator that found it. Numbers are whole or fractions, in decimal digits: "-3", "7/2".

use serde::{Deserialize, Serialize};

use crate::ground::FoundRow;

/// The general cuts that a search used.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Cuts {
    /// The rows that derivations speak of by place.
    pub sources: Vec<Source>,
    /// The cuts in the order in which they were found.
    pub cuts: Vec<FoundCut>,
}

/// A row that a derivation rests on.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub enum Source {
    /// A row of the model.
    Row(FoundRow),
    /// A cut, by place: one that was found before.
    Cut(u32),
}

/// `Σ a x ≤ b`, whatever its class.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct FoundCut {
    /// Its class, in the scenario's word.
    pub class: String,
    /// Columns, by rising place in the model, with their coefficients.
    pub entries: Vec<(u32, String)>,
    /// The right side.
    pub side: String,
    /// How it follows.
    pub derivation: Derivation,
}

/// One side of a source: its place, and whether the upper side is meant.
pub type Used = (u32, bool);

/// A column, and whether it is meant as it is, else as 1 less it.
pub type Literal = (u32, bool);

/// Sources with multipliers: a positive one takes the upper side.
pub type Combination = Vec<(u32, String)>;

/// How a cut follows.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub enum Derivation {
    /// A sum of rows, divided, columns moved to a bound, rounded.
    Rounding {
        /// The sides with their multipliers.
        sum: Vec<(Used, String)>,
        /// What the sum is divided by.
        divisor: String,
        /// The columns that are moved to their upper bound.
        upper: Vec<u32>,
    },
    /// No binary point of this side breaks the cut.
    Knapsack(Used),
    /// An odd cycle of conflicts and hubs.
    Conflicts {
        /// The cycle.
        cycle: Vec<Literal>,
        /// The hubs.
        hubs: Vec<Literal>,
        /// A side for each pair.
        witnesses: Vec<Used>,
    },
    /// The first of some binaries that is 1, or none.
    Cases {
        /// The binaries.
        split: Vec<u32>,
        /// A combination for each case.
        proofs: Vec<Combination>,
    },
    /// Arcs among few stops.
    Paths {
        /// Tail, head and column of each arc.
        arcs: Vec<(u32, u32, u32)>,
        /// Two arcs, by place, with a side that both break.
        pairs: Vec<(u32, u32, Used)>,
        /// The arcs of a cycle with what it breaks.
        cycles: Vec<(Vec<u32>, Combination)>,
    },
}
