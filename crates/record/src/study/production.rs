//! Results of the team's production solver, pasted as a table, in the statistics of a growth study.

use serde::{Deserialize, Serialize};

use super::{GrowthPair, SizeMean};

/// What a table of results comes to.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Production {
    /// Results that were read.
    pub results: u32,
    /// What was said of the table while it was read, with its lines.
    pub remarks: Vec<String>,
    /// What `work` counts: "milliseconds", or "nodes" where the table has no time, a hundred each.
    pub measure: String,
    /// Each rival over its instances; `size` is 0.
    pub means: Vec<SizeMean>,
    /// Each pair of rivals on the instances that both have.
    pub pairs: Vec<GrowthPair>,
    /// The share of instances on which each rival needs at most so many times the least.
    pub profile: Vec<(f64, Vec<f64>)>,
    /// What the table says of the instance of this scenario, beside what is proved of it here.
    pub against: Vec<Against>,
}

/// A result of the table beside what is proved of the rival here.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Against {
    /// The rival.
    pub rival: String,
    /// The instance, as the table names it.
    pub instance: String,
    /// The bound of the table.
    pub bound: Option<f64>,
    /// Its best plan.
    pub plan: Option<f64>,
    /// The bound of the relaxation here, where exact arithmetic has proved it.
    pub root: Option<f64>,
    /// Why both cannot be of the same model and data; empty where they can.
    pub wrong: String,
}
