//! Saved logs proved by a call that did not run them, and logs that were tampered with: byte for
//! byte as a file, for every leaf.

use record::event::{Event, Log, NodeNumber, NodeState, Side};
use record::ground::FoundRow;
use record::log::{decode, encode};

use crate::launch::hullward;

/// Seven stops, not symmetric.
const STOPS: &str = "\
\tAsh\tBirch\tCedar\tElm\tFir\tGorse\tHazel
Ash\t0\t3\t14\t15\t9\t8\t12
Birch\t2\t0\t6\t5\t3\t11\t7
Cedar\t5\t8\t0\t9\t7\t4\t13
Elm\t9\t3\t2\t0\t3\t12\t6
Fir\t8\t4\t6\t2\t0\t9\t5
Gorse\t7\t12\t5\t10\t8\t0\t3
Hazel\t11\t6\t12\t7\t4\t2\t0
";

/// Scenarios whose trees have leaves of every kind, by name and rival.
fn scenarios() -> Vec<(&'static str, String)> {
    let of = |rival: &str, run: &str| {
        format!(
            "hullward = 1\n[instance]\ntext = '''\n{STOPS}'''\n[[rival]]\nfrom = \"{rival}\"\n[run]\n{run}\n"
        )
    };
    vec![
        ("labels", of("atsp/labels", "")),
        ("subtours", of("atsp/subtours", "")),
        ("tightened", of("atsp/labels", "node_work = [\"propagation\", \"reduced costs\"]")),
        ("cuts", of("atsp/labels", "cuts = [\"gomory\", \"mir\", \"cover\"]")),
        ("deep", of("atsp/labels", "selection = \"depth first\"\nbranching = \"reliability\"")),
    ]
}

fn path(name: &str) -> String {
    format!("{}/prove-{name}", env!("CARGO_TARGET_TMPDIR"))
}

/// The log of a run, as it was saved.
fn saved(name: &str, scenario: &str) -> Log {
    let (text, log) = (path(&format!("{name}.toml")), path(&format!("{name}.log")));
    std::fs::write(&text, scenario).expect("written");
    let run = hullward(&["run", &text, "--log", &log], "");
    assert_eq!(run.status.code(), Some(0), "{name}: {run:?}");
    decode(&std::fs::read(&log).expect("saved")).expect("a log")
}

/// Exit status and words of the proof of a log.
fn proved(name: &str, log: &Log) -> (Option<i32>, String) {
    let file = path(&format!("{name}.again.log"));
    std::fs::write(&file, encode(log).expect("a log")).expect("written");
    let output = hullward(&["prove", &file], "");
    let words = String::from_utf8(output.stdout).expect("text");
    let wrong = String::from_utf8(output.stderr).expect("text");
    (output.status.code(), words + &wrong)
}

fn leaves(log: &Log) -> Vec<NodeNumber> {
    let closed = |event: &Event| match event {
        Event::Solved { node, state, .. } | Event::Dropped { node, state } => {
            let open = matches!(state, NodeState::Branched | NodeState::Open);
            (!open).then_some(*node)
        }
        _ => None,
    };
    log.events.iter().filter_map(closed).collect()
}

fn of(event: &Event) -> Option<NodeNumber> {
    match event {
        Event::Created { node, .. } | Event::Solved { node, .. } | Event::Dropped { node, .. } => {
            Some(*node)
        }
        Event::Incumbent { .. } | Event::Bound { .. } => None,
    }
}

fn names(words: &str, node: NodeNumber) -> bool {
    words.split(|c: char| !c.is_ascii_digit()).any(|word| word == node.0.to_string())
}

fn parent(log: &Log, child: NodeNumber) -> Option<NodeNumber> {
    log.events.iter().find_map(|event| match event {
        Event::Created { node, parent, .. } if *node == child => *parent,
        _ => None,
    })
}

#[test]
fn a_saved_log_is_proved_where_it_was_not_run() {
    for (name, scenario) in scenarios() {
        let log = saved(name, &scenario);
        let (status, words) = proved(name, &log);
        assert_eq!(status, Some(0), "{name}: {words}");
        let leaves = leaves(&log).len();
        assert!(words.contains(&format!("All {leaves} lea")), "{name}: {words}");
        assert!(words.contains("no plan is better than 26."), "{name}: {words}");
    }
}

/// Each change of one leaf of a log.
fn changes(log: &Log, leaf: NodeNumber) -> Vec<(&'static str, Log)> {
    let changed = |change: &dyn Fn(&mut Event)| {
        let mut other = log.clone();
        let here = other.events.iter_mut().filter(|event| of(event) == Some(leaf));
        here.for_each(change);
        other
    };
    let mut gone = log.clone();
    gone.events.retain(|event| of(event) != Some(leaf));
    let mut unclosed = log.clone();
    unclosed
        .events
        .retain(|event| of(event) != Some(leaf) || matches!(event, Event::Created { .. }));
    let shifted = changed(&|event| {
        if let Event::Created { branching: Some(branching), .. } = event {
            branching.bound += if branching.side == Side::AtMost { -1.0 } else { 1.0 };
        }
    });
    let raised = changed(&|event| {
        if let Event::Solved { bound: Some(bound), .. } = event {
            *bound += 1.0 + bound.abs();
        }
    });
    let mut all = vec![("leaf removed", gone), ("leaf not closed", unclosed)];
    all.push(("branching shifted", shifted));
    all.push(("bound raised", raised));
    all.retain(|(_, other)| other != log);
    all
}

#[test]
fn a_log_that_is_tampered_with_in_any_leaf_is_refused_with_its_number() {
    for (name, scenario) in scenarios().into_iter().take(4) {
        let log = saved(&format!("t-{name}"), &scenario);
        for leaf in leaves(&log) {
            for (what, other) in changes(&log, leaf) {
                let (status, words) = proved(&format!("t-{name}"), &other);
                assert_ne!(status, Some(0), "{name}: {what} at {leaf:?}");
                let missed = parent(&log, leaf).is_some_and(|parent| names(&words, parent));
                let gone = what == "leaf removed" && missed;
                assert!(names(&words, leaf) || gone, "{name}: {what} at {leaf:?}: {words}");
            }
        }
    }
}

#[test]
fn another_incumbent_is_refused() {
    for (name, scenario) in scenarios() {
        let log = saved(&format!("i-{name}"), &scenario);
        let mut other = log.clone();
        for event in &mut other.events {
            if let Event::Incumbent { value, .. } = event {
                *value -= 1.0;
            }
        }
        let (status, words) = proved(&format!("i-{name}"), &other);
        assert_eq!(status, Some(2), "{name}: {words}");
        assert!(words.contains("its plan costs 26, not 25"), "{name}: {words}");
        let mut other = log;
        let plan = &mut other.ground.as_mut().expect("a ground").evidence.plan;
        plan.remove(0);
        let (status, words) = proved(&format!("i-{name}"), &other);
        assert_eq!(status, Some(2), "{name}: {words}");
        assert!(words.contains("its plan breaks"), "{name}: {words}");
    }
}

#[test]
fn other_rows_another_scenario_and_older_logs_are_refused() {
    let (name, scenario) = scenarios().remove(1);
    let log = saved("rows", &scenario);
    let mut other = log.clone();
    let rows = &mut other.ground.as_mut().expect("a ground").evidence.rows;
    let member = rows.iter_mut().find_map(|row| match row {
        FoundRow::Member { subset, .. } => Some(subset),
        FoundRow::Written(_) => None,
    });
    // Every stop but the depot is one too many for a set that the family has.
    member.expect("a member").clear();
    let (status, words) = proved("rows", &other);
    assert_eq!(status, Some(2), "{name}: {words}");
    assert!(words.contains("a row that the model does not have"), "{words}");

    let mut dearer = log.clone();
    let text = &mut dearer.ground.as_mut().expect("a ground").scenario;
    *text = text.replace("\t14\t15\t9", "\t1\t1\t1");
    assert_ne!(proved("rows", &dearer).0, Some(0), "another instance");

    let older = Log { version: 1, ground: None, ..log };
    let (status, words) = proved("rows", &older);
    assert_eq!(status, Some(2), "{words}");
    assert!(words.contains("does not say what it rests on"), "{words}");
    let missing = hullward(&["prove", "/no/such.log"], "");
    assert_eq!(missing.status.code(), Some(2));
}

#[test]
fn a_search_that_a_limit_stopped_is_no_proof() {
    let scenario = scenarios().remove(0).1.replace("[run]", "[run]\nnodes = 3");
    let (text, log) = (path("limit.toml"), path("limit.log"));
    std::fs::write(&text, scenario).expect("written");
    assert_eq!(hullward(&["run", &text, "--log", &log], "").status.code(), Some(1));
    let output = hullward(&["prove", &log, "--json"], "");
    assert_eq!(output.status.code(), Some(1), "{output:?}");
    let found: serde_json::Value = serde_json::from_slice(&output.stdout).expect("JSON");
    assert_eq!(found["judgement"], "open");
    assert!(found["open"].as_array().is_some_and(|open| !open.is_empty()), "{found}");
}

#[test]
fn a_log_that_is_tampered_with_in_any_cut_is_refused_with_its_number() {
    let (name, scenario) = scenarios().remove(3);
    let log = saved("cuts", &scenario);
    assert_eq!(log.version, 3);
    let (status, words) = proved("cuts", &log);
    assert_eq!(status, Some(0), "{words}");
    let cuts = &log.ground.as_ref().expect("a ground").evidence.cuts.cuts;
    assert!(words.contains(&format!("{} general cuts proved as well", cuts.len())), "{words}");
    for place in 0..cuts.len() {
        let mut other = log.clone();
        let evidence = &mut other.ground.as_mut().expect("a ground").evidence;
        evidence.cuts.cuts[place].side = "-1000".to_owned();
        let (status, words) = proved("cuts", &other);
        assert_eq!(status, Some(2), "{name}: {words}");
        assert!(words.contains(&format!("rests on cut {} (", place + 1)), "{words}");
    }
    let mut other = log;
    let evidence = &mut other.ground.as_mut().expect("a ground").evidence;
    evidence.cuts.cuts[0].entries[0].0 = u32::MAX;
    let (status, words) = proved("cuts", &other);
    assert_eq!(status, Some(2), "{name}: {words}");
    assert!(words.contains("cannot be read"), "{words}");
}
