//! Control of a search by requests: to the next plan, past a limit that is raised, and its log as a
//! file, which is replayed from the scenario that it holds and refused where any leaf is another.

#![expect(clippy::panic, clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use std::collections::BTreeSet;

use hullward_engine::native::{Watch, run_rival};
use hullward_engine::{LogAudit, Worker};
use record::event::{Event, Log, NodeNumber, NodeState, Side};
use record::file;
use record::log::{decode, encode};
use record::message::{LaneJob, LogJob, Reply, Request};
use record::results::{AuditReport, Judgement, SearchReport, Status};
use record::scenario::{Act, ActKind, Run, Scenario};

fn scenario(text: &str) -> Scenario {
    file::parse(text).scenario.expect("the scenario is right")
}

fn labels() -> Scenario {
    scenario(include_str!("scenarios/labels.toml"))
}

fn loaded(scenario: &Scenario) -> Worker {
    let mut worker = Worker::new();
    worker.handle(Request::Load(Box::new(LaneJob {
        instance: scenario.instance.clone(),
        rival: scenario.rivals[0].clone(),
        settings: scenario.run.clone(),
        seed: scenario.seed,
        ..LaneJob::default()
    })));
    worker
}

/// What a worker answers until it stands still: events, the last report, and the rest.
fn asked(worker: &mut Worker, request: Request) -> (Vec<Event>, Option<SearchReport>, Vec<Reply>) {
    worker.handle(request);
    while worker.advance(5_000) {}
    let (mut events, mut last, mut rest) = (Vec::new(), None, Vec::new());
    for envelope in worker.take() {
        match envelope.reply {
            Reply::Batch(batch) => events.extend(batch),
            Reply::Paused(report) | Reply::Done(report) => last = Some(*report),
            reply => rest.push(reply),
        }
    }
    (events, last, rest)
}

fn plans(events: &[Event]) -> usize {
    events.iter().filter(|event| matches!(event, Event::Incumbent { .. })).count()
}

#[test]
fn it_goes_from_plan_to_plan() {
    let given = labels();
    let whole = run_rival(&given, (0, 0), 5_000, &mut |_| Watch::GoOn);
    let mut worker = loaded(&given);
    let (mut events, mut stops) = (Vec::new(), 0);
    loop {
        // The first is asked for before the root is solved.
        let (new, last, _) = asked(&mut worker, Request::RunToPlan);
        events.extend(new);
        let last = last.expect("it stands still or ends");
        if last.status != Status::Limit {
            break;
        }
        stops += 1;
        assert_eq!((plans(&events), last.stopped.as_deref()), (stops, Some("paused")));
        assert!(last.incumbent.is_some());
    }
    assert!(stops > 0 && plans(&events) <= stops + 1);
    assert_eq!(events, whole.events);
}

#[test]
fn a_limit_that_is_raised_lets_the_search_go_on() {
    let given = labels();
    let whole = run_rival(&given, (0, 0), 5_000, &mut |_| Watch::GoOn);
    let limited = Scenario { run: Run { nodes: 6, ..given.run.clone() }, ..given };
    let mut worker = loaded(&limited);
    let (mut events, last, _) = asked(&mut worker, Request::Run { nodes: None });
    let last = last.expect("it ends");
    assert_eq!((last.nodes, last.stopped.as_deref()), (6, Some("node limit")));
    let raise = |most: &str| Act {
        after: 0,
        what: ActKind::Rule,
        node: None,
        on: vec!["nodes".to_owned(), most.to_owned()],
    };
    let (none, last, said) = asked(&mut worker, Request::Act(raise("6")));
    assert!(none.is_empty() && last.is_none());
    assert!(said.iter().any(|r| matches!(r, Reply::Acted(acted) if acted.refused.is_some())));
    let mut acts = Vec::new();
    for (most, nodes) in [("9", Some(9)), ("0", None)] {
        let (more, last, said) = asked(&mut worker, Request::Act(raise(most)));
        events.extend(more);
        let last = last.expect("it went on");
        assert!(nodes.is_none_or(|nodes| last.nodes == nodes), "{last:?}");
        for reply in said {
            let Reply::Acted(acted) = reply else { continue };
            assert_eq!(acted.refused, None);
            acts.push(acted.act);
        }
    }
    assert_eq!(acts.iter().map(|act| act.after).collect::<Vec<_>>(), [6, 9]);
    assert_eq!(events, whole.events);
    let mut again = limited;
    again.rivals[0].acts = acts;
    let again = scenario(&file::print(&again));
    let run = run_rival(&again, (0, 0), 900, &mut |_| Watch::GoOn);
    assert_eq!(run.events, whole.events, "the replay differs");
}

/// The log that a worker hands over at the end of its search, as a file's bytes.
fn saved(given: &Scenario) -> (Vec<u8>, Vec<Event>) {
    let mut worker = loaded(given);
    let job = LogJob { scenario: file::print(given), instance: 0, rival: 0 };
    let (events, _, _) = asked(&mut worker, Request::Run { nodes: None });
    let (_, _, said) = asked(&mut worker, Request::Log(Box::new(job)));
    let [Reply::Log(Ok(bytes))] = said.as_slice() else { panic!("{} replies", said.len()) };
    (bytes.clone(), events)
}

fn proved(log: Log) -> AuditReport {
    let mut audit = LogAudit::new(log).expect("it says what it rests on");
    while !audit.advance(100_000).expect("its scenario becomes a model") {}
    audit.report()
}

/// Scenarios whose trees have leaves of every kind: by labels, by rows on demand, and with cuts.
fn scenarios() -> Vec<(&'static str, Scenario)> {
    let with_cuts = |mut given: Scenario| {
        given.run.cuts = Some(vec!["cover".to_owned(), "gomory".to_owned(), "mir".to_owned()]);
        given
    };
    let knapsack = scenario(include_str!("scenarios/knapsack.toml"));
    vec![
        ("labels", labels()),
        ("subtours", scenario(include_str!("scenarios/subtours.toml"))),
        ("knapsack", knapsack.clone()),
        ("knapsack with cuts", with_cuts(knapsack)),
        ("labels with cuts", with_cuts(labels())),
    ]
}

#[test]
fn a_log_that_is_handed_over_is_proved_and_replayed() {
    for (name, given) in scenarios() {
        let (bytes, events) = saved(&given);
        let log = decode(&bytes).expect("a log");
        assert_eq!(log.events, events, "{name}");
        let ground = log.ground.clone().expect("it says what it rests on");
        let again = scenario(&ground.scenario);
        let place = (ground.instance as usize, ground.rival as usize);
        let run = run_rival(&again, place, 700, &mut |_| Watch::GoOn);
        assert_eq!(run.events, events, "{name}: the replay differs");
        let status = run.search.expect("it is searched").status;
        let found = proved(log);
        assert_eq!(found.judgement == Judgement::Proved, status == Status::Optimal, "{name}");
    }
}

/// The leaves of a log: nodes that no other is made of.
fn leaves(events: &[Event]) -> BTreeSet<NodeNumber> {
    let made = |event: &Event| match event {
        Event::Created { node, parent, .. } => Some((*node, *parent)),
        _ => None,
    };
    let all: BTreeSet<NodeNumber> = events.iter().filter_map(made).map(|(node, _)| node).collect();
    let inner: BTreeSet<NodeNumber> = events.iter().filter_map(made).filter_map(|m| m.1).collect();
    all.difference(&inner).copied().collect()
}

/// Ways to tamper with one leaf: its bound, how it stands, its branching, or its end taken out.
fn tampered(log: &Log, leaf: NodeNumber, better: f64) -> Vec<(&'static str, Log)> {
    let changed = |change: &dyn Fn(&mut Event)| {
        let mut other = log.clone();
        other.events.iter_mut().for_each(change);
        other
    };
    let raised = changed(&|event| {
        if let Event::Solved { node, bound: Some(bound), .. } = event
            && *node == leaf
        {
            *bound -= better * (1.0 + bound.abs());
        }
    });
    let opened = changed(&|event| {
        if let Event::Solved { node, state, .. } | Event::Dropped { node, state } = event
            && *node == leaf
        {
            *state = NodeState::Open;
        }
    });
    let shifted = changed(&|event| {
        if let Event::Created { node, branching: Some(branching), .. } = event
            && *node == leaf
        {
            branching.bound += if branching.side == Side::AtMost { -1.0 } else { 1.0 };
        }
    });
    let mut gone = log.clone();
    gone.events.retain(|event| {
        !matches!(event, Event::Solved { node, .. } | Event::Dropped { node, .. } if *node == leaf)
    });
    let all = [("bound", raised), ("open", opened), ("branching", shifted), ("gone", gone)];
    all.into_iter().filter(|(_, other)| other != log).collect()
}

#[test]
fn a_log_with_any_leaf_tampered_with_is_refused() {
    let (mut tried, mut kinds) = (0, BTreeSet::new());
    for (name, given) in scenarios() {
        let (bytes, events) = saved(&given);
        let log = decode(&bytes).expect("a log");
        if proved(log.clone()).judgement != Judgement::Proved {
            continue;
        }
        let maximise = name.starts_with("knapsack");
        for leaf in leaves(&events) {
            for (what, other) in tampered(&log, leaf, if maximise { 1.0 } else { -1.0 }) {
                // As a file, as another machine gets it.
                let other = decode(&encode(&other).expect("it is written")).expect("it is read");
                let found = proved(other);
                let place = format!("{name}: {what} of node {}", leaf.0);
                assert_ne!(found.judgement, Judgement::Proved, "{place}");
                let word = leaf.0.to_string();
                let said = |why: &str| why.split(|c: char| !c.is_ascii_digit()).any(|w| w == word);
                let faults = found.faults.iter().any(|(node, why)| *node == leaf.0 || said(why));
                let parent = |event: &Event| match event {
                    Event::Created { node, parent: Some(parent), .. } if *node == leaf => {
                        Some(parent.0)
                    }
                    _ => None,
                };
                let above = events.iter().find_map(parent);
                let near = found.faults.iter().any(|(node, _)| Some(*node) == above);
                assert!(faults || near || found.open.contains(&leaf.0), "{place}: {found:?}");
                tried += 1;
                kinds.insert(what);
            }
        }
    }
    assert!(tried > 200 && kinds.len() == 4, "{tried} {kinds:?}");
}

/// What the host tells of its memory comes to the page; where little is left the search stands
/// still, keeps its tree, and may go on.
#[test]
fn a_search_stands_still_before_memory_ends() {
    let mut worker = loaded(&labels());
    worker.handle(Request::Run { nodes: None });
    for _ in 0..40 {
        worker.advance(2_000);
    }
    worker.tell_memory(100, 1_000, false);
    assert!(worker.advance(2_000), "there is room: the search goes on");
    worker.tell_memory(900, 1_000, true);
    while worker.advance(2_000) {}
    let told: Vec<Reply> = worker.take().into_iter().map(|envelope| envelope.reply).collect();
    let memory = told.iter().filter(|reply| matches!(reply, Reply::Memory { .. })).count();
    assert_eq!(memory, 2);
    let Some(Reply::Paused(report)) = told.last() else { panic!("{:?}", told.last()) };
    let (_, last, _) = asked(&mut worker, Request::Run { nodes: None });
    let last = last.expect("it goes on");
    assert!(last.nodes > report.nodes && last.status != Status::Limit);
}
