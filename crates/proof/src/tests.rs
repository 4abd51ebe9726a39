//! Tests through the public face.

mod by_hand;
mod certified;
mod vertices;
mod words;
