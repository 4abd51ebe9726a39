//! What went wrong, as a sentence for the person at the terminal.

use std::fmt;

/// A sentence that says what is wrong and, where it helps, what to do.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) struct Fault(String);

impl Fault {
    /// From the sentence.
    pub(crate) fn new(sentence: impl Into<String>) -> Self {
        Self(sentence.into())
    }
}

impl fmt::Display for Fault {
    fn fmt(&self, formatter: &mut fmt::Formatter<'_>) -> fmt::Result {
        formatter.write_str(&self.0)
    }
}

/// Puts what was attempted before an error's own words.
pub(crate) trait Attempt<T> {
    /// `attempt` as a clause: "read web/index.html".
    fn attempting(self, attempt: impl fmt::Display) -> Result<T, Fault>;
}

impl<T, E: fmt::Display> Attempt<T> for Result<T, E> {
    fn attempting(self, attempt: impl fmt::Display) -> Result<T, Fault> {
        self.map_err(|error| Fault::new(format!("could not {attempt}: {error:#}")))
    }
}
