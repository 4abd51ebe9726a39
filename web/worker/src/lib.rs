//! The engine as its own wasm module, without a document.
