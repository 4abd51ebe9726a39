//! Studies: what turns runs of rivals into evidence.
//!
//! | module | answers |
//! |---|---|
//! | [`mod@ladder`] | how far each step lifts a rival's bound |
//! | [`mod@families`] | which constraint families the bound comes from |
//! | [`mod@cuts`] | which classes of general cuts are worth their rows |
//! | [`court`] | whether two rivals are the same problem |
//! | [`mod@order`] | which of two relaxations is stronger, and how far that is known |
//! | [`mod@lift`] | which further values go with a plan in the natural variable |
//! | [`mod@tightening`] | how small the coefficients of switches can be |
//! | [`mod@growth`] | how rivals compare as instances grow |
//! | [`mod@production`] | what results of a production solver say in the same statistics |
//! | [`mod@infeasibility`] | which rows cannot hold together, and the cheapest way to relax them |
//! | [`mod@symmetry`] | what a model does not tell apart, and rows that would |
//! | [`mod@variability`] | how much a search varies with the order of rows and columns, a bound with the root |
//! | [`mod@numerics`] | how far coefficients range, and what leaks |
//!
//! A study takes [`Subject`]s, works at a [`Desk`] and gives a report of [`record::study`]; it runs in
//! slices as a [`Running`]. No study reads a clock; limits are counts of nodes, rows and trials.

mod claims;
pub mod court;
pub mod cuts;
pub mod desk;
pub mod families;
pub mod growth;
pub mod infeasibility;
pub mod ladder;
pub mod lift;
mod maximise;
pub mod numerics;
pub mod order;
pub mod plan;
pub mod production;
mod propagate;
pub mod shared;
mod statistics;
pub mod subject;
pub mod symmetry;
pub mod tightening;
pub mod variability;
mod words;

pub use desk::{Desk, Running, Solved};
pub use plan::{GrowthPlan, Plan};
pub use subject::{Ground, Source, Subject, model_of};

#[cfg(test)]
mod tests;
