//! Named blocks as text.

use std::fmt::Display;

/// Blocks as they are written one after another.
pub(super) struct Blocks(String);

impl Blocks {
    pub(super) fn new() -> Self {
        Self(String::new())
    }

    /// A set of labels, a few hundred to a line.
    pub(super) fn list(&mut self, name: &str, labels: &[String]) {
        let lines: Vec<String> = labels.chunks(500).map(|line| line.join(" ")).collect();
        self.0.push_str(&format!("{name}\n{}\n\n", lines.join("\n")));
    }

    /// A set of numbered labels: `letter` and 1, 2, ….
    pub(super) fn labels(&mut self, name: &str, letter: char, count: usize) -> Vec<String> {
        let labels = names(letter, count);
        self.list(name, &labels);
        labels
    }

    /// Numbers over one set.
    pub(super) fn column<N: Display>(
        &mut self,
        (name, index): (&str, &str),
        labels: &[String],
        mut value: impl FnMut(usize) -> N,
    ) {
        let rows = labels.iter().enumerate().map(|(k, label)| format!("{label} {}", value(k)));
        self.by(name, index, &rows.collect::<Vec<_>>());
    }

    /// Numbers over pairs; those without a value are left out.
    pub(super) fn table<N: Display>(
        &mut self,
        (name, indices): (&str, &str),
        (rows, columns): (&[String], &[String]),
        mut value: impl FnMut(usize, usize) -> Option<N>,
    ) {
        let mut lines = Vec::new();
        for (i, row) in rows.iter().enumerate() {
            for (j, column) in columns.iter().enumerate() {
                lines.extend(value(i, j).map(|value| format!("{row} {column} {value}")));
            }
        }
        self.by(name, indices, &lines);
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

/// Half of a size and two more, for families whose models grow fast.
pub(super) fn halved(size: u32) -> usize {
    size as usize / 2 + 2
}
