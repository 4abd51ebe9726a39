//! The second opinion: one worker of its own, asked about one root after the other.
//!
//! It never holds a lane up: a lane hands its relaxation over and goes on. When the lane begins
//! anew, is stopped or goes, what is being asked about it is given up, and so is what takes too
//! long: the worker is ended, for it hears nothing while it solves.

use std::collections::VecDeque;

use gloo_timers::callback::Timeout;
use record::message::RunNumber;
use record::opinion::{Opinion, SECONDS};
use record::wire::read_opinion;
use yew::Callback;

use crate::browser::worker::{Program, RawWorker};
use crate::state::lane::LaneId;

/// Whose root is asked about.
pub(crate) type Root = (LaneId, RunNumber);

/// What comes of asking.
#[derive(Debug)]
pub(crate) enum Told {
    /// The worker's answer, or why it failed.
    Answer(Result<Vec<u8>, String>),
    /// The time is over.
    TooLate,
}

/// The worker, the root it is asked about, and those that wait.
#[derive(Debug)]
pub(crate) struct Opinions {
    hear: Callback<Told>,
    worker: Option<RawWorker>,
    asked: Option<(Root, Option<Timeout>)>,
    waiting: VecDeque<(Root, Vec<u8>)>,
}

impl Opinions {
    /// Nobody is asked yet; what comes of asking goes to `hear`, and from there to
    /// [`Self::end`].
    pub(crate) fn new(hear: Callback<Told>) -> Self {
        Self { hear, worker: None, asked: None, waiting: VecDeque::new() }
    }

    /// Asks about a root, once those before it are done.
    pub(crate) fn ask(&mut self, root: Root, relaxation: Vec<u8>) {
        self.waiting.push_back((root, relaxation));
        self.next();
    }

    /// What was told, as an opinion of a root; `None` when nobody waits for it any more.
    pub(crate) fn end(&mut self, told: Told) -> Option<(Root, Opinion)> {
        let opinion = match told {
            Told::Answer(Ok(bytes)) => read_opinion(&bytes).map_err(|error| error.to_string()),
            Told::Answer(Err(why)) => Err(why),
            Told::TooLate => {
                self.worker = None;
                Ok(Opinion::too_late(SECONDS as f64))
            }
        };
        let opinion = opinion.unwrap_or_else(|_| {
            self.worker = None;
            Opinion::Silent("the second LP code failed".to_owned())
        });
        let (root, _) = self.asked.take()?;
        self.next();
        Some((root, opinion))
    }

    /// Gives up what is asked about a lane; whether there was anything.
    pub(crate) fn give_up(&mut self, lane: LaneId) -> bool {
        let before = self.waiting.len();
        self.waiting.retain(|((of, _), _)| *of != lane);
        let mut any = self.waiting.len() < before;
        if self.asked.as_ref().is_some_and(|((of, _), _)| *of == lane) {
            (self.worker, self.asked) = (None, None);
            any = true;
            self.next();
        }
        any
    }

    fn next(&mut self) {
        if self.asked.is_some() {
            return;
        }
        let Some((root, relaxation)) = self.waiting.pop_front() else { return };
        let posted = self.post(&relaxation);
        let hear = self.hear.clone();
        let (wait, told) = match posted {
            Ok(()) => (SECONDS as u32 * 1_000, Told::TooLate),
            Err(why) => (0, Told::Answer(Err(why))),
        };
        let later = Timeout::new(wait, move || hear.emit(told));
        self.asked = Some((root, Some(later)));
    }

    fn post(&mut self, relaxation: &[u8]) -> Result<(), String> {
        if self.worker.is_none() {
            let hear = self.hear.reform(Told::Answer);
            self.worker = Some(RawWorker::start(Program::Opinion, &hear)?);
        }
        self.worker.as_ref().map_or(Ok(()), |worker| worker.post(relaxation))
    }
}
