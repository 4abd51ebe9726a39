//! How much a search varies when nothing but the order of rows and columns changes, or the root of
//! a round trip.

use serde::{Deserialize, Serialize};

/// What a study of variability found.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Variability {
    /// Nodes at most for each run.
    pub nodes: u32,
    /// Orders that were tried, the one as written not counted.
    pub orders: u32,
    /// The rivals in order, instance by instance.
    pub rivals: Vec<RivalVariability>,
    /// Over how many instances of the scenario it goes.
    #[serde(default)]
    pub instances: u32,
    /// Each pair of rivals under the same orders.
    pub pairs: Vec<VariabilityPair>,
    /// What the bounds below were varied over: the root of a round trip; empty where there is none.
    pub root: String,
    /// The element that is the root as the instance has it.
    pub root_used: String,
    /// Elements that could be the root; where there are many, only some were tried.
    #[serde(default)]
    pub elements: u32,
}

/// One rival.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalVariability {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// The instance; empty where the scenario has one.
    #[serde(default)]
    pub instance: String,
    /// As written.
    pub written: Run,
    /// Under each order.
    pub runs: Vec<Run>,
    /// Work: the least, the shifted geometric mean and the most, over all runs.
    pub work: (f64, f64, f64),
    /// The bound of the relaxation with each element as the root, on the first instance.
    pub roots: Vec<(String, Option<f64>)>,
}

/// One search.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Run {
    /// Nodes solved.
    pub nodes: u32,
    /// Non-zeros touched.
    pub work: u64,
    /// Whether it was solved to the end.
    pub solved: bool,
    /// The best plan's value.
    pub incumbent: Option<f64>,
}

/// Two rivals under the same orders.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct VariabilityPair {
    /// Their letters.
    pub rivals: [String; 2],
    /// Orders under which the first took less than 0.9 times the work, about the same, or more.
    pub wins: u32,
    /// Within a tenth of each other.
    pub ties: u32,
    /// The second took less.
    pub losses: u32,
    /// How many times the work of the first the second takes: geometric mean of the ratios.
    pub ratio: f64,
    /// Bootstrap interval of it, 95 %.
    pub interval: (f64, f64),
    /// Whether the interval leaves out 1 by more than either varies alone.
    pub beyond_noise: bool,
}
