//! Every tolerance of the crate.

/// A member is violated when its row is, by more than this, in the units of the row.
pub(crate) const VIOLATION: f64 = 1e-6;

/// Residual capacities up to this (in the units of the row) count as none in a maximum flow.
/// The cut that is found is so at most this times the number of arcs over the minimum.
pub(crate) const RESIDUAL: f64 = 1e-11;

/// The most by which node weights may differ from 0, and flow into a node from flow out of
/// it, for a set and its complement to be taken as equally violated (units of the row).
pub(crate) const BALANCE: f64 = 1e-9;

/// At points at which every number is whole: half a unit.
pub(crate) const HALF: f64 = 0.5;
