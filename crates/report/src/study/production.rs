//! Results of a production solver in words.

use record::study::{Against, Production, SizeMean};

use super::growth::{pairs, profile, verdict};
use super::{Section, Table, value};
use crate::number::{count, of, short};

/// What a reader must know of the figures.
const MEANING: &str = "Results as they were pasted: nobody checked them here. Means are shifted \
geometric ones, of time by a second. Solved is a result whose bound and plan are within one part in \
ten thousand. A run that was stopped counts with what it had done until then. Ratios are paired: the \
same instances for both.";

pub(super) fn sections(report: &Production) -> Vec<Section> {
    let mut out = Vec::new();
    if !report.means.is_empty() {
        out.push(rivals(report));
    } else if !report.remarks.is_empty() {
        let heading = "In production".to_owned();
        return vec![Section { heading, faults: report.remarks.clone(), ..Section::default() }];
    }
    let letters: Vec<&str> = report.means.iter().map(|mean| mean.rival.as_str()).collect();
    if !report.pairs.is_empty() {
        out.push(pairs(&report.pairs, word(report)));
        out.push(profile(&report.profile, &letters, word(report)));
    }
    if !report.against.is_empty() {
        out.push(against(&report.against));
    }
    out
}

/// What is compared.
fn word(report: &Production) -> &'static str {
    if report.measure == "nodes" { "nodes" } else { "time" }
}

fn rivals(report: &Production) -> Section {
    let timed = word(report) == "time";
    let mut head = vec!["rival", "instances", "not solved", "nodes"];
    if timed {
        head.push("seconds");
    }
    let mut table = Table::new(&head, &[0]);
    table.rows = report.means.iter().map(|mean| row(mean, timed)).collect();
    Section {
        heading: format!("In production ({})", of(u64::from(report.results), "pasted result")),
        faults: report.remarks.clone(),
        verdict: report.pairs.iter().map(|pair| verdict(pair, word(report))).collect(),
        figure: None,
        table: Some(table),
        notes: vec![MEANING.to_owned()],
    }
}

fn row(mean: &SizeMean, timed: bool) -> Vec<String> {
    let mut row = vec![
        mean.rival.clone(),
        count(u64::from(mean.instances)),
        count(u64::from(mean.stopped)),
        short(mean.nodes),
    ];
    if timed {
        row.push(short(mean.work / 1_000.0));
    }
    row
}

fn against(lines: &[Against]) -> Section {
    let head = ["rival", "instance", "bound pasted", "plan pasted", "root bound proved here", ""];
    let mut table = Table::new(&head, &[0, 1, 5]);
    let row = |one: &Against| {
        let wrong = if one.wrong.is_empty() { "agrees".to_owned() } else { one.wrong.clone() };
        let name = one.instance.clone();
        vec![one.rival.clone(), name, value(one.bound), value(one.plan), value(one.root), wrong]
    };
    table.rows = lines.iter().map(row).collect();
    let wrong: Vec<&Against> = lines.iter().filter(|one| !one.wrong.is_empty()).collect();
    let verdict = match wrong.first() {
        None => "No pasted result contradicts what is proved here.".to_owned(),
        Some(first) => format!(
            "{} of {} cannot be of the same model and data, {} to begin with: {}.",
            count(wrong.len() as u64),
            of(lines.len() as u64, "pasted result"),
            first.rival,
            first.wrong
        ),
    };
    Section {
        heading: "Pasted results beside what is proved here".to_owned(),
        verdict: vec![verdict],
        table: Some(table),
        ..Section::default()
    }
}
