//! Events of the search.

use record::event::{Branching, Event, NodeNumber, NodeState, Origin, Side};

use super::{finite, tidy};

/// The event as it is logged.
pub(crate) fn event(event: tree::Event) -> Event {
    match event {
        tree::Event::Created { node, parent, branching } => Event::Created {
            node: number(node),
            parent: parent.map(number),
            branching: branching.as_ref().map(branch),
        },
        tree::Event::Solved {
            node,
            state,
            bound,
            fractional,
            iterations,
            rows_added,
            branch_column,
        } => Event::Solved {
            node: number(node),
            state: node_state(state),
            bound: bound.and_then(finite),
            fractional,
            iterations,
            rows_added,
            branch_column: branch_column.map(|column| column.0),
        },
        tree::Event::Dropped { node, state } => {
            Event::Dropped { node: number(node), state: node_state(state) }
        }
        tree::Event::Incumbent { node, value, origin: from } => {
            Event::Incumbent { node: number(node), value: tidy(value), origin: origin(from) }
        }
        tree::Event::Bound { bound, nodes } => Event::Bound { bound: tidy(bound), nodes },
    }
}

/// A node's number.
pub(crate) fn number(node: tree::NodeId) -> NodeNumber {
    NodeNumber(node.0)
}

/// A branching.
pub(crate) fn branch(branch: &tree::Branch) -> Branching {
    let side = match branch.side {
        tree::Side::AtMost => Side::AtMost,
        tree::Side::AtLeast => Side::AtLeast,
    };
    Branching { column: branch.column.0, side, bound: tidy(branch.bound) }
}

/// How a node stands.
pub(crate) fn node_state(state: tree::NodeState) -> NodeState {
    match state {
        tree::NodeState::Open => NodeState::Open,
        tree::NodeState::Branched => NodeState::Branched,
        tree::NodeState::Integer => NodeState::Integer,
        tree::NodeState::Infeasible => NodeState::Infeasible,
        tree::NodeState::Pruned => NodeState::Pruned,
        tree::NodeState::Closed => NodeState::Closed,
        tree::NodeState::Unbounded => NodeState::Unbounded,
        tree::NodeState::Unsolved => NodeState::Unsolved,
    }
}

fn origin(origin: tree::Origin) -> Origin {
    match origin {
        tree::Origin::Relaxation => Origin::Relaxation,
        tree::Origin::Rounding => Origin::Rounding,
        tree::Origin::Heuristic(name) => Origin::Heuristic(name),
        tree::Origin::Given => Origin::Given,
    }
}

/// A logged event as the search tells it; what it says of its origin is not read.
pub(crate) fn logged(event: &Event) -> tree::Event {
    match *event {
        Event::Created { node, parent, ref branching } => tree::Event::Created {
            node: node_of(node),
            parent: parent.map(node_of),
            branching: branching.as_ref().map(branch_of),
        },
        Event::Solved { node, state, bound, fractional, iterations, rows_added, branch_column } => {
            tree::Event::Solved {
                node: node_of(node),
                state: state_of(state),
                bound,
                fractional,
                iterations,
                rows_added,
                branch_column: branch_column.map(model::ColumnId),
            }
        }
        Event::Dropped { node, state } => {
            tree::Event::Dropped { node: node_of(node), state: state_of(state) }
        }
        Event::Incumbent { node, value, .. } => {
            tree::Event::Incumbent { node: node_of(node), value, origin: tree::Origin::Relaxation }
        }
        Event::Bound { bound, nodes } => tree::Event::Bound { bound, nodes },
    }
}

fn node_of(node: NodeNumber) -> tree::NodeId {
    tree::NodeId(node.0)
}

/// A logged branching as the search tells it.
pub(crate) fn branch_of(branching: &Branching) -> tree::Branch {
    let side = match branching.side {
        Side::AtMost => tree::Side::AtMost,
        Side::AtLeast => tree::Side::AtLeast,
    };
    tree::Branch { column: model::ColumnId(branching.column), side, bound: branching.bound }
}

fn state_of(state: NodeState) -> tree::NodeState {
    match state {
        NodeState::Open => tree::NodeState::Open,
        NodeState::Branched => tree::NodeState::Branched,
        NodeState::Integer => tree::NodeState::Integer,
        NodeState::Infeasible => tree::NodeState::Infeasible,
        NodeState::Pruned => tree::NodeState::Pruned,
        NodeState::Closed => tree::NodeState::Closed,
        NodeState::Unbounded => tree::NodeState::Unbounded,
        NodeState::Unsolved => tree::NodeState::Unsolved,
    }
}
