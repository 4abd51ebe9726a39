//! Rivals run on the instances that are not chosen: one after another, in one worker.

use std::cell::RefCell;
use std::collections::VecDeque;
use std::rc::Rc;

use gloo_timers::callback::Timeout;
use record::message::{Envelope, LaneJob, Reply, Request, RunNumber};
use record::results::Status;
use yew::{Callback, UseReducerDispatcher};

use crate::browser::clock;
use crate::browser::worker::{FromWorker, WorkerHandle};
use crate::state::board::{Board, BoardAction};
use crate::state::outcomes::{Kept, Outcome};
use crate::state::pointer::Shared;

/// A rival on an instance.
#[derive(Debug, Clone)]
pub(crate) struct Job {
    /// What the worker is given.
    pub(crate) lane: LaneJob,
    /// Whether to search as well.
    pub(crate) search: bool,
}

/// The runs. Clones are the same runs.
#[derive(Debug, Clone)]
pub(crate) struct Elsewhere(Rc<RefCell<Inner>>);

#[derive(Debug)]
struct Inner {
    board: UseReducerDispatcher<Board>,
    worker: Option<WorkerHandle>,
    queue: VecDeque<Job>,
    now: Option<(Job, Outcome)>,
    limit: Option<Timeout>,
    number: u32,
}

impl Elsewhere {
    /// Nothing runs yet; the board hears of results.
    pub(crate) fn new(board: UseReducerDispatcher<Board>) -> Self {
        Self(Rc::new(RefCell::new(Inner {
            board,
            worker: None,
            queue: VecDeque::new(),
            now: None,
            limit: None,
            number: 0,
        })))
    }

    /// Runs jobs in place of those that wait.
    pub(crate) fn run(&self, jobs: Vec<Job>) {
        self.stop();
        self.0.borrow_mut().queue = jobs.into();
        self.tell(BoardAction::Elsewhere(true));
        self.next();
    }

    /// Ends what runs; what was found before is kept.
    pub(crate) fn stop(&self) {
        {
            let mut inner = self.0.borrow_mut();
            (inner.worker, inner.now, inner.limit) = (None, None, None);
            inner.queue.clear();
        }
        self.tell(BoardAction::Elsewhere(false));
    }

    fn tell(&self, action: BoardAction) {
        let board = self.0.borrow().board.clone();
        board.dispatch(action);
    }

    /// Begins the next job.
    fn next(&self) {
        let worker = self.0.borrow_mut().worker.take().or_else(|| self.worker());
        let begun = {
            let mut inner = self.0.borrow_mut();
            inner.worker = worker;
            inner.limit = None;
            inner.number += 1;
            let job = inner.queue.pop_front();
            inner.now = job.map(|job| (job, Outcome::default()));
            let run = RunNumber(inner.number);
            match (&inner.now, &inner.worker) {
                (Some((job, _)), Some(worker)) => {
                    let lane = LaneJob { run, ..job.lane.clone() };
                    // A worker that takes no message tells so by its error event.
                    let _ = worker.post(&Request::Load(Box::new(lane)));
                    true
                }
                _ => false,
            }
        };
        if !begun {
            self.stop();
        }
    }

    fn worker(&self) -> Option<WorkerHandle> {
        let weak = Rc::downgrade(&self.0);
        let hear = Callback::from(move |from| {
            if let Some(inner) = weak.upgrade() {
                Self(inner).hear(from);
            }
        });
        WorkerHandle::start(&hear).ok()
    }

    fn hear(&self, from: FromWorker) {
        match from {
            FromWorker::Reply(envelope) => self.reply(envelope),
            FromWorker::Failure(_) => {
                self.0.borrow_mut().worker = None;
                self.finish(|_| Outcome::failed());
            }
        }
    }

    fn reply(&self, Envelope { run, reply, .. }: Envelope) {
        if run.0 != self.0.borrow().number {
            return;
        }
        match reply {
            Reply::Understood(report) => {
                if let Some((_, outcome)) = &mut self.0.borrow_mut().now {
                    outcome.found.0 = Some(Shared::new(*report));
                }
            }
            Reply::Root(root) => {
                let search = self.0.borrow().now.as_ref().is_some_and(|(job, _)| job.search);
                let of_root = |before: Outcome| {
                    let mut outcome = Outcome::of_root(&root);
                    outcome.found.0 = before.found.0;
                    outcome
                };
                if search && root.status == Status::Optimal {
                    let before = self.0.borrow().now.as_ref().map(|(_, outcome)| outcome.clone());
                    self.search(of_root(before.unwrap_or_default()));
                } else {
                    self.finish(of_root);
                }
            }
            Reply::Paused(report) | Reply::Done(report) => {
                self.finish(|outcome| outcome.searched(&report));
            }
            Reply::Failed(_) => self.finish(|_| Outcome::failed()),
            _ => {}
        }
    }

    /// Searches on from the root; the scenario's limit of seconds ends it.
    fn search(&self, outcome: Outcome) {
        self.keep(Outcome { words: "searching", ..outcome.clone() });
        let weak = Rc::downgrade(&self.0);
        let mut inner = self.0.borrow_mut();
        let Some((job, now)) = &mut inner.now else { return };
        *now = outcome;
        let seconds = job.lane.settings.seconds;
        if let Some(worker) = &inner.worker {
            // A worker that takes no message tells so by its error event.
            let _ = worker.post(&Request::Run { nodes: None });
        }
        inner.limit = clock::after(seconds, move || {
            let Some(inner) = weak.upgrade() else { return };
            if let Some(worker) = &inner.borrow().worker {
                let _ = worker.post(&Request::Pause);
            }
        });
    }

    fn finish(&self, outcome: impl FnOnce(Outcome) -> Outcome) {
        let last = self.0.borrow().now.as_ref().map(|(_, outcome)| outcome.clone());
        if let Some(last) = last {
            self.keep(outcome(last));
            self.next();
        }
    }

    fn keep(&self, outcome: Outcome) {
        let job = self.0.borrow().now.as_ref().map(|(job, _)| job.lane.clone());
        if let Some(job) = job {
            self.tell(BoardAction::Keep(Box::new(Kept::new(job, outcome))));
        }
    }
}
