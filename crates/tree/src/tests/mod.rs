//! Tests of the whole search against enumeration and known trees.

mod acts;
mod conflict;
mod by_hand;
mod cycles;
mod endings;
mod enumeration;
mod inspection;
mod jeroslow;
mod slices;
pub(crate) mod support;
mod trips;
