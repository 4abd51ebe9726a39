//! Every target on its seeds and on a fixed number of seeded mutations of them. A case that fails
//! is written to the temporary folder, and its number with it: the same on every machine.

#![expect(clippy::panic, reason = "a case that fails is told")]

use std::panic::catch_unwind;
use std::thread::{Builder, scope};
use std::time::Duration;

use hullward_tests_fuzz::mutate::{Draw, mutated};
use hullward_tests_fuzz::seeds;
use hullward_tests_fuzz::targets::{ALL, Target, find};

/// Mutations of each target, about a minute of two cores in all; `HULLWARD_FUZZ` multiplies it.
const CASES: u64 = 4_000;

fn cases() -> u64 {
    let times = std::env::var("HULLWARD_FUZZ").ok().and_then(|times| times.parse().ok());
    CASES * times.unwrap_or(1)
}

/// What a case may take of a processor. A second is promised of the page's build; this one checks
/// overflows besides and knows no optimisation across crates, so it is given three.
const LIMIT: Duration = Duration::from_secs(3);

/// How long this thread has run, where Linux tells it: other work on the machine does not count.
fn run_time() -> Option<Duration> {
    let told = std::fs::read_to_string("/proc/thread-self/schedstat").ok()?;
    told.split(' ').next()?.parse().ok().map(Duration::from_nanos)
}

fn one((name, run): Target, what: &str, bytes: &[u8]) {
    let before = run_time();
    outcome((name, run), what, bytes);
    if let (Some(before), Some(after)) = (before, run_time()) {
        let taken = after.saturating_sub(before);
        if taken > LIMIT {
            let path = std::env::temp_dir().join(format!("hullward-slow-{name}"));
            let kept = std::fs::write(&path, bytes).map(|()| path.display().to_string());
            panic!("{name} takes {taken:?} on {what}: {}", kept.unwrap_or_default());
        }
    }
}

fn outcome((name, run): Target, what: &str, bytes: &[u8]) {
    if catch_unwind(|| run(bytes)).is_err() {
        let path = std::env::temp_dir().join(format!("hullward-{name}"));
        let kept = std::fs::write(&path, bytes).is_ok();
        let place = if kept { path.display().to_string() } else { String::new() };
        panic!("{name} falls over on {what}: {place}");
    }
}

/// With a stack of a megabyte, so that nesting is met with what a browser's worker has.
fn runs(name: &str) {
    let Some(target) = find(name) else { panic!("no target {name}") };
    scope(|scope| {
        let work = || {
            let seeds = seeds::of(name);
            for (place, seed) in seeds.iter().enumerate() {
                one(target, &format!("seed {place}"), seed.as_bytes());
            }
            for case in 0..cases() {
                let bytes = mutated(&seeds, &mut Draw::new(name, case));
                one(target, &format!("case {case}"), &bytes);
            }
        };
        let thread = Builder::new().stack_size(1 << 20).spawn_scoped(scope, work);
        let ended = thread.map(std::thread::ScopedJoinHandle::join);
        assert!(matches!(ended, Ok(Ok(()))), "{name}");
    });
}

#[test]
fn parse() {
    runs("parse");
}

#[test]
fn check() {
    runs("check");
}

#[test]
fn print() {
    runs("print");
}

#[test]
fn expand() {
    runs("expand");
}

#[test]
fn instance() {
    runs("instance");
}

#[test]
fn scenario() {
    runs("scenario");
}

#[test]
fn mps() {
    runs("mps");
}

#[test]
fn wire() {
    runs("wire");
}

#[test]
fn every_target_is_run() {
    let names = ALL.map(|(name, _)| name);
    assert_eq!(names, ["parse", "check", "print", "expand", "instance", "scenario", "mps", "wire"]);
    for name in names {
        assert!(!seeds::of(name).is_empty(), "{name}");
    }
}
