//! Symmetries in words.

use record::study::{Interchangeable, RivalSymmetry, Symmetry};

use super::{Section, Table, and};
use crate::number::{of, short};

/// Labels that are told one by one.
const MOST_LABELS: usize = 8;
/// Order rows that are told one by one.
const MOST_ROWS: usize = 3;

pub(super) fn sections(report: &Symmetry) -> Vec<Section> {
    report.rivals.iter().map(of_rival).collect()
}

fn of_rival(rival: &RivalSymmetry) -> Section {
    let mut verdict: Vec<String> = rival.interchangeable.iter().map(exchange).collect();
    verdict.extend(rival.generators.iter().map(|one| {
        format!("Beside it: {} ({} move).", one.words, of(u64::from(one.moves), "column"))
    }));
    if verdict.is_empty() && rival.open.is_empty() {
        verdict.push(format!("{} tells all of its columns apart.", rival.rival));
    }
    if !rival.open.is_empty() {
        verdict.push(format!("Not settled: {}.", rival.open));
    }
    let mut notes = Vec::new();
    if rival.log10_copies > 0.0 {
        notes.push(format!(
            "Each plan has up to 10^{} copies by exchanges of labels. Every symmetry that is told was \
             verified against every row.",
            short(rival.log10_copies)
        ));
    }
    let mut table = Table::new(&["", "number"], &[0]);
    let row = |what: &str, number: u32| vec![what.to_owned(), number.to_string()];
    table.rows = vec![
        row("columns", rival.columns),
        row("classes that colour refinement leaves", rival.classes),
        row("orbits of the verified symmetries", rival.orbits),
    ];
    Section {
        faults: Vec::new(),
        figure: None,
        heading: format!("What {} does not tell apart: {}", rival.rival, rival.title),
        verdict,
        table: (rival.classes > 0).then_some(table),
        notes,
    }
}

fn exchange(one: &Interchangeable) -> String {
    let labels = match one.labels.as_slice() {
        [first, .., last] if one.labels.len() > MOST_LABELS => {
            format!("{first} to {last} ({} labels)", one.labels.len())
        }
        labels => and(labels),
    };
    let order = match one.order.as_slice() {
        [] => String::new(),
        rows if rows.len() > MOST_ROWS => {
            format!(" Rows that keep one order: {}, …", rows[..MOST_ROWS].join(", "))
        }
        rows => format!(" Rows that keep one order: {}.", rows.join(", ")),
    };
    format!("{labels} are interchangeable.{order}")
}
