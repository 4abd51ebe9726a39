//! A rival handed over to others by the page.

use serde::{Deserialize, Serialize};

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
