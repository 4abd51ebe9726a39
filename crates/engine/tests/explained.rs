//! Every code of a complaint about a formulation, a rival or a run has a meaning and an example,
//! found in the sources so that none can be forgotten. The codes of `notation` are held to their
//! examples in `crates/notation/tests/help.rs`; those of the engine itself here.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by it")]

use std::collections::BTreeSet;
use std::path::Path;

use hullward_engine::{Worker, explained, explanation};
use notation::Help;
use record::message::{LaneJob, Reply, Request};
use record::scenario::{InstanceText, Rival, Run};

/// Endings of file names, which look like codes.
const FILES: [&str; 7] = ["toml", "txt", "mps", "log", "html", "md", "json"];

/// What looks like a code and is none.
const OTHERS: [&str; 3] = ["s.t", "s.to", "lint.nothing"];

/// Crates whose complaints carry such codes.
const CRATES: [&str; 7] =
    ["engine", "notation", "catalogue", "study", "record", "separate", "tree"];

/// Every literal `"family.code"` in the sources below a folder.
fn literals(folder: &Path, found: &mut BTreeSet<String>) {
    for entry in std::fs::read_dir(folder).unwrap() {
        let path = entry.unwrap().path();
        if path.is_dir() {
            literals(&path, found);
        } else if path.extension().is_some_and(|e| e == "rs") {
            let text = std::fs::read_to_string(&path).unwrap();
            found.extend(text.split('"').filter(|piece| is_code(piece)).map(str::to_owned));
        }
    }
}

fn is_code(piece: &str) -> bool {
    let Some((family, code)) = piece.split_once('.') else { return false };
    let word = |text: &str, mark: char| {
        !text.is_empty() && text.chars().all(|c| c.is_ascii_lowercase() || c == mark)
    };
    word(family, 'a') && word(code, '-') && !FILES.contains(&code) && !OTHERS.contains(&piece)
}

#[test]
fn every_code_in_the_sources_is_explained() {
    let mut found = BTreeSet::new();
    for name in CRATES {
        let folder = format!("{}/../{name}/src", env!("CARGO_MANIFEST_DIR"));
        literals(Path::new(&folder), &mut found);
    }
    let known: BTreeSet<String> = explained().map(str::to_owned).collect();
    let unknown: Vec<&String> = found.difference(&known).collect();
    assert!(unknown.is_empty(), "without a meaning: {unknown:?}");
    assert!(found.len() > 90 && found.contains("catalogue.assumption"), "{}", found.len());
    let unused: Vec<&String> = known.difference(&found).collect();
    assert!(unused.is_empty(), "nothing gives {unused:?}");
}

/// The codes that the engine says of a rival.
fn told(rival: &str, instance: &str, priority: Vec<String>) -> Vec<String> {
    let mut worker = Worker::new();
    worker.handle(Request::Load(Box::new(LaneJob {
        rival: Rival { from: Some(rival.to_owned()), ..Rival::default() },
        instance: Some(InstanceText { text: instance.to_owned(), ..InstanceText::default() }),
        settings: Run { priority, ..Run::default() },
        ..LaneJob::default()
    })));
    while worker.advance(1_000_000) {}
    let replies = worker.take().into_iter().map(|envelope| envelope.reply);
    let understood = replies.filter_map(|reply| match reply {
        Reply::Understood(report) => Some(report.complaints),
        _ => None,
    });
    understood.flatten().map(|one| one.code).filter(|code| !code.starts_with("note.")).collect()
}

/// The codes of the engine itself, each with what its example provokes and what the mended one does.
#[test]
fn examples_of_the_engine_provoke_their_code_and_mended_ones_do_not() {
    let own: BTreeSet<&str> = explained().filter(|code| notation::help(code).is_none()).collect();
    let mut tried = BTreeSet::new();
    let help = |code: &'static str| {
        let found = explanation(code);
        let (meaning, example) = (found.meaning.leak(), found.example.leak());
        assert!(meaning.len() > 40 && !meaning.contains('\n'), "{code}");
        Help { code, meaning, example }
    };
    let data = help("catalogue.assumption");
    assert_eq!(told("max-cut/sides", &data.fails(), Vec::new()), [data.code]);
    assert!(told("max-cut/sides", &data.mended(), Vec::new()).is_empty());
    tried.insert(data.code);
    let run = help("run.priority");
    let list = |text: String| {
        let scenario = format!("hullward = 1\n{text}");
        record::file::parse(&scenario).scenario.unwrap().run.priority
    };
    assert_eq!(told("max-cut/sides", &data.mended(), list(run.fails())), [run.code]);
    assert!(told("max-cut/sides", &data.mended(), list(run.mended())).is_empty());
    tried.insert(run.code);
    assert_eq!(tried, own);
}
