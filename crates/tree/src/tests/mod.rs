//! Tests of the whole search against enumeration and known trees.

mod acts;
mod audit;
mod audit_cuts;
mod by_hand;
mod conflict;
mod cuts;
mod cycles;
mod decimals;
mod endings;
mod enumeration;
mod eye;
mod heuristics;
mod inspection;
mod jeroslow;
mod measures;
mod node_work;
mod rules;
mod slices;
pub(crate) mod support;
mod tampered;
mod trips;
