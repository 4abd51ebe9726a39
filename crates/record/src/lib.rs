//! Every type that is saved or sent: the scenario file, the log of a search, the messages
//! between page and workers, the results of the command. The only crate with serde derives.
//!
//! | module | holds |
//! |---|---|
//! | [`scenario`] | what a scenario holds (version 1) |
//! | [`mod@file`] | the scenario file: TOML text to scenario and back, each complaint with its place |
//! | [`link`] | the link: a scenario text in the fragment of an address |
//! | [`event`] | what a search reports as it goes |
//! | [`log`] | the saved log (versions 1 to 3) and its digest |
//! | [`derivation`] | general cuts of a log with how each follows |
//! | [`ground`] | what a log rests on, so that it can be proved again |
//! | [`message`] | [`message::Request`] and [`message::Reply`] |
//! | [`opinion`] | the relaxation that a second LP code is asked about, and its answer |
//! | [`typeset`] | a formulation set as mathematics |
//! | [`handover`] | a rival handed over to others |
//! | [`pack`] | a scenario with what its rivals gave, to be held to |
//! | [`wire`] | messages as bytes |
//! | [`results`] | the JSON objects of `hullward run --json`, and their digest |
//! | [`study`] | what studies find |
//! | [`place`] | byte spans to line, column and UTF-16 units |
//! | [`hash`] | a small stable hash |
//!
//! The scenario, the link and the log are versioned and open for ever; the messages are not
//! promised. No value holds a NaN, and zeros are +0.

pub mod derivation;
pub mod event;
pub mod file;
pub mod ground;
pub mod handover;
pub mod hash;
mod kept;
pub mod link;
pub mod log;
pub mod message;
pub mod opinion;
pub mod pack;
pub mod place;
pub mod results;
pub mod scenario;
pub mod study;
pub mod typeset;
pub mod wire;
