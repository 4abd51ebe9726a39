//! The JSON objects of `hullward run --json`. Field names are fixed; new ones may be added.
//! What is also sent between workers leaves no field out, for postcard names none.

mod audit;
mod digest;
mod measures;
mod solution;

pub use audit::{AuditReport, Judgement};
pub use digest::{Comparison, compare, digest};
pub use measures::{
    DiagnosisKind, DiagnosisReport, EstimateReport, IncumbentReport, LeavesReport, MeasuresReport,
    PlanReport,
};

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

use crate::scenario::FamilyState;

/// How a relaxation or a search ended.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Status {
    /// Solved to the end.
    Optimal,
    /// There is no point.
    Infeasible,
    /// The objective has no bound.
    Unbounded,
    /// A limit stopped it.
    Limit,
    /// It could not be run.
    #[default]
    Error,
}

impl Status {
    /// As JSON and tables have it.
    #[must_use]
    pub fn word(self) -> &'static str {
        match self {
            Self::Optimal => "optimal",
            Self::Infeasible => "infeasible",
            Self::Unbounded => "unbounded",
            Self::Limit => "limit",
            Self::Error => "error",
        }
    }
}

/// What one rival gave.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalResult {
    /// The scenario's title.
    pub scenario: String,
    /// The instance's title, where the scenario has several.
    #[serde(skip_serializing_if = "String::is_empty", default)]
    pub instance: String,
    /// The rival's letter.
    pub rival: String,
    /// The rival's title.
    pub title: String,
    /// How it ended as a whole: its search, or its relaxation where there was no search.
    pub status: Status,
    /// Whether larger is better.
    pub maximise: bool,
    /// Whether it is only a relaxation: bounded, not compared for its optimum.
    #[serde(default)]
    pub relaxation: bool,
    /// Which settings ran: "bare", "as a production solver would" or "own settings".
    #[serde(default)]
    pub preset: String,
    /// Written rows, not domain lines.
    pub rows: u32,
    /// Columns.
    pub columns: u32,
    /// Columns that must be whole.
    pub integer_columns: u32,
    /// Entries.
    pub nonzeros: u64,
    /// Its families.
    pub families: Vec<FamilyReport>,
    /// The relaxation.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub root: Option<RootReport>,
    /// The search.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub search: Option<SearchReport>,
    /// Which families cannot hold together, where the relaxation has a point and the search
    /// found that there is no plan.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub conflict: Option<ConflictReport>,
    /// Why there is no result.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub error: Option<ErrorReport>,
    /// What was assumed because the instance does not say.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub assumed: Vec<String>,
    /// What the scenario asks for and this version of the engine does not do, in words.
    #[serde(skip_serializing_if = "Vec::is_empty", default)]
    pub left_out: Vec<String>,
    /// What an independent LP code said of the relaxation, where one was asked.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub second: Option<SecondReport>,
    /// Times, apart from everything that must be equal between machines.
    #[serde(skip_serializing_if = "Option::is_none", default)]
    pub timing: Option<Timing>,
}

/// What an independent LP code said of a relaxation. It counts in no digest: the code has a limit
/// of time.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct SecondReport {
    /// How it ended there; `limit` when it said nothing.
    pub status: Status,
    /// Whether it agrees with the root; `None` when it said nothing.
    pub agrees: Option<bool>,
    /// The comparison in words.
    pub words: String,
}

/// One constraint family.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct FamilyReport {
    /// Its name.
    pub name: String,
    /// Where its rows stand.
    pub state: FamilyState,
    /// Rows written from the start.
    pub rows: u32,
    /// Rows that separation added at the root.
    pub added: u32,
    /// Coefficients by power of ten.
    pub decades: BTreeMap<String, u64>,
    /// How it is separated, in words ("exact minimum cut"); empty when it is not.
    #[serde(default)]
    pub separation: String,
}

/// What exact arithmetic proved of a bound.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum Proof {
    /// It is the optimum of the relaxation, a fraction; or that there is no point.
    Exact,
    /// A bound, away from the value that was found by `checked_within`.
    Within,
    /// Nothing.
    #[default]
    None,
}

/// The relaxation of the formulation as it is meant.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RootReport {
    /// How it ended.
    pub status: Status,
    /// The bound in the direction of the objective.
    pub bound: Option<f64>,
    /// Whether the bound (or the infeasibility) was checked in exact arithmetic.
    pub checked: bool,
    /// The exact bound that was proved, as a fraction: "756/5".
    pub checked_bound: Option<String>,
    /// Whether what was proved is the optimum of the relaxation itself.
    #[serde(default)]
    pub proof: Proof,
    /// By how much the proved bound differs from `bound`, rounded up, where it is a bound and not
    /// known to be the optimum.
    #[serde(default)]
    pub checked_within: Option<f64>,
    /// The value that an independent LP code found, to nine digits, where one was asked.
    #[serde(default)]
    pub second_opinion: Option<f64>,
    /// Simplex iterations.
    pub iterations: u64,
    /// Whole columns with a fractional value.
    pub fractional: u32,
    /// Rounds of separation.
    pub rounds: u32,
    /// Rows that separation added.
    pub added: u32,
    /// The same by family, in the order of the model's families.
    #[serde(default)]
    pub added_by_family: Vec<u32>,
    /// Rows of a Farkas ray, by name with multiplier, when infeasible; when unbounded, columns
    /// with the step along which the objective has no bound.
    #[serde(default)]
    pub ray: Vec<(String, f64)>,
    /// What ended it early, when the status is `limit`.
    #[serde(default)]
    pub stopped: Option<String>,
}

/// What stops a search by hand in which every open node is solved and waits for its branching.
pub const WAITS: &str = "it waits for a branching by hand";

/// What a search gave, so far or at its end.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct SearchReport {
    /// How it ended.
    pub status: Status,
    /// The bound of the whole tree.
    pub bound: Option<f64>,
    /// The best solution's value.
    pub incumbent: Option<f64>,
    /// |incumbent − bound| / |incumbent|.
    pub gap: Option<f64>,
    /// Nodes solved.
    pub nodes: u32,
    /// Nodes still open.
    pub open: u32,
    /// Simplex iterations.
    pub iterations: u64,
    /// Non-zeros touched: the same on every machine.
    pub work: u64,
    /// The best solution: variable, indices, value, for every value other than 0.
    pub solution: Vec<SolutionEntry>,
    /// Whether every leaf and the solution were checked in exact arithmetic.
    pub checked: bool,
    /// What stopped it, when the status is `limit`.
    #[serde(default)]
    pub stopped: Option<String>,
    /// What node work did.
    #[serde(default)]
    pub node_work: NodeWorkReport,
    /// What general cuts gave, where some were asked for.
    #[serde(default)]
    pub cuts: Option<CutsReport>,
    /// How the tree grew.
    #[serde(default)]
    pub measures: Box<MeasuresReport>,
    /// How many nodes there will be in all, while that is not known.
    #[serde(default)]
    pub estimate: Option<EstimateReport>,
    /// What the search suffers from, what weighs most first.
    #[serde(default)]
    pub diagnosis: Vec<DiagnosisReport>,
    /// What became of the plan that was given.
    #[serde(default)]
    pub plan: Option<PlanReport>,
}

/// What general cuts gave.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct CutsReport {
    /// The bound of the root's relaxation with them.
    pub bound: Option<f64>,
    /// Rounds at the root that added some.
    pub rounds: u32,
    /// How many of each class were added, at the root and below.
    pub added: BTreeMap<String, u32>,
    /// How many of each class are in the relaxation.
    #[serde(default)]
    pub kept: BTreeMap<String, u32>,
    /// What each class moved the bound of the root by.
    #[serde(default)]
    pub moved: BTreeMap<String, f64>,
    /// How many were added below the root.
    #[serde(default)]
    pub below: u32,
    /// How many were purged from the relaxation.
    #[serde(default)]
    pub purged: u32,
    /// How many of those came back.
    #[serde(default)]
    pub returned: u32,
}

/// What node work did; all 0 where none was asked for.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct NodeWorkReport {
    /// Nodes that propagation over rows closed without solving them.
    pub closed: u32,
    /// Bounds that it tightened.
    pub tightened: u64,
    /// Bounds that reduced costs tightened.
    pub fixed: u64,
    /// Leaves that only the step of the objective closed.
    #[serde(default)]
    pub stepped: u32,
    /// Nodes closed after general cuts were added for them; the root among them.
    #[serde(default)]
    pub cut_off: u32,
}

/// One value of a solution; written in JSON as `["x","Ash","Birch",1.0]`.
#[derive(Debug, Clone, PartialEq)]
pub struct SolutionEntry {
    /// The variable.
    pub variable: String,
    /// Its indices.
    pub indices: Vec<String>,
    /// The value.
    pub value: f64,
}

/// Constraint families that cannot hold together with the domains.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct ConflictReport {
    /// Their names in the order of their statements; none when the domains alone have no plan.
    pub families: Vec<String>,
    /// What is known of the set.
    pub level: ConflictLevel,
    /// Nodes solved to find it.
    pub nodes: u32,
    /// Sets of families that were tried.
    pub trials: u32,
}

/// What is known of families in conflict.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum ConflictLevel {
    /// Any fewer families can hold together.
    Smallest,
    /// The others can hold together when any one is left out.
    Irreducible,
    /// A limit left it open whether each of them is needed.
    Undecided,
}

/// Why there is no result.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct ErrorReport {
    /// What is wrong, in one clause.
    pub message: String,
    /// Each reason with its place in the text it is about.
    pub complaints: Vec<crate::message::Complaint>,
    /// Which text the places are in: "instance", "rival" or "scenario".
    pub place: String,
}

/// Times in milliseconds.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Timing {
    /// The root.
    pub root_ms: f64,
    /// The search.
    pub search_ms: f64,
}

impl std::fmt::Display for ErrorReport {
    /// The message, then each complaint on a line of its own as `line:column: message (mend)`.
    fn fmt(&self, formatter: &mut std::fmt::Formatter<'_>) -> std::fmt::Result {
        formatter.write_str(&self.message)?;
        for complaint in &self.complaints {
            write!(formatter, "\n{}:{}: {}", complaint.line, complaint.column, complaint.message)?;
            if !complaint.mend.is_empty() {
                write!(formatter, " ({})", complaint.mend)?;
            }
        }
        Ok(())
    }
}

impl std::error::Error for ErrorReport {}

#[cfg(test)]
mod tests {
    use super::*;

    fn result(second_opinion: Option<f64>, bound: f64) -> RivalResult {
        let agrees = second_opinion.map(|_| true);
        RivalResult {
            root: Some(RootReport { bound: Some(bound), second_opinion, ..RootReport::default() }),
            second: Some(SecondReport { agrees, ..SecondReport::default() }),
            ..RivalResult::default()
        }
    }

    // Its time may run out on one machine and not on another.
    #[test]
    fn the_second_opinion_is_not_in_the_digest() {
        let digest = |second, bound| digest(&[result(second, bound)]);
        assert_eq!(digest(Some(3.0), 3.0), digest(None, 3.0));
        assert_ne!(digest(None, 4.0), digest(None, 3.0));
    }
}
