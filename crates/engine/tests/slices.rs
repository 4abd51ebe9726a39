//! The log of a search is the same, bit for bit, for every slice size. The shipped wasm module
//! is held against the same lines by `cargo xtask test`. No slice does much more than it was given.

#![expect(clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use std::collections::BTreeMap;

use hullward_engine::{StudyRun, Worker, log_digest};
use record::file;
use record::message::{LaneJob, Reply, Request};
use record::scenario::{Preset, Run, Scenario, Study};

const SCENARIOS: [(&str, &str, usize); 3] = [
    ("labels", include_str!("scenarios/labels.toml"), 3),
    ("subtours", include_str!("scenarios/subtours.toml"), 2),
    ("knapsack", include_str!("scenarios/knapsack.toml"), 1),
];

/// From a slice that ends inside nearly every LP to one that never ends early.
const SLICES: [u64; 3] = [97, 20_011, u64::MAX];

#[test]
fn the_log_is_the_same_for_every_slice_size() {
    for (name, text, rivals) in SCENARIOS {
        for rival in 0..rivals {
            let run = |slice| log_digest(text, rival, slice).expect("the scenario runs");
            let lines = SLICES.map(run);
            assert!(lines.iter().all(|line| *line == lines[0]), "{name}: {lines:#?}");
        }
        let line = log_digest(text, 0, 1_000).expect("the scenario runs");
        let events: u32 = line.split(' ').nth(1).expect("three words").parse().expect("a count");
        assert!(events > 20, "{name}: a log of {events} events compares little");
    }
}

#[test]
fn another_limit_gives_another_log() {
    let (_, text, _) = SCENARIOS[0];
    let limited = format!("{text}nodes = 3\n");
    let all = log_digest(text, 0, 20_011).expect("the scenario runs");
    assert_ne!(all, log_digest(&limited, 0, 20_011).expect("the scenario runs"));
}

#[test]
fn what_cannot_be_run_says_why() {
    let error = log_digest("hullward = 1\nrivl = 3", 0, 1_000).expect_err("a wrong scenario");
    assert_eq!((error.place.as_str(), error.complaints.len()), ("scenario", 1));
    assert!(error.to_string().contains("2:1: a scenario has no field `rivl`"), "{error}");
    let error = log_digest("hullward = 1", 0, 1_000).expect_err("no rival");
    assert!(error.message.contains("no such rival"), "{error}");
}

/// What one slice may do beyond its ticks: so many looks at the whole model, for a step (a factor, a
/// proof, a search for one cut) is never left halfway, and on a small model so many ticks, less than a
/// millisecond.
const LOOKS: u64 = 50;
const ALWAYS: u64 = 300_000;

/// A worker that loads a rival and searches it for some nodes: the most that one slice did over its
/// ticks, and what one look at the model is.
fn farthest(scenario: &Scenario, rival: usize, nodes: u32, slice: u64) -> (u64, u64, u64) {
    let mut worker = Worker::new();
    worker.handle(Request::Load(Box::new(LaneJob {
        instance: scenario.instance.clone(),
        rival: scenario.rivals[rival].clone(),
        settings: Run { nodes, ..scenario.run.clone() },
        ..LaneJob::default()
    })));
    worker.handle(Request::Run { nodes: None });
    let (mut most, mut look, mut slices) = (0, 0, 0);
    loop {
        let before = worker.ticks();
        let busy = worker.advance(slice);
        most = most.max(worker.ticks().saturating_sub(before).saturating_sub(slice));
        slices += 1;
        for envelope in worker.take() {
            if let Reply::Understood(report) = envelope.reply {
                look = u64::from(report.rows + report.columns) + report.nonzeros;
            }
        }
        if !busy {
            return (most, look, slices);
        }
    }
}

fn parsed(text: &str) -> Scenario {
    file::parse(text).scenario.expect("the scenario is right")
}

#[test]
fn no_slice_goes_far_over_its_ticks() {
    let demo = parsed(include_str!("../../../scenarios/mobile-library-round.toml"));
    let points: String =
        (0..30).map(|k| format!("s{k} {} {}\n", k * 37 % 101, k * 53 % 97)).collect();
    let large = parsed(&format!(
        "hullward = 1\n[instance]\nreader = \"points\"\ntext = '''\n{points}'''\n\
         [[rival]]\nfrom = \"atsp/labels\"\n[[rival]]\nfrom = \"tsp/subtours\"\n"
    ));
    for (given, rivals, nodes) in [(&demo, demo.rivals.len(), 40), (&large, 2, 1)] {
        for preset in [Preset::Bare, Preset::Production] {
            let given = Scenario { run: given.run.with(preset), ..given.clone() };
            for rival in 0..rivals {
                let slice = 20_000;
                let (most, look, slices) = farthest(&given, rival, nodes, slice);
                let place = format!("rival {rival}, {preset:?}: {most} over, a look is {look}");
                assert!(look > 0 && slices > 8, "{place}, {slices} slices");
                assert!(most <= ALWAYS.max(LOOKS * look), "{place}");
            }
        }
    }
}

/// A study's rivals become models one after the other, and its own work goes in slices.
#[test]
fn a_study_is_loaded_in_slices() {
    let mut demo = parsed(include_str!("../../../scenarios/mobile-library-round.toml"));
    demo.studies = vec![Study { kind: "ladder".to_owned(), fields: BTreeMap::new() }];
    let mut study = StudyRun::new(&demo, 0, &demo.studies[0]);
    let mut doing = Vec::new();
    let (mut most, slice) = (0, 2_000);
    loop {
        let before = study.ticks();
        let (words, _) = study.doing();
        let done = study.advance(slice);
        most = most.max(study.ticks().saturating_sub(before));
        if doing.last() != Some(&words) {
            doing.push(words);
        }
        if done {
            break;
        }
    }
    assert!(doing[0].starts_with("writing the rows of A"), "{doing:?}");
    assert!(doing[1].starts_with("writing the rows of B"), "{doing:?}");
    assert!(most < ALWAYS, "{most} in a slice of {slice}");
    assert_eq!(study.take().len(), 1);
}
