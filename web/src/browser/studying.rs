//! One study at a time, in a worker of its own, over one instance after another.

use std::cell::RefCell;
use std::collections::VecDeque;
use std::rc::Rc;

use record::message::{Envelope, Reply, Request, StudyJob};
use record::study::Report;
use yew::{Callback, UseReducerDispatcher};

use crate::browser::worker::{FromWorker, WorkerHandle};
use crate::state::studies::{Found, Part, Shelf, ShelfAction};

/// The worker of studies. Clones are the same.
#[derive(Debug, Clone)]
pub(crate) struct Studying(Rc<RefCell<Inner>>);

#[derive(Debug)]
struct Inner {
    shelf: UseReducerDispatcher<Shelf>,
    worker: Option<WorkerHandle>,
    of: Rc<str>,
    /// The instance at hand and those to come, each with its name.
    waiting: VecDeque<(usize, String)>,
    parts: Vec<Part>,
}

impl Studying {
    /// Nothing is being done; the shelf hears of what is found.
    pub(crate) fn new(shelf: UseReducerDispatcher<Shelf>) -> Self {
        let (waiting, parts) = (VecDeque::new(), Vec::new());
        Self(Rc::new(RefCell::new(Inner { shelf, worker: None, of: "".into(), waiting, parts })))
    }

    /// Makes the study that a scenario's text holds on instances by place, each with its name; one that
    /// runs is given up.
    pub(crate) fn begin(
        &self,
        kind: &'static str,
        scenario: String,
        instances: Vec<(usize, String)>,
    ) {
        self.stop();
        self.tell(ShelfAction::Begun(kind));
        {
            let mut inner = self.0.borrow_mut();
            inner.of = scenario.into();
            inner.waiting = instances.into();
            inner.parts.clear();
        }
        self.next();
    }

    /// Gives up what is being done; what was found on other instances stays.
    pub(crate) fn stop(&self) {
        if self.0.borrow_mut().worker.take().is_none() {
            return;
        }
        if self.0.borrow().parts.is_empty() {
            self.tell(ShelfAction::Stopped);
        } else {
            self.hand_over();
        }
    }

    /// Goes on to the instance that comes first, in a worker of its own; at the end, hands over.
    fn next(&self) {
        let Some((place, _)) = self.0.borrow().waiting.front().cloned() else {
            return self.hand_over();
        };
        let weak = Rc::downgrade(&self.0);
        let hear = Callback::from(move |from| {
            if let Some(inner) = weak.upgrade() {
                Self(inner).hear(from);
            }
        });
        let worker = WorkerHandle::start(&hear);
        let instance = u32::try_from(place).unwrap_or(u32::MAX);
        let scenario = self.0.borrow().of.to_string();
        let job = StudyJob { scenario, instance, ..StudyJob::default() };
        let posted = worker.and_then(|worker| {
            worker.post(&Request::Study(Box::new(job)))?;
            Ok(worker)
        });
        match posted {
            Ok(worker) => self.0.borrow_mut().worker = Some(worker),
            Err(why) => self.end(Err(why)),
        }
    }

    fn hear(&self, from: FromWorker) {
        match from {
            FromWorker::Reply(Envelope { reply, .. }) => match reply {
                Reply::Progress(progress) => self.doing(progress.doing),
                Reply::Studied(reports) => self.end(Ok(reports)),
                Reply::Failed(error) => self.end(Err(error.message)),
                _ => {}
            },
            FromWorker::Failure(why) => {
                let why = if why.is_empty() { "the worker failed".to_owned() } else { why };
                self.end(Err(why));
            }
        }
    }

    /// What is being done, and on which of several instances.
    fn doing(&self, doing: String) {
        let words = {
            let inner = self.0.borrow();
            let all = inner.parts.len() + inner.waiting.len();
            match inner.waiting.front() {
                Some((_, name)) if all > 1 => {
                    format!("{name} ({} of {all}): {doing}", inner.parts.len() + 1)
                }
                _ => doing,
            }
        };
        self.tell(ShelfAction::Doing(words));
    }

    /// The instance at hand is done.
    fn end(&self, reports: Result<Vec<Report>, String>) {
        {
            let mut inner = self.0.borrow_mut();
            inner.worker = None;
            let instance = inner.waiting.pop_front().map(|(_, name)| name).unwrap_or_default();
            inner.parts.push(Part { instance, reports });
        }
        self.next();
    }

    fn hand_over(&self) {
        let found = {
            let mut inner = self.0.borrow_mut();
            let (parts, left) = (std::mem::take(&mut inner.parts), inner.waiting.len());
            inner.waiting.clear();
            Found { of: Rc::clone(&inner.of), parts, left }
        };
        self.tell(ShelfAction::Ended(found));
    }

    fn tell(&self, action: ShelfAction) {
        let shelf = self.0.borrow().shelf.clone();
        shelf.dispatch(action);
    }
}
