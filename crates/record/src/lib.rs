//! Every type that is saved or sent: the scenario file, the log of a search, the messages
//! between page and workers, the results of the command. The only crate with serde derives.
//!
//! | module | holds |
//! |---|---|
//! | [`scenario`] | the scenario file (version 1) |
//! | [`event`] | what a search reports as it goes, and the log (version 1) |
//! | [`message`] | [`message::Request`] and [`message::Reply`], sent as postcard |
//! | [`results`] | the JSON objects of `hullward run --json` |
//!
//! The scenario, the link and the log are versioned and open for ever; the messages are not
//! promised. No value holds a NaN, and zeros are +0.

pub mod event;
pub mod message;
pub mod results;
pub mod scenario;
