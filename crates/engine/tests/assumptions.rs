//! What a family assumes of its data is held against them: one number below 0 in each of the tables that
//! should have none is told at its line of the formulation, and generated instances are told nothing.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by it")]

use catalogue::{Class, Entry, entries, generate, nonnegative};
use hullward_engine::Worker;
use record::message::{Complaint, LaneJob, Reply, Request};
use record::scenario::{InstanceText, Rival};

const CODE: &str = "catalogue.assumption";

/// What is said of a rival on an instance.
fn told(id: &str, text: &str) -> Vec<Complaint> {
    let mut worker = Worker::new();
    let rival = Rival { from: Some(id.to_owned()), ..Rival::default() };
    let instance = InstanceText { text: text.to_owned(), ..InstanceText::default() };
    let job = LaneJob { instance: Some(instance), rival, ..LaneJob::default() };
    worker.handle(Request::Load(Box::new(job)));
    while worker.advance(1_000_000) {}
    let replies = worker.take().into_iter().map(|envelope| envelope.reply);
    let reports = replies.filter_map(|reply| match reply {
        Reply::Understood(report) => Some(report.complaints),
        _ => None,
    });
    reports.flatten().filter(|one| one.code == CODE).collect()
}

/// The text with the first number of a block below 0; none where the block holds nothing else than 0.
fn spoilt(text: &str, name: &str) -> Option<String> {
    let mut lines: Vec<String> = text.lines().map(str::to_owned).collect();
    let start = lines.iter().position(|line| line.starts_with(&format!("{name} by ")))? + 1;
    let block = lines[start..].iter().take_while(|line| !line.trim().is_empty()).count();
    for line in &mut lines[start..start + block] {
        let (labels, value) = line.rsplit_once(' ')?;
        if value.parse::<f64>().is_ok_and(|value| value > 0.0) {
            *line = format!("{labels} -{value}");
            return Some(lines.join("\n"));
        }
    }
    None
}

/// The first rival of each family that assumes something.
fn firsts() -> Vec<Entry> {
    let mut out: Vec<Entry> = Vec::new();
    for entry in entries().into_iter().filter(|entry| !nonnegative(&entry.family).is_empty()) {
        if out.last().is_none_or(|last| last.family != entry.family) {
            out.push(entry);
        }
    }
    out
}

#[test]
fn a_number_below_zero_is_told_where_none_is_assumed() {
    let mut tried = 0;
    for entry in firsts() {
        let text = generate(&entry.family, 4, Class::Uniform, 1).unwrap();
        assert!(told(&entry.id, &text).is_empty(), "{}", entry.id);
        for name in nonnegative(&entry.family) {
            let Some(spoilt) = spoilt(&text, &name) else {
                panic!("{}: no {name}\n{text}", entry.id)
            };
            let found = told(&entry.id, &spoilt);
            // Where the rows cannot be made any more, an error says so in its place.
            let Some(one) = found.first() else { continue };
            tried += 1;
            assert_eq!(found.len(), 1, "{} {name}: {found:?}", entry.id);
            assert!(!one.error && one.message.contains(&format!("here {name} of ")), "{one:?}");
            let line = entry.text.lines().nth(one.line as usize - 1).unwrap();
            assert!(line.trim_start().starts_with(&name), "{one:?}: {line}");
        }
    }
    assert!(tried >= 30, "{tried} data");
}

/// A form that counts an edge across the sides only while that is worth something is wrong where it is
/// not: the reason why the assumption is told.
#[test]
fn a_maximum_cut_with_a_worth_below_zero_is_doubted() {
    let text = "V\na b c\n\nE by i, j\na b\nb c\na c\n\nw by i, j\na b 3\nb c 2\na c -1\n";
    let found = told("max-cut/sides", text);
    assert_eq!(found.len(), 1, "{found:?}");
    assert!(found[0].message.ends_with("here w of a, c is −1"), "{found:?}");
    assert!(told("max-cut/sides", &text.replace("-1", "1")).is_empty());
}
