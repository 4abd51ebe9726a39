//! An engine worker: started with the compiled engine, ended when dropped.
//!
//! The boot script leaves the compiled module and the worker's script in `globalThis.hullward`.
//! The module is posted first, then requests; replies come back as bytes, a failure as text.

use gloo_events::EventListener;
use js_sys::{Reflect, Uint8Array, global};
use record::message::{Envelope, Request};
use record::wire::{read_envelope, write_request};
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{ErrorEvent, MessageEvent, Worker};
use yew::Callback;

/// What comes from a worker.
#[derive(Debug)]
pub(crate) enum FromWorker {
    /// A reply.
    Reply(Envelope),
    /// The worker failed and is of no use any more.
    Failure(String),
}

/// A running worker.
#[derive(Debug)]
pub(crate) struct WorkerHandle {
    worker: Worker,
    _listeners: [EventListener; 3],
}

impl WorkerHandle {
    /// Starts a worker; what it says goes to `hear`.
    pub(crate) fn start(hear: &Callback<FromWorker>) -> Result<Self, String> {
        let parts = Reflect::get(&global(), &JsValue::from_str("hullward"))
            .map_err(|error| text(&error))?;
        let part = |name: &str| {
            Reflect::get(&parts, &JsValue::from_str(name)).map_err(|error| text(&error))
        };
        let address = part("workerUrl")?.as_string().ok_or("the page has no worker script")?;
        let worker = Worker::new(&address).map_err(|error| text(&error))?;
        worker.post_message(&part("engineModule")?).map_err(|error| text(&error))?;
        let listeners = listeners(&worker, hear);
        Ok(Self { worker, _listeners: listeners })
    }

    /// Sends a request.
    pub(crate) fn post(&self, request: &Request) -> Result<(), String> {
        let bytes = write_request(request).map_err(|error| error.to_string())?;
        self.worker.post_message(&Uint8Array::from(bytes.as_slice())).map_err(|error| text(&error))
    }
}

impl Drop for WorkerHandle {
    fn drop(&mut self) {
        self.worker.terminate();
    }
}

fn listeners(worker: &Worker, hear: &Callback<FromWorker>) -> [EventListener; 3] {
    let on_message = hear.clone();
    let on_error = hear.clone();
    let on_garbled = hear.clone();
    [
        EventListener::new(worker, "message", move |event| {
            if let Some(event) = event.dyn_ref::<MessageEvent>() {
                on_message.emit(decoded(&event.data()));
            }
        }),
        EventListener::new(worker, "error", move |event| {
            let message = event.dyn_ref::<ErrorEvent>().map(ErrorEvent::message);
            on_error.emit(FromWorker::Failure(message.unwrap_or_default()));
        }),
        EventListener::new(worker, "messageerror", move |_| {
            on_garbled.emit(FromWorker::Failure("a message could not be read".to_owned()));
        }),
    ]
}

fn decoded(data: &JsValue) -> FromWorker {
    if let Some(bytes) = data.dyn_ref::<Uint8Array>() {
        return match read_envelope(&bytes.to_vec()) {
            Ok(envelope) => FromWorker::Reply(envelope),
            Err(error) => FromWorker::Failure(error.to_string()),
        };
    }
    FromWorker::Failure(data.as_string().unwrap_or_default())
}

fn text(value: &JsValue) -> String {
    value.as_string().unwrap_or_else(|| format!("{value:?}"))
}
