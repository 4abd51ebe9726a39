//! The bound ladder: what each step adds to a rival's bound, on one scale for all.

use serde::{Deserialize, Serialize};

/// The ladders of all rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Ladder {
    /// The value that gaps are closed towards: the best solution of any rival, or the value that
    /// the scenario gives.
    pub reference: Option<f64>,
    /// Where it comes from: "best solution of B, proved optimal".
    pub reference_from: String,
    /// The rivals in order.
    pub rivals: Vec<RivalLadder>,
    /// The root of a round trip, which the bound of some formulations depends on: its name in the
    /// instance; empty where there is none.
    #[serde(default)]
    pub root: String,
    /// The element that it is.
    #[serde(default)]
    pub root_used: String,
}

/// One rival's ladder.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalLadder {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// The rungs from the bottom.
    pub rungs: Vec<Rung>,
}

/// A bound on the way up.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Rung {
    /// What was done: "relaxation", "bounds propagated", "coefficients tightened", a class of cuts,
    /// "all cuts", "search".
    pub step: String,
    /// The bound; `None` where there is none, and `note` says why.
    pub bound: Option<f64>,
    /// Whether it was proved in exact arithmetic.
    pub checked: bool,
    /// The share of the gap between the relaxation and the reference that it closes.
    pub closed: Option<f64>,
    /// Simplex iterations.
    pub iterations: u64,
    /// Non-zeros touched: the same on every machine.
    pub work: u64,
    /// Nodes, where it was searched.
    pub nodes: u32,
    /// What a reader must know beside.
    pub note: String,
}
