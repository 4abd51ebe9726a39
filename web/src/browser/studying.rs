//! One study at a time, in a worker of its own.

use std::cell::RefCell;
use std::rc::Rc;

use record::message::{Envelope, Reply, Request, StudyJob};
use yew::{Callback, UseReducerDispatcher};

use crate::browser::worker::{FromWorker, WorkerHandle};
use crate::state::studies::{Found, Shelf, ShelfAction};

/// The worker of studies. Clones are the same.
#[derive(Debug, Clone)]
pub(crate) struct Studying(Rc<RefCell<Inner>>);

#[derive(Debug)]
struct Inner {
    shelf: UseReducerDispatcher<Shelf>,
    worker: Option<WorkerHandle>,
    of: Rc<str>,
}

impl Studying {
    /// Nothing is being done; the shelf hears of what is found.
    pub(crate) fn new(shelf: UseReducerDispatcher<Shelf>) -> Self {
        Self(Rc::new(RefCell::new(Inner { shelf, worker: None, of: "".into() })))
    }

    /// Makes the study that a scenario's text holds, on the instance at a place; one that runs is given up.
    pub(crate) fn begin(&self, kind: &'static str, scenario: String, instance: usize) {
        self.stop();
        self.tell(ShelfAction::Begun(kind));
        let weak = Rc::downgrade(&self.0);
        let hear = Callback::from(move |from| {
            if let Some(inner) = weak.upgrade() {
                Self(inner).hear(from);
            }
        });
        let worker = WorkerHandle::start(&hear);
        let instance = u32::try_from(instance).unwrap_or(u32::MAX);
        let job = StudyJob { scenario: scenario.clone(), instance, ..StudyJob::default() };
        let posted = worker.and_then(|worker| {
            worker.post(&Request::Study(Box::new(job)))?;
            Ok(worker)
        });
        self.0.borrow_mut().of = scenario.into();
        match posted {
            Ok(worker) => self.0.borrow_mut().worker = Some(worker),
            Err(why) => self.end(Err(why)),
        }
    }

    /// Gives up what is being done.
    pub(crate) fn stop(&self) {
        if self.0.borrow_mut().worker.take().is_some() {
            self.tell(ShelfAction::Stopped);
        }
    }

    fn hear(&self, from: FromWorker) {
        match from {
            FromWorker::Reply(Envelope { reply, .. }) => match reply {
                Reply::Progress(progress) => self.tell(ShelfAction::Doing(progress.doing)),
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

    fn end(&self, reports: Result<Vec<record::study::Report>, String>) {
        let of = {
            let mut inner = self.0.borrow_mut();
            inner.worker = None;
            Rc::clone(&inner.of)
        };
        self.tell(ShelfAction::Ended(Found { of, reports }));
    }

    fn tell(&self, action: ShelfAction) {
        let shelf = self.0.borrow().shelf.clone();
        shelf.dispatch(action);
    }
}
