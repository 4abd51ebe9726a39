//! What studies found, as sections of words and tables: the command prints them, the page and the
//! decision record set them. Every sentence is made from the figures of the report.

mod chart;
mod cuts;
mod equivalence;
mod families;
mod figure;
mod growth;
mod growth_chart;
mod hasse;
mod infeasibility;
mod ladder;
mod numerics;
mod order;
mod plans;
mod production;
mod symmetry;
mod tightening;
mod variability;

use record::results::SolutionEntry;
use record::study::Report;

use crate::number::{count, short};
pub use figure::Figure;
pub use hasse::overview;
pub use order::over_instances;

/// A part of the evidence.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct Section {
    /// Its heading.
    pub heading: String,
    /// What could not be taken of what was given, each with its line and its mend.
    pub faults: Vec<String>,
    /// What it comes to, in sentences.
    pub verdict: Vec<String>,
    /// A drawing of it; its words stand in the verdict too.
    pub figure: Option<Figure>,
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
        Report::Infeasibility(report) => infeasibility::sections(report),
        Report::Symmetry(report) => symmetry::sections(report),
        Report::Variability(report) => variability::sections(report),
        Report::Production(report) => production::sections(report),
        Report::Left { kind, why } => {
            let verdict = vec![format!("left out: {why}")];
            vec![Section { heading: format!("Study: {kind}"), verdict, ..Section::default() }]
        }
    }
}

/// Models that came out of a study, each with the words of a button that makes it a rival, in MPS.
#[must_use]
pub fn derived(report: &Report) -> Vec<(String, String)> {
    let all: Vec<(String, &String)> = match report {
        Report::Tightening(found) => {
            let words = |letter: &str| format!("Add {letter} tightened as a rival");
            let cut = |letter: &str| {
                format!(
                    "Add {letter} tightened with the cut-off as a rival: an optimum stays, worse plans may go"
                )
            };
            let both = found.rivals.iter().flat_map(|one| {
                [(words(&one.rival), &one.model), (cut(&one.rival), &one.model_by_cutoff)]
            });
            both.collect()
        }
        Report::Cuts(found) => {
            let words = |letter: &str| format!("Add {letter} with these cuts as rows as a rival");
            found.rivals.iter().map(|one| (words(&one.rival), &one.model)).collect()
        }
        Report::Symmetry(found) => {
            let words = |letter: &str| format!("Add {letter} with its order rows as a rival");
            found.rivals.iter().map(|one| (words(&one.rival), &one.with_order)).collect()
        }
        _ => Vec::new(),
    };
    let some = all.into_iter().filter(|(_, text)| !text.is_empty());
    some.map(|(words, text)| (words, text.clone())).collect()
}

/// The values of a plan, `x[a, b] = 1`, and beyond `most` how many more there are.
fn entries(plan: &[SolutionEntry], most: usize) -> Vec<String> {
    let mut out: Vec<String> = plan.iter().take(most).map(entry).collect();
    if plan.len() > most {
        out.push(format!("and {} more", count((plan.len() - most) as u64)));
    }
    out
}

fn entry(entry: &SolutionEntry) -> String {
    let mut out = entry.variable.clone();
    if !entry.indices.is_empty() {
        out += &format!("[{}]", entry.indices.join(", "));
    }
    out + " = " + &short(entry.value)
}

/// A value that may be missing.
fn value(value: Option<f64>) -> String {
    value.map_or_else(|| "–".to_owned(), short)
}

/// `A, B and C`.
pub(crate) fn and(words: &[String]) -> String {
    match words {
        [] => String::new(),
        [one] => one.clone(),
        [first @ .., last] => format!("{} and {last}", first.join(", ")),
    }
}

#[cfg(test)]
mod tests;
