//! A worker started beside the page's own, as the page starts them, and spoken to in its messages.

use record::message::{Envelope, Request};
use record::wire::{read_envelope, write_request};
use serde_json::{Value, json};

use crate::browser::Browser;
use crate::{Outcome, fault};

const ASK: &str = "
    const [requests, done] = [arguments[0], arguments[arguments.length - 1]];
    const worker = hullward.startWorker('engine');
    const end = (answer) => { worker.terminate(); done(answer); };
    worker.onerror = (event) => end(`error: ${event.message}`);
    worker.onmessage = ({ data }) => end(typeof data === 'string' ? data : Array.from(data));
    for (const bytes of requests) worker.postMessage(new Uint8Array(bytes));
";

impl Browser {
    /// Sends a request to a fresh worker and returns its first reply.
    ///
    /// # Errors
    /// What the worker says when it fails.
    pub async fn ask_worker(&self, request: &Request) -> Outcome<Envelope> {
        let bytes = write_request(request)?;
        let answer = self.script_async(ASK, vec![json!([bytes])]).await?;
        let Value::Array(numbers) = answer else {
            return Err(fault(format!("the worker failed: {answer}")));
        };
        let bytes: Option<Vec<u8>> = numbers
            .iter()
            .map(|number| number.as_u64().and_then(|number| u8::try_from(number).ok()))
            .collect();
        Ok(read_envelope(&bytes.ok_or_else(|| fault("the worker sent no bytes"))?)?)
    }
}
