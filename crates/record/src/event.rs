//! What a search reports as it goes. A log is the list of its events: the same bytes for the
//! same scenario, on every machine and for every slice size.

use serde::{Deserialize, Serialize};

use crate::ground::Ground;

/// The number of a node, counted from 1 (the root) in the order of creation.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
pub struct NodeNumber(pub u32);

/// Which side of a branching a node is.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Side {
    /// The column's upper bound was lowered: `column ≤ bound`.
    AtMost,
    /// The column's lower bound was raised: `column ≥ bound`.
    AtLeast,
}

/// The branching that made a node.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Branching {
    /// The column, by its place in the model.
    pub column: u32,
    /// Which side.
    pub side: Side,
    /// The new bound, a whole number.
    pub bound: f64,
}

/// How a node ended (or stands).
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum NodeState {
    /// Not solved yet.
    Open,
    /// Solved and branched on.
    Branched,
    /// Its relaxation is a solution: an incumbent, or one not better than it.
    Integer,
    /// Its relaxation has no point.
    Infeasible,
    /// Its bound is no better than the incumbent or the cut-off.
    Pruned,
    /// Closed by hand.
    Closed,
    /// Its relaxation is unbounded.
    Unbounded,
    /// Its relaxation could not be solved (limit or numerics); its parent's bound stands.
    Unsolved,
}

/// Where an incumbent came from.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub enum Origin {
    /// The relaxation of a node was a solution.
    Relaxation,
    /// A rounding of the relaxation of a node.
    Rounding,
    /// A heuristic, by its published name.
    Heuristic(String),
    /// Given by the user.
    Given,
}

/// One event. Bounds and values are in the direction of the objective, as the user reads them.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Event {
    /// A node was made. The root has neither parent nor branching.
    Created {
        /// Its number.
        node: NodeNumber,
        /// The node it was branched from.
        parent: Option<NodeNumber>,
        /// The branching that made it.
        branching: Option<Branching>,
    },
    /// A node's relaxation was solved, separation included.
    Solved {
        /// Its number.
        node: NodeNumber,
        /// How it stands now.
        state: NodeState,
        /// Its own bound; `None` when it has none (infeasible, unbounded, unsolved).
        bound: Option<f64>,
        /// How many whole columns are fractional.
        fractional: u32,
        /// Simplex iterations spent on it.
        iterations: u32,
        /// Rows that separation added.
        rows_added: u32,
        /// The column it will be branched on, if it is.
        branch_column: Option<u32>,
    },
    /// An open node was closed without being solved, because an incumbent or a person closed it.
    Dropped {
        /// Its number.
        node: NodeNumber,
        /// [`NodeState::Pruned`] or [`NodeState::Closed`].
        state: NodeState,
    },
    /// A better solution was found.
    Incumbent {
        /// The node at which it was found.
        node: NodeNumber,
        /// Its objective value.
        value: f64,
        /// Where it came from.
        origin: Origin,
    },
    /// The bound of the whole tree rose (fell, when maximising).
    Bound {
        /// The new bound.
        bound: f64,
        /// Nodes solved so far.
        nodes: u32,
    },
}

/// A saved log of one search. [`crate::log`] reads and writes it.
#[derive(Debug, Clone, PartialEq)]
pub struct Log {
    /// The version of its bytes ([`crate::log::version`]).
    pub version: u32,
    /// The version of the engine that wrote it.
    pub engine: String,
    /// The events in order.
    pub events: Vec<Event>,
    /// What it rests on.
    pub ground: Option<Ground>,
}
