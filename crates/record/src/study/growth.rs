//! The growth study: rivals over sizes, classes of data and seeds, paired.

use serde::{Deserialize, Serialize};

/// What a growth study found.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Growth {
    /// Where the instances come from: "generated: atsp", "parts of the instance" or "parts of 3
    /// instances".
    pub data: String,
    /// Nodes at most for each run; a run that needs more counts as stopped there.
    pub nodes: u32,
    /// Non-zeros touched at most for each run, where that is limited too.
    #[serde(default)]
    pub most_work: Option<u64>,
    /// The size that the fit is drawn out to.
    pub production: u32,
    /// The seed of the resampling.
    pub seed: u64,
    /// How many cells the whole study has.
    pub of: u32,
    /// Parts of instances that were asked for and are left out, for they would be parts that are there
    /// already: each counts once.
    #[serde(default)]
    pub again: u32,
    /// The runs, in order of their numbers.
    pub cells: Vec<Cell>,
    /// Each rival at each size.
    pub means: Vec<SizeMean>,
    /// Each pair of rivals on the same instances.
    pub pairs: Vec<GrowthPair>,
    /// How each rival grows.
    pub fits: Vec<Fit>,
    /// The share of instances on which each rival needs at most so many times the work of the best
    /// (Dolan, Moré 2002), in the order of the rivals.
    pub profile: Vec<(f64, Vec<f64>)>,
}

/// One rival on one instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Cell {
    /// Its number, from 0.
    pub cell: u32,
    /// The rival's letter.
    pub rival: String,
    /// The size of the instance.
    pub size: u32,
    /// The instance of the scenario of which it is a part; empty where there is one, or it is generated.
    #[serde(default)]
    pub instance: String,
    /// The class of its data; empty where it is a part of the scenario's own.
    pub class: String,
    /// Its seed.
    pub seed: u64,
    /// Rows and columns of the model; 0 where there is none.
    pub rows: u32,
    /// Columns.
    pub columns: u32,
    /// The bound of the relaxation.
    pub bound: Option<f64>,
    /// The best plan's value.
    pub incumbent: Option<f64>,
    /// Nodes solved.
    pub nodes: u32,
    /// Simplex iterations.
    pub iterations: u64,
    /// Non-zeros touched: the same on every machine.
    pub work: u64,
    /// Whether it was solved to the end; else nodes and work are at least so many.
    pub solved: bool,
    /// Why there is no result, where there is none.
    pub failed: String,
}

/// A rival at a size.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct SizeMean {
    /// The size.
    pub size: u32,
    /// The rival.
    pub rival: String,
    /// Instances.
    pub instances: u32,
    /// Of these, not solved to the end.
    pub stopped: u32,
    /// Shifted geometric mean of nodes, shift 10.
    pub nodes: f64,
    /// Shifted geometric mean of work, shift 1,000.
    pub work: f64,
    /// Mean gap of the relaxation to the best plan of any rival; `None` where there is none.
    pub gap: Option<f64>,
}

/// Two rivals on the same instances.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct GrowthPair {
    /// Their letters.
    pub rivals: [String; 2],
    /// Instances on which at least one of them was solved.
    pub instances: u32,
    /// How many times the work of the first the second takes: geometric mean of the ratios.
    pub ratio: f64,
    /// Bootstrap interval of it, 95 %.
    pub interval: (f64, f64),
    /// Instances on which the first took less than 0.9 times the work, about the same, or more.
    pub wins: u32,
    /// Within a tenth of each other.
    pub ties: u32,
    /// The second took less.
    pub losses: u32,
    /// Of the sign test, two-sided.
    pub p: f64,
    /// The same after Holm's correction for all pairs.
    pub adjusted: f64,
    /// Instances on which one of them was stopped, so that the ratio is only a bound.
    pub censored: u32,
    /// Whether they can be told apart: the interval leaves out 1 and the adjusted p is below 0.05.
    pub distinguishable: bool,
}

/// How a rival's work grows.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Fit {
    /// The rival.
    pub rival: String,
    /// "exponential": work is multiplied by `factor` for each element; "power": it grows with the
    /// size to the power `factor`.
    pub model: String,
    /// See `model`.
    pub factor: f64,
    /// Work at the production size, and the band of 95 %.
    pub at: f64,
    /// Lower end of the band.
    pub low: f64,
    /// Upper end.
    pub high: f64,
    /// The share of the variance of log work that it explains.
    pub r2: f64,
}
