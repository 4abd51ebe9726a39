//! Models without a plan: rows that cannot hold together, and the cheapest way to relax them.

use serde::{Deserialize, Serialize};

/// All rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Infeasibility {
    /// The rivals in order.
    pub rivals: Vec<RivalInfeasibility>,
}

/// One rival.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalInfeasibility {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// What it has.
    pub standing: Standing,
    /// The families that cannot hold together.
    pub families: Vec<String>,
    /// The rows that cannot hold together; families on demand stand for all their rows.
    pub rows: Vec<ConflictRow>,
    /// The variables in these rows, whose domains hold beside them.
    pub variables: Vec<String>,
    /// Whether the rest was shown to hold without any one of them.
    pub irreducible: bool,
    /// Whether the conflict was proved in exact arithmetic.
    pub checked: bool,
    /// Ways to relax it, the cheapest first.
    pub repairs: Vec<Repair>,
    /// Models solved.
    pub solved: u32,
}

/// Whether a model has a plan.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum Standing {
    /// It has one.
    #[serde(rename = "feasible")]
    Feasible,
    /// Its relaxation has no point.
    #[serde(rename = "no point")]
    NoPoint,
    /// Its relaxation has points, none of them whole.
    #[serde(rename = "no whole point")]
    NoWholePoint,
    /// A limit left it open.
    #[default]
    #[serde(rename = "open")]
    Open,
}

/// A row of a conflict.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct ConflictRow {
    /// Its name.
    pub row: String,
    /// Its family.
    pub family: String,
    /// What it says.
    pub says: String,
}

/// A way to give the model a plan.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Repair {
    /// The families whose rows may be violated; their other rows hold.
    pub families: Vec<String>,
    /// The least sum of violations; each is divided by the largest side of its family where
    /// several families may be violated. `None` where no plan was found.
    pub violation: Option<f64>,
    /// Whether no cheaper way is left.
    pub proved: bool,
    /// Whether there is none: violating these rows does not help.
    pub hopeless: bool,
    /// The rows that are violated, and by how much.
    pub changes: Vec<(String, f64)>,
}
