//! One study at a time, in a worker of its own, over one instance after another; what is asked
//! meanwhile waits its turn.

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
    /// Studies to come.
    queue: VecDeque<Asked>,
}

/// A study that is asked for.
#[derive(Debug)]
pub(crate) struct Asked {
    /// Its kind.
    pub(crate) kind: &'static str,
    /// The text of the scenario that holds it.
    pub(crate) scenario: String,
    /// Its instances by place, each with its name.
    pub(crate) instances: Vec<(usize, String)>,
}

impl Studying {
    /// Nothing is being done; the shelf hears of what is found.
    pub(crate) fn new(shelf: UseReducerDispatcher<Shelf>) -> Self {
        Self(Rc::new(RefCell::new(Inner {
            shelf,
            worker: None,
            of: "".into(),
            waiting: VecDeque::new(),
            parts: Vec::new(),
            queue: VecDeque::new(),
        })))
    }

    /// Makes a study, now or when those asked before it are at their end.
    pub(crate) fn ask(&self, asked: Asked) {
        if self.0.borrow().worker.is_none() {
            return self.begin(asked);
        }
        self.tell(ShelfAction::Asked(asked.kind));
        self.0.borrow_mut().queue.push_back(asked);
    }

    /// A study that waits is not made.
    pub(crate) fn withdraw(&self, kind: &'static str) {
        self.0.borrow_mut().queue.retain(|asked| asked.kind != kind);
        self.tell(ShelfAction::Withdrawn(kind));
    }

    fn begin(&self, asked: Asked) {
        self.tell(ShelfAction::Begun(asked.kind));
        {
            let mut inner = self.0.borrow_mut();
            inner.of = asked.scenario.into();
            inner.waiting = asked.instances.into();
            inner.parts.clear();
        }
        self.next();
    }

    /// Gives up what is being done; what was found on other instances stays.
    pub(crate) fn stop(&self) {
        if self.0.borrow_mut().worker.take().is_none() {
            return;
        }
        if !self.0.borrow().parts.is_empty() {
            return self.hand_over();
        }
        self.tell(ShelfAction::Stopped);
        self.turn();
    }

    /// The study that has waited longest.
    fn turn(&self) {
        let asked = self.0.borrow_mut().queue.pop_front();
        if let Some(asked) = asked {
            self.begin(asked);
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
        self.turn();
    }

    fn tell(&self, action: ShelfAction) {
        let shelf = self.0.borrow().shelf.clone();
        shelf.dispatch(action);
    }
}
