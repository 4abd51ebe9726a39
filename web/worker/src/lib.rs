//! The engine as its own wasm module, without a document.
//!
//! The page's workers drive it through [`Host`]: requests in, slices of work, replies out, all as
//! postcard bytes. The clock is read here alone, and only to end a slice in time and to send
//! seldom enough; what is computed never depends on it.

mod memory;
mod pace;

use std::collections::VecDeque;

use memory::Memory;
use pace::Pace;
use wasm_bindgen::prelude::wasm_bindgen;

#[wasm_bindgen]
extern "C" {
    #[wasm_bindgen(js_namespace = performance)]
    fn now() -> f64;

    #[wasm_bindgen(js_name = postMessage)]
    fn post_text(text: &str);
}

/// One worker: the engine, its pace, and replies not yet sent.
#[wasm_bindgen]
#[derive(Debug)]
pub struct Host {
    worker: engine::Worker,
    pace: Pace,
    memory: Memory,
    outbox: VecDeque<Vec<u8>>,
}

#[wasm_bindgen]
impl Host {
    /// A worker without a job. A panic from now on is told to the page as text.
    #[wasm_bindgen(constructor)]
    pub fn new() -> Host {
        std::panic::set_hook(Box::new(|panic| post_text(&panic.to_string())));
        Host {
            worker: engine::Worker::new(),
            pace: Pace::new(),
            memory: Memory::default(),
            outbox: VecDeque::new(),
        }
    }

    /// Takes a request, as postcard bytes of `record::message::Request`.
    pub fn receive(&mut self, request: &[u8]) {
        self.worker.handle_bytes(request);
    }

    /// Works for one slice, about 15 milliseconds. True while there is more to do.
    pub fn slice(&mut self) -> bool {
        let begun = now();
        loop {
            let before = now();
            let busy = self.worker.advance(self.pace.ticks());
            let after = now();
            self.pace.learn(after - before);
            if !busy || !self.pace.fits(begun, after) {
                if let Some(word) = self.memory.look(memory::taken()) {
                    self.worker.tell_memory(word.bytes, memory::MOST, word.full);
                }
                if self.pace.send(busy, after) {
                    self.outbox.extend(self.worker.take_bytes());
                }
                return busy;
            }
        }
    }

    /// The next reply to send, as postcard bytes of `record::message::Envelope`.
    pub fn take(&mut self) -> Option<Vec<u8>> {
        self.outbox.pop_front()
    }
}

impl Default for Host {
    fn default() -> Self {
        Self::new()
    }
}

/// The digest of the log of a scenario's rival, run in slices of the given number of ticks: the
/// same text natively and here, for every slice. For the check that the shipped module computes
/// what the native engine computes.
#[wasm_bindgen]
pub fn digest(scenario: &str, rival: u32, slice: u32) -> Result<String, String> {
    engine::log_digest(scenario, rival as usize, u64::from(slice))
        .map_err(|error| error.to_string())
}
