//! A worker: started with its compiled module, ended when dropped.
//!
//! The boot script starts it, by `hullward.startWorker`, and posts the compiled module once that is
//! there; requests that come before it wait in the worker. Replies come back as bytes, a failure as
//! text.

use gloo_events::EventListener;
use js_sys::{Function, Reflect, Uint8Array, global};
use record::message::{Envelope, Request};
use record::wire::{read_envelope, write_request};
use wasm_bindgen::{JsCast, JsValue};
use web_sys::{ErrorEvent, MessageEvent, Worker};
use yew::Callback;

/// What a worker runs.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Program {
    /// The engine.
    Engine,
    /// The second LP code.
    Opinion,
}

/// What comes from an engine worker.
#[derive(Debug)]
pub(crate) enum FromWorker {
    /// A reply.
    Reply(Envelope),
    /// The worker failed and is of no use any more.
    Failure(String),
}

/// A running engine worker.
#[derive(Debug)]
pub(crate) struct WorkerHandle(RawWorker);

impl WorkerHandle {
    /// Starts a worker; what it says goes to `hear`.
    pub(crate) fn start(hear: &Callback<FromWorker>) -> Result<Self, String> {
        RawWorker::start(Program::Engine, &hear.reform(decoded)).map(Self)
    }

    /// Sends a request.
    pub(crate) fn post(&self, request: &Request) -> Result<(), String> {
        self.0.post(&write_request(request).map_err(|error| error.to_string())?)
    }
}

/// A running worker that speaks in bytes.
#[derive(Debug)]
pub(crate) struct RawWorker {
    worker: Worker,
    _listeners: [EventListener; 3],
}

impl RawWorker {
    /// Starts a worker; what it says, or why it failed, goes to `hear`.
    pub(crate) fn start(
        program: Program,
        hear: &Callback<Result<Vec<u8>, String>>,
    ) -> Result<Self, String> {
        let worker = started(program).map_err(|error| text(&error))?;
        let listeners = listeners(&worker, hear);
        Ok(Self { worker, _listeners: listeners })
    }

    /// Sends bytes.
    pub(crate) fn post(&self, bytes: &[u8]) -> Result<(), String> {
        self.worker.post_message(&Uint8Array::from(bytes)).map_err(|error| text(&error))
    }
}

impl Drop for RawWorker {
    fn drop(&mut self) {
        self.worker.terminate();
    }
}

/// Has the boot script start a worker.
fn started(program: Program) -> Result<Worker, JsValue> {
    let boot = Reflect::get(&global(), &JsValue::from_str("hullward"))?;
    let start: Function = Reflect::get(&boot, &JsValue::from_str("startWorker"))?.dyn_into()?;
    let name = match program {
        Program::Engine => "engine",
        Program::Opinion => "opinion",
    };
    Ok(start.call1(&boot, &JsValue::from_str(name))?.unchecked_into())
}

fn listeners(worker: &Worker, hear: &Callback<Result<Vec<u8>, String>>) -> [EventListener; 3] {
    let on_message = hear.clone();
    let on_error = hear.clone();
    let on_garbled = hear.clone();
    [
        EventListener::new(worker, "message", move |event| {
            if let Some(event) = event.dyn_ref::<MessageEvent>() {
                on_message.emit(bytes(&event.data()));
            }
        }),
        EventListener::new(worker, "error", move |event| {
            let message = event.dyn_ref::<ErrorEvent>().map(ErrorEvent::message);
            on_error.emit(Err(message.unwrap_or_default()));
        }),
        EventListener::new(worker, "messageerror", move |_| {
            on_garbled.emit(Err("a message could not be read".to_owned()));
        }),
    ]
}

fn bytes(data: &JsValue) -> Result<Vec<u8>, String> {
    match data.dyn_ref::<Uint8Array>() {
        Some(bytes) => Ok(bytes.to_vec()),
        None => Err(data.as_string().unwrap_or_default()),
    }
}

fn decoded(said: Result<Vec<u8>, String>) -> FromWorker {
    let envelope = said.and_then(|bytes| read_envelope(&bytes).map_err(|error| error.to_string()));
    envelope.map_or_else(FromWorker::Failure, FromWorker::Reply)
}

fn text(value: &JsValue) -> String {
    value.as_string().unwrap_or_else(|| format!("{value:?}"))
}
