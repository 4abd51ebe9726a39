//! How a tree grew, how large it will be, and what a search suffers from.

use serde::{Deserialize, Serialize};

/// Measures of a search.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct MeasuresReport {
    /// Nodes solved at each depth, the root's first.
    pub depths: Vec<u32>,
    /// Leaves by the reason for which they are closed.
    pub leaves: LeavesReport,
    /// What `column ≤ v` raised the bound by, as a mean.
    pub gain_down: Option<f64>,
    /// What `column ≥ v + 1` raised it by.
    pub gain_up: Option<f64>,
    /// The relative distance of the incumbent to the best, summed over work.
    pub primal_integral: Option<f64>,
    /// The same of the bound.
    pub dual_integral: Option<f64>,
    /// The incumbents in order.
    pub incumbents: Vec<IncumbentReport>,
    /// The most nodes in a row without a rise of the bound.
    pub plateau: u32,
}

/// Leaves by reason.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct LeavesReport {
    /// Solved, and no better than the best known value.
    pub pruned: u32,
    /// Closed by an incumbent before they were solved.
    pub dropped: u32,
    /// Without a point.
    pub infeasible: u32,
    /// Their point is a plan.
    pub integer: u32,
    /// Closed by hand, or not solved.
    pub other: u32,
}

/// One incumbent.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct IncumbentReport {
    /// Nodes solved before it.
    pub nodes: u32,
    /// Non-zeros touched until then.
    pub work: u64,
    /// Its value.
    pub value: f64,
    /// What found it: "relaxation", "rounding", or a method by its name.
    pub origin: String,
}

/// How many nodes there will be in all.
#[derive(Debug, Clone, Copy, Default, PartialEq, Serialize, Deserialize)]
pub struct EstimateReport {
    /// The least of the estimates.
    pub low: f64,
    /// The middle one.
    pub middle: f64,
    /// The largest.
    pub high: f64,
}

/// One thing that a search suffers from.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct DiagnosisReport {
    /// Which.
    pub kind: DiagnosisKind,
    /// A sentence with the figures that it rests on.
    pub words: String,
}

/// The kinds of a diagnosis.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
#[serde(rename_all = "kebab-case")]
pub enum DiagnosisKind {
    /// The root's bound is far from the best value.
    WeakRoot,
    /// The best plan was found late.
    IncumbentLate,
    /// The bound stood still for long.
    Plateau,
    /// One side of the branchings changes much and the other nothing.
    UnbalancedBranching,
    /// The model does not tell some labels apart.
    SymmetricCopies,
    /// Many leaves have no point.
    ManyInfeasibleLeaves,
    /// Floating-point arithmetic did not suffice.
    Numerics,
}

/// What became of a plan that was given.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct PlanReport {
    /// Whether it meets every row and family.
    pub feasible: bool,
    /// What it costs, where that is known.
    pub value: Option<f64>,
    /// What was not understood, and every row that it breaks, a sentence each; of a family over
    /// subsets those members that a round of separation finds.
    pub remarks: Vec<String>,
    /// How many of them are rows that it breaks: the last ones.
    #[serde(default)]
    pub broken: u32,
}
