//! However a search is paused, stepped, inspected and stopped, its log is the beginning of the
//! log of one run from beginning to end.

#![expect(clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use hullward_engine::Worker;
use proptest::collection::vec;
use proptest::prelude::*;
use record::event::{Event, NodeNumber};
use record::file;
use record::message::{LaneJob, Reply, Request};
use record::scenario::Run;

fn job() -> LaneJob {
    let parsed = file::parse(include_str!("scenarios/labels.toml"));
    let scenario = parsed.scenario.expect("the scenario is right");
    LaneJob {
        instance: scenario.instance,
        rival: scenario.rivals[0].clone(),
        settings: Run { nodes: 60, ..scenario.run },
        ..LaneJob::default()
    }
}

/// What is done to a worker.
#[derive(Debug, Clone)]
enum Step {
    Ask(Request),
    Work { ticks: u64, slices: u32 },
}

fn step() -> impl Strategy<Value = Step> {
    prop_oneof![
        (0_u32..6).prop_map(|nodes| Step::Ask(Request::Run { nodes: Some(nodes) })),
        Just(Step::Ask(Request::Run { nodes: None })),
        Just(Step::Ask(Request::Pause)),
        Just(Step::Ask(Request::Stop)),
        (0_u32..40).prop_map(|node| Step::Ask(Request::Inspect(NodeNumber(node)))),
        (1_u64..3_000, 1_u32..30).prop_map(|(ticks, slices)| Step::Work { ticks, slices }),
        (1_u64..3_000, 1_u32..30).prop_map(|(ticks, slices)| Step::Work { ticks, slices }),
    ]
}

/// The events of a worker to which these steps are done.
fn events(steps: &[Step]) -> Vec<Event> {
    let mut worker = Worker::new();
    worker.handle(Request::Load(Box::new(job())));
    let mut events = Vec::new();
    for step in steps {
        match step {
            Step::Ask(request) => worker.handle(request.clone()),
            Step::Work { ticks, slices } => {
                for _ in 0..*slices {
                    worker.advance(*ticks);
                }
            }
        }
        events.extend(taken(&mut worker));
    }
    while worker.advance(10_000) {}
    events.extend(taken(&mut worker));
    events
}

fn taken(worker: &mut Worker) -> Vec<Event> {
    let replies = worker.take().into_iter().map(|envelope| envelope.reply);
    let batches = replies.filter_map(|reply| match reply {
        Reply::Batch(events) => Some(events),
        _ => None,
    });
    batches.flatten().collect()
}

proptest! {
    #![proptest_config(ProptestConfig { cases: 60, failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn acts_never_change_what_is_found(steps in vec(step(), 0..14)) {
        let whole = events(&[Step::Ask(Request::Run { nodes: None })]);
        prop_assert!(whole.len() > 20, "a log of {} events compares little", whole.len());
        let log = events(&steps);
        prop_assert_eq!(log.as_slice(), &whole[..log.len().min(whole.len())]);
    }
}
