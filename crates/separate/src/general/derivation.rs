//! How a cut follows from rows and bounds: what [`super::follows`] checks without trusting the
//! separator that found it.

use std::collections::BTreeSet;

use model::{ColumnId, Number};

/// A row, by its number in the list that the separator was given, and the side of it that is used.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Used {
    /// The row.
    pub row: usize,
    /// Whether its upper side is meant.
    pub upper: bool,
}

/// A binary column or its complement.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct Literal {
    /// The column.
    pub column: ColumnId,
    /// Whether it stands for x; else for 1 − x.
    pub plain: bool,
}

/// Rows with multipliers; a positive one takes the upper side, a negative one the lower.
pub type Combination = Vec<(usize, Number)>;

/// How a cut follows. Every kind allows the cut to be weaker than what it proves by what the bounds
/// of the columns give away.
#[derive(Debug, Clone, PartialEq)]
pub enum Derivation {
    /// A sum of rows, divided, columns moved to a bound, rounded (Nemhauser, Wolsey 1990).
    Rounding {
        /// The rows with their multipliers.
        sum: Vec<(Used, Number)>,
        /// What the sum is divided by.
        divisor: Number,
        /// The columns that are moved to their upper bound; the others go to the lower.
        upper: BTreeSet<ColumnId>,
    },
    /// No binary point of this row breaks the cut: a knapsack over the cut's coefficients.
    Knapsack(Used),
    /// `Σ cycle + h Σ hubs ≤ h`, h = ⌊|cycle|/2⌋ (1 without a cycle): of two neighbours in the cycle,
    /// of a hub and anything else, at most one is 1.
    Conflicts {
        /// The odd cycle in order; empty for a clique.
        cycle: Vec<Literal>,
        /// The hubs.
        hubs: Vec<Literal>,
        /// For each pair a row that both would break: neighbours in the cycle in order, then each
        /// hub with the cycle and with the hubs before it.
        witnesses: Vec<Used>,
    },
    /// The first of some binaries that is 1, or none: in each case a combination of rows.
    Cases {
        /// The binaries in order.
        split: Vec<ColumnId>,
        /// One combination a binary, for the case that it is 1 and those before it are 0; then the
        /// one for the case that all are 0.
        proofs: Vec<Combination>,
    },
    /// Arcs among few stops, of which no two leave or enter the same stop and none close a cycle:
    /// every such set of arcs is looked at.
    Paths {
        /// The arcs of the cut: tail, head, column.
        arcs: Vec<(usize, usize, ColumnId)>,
        /// For two arcs with the same tail or head, by place in `arcs`, a row that both break.
        pairs: Vec<(usize, usize, Used)>,
        /// For each cycle, by places in `arcs`, rows that it breaks.
        cycles: Vec<(Vec<usize>, Combination)>,
    },
}

impl Derivation {
    /// Gives each row that it speaks of another number, in the order in which they come. `O(rows)`.
    pub fn renumber(&mut self, number: &mut dyn FnMut(usize) -> usize) {
        let mut used = |used: &mut Used| used.row = number(used.row);
        match self {
            Self::Rounding { sum, .. } => sum.iter_mut().for_each(|(row, _)| used(row)),
            Self::Knapsack(row) => used(row),
            Self::Conflicts { witnesses, .. } => witnesses.iter_mut().for_each(used),
            Self::Cases { proofs, .. } => {
                proofs.iter_mut().flatten().for_each(|(row, _)| *row = number(*row));
            }
            Self::Paths { pairs, cycles, .. } => {
                pairs.iter_mut().for_each(|(.., row)| used(row));
                let rows = cycles.iter_mut().flat_map(|(_, rows)| rows);
                rows.for_each(|(row, _)| *row = number(*row));
            }
        }
    }
}
