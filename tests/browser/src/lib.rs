//! The built page in Chromium: what a person sees and does there.
//!
//! | module | holds |
//! |---|---|
//! | [`visit`] | one test's browser with the page open, from a file or from the server |
//! | [`browser`] | finding by role and name, typing, waiting, what the console said |
//! | [`screen`] | sizes, light and dark, screenshots |
//! | [`tasks`] | what the page's own thread did, from the browser's trace |
//! | [`worker`] | a worker of the page's own, spoken to in its own messages |
//!
//! The page must have been built (`cargo xtask page --no-serve`); `cargo xtask test --only
//! browser` says what lacks.

mod devtools;
mod driver;
mod memory;
mod server;

pub mod browser;
pub mod screen;
pub mod tasks;
pub mod visit;
pub mod worker;

/// What a step of a test gives: any error fails the test in its own words.
pub type Outcome<T> = Result<T, Box<dyn std::error::Error>>;

/// An error out of a sentence.
pub(crate) fn fault(sentence: impl Into<String>) -> Box<dyn std::error::Error> {
    sentence.into().into()
}
