//! A worker: started with its compiled module, ended when dropped.
//!
//! The boot script leaves the compiled modules and the workers' scripts in `globalThis.hullward`.
//! The module is posted first, then requests; replies come back as bytes, a failure as text.

use gloo_events::EventListener;
use js_sys::{Array, Function, Reflect, Uint8Array, global};
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
        let parts = Reflect::get(&global(), &JsValue::from_str("hullward"))
            .map_err(|error| text(&error))?;
        let part = |name: &str| {
            Reflect::get(&parts, &JsValue::from_str(name)).map_err(|error| text(&error))
        };
        let (module, script) = match program {
            Program::Engine => ("engineModule", "workerUrl"),
            Program::Opinion => ("opinionModule", "opinionUrl"),
        };
        let worker = made(&part(script)?)?;
        worker.post_message(&part(module)?).map_err(|error| text(&error))?;
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

/// A worker of an address as it stands, a trusted one where the browser knows of trust: as a mere
/// text it would be refused.
fn made(address: &JsValue) -> Result<Worker, String> {
    let class =
        Reflect::get(&global(), &JsValue::from_str("Worker")).map_err(|error| text(&error))?;
    let class = class.dyn_ref::<Function>().ok_or("the browser has no workers")?;
    let worker = Reflect::construct(class, &Array::of1(address)).map_err(|error| text(&error))?;
    Ok(worker.unchecked_into())
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
