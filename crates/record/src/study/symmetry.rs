//! What a model does not tell apart, and rows that would.

use serde::{Deserialize, Serialize};

/// All rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Symmetry {
    /// The rivals in order.
    pub rivals: Vec<RivalSymmetry>,
}

/// One rival.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalSymmetry {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// Its columns.
    pub columns: u32,
    /// Classes of columns that colour refinement cannot split.
    pub classes: u32,
    /// Classes of columns that the verified symmetries carry into each other.
    pub orbits: u32,
    /// Labels any two of which can be exchanged: each exchange of neighbours is verified.
    pub interchangeable: Vec<Interchangeable>,
    /// Further verified symmetries.
    pub generators: Vec<Generator>,
    /// The logarithm, to the base 10, of the number of copies that exchanges of labels make.
    pub log10_copies: f64,
    /// The model with the order rows, in MPS; empty where there are none.
    pub with_order: String,
    /// Why it was not looked for, or not to the end; empty otherwise.
    pub open: String,
}

/// Labels that the model does not tell apart.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Interchangeable {
    /// The labels in the order of the model.
    pub labels: Vec<String>,
    /// Rows that leave one order of them, in words; none where no variable tells how.
    pub order: Vec<String>,
}

/// A permutation of columns that gives the same model.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Generator {
    /// Columns that it moves.
    pub moves: u32,
    /// What it does, in words.
    pub words: String,
}
