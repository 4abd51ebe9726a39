//! Named blocks as text.

use std::fmt::Display;

/// Blocks as they are written one after another.
pub(super) struct Blocks(String);

impl Blocks {
    pub(super) fn new() -> Self {
        Self(String::new())
    }

    /// A set of labels.
    pub(super) fn list(&mut self, name: &str, labels: &[String]) {
        self.0.push_str(&format!("{name}\n{}\n\n", labels.join(" ")));
    }

    /// Tuples, or numbers over them: each row holds its labels and its number.
    pub(super) fn by(&mut self, name: &str, indices: &str, rows: &[String]) {
        self.0.push_str(&format!("{name} by {indices}\n{}\n\n", rows.join("\n")));
    }

    /// A number or an element.
    pub(super) fn value(&mut self, name: &str, value: impl Display) {
        self.0.push_str(&format!("{name} = {value}\n\n"));
    }

    pub(super) fn text(self) -> String {
        self.0
    }
}

/// `n1`, `n2`, … for `n`.
pub(super) fn names(letter: char, count: usize) -> Vec<String> {
    (1..=count).map(|i| format!("{letter}{i}")).collect()
}
