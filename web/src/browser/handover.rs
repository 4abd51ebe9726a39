//! A rival handed over: a worker of its own writes and compares, so that neither a search nor the
//! check of what is typed waits for it.

use record::handover::{Form, Written};
use record::message::{Envelope, LaneJob, Reply, Request};
use yew::Callback;

use crate::browser::worker::{FromWorker, WorkerHandle};

/// Begins; the answer goes to `hear`. Nothing comes once the worker is dropped.
///
/// # Errors
/// Why there is no worker.
pub(crate) fn hand_over(
    form: Form,
    job: LaneJob,
    hear: Callback<Result<Written, String>>,
) -> Result<WorkerHandle, String> {
    let listen = Callback::from(move |from| match from {
        FromWorker::Reply(Envelope { reply: Reply::Written(written), .. }) => {
            hear.emit(Ok(*written));
        }
        FromWorker::Reply(Envelope { reply: Reply::Failed(error), .. }) => {
            hear.emit(Err(error.message));
        }
        FromWorker::Reply(_) => {}
        FromWorker::Failure(why) => hear.emit(Err(why)),
    });
    let worker = WorkerHandle::start(&listen)?;
    worker.post(&Request::Write(form, Box::new(job)))?;
    Ok(worker)
}
