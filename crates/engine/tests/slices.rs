//! The log of a search is the same, bit for bit, for every slice size. The shipped wasm module
//! is held against the same lines by `cargo xtask test`.

use hullward_engine::log_digest;

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
