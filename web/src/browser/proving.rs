//! A saved log proved in a worker of its own, which did not run it.

use record::message::{Envelope, Reply, Request};
use report::audit::sentences;
use yew::Callback;

use crate::browser::worker::{FromWorker, WorkerHandle};

/// What is told of a proof.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Told {
    /// What is being done.
    Doing(String),
    /// What came of it.
    Ended(String),
}

/// Begins with the bytes of a log's file; dropping the worker ends it.
///
/// # Errors
/// Why there is no worker.
pub(crate) fn prove(bytes: Vec<u8>, hear: Callback<Told>) -> Result<WorkerHandle, String> {
    let listen = Callback::from(move |from| match from {
        FromWorker::Reply(Envelope { reply: Reply::Progress(progress), .. }) => {
            hear.emit(Told::Doing(progress.doing));
        }
        FromWorker::Reply(Envelope { reply: Reply::Audited(found), .. }) => {
            hear.emit(Told::Ended(format!("{}: {}", found.title, sentences(&found).join(" "))));
        }
        FromWorker::Reply(Envelope { reply: Reply::Failed(error), .. }) => {
            hear.emit(Told::Ended(format!("not proved, {}.", error.message)));
        }
        FromWorker::Reply(_) => {}
        FromWorker::Failure(why) => hear.emit(Told::Ended(format!("the worker failed: {why}."))),
    });
    let worker = WorkerHandle::start(&listen)?;
    worker.post(&Request::Prove(bytes))?;
    Ok(worker)
}
