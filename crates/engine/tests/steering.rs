//! Acts by hand: what a person did to a worker is appended to the scenario, and the scenario gives
//! the same log and the same results on another machine.

#![expect(clippy::panic, clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use hullward_engine::Worker;
use hullward_engine::native::{RivalRun, Watch, result, run_rival};
use record::event::{Event, NodeNumber, NodeState};
use record::file;
use record::message::{Acted, LaneJob, Reply, Request, RivalReport};
use record::results::{SearchReport, Status};
use record::scenario::{Act, ActKind, Scenario};

fn scenario(text: &str) -> Scenario {
    file::parse(text).scenario.expect("the scenario is right")
}

fn labels() -> Scenario {
    scenario(include_str!("scenarios/labels.toml"))
}

fn subtours() -> Scenario {
    scenario(include_str!("scenarios/subtours.toml"))
}

/// A worker with all that it said.
struct Desk {
    worker: Worker,
    slice: u64,
    report: Option<RivalReport>,
    events: Vec<Event>,
    acted: Vec<Acted>,
    nodes: Vec<Reply>,
    last: Option<SearchReport>,
}

impl Desk {
    fn new(scenario: &Scenario, slice: u64) -> Self {
        let mut desk = Self {
            worker: Worker::new(),
            slice,
            report: None,
            events: Vec::new(),
            acted: Vec::new(),
            nodes: Vec::new(),
            last: None,
        };
        desk.ask(Request::Load(Box::new(LaneJob {
            instance: scenario.instance.clone(),
            rival: scenario.rivals[0].clone(),
            settings: scenario.run.clone(),
            seed: scenario.seed,
            ..LaneJob::default()
        })));
        desk
    }

    /// Asks and works until the worker stands still.
    fn ask(&mut self, request: Request) {
        self.worker.handle(request);
        while self.worker.advance(self.slice) {}
        for envelope in self.worker.take() {
            match envelope.reply {
                Reply::Understood(report) => self.report = Some(*report),
                Reply::Batch(events) => self.events.extend(events),
                Reply::Acted(acted) => self.acted.push(*acted),
                Reply::Paused(report) | Reply::Done(report) => self.last = Some(*report),
                Reply::Failed(error) => panic!("{error}"),
                Reply::Node(_) => self.nodes.push(envelope.reply),
                _ => {}
            }
        }
    }

    fn act(&mut self, what: ActKind, node: Option<u32>, on: &[&str]) -> Acted {
        let on = on.iter().map(|&word| word.to_owned()).collect();
        self.ask(Request::Act(Act { after: 999, what, node, on }));
        self.acted.last().expect("it is answered").clone()
    }

    fn run(&mut self, nodes: Option<u32>) {
        self.ask(Request::Run { nodes });
    }

    /// The first node that is open.
    fn open(&mut self) -> u32 {
        for node in 2..200 {
            self.ask(Request::Inspect(NodeNumber(node)));
            if let Some(Reply::Node(detail)) = self.nodes.last()
                && detail.state == NodeState::Open
            {
                return node;
            }
        }
        panic!("no node is open")
    }
}

/// The scenario with what was done, as another machine reads it from its text.
fn with_acts(mut scenario: Scenario, acted: &[Acted]) -> Scenario {
    let done = acted.iter().filter(|acted| acted.refused.is_none() && !acted.replayed);
    scenario.rivals[0].acts.extend(done.map(|acted| acted.act.clone()));
    file::parse(&file::print(&scenario)).scenario.expect("it comes back")
}

fn replayed(scenario: &Scenario, slice: u64) -> RivalRun {
    run_rival(scenario, (0, 0), slice, &mut |_| Watch::GoOn)
}

#[test]
fn a_steered_search_is_replayed_to_the_same_log() {
    for (given, steps) in [(labels(), 5), (subtours(), 1)] {
        let mut desk = Desk::new(&given, 700);
        let names = &desk.report.as_ref().expect("it is expanded").families;
        let family = names.iter().find(|family| !family.separation.is_empty());
        let cut = family.map(|family| family.name.clone());
        let stops = if cut.is_some() { ["1", "3"] } else { ["Ash", "Elm"] };
        let root = desk.act(ActKind::Branch, Some(1), &["x", stops[0], stops[1]]);
        assert_eq!((root.refused, root.act.after), (None, 1));
        desk.run(Some(4));
        let open = desk.open();
        let branch = desk.act(ActKind::Branch, Some(open), &["x", stops[1], stops[0]]);
        assert_eq!((branch.refused, branch.act.after), (None, 5));
        if let Some(family) = &cut {
            let cut = desk.act(ActKind::Cut, None, &[family, "2", "5", "7", "9"]);
            assert_eq!(cut.refused, None);
        }
        desk.run(Some(3));
        let open = desk.open();
        let close = desk.act(ActKind::Close, Some(open), &[]);
        assert_eq!((close.refused, close.act.after), (None, 8));
        desk.run(Some(steps));
        assert_eq!(desk.act(ActKind::Stop, None, &[]).refused, None);
        let last = desk.last.clone().expect("it has ended");
        assert_eq!((last.status, last.nodes), (Status::Limit, 8 + steps));
        assert_eq!(last.stopped.as_deref(), Some("stopped by hand"));
        let again = with_acts(given, &desk.acted);
        for slice in [90, u64::MAX] {
            let run = replayed(&again, slice);
            assert_eq!(run.events, desk.events);
            assert_eq!(run.search.as_ref(), Some(&last));
            assert!(result(&again, (0, 0), &run).left_out.is_empty());
        }
    }
}

#[test]
fn what_does_not_apply_is_refused_in_words() {
    let mut desk = Desk::new(&labels(), u64::MAX);
    desk.run(Some(3));
    let before = desk.last.clone();
    for (what, node, on, why) in [
        (ActKind::Branch, Some(2), &["x", "Ash", "Oak"][..], "no column x[Ash, Oak]"),
        (ActKind::Branch, Some(2), &[], "names no column"),
        (ActKind::Branch, None, &["x", "Ash", "Elm"], "names no node"),
        (ActKind::Branch, Some(900), &["x", "Ash", "Elm"], "there is no node 900"),
        (ActKind::Branch, Some(1), &["x", "Ash", "Elm"], "branched on"),
        (ActKind::Close, Some(1), &[], "whole tree"),
        (ActKind::Close, None, &[], "names no node"),
        (ActKind::Cut, None, &["order", "Ash", "Elm"], "no family order over subsets"),
        (ActKind::Cut, None, &[], "names no family"),
    ] {
        let acted = desk.act(what, node, on);
        let refused = acted.refused.expect("it does not apply");
        assert!(refused.contains(why), "{refused}");
    }
    desk.ask(Request::Pause);
    assert_eq!(desk.last, before);
    desk.run(None);
    assert_eq!(desk.events, replayed(&labels(), u64::MAX).events);
    assert_eq!(desk.act(ActKind::Stop, None, &[]).refused.as_deref(), Some("the search has ended"));
}

#[test]
fn a_replay_says_what_did_not_apply_and_goes_on() {
    let act = |after, what, node, on: &[&str]| {
        let on = on.iter().map(|&word| word.to_owned()).collect();
        Act { after, what, node, on }
    };
    let mut given = labels();
    given.rivals[0].acts = vec![
        act(3, ActKind::Close, Some(700), &[]),
        act(2, ActKind::Branch, Some(2), &["x", "Ash", "Oak"]),
        act(1_000_000, ActKind::Stop, None, &[]),
    ];
    let run = replayed(&given, 500);
    assert_eq!(run.events, replayed(&labels(), u64::MAX).events);
    let left_out = result(&given, (0, 0), &run).left_out;
    assert_eq!(left_out.len(), 3, "{left_out:?}");
    assert!(left_out[0].contains("Oak"), "{left_out:?}");
    assert!(left_out[1].contains("(close at node 700) was left out after 3 nodes"));
    assert!(left_out[2].contains("the search has ended"), "{left_out:?}");
}

#[test]
fn an_act_before_there_is_a_search_is_refused() {
    let mut worker = Worker::new();
    let given = labels();
    let (instance, rival) = (given.instance.clone(), given.rivals[0].clone());
    worker.handle(Request::Load(Box::new(LaneJob { instance, rival, ..LaneJob::default() })));
    let stop = Act { after: 0, what: ActKind::Stop, node: None, on: Vec::new() };
    worker.handle(Request::Act(stop));
    while worker.advance(u64::MAX) {}
    let refused = worker.take().into_iter().find_map(|envelope| match envelope.reply {
        Reply::Acted(acted) => acted.refused,
        _ => None,
    });
    assert_eq!(refused.as_deref(), Some("there is no search yet"));
}
