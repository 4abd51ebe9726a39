//! The worker as the page drives it: requests in, replies out.

#![expect(clippy::panic, clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use hullward_engine as engine;
use hullward_engine::Worker;
use hullward_engine::native::{Watch, run_rival};
use record::event::{Event, NodeNumber};
use record::file;
use record::message::{Envelope, LaneJob, Picture, Reply, Request, RunNumber};
use record::results::{ErrorReport, Status};
use record::scenario::{FamilyState, InstanceText, Rival, Run};
use record::wire::{read_envelope, read_relaxation, write_request};

const MATRIX: &str = "\
\tAsh\tBirch\tCedar\tElm\tFir
Ash\t0\t3\t14\t15\t9
Birch\t2\t0\t6\t5\t3
Cedar\t5\t8\t0\t9\t7
Elm\t9\t3\t2\t0\t3
Fir\t8\t4\t6\t2\t0
";

fn job(from: &str) -> LaneJob {
    LaneJob {
        run: RunNumber(4),
        instance: Some(InstanceText { text: MATRIX.to_owned(), ..InstanceText::default() }),
        rival: Rival { from: Some(from.to_owned()), ..Rival::default() },
        settings: Run::default(),
        seed: 1,
    }
}

fn load(job: LaneJob) -> Request {
    Request::Load(Box::new(job))
}

/// Carries out requests to the end and gives the replies, words on progress left out.
fn replies(worker: &mut Worker, requests: Vec<Request>) -> Vec<Reply> {
    for request in requests {
        worker.handle(request);
    }
    while worker.advance(500) {}
    let replies = worker.take().into_iter().map(|envelope| envelope.reply);
    replies.filter(|reply| !matches!(reply, Reply::Progress(_))).collect()
}

fn failure(requests: Vec<Request>) -> ErrorReport {
    let mut replies = replies(&mut Worker::new(), requests);
    match replies.pop() {
        Some(Reply::Failed(error)) => error,
        other => panic!("no failure: {other:?}"),
    }
}

#[test]
fn warming_up_solves_and_says_the_version() {
    let replies = replies(&mut Worker::new(), vec![Request::Warm]);
    assert_eq!(replies, [Reply::Ready { engine: engine::VERSION.to_owned() }]);
}

#[test]
fn an_instance_is_read_with_its_stops_and_matrix() {
    let text = InstanceText { text: MATRIX.to_owned(), ..InstanceText::default() };
    let replies = replies(&mut Worker::new(), vec![Request::Read(text)]);
    let [Reply::InstanceRead(report)] = replies.as_slice() else { panic!("{replies:?}") };
    assert!(report.usable && report.places_computed);
    let labels: Vec<&str> = report.stops.iter().map(|stop| stop.label.as_str()).collect();
    assert_eq!(labels, ["Ash", "Birch", "Cedar", "Elm", "Fir"]);
    assert_eq!(report.matrix.len(), 25);
    assert_eq!(
        (report.matrix[0], report.matrix[1], report.matrix[5]),
        (None, Some(3.0), Some(2.0))
    );
}

#[test]
fn a_broken_cell_is_complained_of_at_its_place() {
    let text = MATRIX.replace("14", "1é4x");
    let request = Request::Read(InstanceText { text: text.clone(), ..InstanceText::default() });
    let replies = replies(&mut Worker::new(), vec![request]);
    let [Reply::InstanceRead(report)] = replies.as_slice() else { panic!("{replies:?}") };
    assert!(!report.usable);
    let complaint = report.complaints.iter().find(|c| c.error).expect("an error");
    assert_eq!((complaint.line, complaint.column), (2, 9));
    let units: Vec<u16> = text.encode_utf16().collect();
    let place = &units[complaint.start as usize..complaint.end as usize];
    assert_eq!(String::from_utf16_lossy(place), "1é4x");
}

#[test]
fn a_rival_goes_from_its_text_to_its_optimum() {
    let mut worker = Worker::new();
    let replies =
        replies(&mut worker, vec![load(job("atsp/subtours")), Request::Run { nodes: None }]);
    let understood = replies.iter().find_map(|reply| match reply {
        Reply::Understood(report) => Some(report),
        _ => None,
    });
    let report = understood.expect("it is understood");
    assert_eq!((report.columns, report.integer_columns, report.rows), (20, 20, 10));
    assert_eq!(report.column_names[0], "x[Ash → Birch]");
    let subtour = report.families.iter().find(|family| family.name == "subtour").expect("a family");
    assert_eq!(subtour.state, FamilyState::OnDemand);
    assert!(!subtour.separation.is_empty());
    assert!(replies.iter().any(|reply| matches!(reply, Reply::Root(root) if root.checked)));
    let Some(Reply::Done(done)) = replies.last() else { panic!("{replies:?}") };
    assert_eq!((done.status, done.gap), (Status::Optimal, Some(0.0)));
    assert!(done.checked);
    assert_eq!(done.incumbent, Some(shortest()));
    assert_eq!(done.solution.len(), 5);
    assert!(done.solution.iter().all(|entry| entry.variable == "x" && entry.indices.len() == 2));
}

/// The shortest round trip by enumeration of all 24.
fn shortest() -> f64 {
    let rows = MATRIX.lines().skip(1);
    let costs: Vec<Vec<f64>> = rows
        .map(|row| row.split('\t').skip(1).map(|cell| cell.parse().expect("a number")).collect())
        .collect();
    extend(&costs, 0, &[1, 2, 3, 4])
}

/// The shortest way from `at` over all that are left and back to the first stop.
fn extend(costs: &[Vec<f64>], at: usize, left: &[usize]) -> f64 {
    if left.is_empty() {
        return costs[at][0];
    }
    let lengths = left.iter().map(|&next| {
        let rest: Vec<usize> = left.iter().copied().filter(|&stop| stop != next).collect();
        costs[at][next] + extend(costs, next, &rest)
    });
    lengths.fold(f64::INFINITY, |best, length| if length < best { length } else { best })
}

#[test]
fn a_run_pauses_is_inspected_and_stops() {
    let mut worker = Worker::new();
    let scenario =
        file::parse(include_str!("scenarios/labels.toml")).scenario.expect("it is right");
    let job = LaneJob { instance: scenario.instance, ..job("atsp/labels") };
    let first = replies(&mut worker, vec![load(job)]);
    let batches = first.iter().filter_map(|reply| match reply {
        Reply::Batch(events) => Some(events),
        _ => None,
    });
    let solved = batches.flatten().find_map(|event| match event {
        Event::Solved { bound, fractional, .. } => Some((*bound, *fractional)),
        _ => None,
    });
    let (bound, fractional) = solved.expect("the root is solved");
    let node = replies(&mut worker, vec![Request::Inspect(NodeNumber(1))]);
    let [Reply::Node(root)] = node.as_slice() else { panic!("{node:?}") };
    assert_eq!(root.bound.map(f64::to_bits), bound.map(f64::to_bits));
    assert_eq!(root.values.iter().filter(|value| value.fractional).count(), fractional as usize);
    assert!(root.checked_bound.is_some() && root.path.is_empty() && root.depth == 0);
    let Some(Picture::Map { arcs, .. }) = root.drawings.first().map(|drawing| &drawing.picture)
    else {
        panic!("the arcs are drawn first: {:?}", root.drawings)
    };
    let leaving: f64 = arcs.iter().filter(|arc| arc.from == 2).map(|arc| arc.value).sum();
    assert!((leaving - 1.0).abs() < 1e-9, "{arcs:?}");
    let step = replies(&mut worker, vec![Request::Run { nodes: Some(1) }]);
    let Some(Reply::Paused(report)) = step.last() else { panic!("{step:?}") };
    assert_eq!((report.status, report.nodes), (Status::Limit, 2));
    let stopped = replies(&mut worker, vec![Request::Stop]);
    assert!(matches!(stopped.last(), Some(Reply::Done(_))), "{stopped:?}");
    let missing = replies(&mut worker, vec![Request::Inspect(NodeNumber(99_999))]);
    assert!(matches!(missing.as_slice(), [Reply::Failed(_)]), "{missing:?}");
}

#[test]
fn stop_acts_in_the_next_slice_whatever_is_being_done() {
    for before in [0, 1, 3, 8, 20, 60] {
        let mut worker = Worker::new();
        worker.handle(load(job("atsp/multi-commodity")));
        for _ in 0..before {
            worker.advance(50);
        }
        worker.handle(Request::Stop);
        let slices = (1..10).find(|_| !worker.advance(50)).expect("it ends");
        assert!(slices <= 3, "{slices} slices after {before}");
        let last = worker.take().pop().map(|envelope| envelope.reply);
        assert!(matches!(last, Some(Reply::Done(_))), "{last:?}");
    }
}

#[test]
fn a_root_pauses_and_goes_on() {
    let mut worker = Worker::new();
    worker.handle(load(job("atsp/multi-commodity")));
    let understood = |worker: &mut Worker| {
        worker.take().iter().any(|envelope| matches!(envelope.reply, Reply::Understood(_)))
    };
    while !understood(&mut worker) {
        worker.advance(50);
    }
    let paused = replies(&mut worker, vec![Request::Pause]);
    assert!(matches!(paused.last(), Some(Reply::Paused(_))), "{paused:?}");
    assert!(!paused.iter().any(|reply| matches!(reply, Reply::Root(_))), "too easy to pause");
    let done = replies(&mut worker, vec![Request::Run { nodes: None }]);
    assert!(done.iter().any(|reply| matches!(reply, Reply::Root(_))), "{done:?}");
    let Some(Reply::Done(report)) = done.last() else { panic!("{done:?}") };
    assert_eq!((report.status, report.incumbent), (Status::Optimal, Some(shortest())));
}

#[test]
fn errors_say_in_which_text_they_are() {
    let unknown = failure(vec![load(job("atsp/label"))]);
    assert_eq!(unknown.place, "scenario");
    assert!(unknown.message.contains("did you mean \"atsp/labels\"?"), "{unknown}");
    let alone = failure(vec![load(LaneJob { instance: None, ..job("atsp/labels") })]);
    assert_eq!(
        (alone.place.as_str(), alone.message.as_str()),
        ("scenario", "the scenario has no instance")
    );
    let text = InstanceText { text: MATRIX.replace("14", "??"), ..InstanceText::default() };
    let broken = failure(vec![load(LaneJob { instance: Some(text), ..job("atsp/labels") })]);
    assert_eq!((broken.place.as_str(), broken.complaints[0].line), ("instance", 2));
    let mps = Rival { mps: Some("ROWS".to_owned()), ..Rival::default() };
    assert!(failure(vec![load(LaneJob { rival: mps, ..job("") })]).message.contains("MPS"));
}

#[test]
fn errors_in_a_formulation_have_their_place_in_its_text() {
    let text = "minimise\n  Σ_{i ∈ V} c_{i} y_{i\n".to_owned();
    let rival = Rival { text: Some(text), ..Rival::default() };
    let syntax = failure(vec![load(LaneJob { rival, ..job("") })]);
    assert_eq!(syntax.place, "rival");
    assert!(syntax.complaints.iter().any(|c| c.error && c.line >= 2), "{syntax}");
    let mut families = job("atsp/subtours");
    families.rival.families.insert("subtours".to_owned(), FamilyState::In);
    let family = failure(vec![load(families)]);
    assert!(family.message.contains("did you mean \"subtour\"?"), "{family}");
}

#[test]
fn a_family_left_out_or_on_demand_changes_the_model() {
    let size = |state: Option<FamilyState>| {
        let mut job = job("atsp/labels");
        job.rival.families.extend(state.map(|state| ("order".to_owned(), state)));
        let replies = replies(&mut Worker::new(), vec![load(job)]);
        let rows = replies.iter().find_map(|reply| match reply {
            Reply::Understood(report) => Some(report.rows),
            _ => None,
        });
        let bound = replies.iter().find_map(|reply| match reply {
            Reply::Root(root) => root.bound,
            _ => None,
        });
        (rows.expect("it is understood"), bound.expect("a bound"))
    };
    let (with, without) = (size(None), size(Some(FamilyState::Out)));
    let demanded = size(Some(FamilyState::OnDemand));
    assert_eq!((with.0, without.0, demanded.0), (22, 10, 10));
    assert!(without.1 <= with.1 && (demanded.1 - with.1).abs() < 1e-6, "{with:?} {demanded:?}");
}

#[test]
fn bytes_in_bytes_out_and_wrong_bytes_are_answered() {
    let mut worker = Worker::new();
    worker.handle_bytes(&[250, 1, 2]);
    worker.handle_bytes(&write_request(&Request::Run { nodes: None }).expect("short"));
    worker.handle_bytes(&write_request(&load(job("atsp/cuts"))).expect("short"));
    while worker.advance(1_000) {}
    let bytes = worker.take_bytes();
    let envelopes: Vec<Envelope> =
        bytes.iter().map(|bytes| read_envelope(bytes).expect("an envelope")).collect();
    assert!(matches!(&envelopes[0].reply, Reply::Failed(error) if error.place == "message"));
    assert!(
        matches!(&envelopes[1].reply, Reply::Failed(error) if error.message == "no rival is loaded")
    );
    assert!(envelopes.iter().zip(0..).all(|(envelope, place)| envelope.sequence == place));
    assert_eq!(envelopes.last().map(|envelope| envelope.run), Some(RunNumber(4)));
}

#[test]
fn the_catalogue_is_listed_and_each_of_its_rivals_loads() {
    let mut worker = Worker::new();
    let listed = replies(&mut worker, vec![Request::List]);
    let [Reply::Catalogue(entries)] = listed.as_slice() else { panic!("{listed:?}") };
    assert!(entries.len() >= 7);
    for entry in entries.iter().filter(|entry| entry.id.starts_with("atsp/")) {
        let replies = replies(&mut worker, vec![load(job(&entry.id))]);
        let root = replies.iter().any(|reply| matches!(reply, Reply::Root(_)));
        assert!(root, "{}: {replies:?}", entry.id);
    }
}

#[test]
fn a_root_is_handed_over_with_the_rows_that_separation_added_to_it() {
    let text = include_str!("scenarios/subtours.toml");
    let scenario = file::parse(text).scenario.expect("a scenario");
    let handed_over = |search: bool| {
        let mut scenario = scenario.clone();
        scenario.run.search = search;
        let run = run_rival(&scenario, (0, 0), 5_000, &mut |_| Watch::GoOn);
        let bytes = run.relaxation.expect("asked for").expect("the root is solved");
        (run.root.expect("a root"), read_relaxation(&bytes).expect("bytes"))
    };
    let (root, relaxation) = handed_over(false);
    assert!(root.added > 0);
    assert_eq!(relaxation.columns.len(), 182);
    assert_eq!(relaxation.rows.len(), 28 + root.added as usize);
    // The rows that the search adds later are not the root's.
    assert_eq!(handed_over(true).1, relaxation);
}

#[test]
fn what_is_not_solved_is_not_handed_over() {
    let mut worker = Worker::new();
    worker.handle(load(job("atsp/labels")));
    worker.handle(Request::Relaxation);
    worker.handle(Request::Stop);
    let said = replies(&mut worker, Vec::new()).into_iter().find_map(|reply| match reply {
        Reply::Relaxation(said) => Some(said),
        _ => None,
    });
    assert_eq!(said, Some(Err("the root is not solved".to_owned())));
}

/// A log as the command saves it.
fn saved() -> Vec<u8> {
    let rival = Rival { from: Some("atsp/labels".to_owned()), ..Rival::default() };
    let instance = InstanceText { text: MATRIX.to_owned(), ..InstanceText::default() };
    let scenario = record::scenario::Scenario {
        instance: Some(instance),
        rivals: vec![rival],
        ..Default::default()
    };
    let run = run_rival(&scenario, (0, 0), 500, &mut |_| Watch::GoOn);
    let ground = run.evidence.map(|evidence| record::ground::Ground {
        scenario: file::print(&scenario),
        evidence,
        ..Default::default()
    });
    let version = record::log::version(ground.as_ref());
    let engine = engine::VERSION.to_owned();
    let log = record::event::Log { version, engine, events: run.events, ground };
    record::log::encode(&log).expect("a log")
}

#[test]
fn a_saved_log_is_proved_by_a_worker_that_did_not_run_it() {
    use record::results::Judgement;
    let bytes = saved();
    let mut worker = Worker::new();
    let found = replies(&mut worker, vec![Request::Prove(bytes.clone())]);
    let [Reply::Audited(found)] = found.as_slice() else { panic!("{found:?}") };
    assert_eq!((found.judgement, found.value.as_deref()), (Judgement::Proved, Some("15")));
    assert!(!found.title.is_empty());
    // Stop ends it at once with what it found.
    worker.handle(Request::Prove(bytes.clone()));
    for _ in 0..6 {
        worker.advance(1);
    }
    let stopped = replies(&mut worker, vec![Request::Stop]);
    let [Reply::Audited(stopped)] = stopped.as_slice() else { panic!("{stopped:?}") };
    assert_eq!(stopped.judgement, Judgement::Open);
    assert!(stopped.leaves < found.leaves, "{stopped:?}");
    let damaged = bytes[..bytes.len() - 3].to_vec();
    assert!(failure(vec![Request::Prove(damaged)]).message.contains("cut short"));
}
