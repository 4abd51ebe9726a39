//! What a log rests on, so that it can be proved again where it was not run: the scenario, the best
//! plan, the rows that separation found, the bounds that were tightened and the general cuts.

use serde::{Deserialize, Serialize};

use crate::derivation::Cuts;
use crate::event::{Branching, NodeNumber};

/// What a log holds beside its events.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Ground {
    /// The scenario file.
    pub scenario: String,
    /// The instance, by place from 0.
    pub instance: u32,
    /// The rival, by place from 0.
    pub rival: u32,
    /// What the search found on the way.
    pub evidence: Evidence,
}

/// What a search found on the way.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Evidence {
    /// The best plan: columns, by place in the model, with their values other than 0.
    pub plan: Vec<(u32, f64)>,
    /// Rows that separation added.
    pub rows: Vec<FoundRow>,
    /// Bounds that were tightened.
    pub tightened: Vec<Tightening>,
    /// General cuts.
    pub cuts: Cuts,
}

/// A row of a family on demand.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub enum FoundRow {
    /// A written row, by place.
    Written(u32),
    /// A member of a family over subsets, both by place.
    Member {
        /// The family.
        family: u32,
        /// The labels of the set.
        subset: Vec<u32>,
    },
}

/// The bounds that were tightened at a node.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Tightening {
    /// The node.
    pub node: NodeNumber,
    /// Before it was solved.
    pub before: Vec<Branching>,
    /// After that: they hold in its children.
    pub after: Vec<Branching>,
}
