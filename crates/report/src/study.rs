//! What studies found, as sections of words and tables: the command prints them, the page and the
//! decision record set them. Every sentence is made from the figures of the report.

mod cuts;
mod equivalence;
mod families;
mod growth;
mod ladder;
mod numerics;
mod order;
mod tightening;

use record::study::Report;

use crate::number::short;

/// A part of the evidence.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Section {
    /// Its heading.
    pub heading: String,
    /// What it comes to, in sentences.
    pub verdict: Vec<String>,
    /// Its figures.
    pub table: Option<Table>,
    /// What a reader must know beside.
    pub notes: Vec<String>,
}

/// A table of figures.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Table {
    /// The heads of its columns.
    pub head: Vec<String>,
    /// Which columns hold words; the others hold numbers, set to the right.
    pub words: Vec<usize>,
    /// Its rows.
    pub rows: Vec<Vec<String>>,
}

impl Table {
    pub(crate) fn new(head: &[&str], words: &[usize]) -> Self {
        let head = head.iter().map(|&cell| cell.to_owned()).collect();
        Self { head, words: words.to_vec(), rows: Vec::new() }
    }
}

/// The sections of a report.
#[must_use]
pub fn sections(report: &Report) -> Vec<Section> {
    match report {
        Report::Ladder(report) => ladder::sections(report),
        Report::Families(report) => families::sections(report),
        Report::Equivalence(report) => vec![equivalence::section(report)],
        Report::Order(report) => vec![order::section(report)],
        Report::Tightening(report) => tightening::sections(report),
        Report::Numerics(report) => numerics::sections(report),
        Report::Cuts(report) => cuts::sections(report),
        Report::Growth(report) => growth::sections(report),
        Report::Left { kind, why } => {
            let verdict = vec![format!("left out: {why}")];
            vec![Section { heading: format!("Study: {kind}"), verdict, ..Section::default() }]
        }
    }
}

/// A value that may be missing.
fn value(value: Option<f64>) -> String {
    value.map_or_else(|| "–".to_owned(), short)
}

/// `A, B and C`.
fn and(words: &[String]) -> String {
    match words {
        [] => String::new(),
        [one] => one.clone(),
        [first @ .., last] => format!("{} and {last}", first.join(", ")),
    }
}

#[cfg(test)]
mod tests;
