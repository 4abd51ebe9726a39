//! The scenario: one TOML text that holds everything a teammate needs to see the same numbers.

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

/// A scenario file, version 1.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Scenario {
    /// The version of this format: 1.
    pub hullward: u32,
    /// A title.
    #[serde(default)]
    pub title: String,
    /// Every random choice of the engine derives from it.
    #[serde(default)]
    pub seed: u64,
    /// Notes in Markdown.
    #[serde(default)]
    pub notes: String,
    /// The instance; a scenario whose rivals are all MPS needs none.
    #[serde(default)]
    pub instance: Option<InstanceText>,
    /// The rivals in order: A, B, C…
    #[serde(default, rename = "rival")]
    pub rivals: Vec<Rival>,
    /// How they are run.
    #[serde(default)]
    pub run: Run,
}

/// An instance exactly as pasted.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct InstanceText {
    /// The reader's name; guessed when left out.
    #[serde(default)]
    pub reader: Option<String>,
    /// A title of its own.
    #[serde(default)]
    pub title: String,
    /// The text.
    pub text: String,
    /// Formulation's name → instance's name, only where names must be mapped.
    #[serde(default)]
    pub bind: BTreeMap<String, String>,
}

/// One rival formulation.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Rival {
    /// A title; the formulation's own when empty.
    #[serde(default)]
    pub title: String,
    /// A catalogue id, e.g. `atsp/labels`.
    #[serde(default)]
    pub from: Option<String>,
    /// Or journal notation.
    #[serde(default)]
    pub text: Option<String>,
    /// The state of families that differ from the formulation's default.
    #[serde(default)]
    pub families: BTreeMap<String, FamilyState>,
}

/// Where the rows of a family stand.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum FamilyState {
    /// In the model.
    #[serde(rename = "in")]
    In,
    /// Separated.
    #[serde(rename = "on demand")]
    OnDemand,
    /// Left out.
    #[serde(rename = "out")]
    Out,
}

/// How the rivals are run.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
#[serde(default)]
pub struct Run {
    /// Whether to search; otherwise root bounds only.
    pub search: bool,
    /// Node limit; 0 is none.
    pub nodes: u32,
    /// Simplex iteration limit; 0 is none.
    pub iterations: u64,
    /// Stops, never steers; 0 is none.
    pub seconds: f64,
    /// A value known to be reachable: a cut-off.
    pub best_known: Option<f64>,
    /// The branching rule.
    pub branching: BranchingRule,
    /// The node selection rule.
    pub selection: Selection,
}

impl Default for Run {
    fn default() -> Self {
        Self {
            search: true,
            nodes: 20_000,
            iterations: 0,
            seconds: 60.0,
            best_known: None,
            branching: BranchingRule::default(),
            selection: Selection::default(),
        }
    }
}

/// Which column a node is branched on.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum BranchingRule {
    /// The column whose value is nearest to a half.
    #[default]
    #[serde(rename = "most fractional")]
    MostFractional,
    /// By the gains seen so far (Bénichou et al. 1971).
    #[serde(rename = "pseudocost")]
    Pseudocost,
}

/// Which open node comes next.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum Selection {
    /// The one with the best bound.
    #[default]
    #[serde(rename = "best bound")]
    BestBound,
    /// The one made last.
    #[serde(rename = "depth first")]
    DepthFirst,
}
