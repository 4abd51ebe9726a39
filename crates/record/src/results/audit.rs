//! What came of proving a log again.

use serde::{Deserialize, Serialize};

/// The whole in a word.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Judgement {
    /// Every leaf, every tightened bound and the plan were proved.
    Proved,
    /// Something in the log is wrong.
    Refused,
    /// Nothing is wrong, and not every leaf is proved.
    #[default]
    Open,
}

/// What an audit of a log found.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct AuditReport {
    /// The title of the rival, where a saved log was proved.
    #[serde(default)]
    pub title: String,
    /// The whole in a word.
    pub judgement: Judgement,
    /// The exact value of the plan, as a fraction or a whole number; none without a plan.
    pub value: Option<String>,
    /// Whether leaves are closed by a value that was given, without a plan that has it.
    pub given: bool,
    /// Nodes of the log.
    pub nodes: u32,
    /// Leaves that were proved.
    pub leaves: u32,
    /// Those of them that have no point.
    pub empty: u32,
    /// Tightened bounds that were proved.
    pub tightened: u32,
    /// General cuts whose derivations were proved.
    #[serde(default)]
    pub cuts: u32,
    /// Parts into which leaves were branched on to prove them.
    pub parts: u32,
    /// Leaves that are not proved.
    pub open: Vec<u32>,
    /// Nodes at which the log is wrong, with what is wrong.
    pub faults: Vec<(u32, String)>,
}
