//! A small rival from text to proved optimum, so that every part of the module is compiled
//! before the first real one.

use record::message::{LaneJob, Request};
use record::scenario::{InstanceText, Rival};

use crate::worker::Worker;

/// Four stops: each part of the engine has something to do, and it takes no time.
const INSTANCE: &str = "0 3 4 5\n2 0 4 6\n7 3 0 5\n4 6 3 0\n";

/// Far more slices than are needed.
const MOST_SLICES: u32 = 10_000;

/// Solves the small rival in a worker of its own; whether it came to its end.
pub(crate) fn warm() -> bool {
    let text = INSTANCE.to_owned();
    let job = LaneJob {
        instance: Some(InstanceText { text, ..InstanceText::default() }),
        rival: Rival { from: Some("atsp/subtours".to_owned()), ..Rival::default() },
        ..LaneJob::default()
    };
    let mut worker = Worker::new();
    worker.handle(Request::Load(Box::new(job)));
    worker.handle(Request::Run { nodes: None });
    let ended = (0..MOST_SLICES).any(|_| !worker.advance(10_000));
    worker.take_bytes();
    ended
}
