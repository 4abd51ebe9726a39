//! What a search reports as it goes. The list of events is the same for every slicing.

use model::ColumnId;

/// The number of a node, counted from 1 (the root) in the order of creation.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub struct NodeId(pub u32);

impl NodeId {
    /// The root.
    pub const ROOT: Self = Self(1);
}

/// Which side of a branching a node is.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Side {
    /// The column's upper bound was lowered: `column ≤ bound`.
    AtMost,
    /// The column's lower bound was raised: `column ≥ bound`.
    AtLeast,
}

/// The branching that made a node.
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Branch {
    /// The column.
    pub column: ColumnId,
    /// Which side.
    pub side: Side,
    /// The new bound, a whole number.
    pub bound: f64,
}

/// How a node ended (or stands).
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum NodeState {
    /// Not solved yet; or solved and waiting for a person's branching, which its children tell;
    /// or the root where no search was asked for.
    Open,
    /// Solved and branched on (the root: or to be branched on).
    Branched,
    /// Its relaxation is a solution: an incumbent, or one not better than it.
    Integer,
    /// Its relaxation has no point.
    Infeasible,
    /// Its bound is no better than the incumbent or the cut-off.
    Pruned,
    /// Closed by hand while it was open; its bound stands.
    Closed,
    /// Its relaxation is unbounded.
    Unbounded,
    /// Its relaxation could not be solved; its parent's bound stands.
    Unsolved,
}

/// Where an incumbent came from.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Origin {
    /// The relaxation of a node was a solution.
    Relaxation,
    /// A rounding of the relaxation of a node.
    Rounding,
    /// A heuristic, by its published name.
    Heuristic(String),
    /// A plan that a person gave.
    Given,
}

/// One event. Bounds and values are in the direction of the objective, offset included.
#[derive(Debug, Clone, PartialEq)]
pub enum Event {
    /// A node was made. The root has neither parent nor branching.
    Created {
        /// Its number.
        node: NodeId,
        /// The node it was branched from.
        parent: Option<NodeId>,
        /// The branching that made it.
        branching: Option<Branch>,
    },
    /// A node's relaxation was solved, separation included. Once a node.
    Solved {
        /// Its number.
        node: NodeId,
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
        /// The column it will be branched on, if it is; at the root a person may still choose
        /// another.
        branch_column: Option<ColumnId>,
    },
    /// A node was closed because an incumbent or a person closed it: an open one, or the root
    /// when a heuristic closes it before it has children.
    Dropped {
        /// Its number.
        node: NodeId,
        /// [`NodeState::Pruned`] or [`NodeState::Closed`].
        state: NodeState,
    },
    /// A better solution was found.
    Incumbent {
        /// The node at which it was found.
        node: NodeId,
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
