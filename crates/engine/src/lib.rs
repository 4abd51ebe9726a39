//! Request to reply in slices: all that a worker of the page or the command drives.
//!
//! | use | for |
//! |---|---|
//! | [`Worker`] | one lane: requests in, slices of work, replies out |
//! | [`native::run_rival`] | the same worker driven to its end without a page |
//! | [`StudyRun`] | a study of all rivals of a scenario, in slices |
//! | [`log_digest`] | one line that two machines can compare |
//! | [`LogAudit`] | a saved log proved again |
//! | [`explanation`], [`explained`] | what the code of a complaint means, and the codes there are |
//! | [`stated`] | what a decision record repeats of a scenario: each rival as it is written and set as mathematics |
//! | [`prepare`] | the model of a rival, for checks |
//! | [`describe`] | the same in sentences |
//! | [`mps`](fn@mps), [`latex`], [`notation_text`] | a rival handed over to others |
//! | [`stripped`](fn@stripped) | a scenario without names, to be shared |
//!
//! Nothing here reads a clock, and nothing runs long without [`Worker::advance`]. What comes
//! out is the same for every slice size; replies that would only repeat how far the work is are
//! merged until they are taken.

mod assumption;
mod audit;
mod bindings;
mod check;
mod digest;
mod dispatch;
mod explain;
mod family;
mod fault;
mod gather;
mod handover;
mod lane;
mod load;
mod map;
mod mps;
pub mod native;
mod on_record;
mod outbox;
mod plan;
mod readings;
mod stripped;
mod studies;
mod warm;
mod worker;

pub use audit::LogAudit;
pub use digest::log_digest;
pub use explain::{explained, explanation};
pub use handover::{HandOver, Refusal, latex, mps, notation_text, tightened};
pub use load::{describe, prepare};
pub use mps::{looks_like_mps, mps_report};
pub use on_record::stated;
pub use readings::instance_report;
pub use stripped::{Stripped, stripped};
pub use studies::{KINDS, StudyRun, cells, gathered, is_over_all};
pub use worker::Worker;

/// The version of the engine: it stands in saved logs, and beside saved results.
pub const VERSION: &str = env!("CARGO_PKG_VERSION");
