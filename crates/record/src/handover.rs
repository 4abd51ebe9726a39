//! What the page hands over to others: a rival, and what a decision record repeats of its scenario.

use serde::{Deserialize, Serialize};

use crate::typeset::Typeset;

/// In what form.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Form {
    /// MPS, read again and compared before it is given.
    Mps,
    /// LaTeX.
    Latex,
    /// Journal notation in Unicode.
    Text,
}

/// What is handed over.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Written {
    /// The text.
    pub text: String,
    /// What who takes it should know, one sentence each.
    pub notes: Vec<String>,
}

/// What a decision record repeats of its scenario.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Stated {
    /// Each rival as it is written, in order; nothing for a model that has no notation.
    pub rivals: Vec<Statement>,
    /// What is understood of the first instance, in sentences.
    pub facts: Vec<String>,
    /// The unit of the objective; empty where the data name none.
    pub unit: String,
}

/// A formulation.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Statement {
    /// In journal notation.
    pub text: String,
    /// Set as mathematics.
    pub typeset: Typeset,
}
