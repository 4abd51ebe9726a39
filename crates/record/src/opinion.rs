//! The relaxation that a second LP code is asked about, and what it says.
//!
//! Both go between workers as the bytes of [`crate::wire`]; the page passes a relaxation on
//! unread.

use serde::{Deserialize, Serialize};

/// More entries than this are not handed over: the second code would take minutes.
pub const MOST_ENTRIES: usize = 400_000;
/// How long the second code is asked for at most, in seconds, where nothing else is said.
pub const SECONDS: u64 = 10;

/// A linear program: the relaxation of a root with the rows that separation added to it.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Relaxation {
    /// Whether larger is better.
    pub maximise: bool,
    /// What is added to the objective.
    pub offset: f64,
    /// The columns.
    pub columns: Vec<RelaxationColumn>,
    /// The rows.
    pub rows: Vec<RelaxationRow>,
}

/// A column of a relaxation.
#[derive(Debug, Clone, Copy, PartialEq, Serialize, Deserialize)]
pub struct RelaxationColumn {
    /// Its cost in the objective.
    pub cost: f64,
    /// Its least value, or −∞.
    pub lower: f64,
    /// Its greatest value, or ∞.
    pub upper: f64,
}

/// A row of a relaxation: lower ≤ Σ entries ≤ upper.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct RelaxationRow {
    /// The least activity, or −∞.
    pub lower: f64,
    /// The greatest activity, or ∞.
    pub upper: f64,
    /// Columns by place, each at most once, with their coefficients.
    pub entries: Vec<(u32, f64)>,
}

impl Relaxation {
    /// How many entries its rows have.
    #[must_use]
    pub fn entries(&self) -> usize {
        self.rows.iter().map(|row| row.entries.len()).sum()
    }
}

/// What a second LP code says of a relaxation.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Opinion {
    /// Solved; the objective's value, offset included.
    Optimal(f64),
    /// There is no point.
    Infeasible,
    /// The objective has no bound.
    Unbounded,
    /// Nothing, and why, as a clause: "took longer than 10 s".
    Silent(String),
}

impl Opinion {
    /// There is none because the time was over.
    #[must_use]
    pub fn too_late(seconds: f64) -> Self {
        Self::Silent(format!("took longer than {seconds} s"))
    }
}
