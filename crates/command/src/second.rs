//! The second opinion: the relaxation of each root, solved again by another LP code.

use std::time::Duration;

use engine::native::RivalRun;
use record::opinion::{Opinion, SECONDS};
use record::results::{RivalResult, SecondReport, Status};
use record::wire::read_relaxation;
use report::opinion::{Verdict, nine_digits, verdict, words};

use crate::clock::Clock;

/// Asks for a second opinion where there is a root to judge. `limit` is the scenario's limit of
/// seconds, 0 for none, and `clock` started with the rival.
pub(crate) fn add_opinion(one: &mut RivalResult, run: &RivalRun, limit: f64, clock: &Clock) {
    let maximise = one.maximise;
    let (Some(root), Some(relaxation)) = (&mut one.root, &run.relaxation) else { return };
    if matches!(root.status, Status::Limit | Status::Error) {
        return;
    }
    let opinion = match relaxation {
        Ok(bytes) => ask(bytes, clock.left(limit)),
        Err(why) => Opinion::Silent(why.clone()),
    };
    let status = match opinion {
        Opinion::Optimal(value) => {
            root.second_opinion = Some(nine_digits(value));
            Status::Optimal
        }
        Opinion::Infeasible => Status::Infeasible,
        Opinion::Unbounded => Status::Unbounded,
        Opinion::Silent(_) => Status::Limit,
    };
    let agrees = match verdict(root, maximise, &opinion) {
        Verdict::Agrees => Some(true),
        Verdict::Refuted | Verdict::Undecided => Some(false),
        Verdict::Silent => None,
    };
    let words = words(root, maximise, &opinion);
    one.second = Some(SecondReport { status, agrees, words });
}

fn ask(bytes: &[u8], left: Option<Duration>) -> Opinion {
    let most = Duration::from_secs(SECONDS);
    let limit = left.map_or(most, |left| left.min(most));
    if limit.is_zero() {
        return Opinion::Silent("the time limit left no time for it".to_owned());
    }
    match read_relaxation(bytes) {
        Ok(relaxation) => opinion::ask(&relaxation, limit),
        Err(error) => Opinion::Silent(error.to_string()),
    }
}
