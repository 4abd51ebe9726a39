//! The second LP code as its own wasm module: a relaxation in, an opinion out, both as the
//! postcard bytes of `record::wire`.
//!
//! It does not work in slices: a worker of its own waits for it, and is ended by whoever does not
//! want to wait any longer.

use wasm_bindgen::prelude::wasm_bindgen;

/// The opinion on a relaxation.
#[wasm_bindgen]
#[must_use]
pub fn answer(relaxation: &[u8]) -> Vec<u8> {
    opinion::answer(relaxation)
}
