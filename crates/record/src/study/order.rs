//! Which of two rivals has the stronger relaxation, and how far that is known.

use serde::{Deserialize, Serialize};

use super::Relation::Undecided;

/// How the bound of the left rival stands to that of the right one.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum Relation {
    /// Never weaker.
    #[serde(rename = "⪰")]
    NeverWeaker,
    /// Never stronger.
    #[serde(rename = "⪯")]
    NeverStronger,
    /// The same.
    #[serde(rename = "=")]
    Equal,
    /// Neither dominates.
    #[serde(rename = "∥")]
    Incomparable,
    /// Not known.
    #[default]
    #[serde(rename = "?")]
    Undecided,
}

/// How far a relation is known.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
#[serde(rename_all = "lowercase")]
pub enum OrderLevel {
    /// Proved in the literature.
    Theorem,
    /// Proved on this instance in exact arithmetic, for every objective in the shared variables.
    Certified,
    /// Seen on this instance and this objective.
    Observed,
    /// Not known.
    #[default]
    Undecided,
}

/// The order of two rivals.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Order {
    /// Their letters.
    pub rivals: [String; 2],
    /// The relation.
    pub relation: Relation,
    /// How far it goes.
    pub level: OrderLevel,
    /// Its source where it is a theorem; else in a sentence what it rests on.
    pub source: String,
    /// Their root bounds on this instance.
    pub bounds: [Option<f64>; 2],
    /// What was proved row by row: that the left relaxation lies within the right one, and the
    /// other way round.
    pub certificates: [Certificate; 2],
    /// Where the pair was looked at on several instances, and this is what they come to: the name of each
    /// and the root bounds there.
    pub over: Vec<(String, [Option<f64>; 2])>,
}

impl Default for Order {
    fn default() -> Self {
        Self {
            rivals: [String::new(), String::new()],
            relation: Undecided,
            level: OrderLevel::Undecided,
            source: String::new(),
            bounds: [None, None],
            certificates: [Certificate::default(), Certificate::default()],
            over: Vec::new(),
        }
    }
}

/// Whether every row of one rival holds over the other's relaxation.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Certificate {
    /// `None` where it was not tried, and `why` says why.
    pub holds: Option<bool>,
    /// Rows and bounds that were maximised.
    pub rows: u32,
    /// Those of them that exact arithmetic proved to hold.
    pub proved: u32,
    /// A row that can be violated: an objective for which the other rival is weaker.
    pub witness: String,
    /// By how much; `None` where that has no end.
    pub violation: Option<f64>,
    /// Why it was not tried, or not to the end.
    pub why: String,
    /// Where an objective tells them apart, and not a row: the bound of this relaxation under it, and
    /// that of the other, which is the better one.
    #[serde(default)]
    pub apart: Option<(f64, f64)>,
    /// Where the other rival has variables of its own: what stands for each of them in the proofs.
    #[serde(default)]
    pub map: Vec<MappedColumn>,
    /// The objective of the witness: coefficients by column.
    pub objective: Vec<(String, String)>,
    /// The point of the relaxation that violates it most: values by column, 0 left out.
    pub point: Vec<(String, f64)>,
    /// What proves each row, with the rows and bounds that it rests on; empty unless it holds.
    pub proofs: Vec<RowProof>,
    /// The rows of the relaxation that proofs use.
    pub system: Vec<SystemRow>,
    /// The bounds of its columns that proofs use; an infinite one is empty.
    pub bounds: Vec<(String, String, String)>,
}

/// A variable of the other rival as an affine expression in the columns of this relaxation. Numbers are
/// fractions.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct MappedColumn {
    /// The column of the other rival.
    pub column: String,
    /// The constant.
    pub constant: String,
    /// Its coefficients by column of this relaxation.
    pub entries: Vec<(String, String)>,
}

/// The proof of one row, `Σ a x ≤ side`: with d = a − Σ y·row, its left side is at most
/// Σ y·(side of the row that goes with the sign of y) + Σ d·(bound that goes with the sign of d).
/// Numbers are fractions.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct RowProof {
    /// The row.
    pub row: String,
    /// Its coefficients by column.
    pub entries: Vec<(String, String)>,
    /// Its side.
    pub side: String,
    /// The multipliers y by row of the system.
    pub multipliers: Vec<(String, String)>,
}

/// A row of a relaxation.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct SystemRow {
    /// Its name.
    pub row: String,
    /// Its coefficients by column.
    pub entries: Vec<(String, String)>,
    /// Its lower side; empty where it has none.
    pub lower: String,
    /// Its upper side; empty where it has none.
    pub upper: String,
}
