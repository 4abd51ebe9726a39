//! A rival, a record or a scenario handed over: a worker of its own writes and compares, so that neither a
//! search nor the check of what is typed waits for it.

use record::handover::{Stated, Written};
use record::message::{Envelope, Reply, Request};
use yew::Callback;

use crate::browser::worker::{FromWorker, WorkerHandle};

/// What is handed over.
#[derive(Debug)]
pub(crate) enum Handed {
    /// A text.
    Written(Written),
    /// What a record repeats of its scenario.
    Stated(Stated),
}

/// Begins; the answer goes to `hear`. Nothing comes once the worker is dropped.
///
/// # Errors
/// Why there is no worker.
pub(crate) fn hand_over(
    request: &Request,
    hear: Callback<Result<Handed, String>>,
) -> Result<WorkerHandle, String> {
    let listen = Callback::from(move |from| match from {
        FromWorker::Reply(Envelope { reply, .. }) => match reply {
            Reply::Written(written) => hear.emit(Ok(Handed::Written(*written))),
            Reply::Stated(stated) => hear.emit(Ok(Handed::Stated(*stated))),
            Reply::Failed(error) => hear.emit(Err(error.message)),
            _ => {}
        },
        FromWorker::Failure(why) => hear.emit(Err(why)),
    });
    let worker = WorkerHandle::start(&listen)?;
    worker.post(request)?;
    Ok(worker)
}
