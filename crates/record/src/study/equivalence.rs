//! The equivalence court's verdict on two rivals.

use serde::{Deserialize, Serialize};

use super::ConflictRow;
use crate::results::SolutionEntry;

/// The verdict on two rivals.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Equivalence {
    /// Their letters.
    pub rivals: [String; 2],
    /// Whether they are the same problem, in the sense of `kind`; `None` is undecided.
    pub equivalent: Option<bool>,
    /// How far that goes.
    pub level: EquivalenceLevel,
    /// Which equivalence.
    pub kind: EquivalenceKind,
    /// The variables in which they are compared, with the number of columns that both have.
    pub shared: Vec<(String, u32)>,
    /// What was tried, in order.
    pub evidence: Vec<Evidence>,
    /// A plan that one admits and the other does not, the smallest that was found.
    pub counterexample: Option<Counterexample>,
    /// Rivals broken on purpose: whether the court noticed.
    pub mutants: Vec<Mutant>,
    /// Families that were not left out in turn, since there are too many.
    pub mutants_untried: u32,
}

/// How far a verdict goes.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum EquivalenceLevel {
    /// Every plan of the instance was compared, or a difference was proved.
    Proved,
    /// Every plan of sub-instances was compared.
    Enumerated,
    /// Nothing that was tried tells them apart.
    #[default]
    Unrefuted,
}

/// In which sense rivals are the same.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum EquivalenceKind {
    /// The same plans in the shared variables.
    #[default]
    #[serde(rename = "sets")]
    Sets,
    /// The same optimum for every non-negative cost.
    #[serde(rename = "non-negative costs")]
    NonNegativeCosts,
    /// The same optimum for this objective.
    #[serde(rename = "this objective")]
    ThisObjective,
}

/// One thing that was tried.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Evidence {
    /// What: "optimum", "plan of A in B", "duels", "enumeration", …
    pub test: String,
    /// What came out, in a sentence.
    pub outcome: String,
    /// Whether the rivals agree; `None` where it tells nothing.
    pub agrees: Option<bool>,
    /// How many trials, plans or rows.
    pub count: u32,
}

/// A plan on which two rivals differ.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Counterexample {
    /// The size of the sub-instance on which it was found; `None` is the whole instance.
    pub size: Option<u32>,
    /// The rival that admits it.
    pub admitted_by: String,
    /// The rival that does not, or values it otherwise.
    pub refused_by: String,
    /// The plan in the shared variables, every value other than 0.
    pub plan: Vec<SolutionEntry>,
    /// The families of the one that refuses it that cannot hold with it.
    pub violated: Vec<String>,
    /// Its values under both objectives, where both admit it.
    pub values: Option<(f64, f64)>,
    /// The elements of the sub-instance, its largest set; empty for the whole instance.
    pub elements: Vec<String>,
    /// The rows of the one that refuses it that cannot hold with it: one row where the plan breaks
    /// it by itself, else rows that leave its further variables no value. Without a name where it has
    /// no column for a part of the plan.
    pub rows: Vec<ConflictRow>,
    /// The plan of the one that refuses it that is nearest, every value other than 0: in the fewest
    /// shared columns of 0 and 1 it is another. Empty where none was found.
    pub nearest: Vec<SolutionEntry>,
}

/// A rival broken on purpose.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Mutant {
    /// Whose it is.
    pub rival: String,
    /// The family that was left out.
    pub without: String,
    /// Whether the court tells it from the other rival; `None` where a limit left it open.
    pub caught: Option<bool>,
    /// By which test, or why it is no other problem.
    pub by: String,
}
