//! The results of a scenario for people.

use std::collections::BTreeSet;
use std::io::{Result, Write};

use record::results::{Proof, RivalResult, RootReport, SearchReport, Status};
use record::scenario::Scenario;
use record::study::Report;
use report::explain;
use report::number::{count, of, percent, short};
use report::proof;
use report::study::sections;

/// Stands under every table.
const CAUTION: &str = "\
A plan that comes out of a model is a decision aid; driving, working-time, energy and
safety rules of the place, and the people licensed to apply them, come first.";

/// What the marks beside a root bound mean.
const LEGEND: &str = "\
✓ proved in exact arithmetic, ~ proved to within the amount said above; \
= a second LP code agrees, ≠ it does not";

/// Longer fractions are no news to a reader; they stand in the JSON.
const LONGEST_FRACTION: usize = 16;

/// The columns by their heading.
const HEADINGS: [&str; 11] = [
    "",
    "rival",
    "rows",
    "columns",
    "root bound",
    "root gap",
    "bound",
    "incumbent",
    "gap",
    "nodes",
    "status",
];

/// The columns that are words, not numbers.
const WORDS: [usize; 3] = [0, 1, 10];

/// Prints the table.
pub(crate) fn print(
    scenario: &Scenario,
    results: &[RivalResult],
    out: &mut dyn Write,
) -> Result<()> {
    let title = if scenario.title.is_empty() { "scenario" } else { &scenario.title };
    writeln!(out, "{title}")?;
    if scenario.run.mode() != "bare" {
        writeln!(out, "run {}", scenario.run.mode().replace("own", "with own"))?;
    }
    let mut instance = "";
    let mut group = Vec::new();
    for one in results {
        if one.instance != instance && !group.is_empty() {
            rows(&group, instance, out)?;
            group.clear();
        }
        instance = &one.instance;
        group.push(one);
    }
    rows(&group, instance, out)?;
    let assumed: BTreeSet<&str> =
        results.iter().flat_map(|one| one.assumed.iter().map(String::as_str)).collect();
    for sentence in assumed {
        writeln!(out, "assumed: {sentence}")?;
    }
    for one in results {
        for sentence in notes(one) {
            writeln!(out, "{}: {sentence}", one.rival)?;
        }
    }
    if results.iter().any(|one| one.root.is_some()) {
        writeln!(out, "{LEGEND}")?;
    }
    Ok(())
}

/// Prints what stands under everything.
pub(crate) fn caution(out: &mut dyn Write) -> Result<()> {
    writeln!(out, "\n{CAUTION}")
}

/// One table: the rivals on one instance.
fn rows(group: &[&RivalResult], instance: &str, out: &mut dyn Write) -> Result<()> {
    writeln!(out, "{}{instance}", if instance.is_empty() { "" } else { "\n" })?;
    let mut table: Vec<Vec<String>> = vec![HEADINGS.map(str::to_owned).to_vec()];
    table.extend(group.iter().map(|one| cells(one)));
    columns(&table, &WORDS, out)
}

/// Prints rows with their columns under each other: words to the left, numbers to the right.
fn columns(table: &[Vec<String>], words: &[usize], out: &mut dyn Write) -> Result<()> {
    let count = table.first().map_or(0, Vec::len);
    let widths: Vec<usize> = (0..count)
        .map(|column| table.iter().map(|row| row[column].chars().count()).max().unwrap_or(0))
        .collect();
    for row in table {
        let padded = row.iter().zip(&widths).enumerate().map(|(column, (cell, &width))| {
            if words.contains(&column) {
                format!("{cell:<width$}")
            } else {
                format!("{cell:>width$}")
            }
        });
        writeln!(out, "{}", padded.collect::<Vec<_>>().join("  ").trim_end())?;
    }
    Ok(())
}

/// Prints what a study found.
pub(crate) fn evidence(report: &Report, instance: &str, out: &mut dyn Write) -> Result<()> {
    for section in sections(report) {
        writeln!(out, "\n{}", section.heading)?;
        if !instance.is_empty() {
            writeln!(out, "on {instance}")?;
        }
        for sentence in section.faults.iter().chain(&section.verdict) {
            writeln!(out, "{sentence}")?;
        }
        if let Some(table) = section.table {
            let rows = [vec![table.head], table.rows].concat();
            columns(&rows, &table.words, out)?;
        }
        for sentence in &section.notes {
            writeln!(out, "{sentence}")?;
        }
    }
    Ok(())
}

fn cells(one: &RivalResult) -> Vec<String> {
    let root = one.root.as_ref();
    let search = one.search.as_ref();
    let bound = root.and_then(|root| root.bound);
    let incumbent = search.and_then(|search| search.incumbent);
    let size = |value: u64| if one.columns == 0 { String::new() } else { count(value) };
    let number = |value: Option<f64>| value.map_or_else(|| "–".to_owned(), short);
    let second = match one.second.as_ref().and_then(|second| second.agrees) {
        Some(true) => " =",
        Some(false) => " ≠",
        None => "",
    };
    let root_checked = match root.map_or(Proof::None, |root| root.proof) {
        Proof::Exact => " ✓",
        Proof::Within => " ~",
        Proof::None => "",
    };
    vec![
        one.rival.clone(),
        one.title.clone(),
        size(u64::from(one.rows)),
        size(u64::from(one.columns)),
        format!("{}{root_checked}{second}", number(bound)),
        gap(incumbent, bound),
        number(search.and_then(|search| search.bound)),
        number(incumbent),
        search.and_then(|search| search.gap).map_or_else(|| "–".to_owned(), percent),
        search.map_or_else(|| "–".to_owned(), |search| count(u64::from(search.nodes))),
        status(one),
    ]
}

/// |incumbent − bound| / |incumbent| as a percentage.
fn gap(incumbent: Option<f64>, bound: Option<f64>) -> String {
    match (incumbent, bound) {
        (Some(incumbent), Some(bound)) if incumbent != 0.0 => {
            percent((incumbent - bound).abs() / incumbent.abs())
        }
        _ => "–".to_owned(),
    }
}

fn status(one: &RivalResult) -> String {
    let word = match one.status {
        Status::Optimal if one.relaxation => "relaxation solved",
        Status::Optimal if one.search.is_none() => "root solved",
        Status::Optimal => "optimal",
        Status::Infeasible => "infeasible",
        Status::Unbounded => "unbounded",
        Status::Limit => "stopped by a limit",
        Status::Error => "could not be run",
    };
    match &one.search {
        Some(SearchReport { checked: true, .. }) => format!("{word} ✓"),
        _ => word.to_owned(),
    }
}

/// What was proved of the root's bound, where the table does not say all of it.
fn proved(root: &RootReport) -> Option<String> {
    match (root.proof, &root.checked_bound) {
        (Proof::Exact, Some(exact)) if exact.contains('/') && exact.len() <= LONGEST_FRACTION => {
            Some(format!("root bound proved: {exact}"))
        }
        (Proof::Within, _) => {
            Some(format!("root bound {}", proof::mark(root.proof, root.checked_within)))
        }
        _ => None,
    }
}

/// What a reader must know beside the numbers.
fn notes(one: &RivalResult) -> Vec<String> {
    let mut notes = one.left_out.clone();
    let stopped = one.search.as_ref().and_then(|search| search.stopped.clone());
    let stopped = stopped.or(one.root.as_ref().and_then(|root| root.stopped.clone()));
    notes.extend(stopped.map(|why| format!("stopped: {why}")));
    notes.extend(one.error.as_ref().map(|error| error.message.clone()));
    notes.extend(one.root.as_ref().and_then(|root| explain::root(root, one.maximise)));
    notes.extend(one.conflict.as_ref().map(explain::conflict));
    notes.extend(one.search.as_ref().and_then(explain::search));
    if let Some(search) = &one.search {
        notes.extend(explain::grown(search));
    }
    notes.extend(one.root.as_ref().and_then(proved));
    let silent_or_not = one.second.as_ref().filter(|second| second.agrees != Some(true));
    notes.extend(silent_or_not.map(|second| second.words.clone()));
    let separated = one.families.iter().filter(|family| !family.separation.is_empty());
    notes.extend(separated.map(|family| {
        let (name, how) = (&family.name, &family.separation);
        let added = of(u64::from(family.added), "row");
        format!("{name} on demand ({how}): {added} added at the root")
    }));
    notes
}
