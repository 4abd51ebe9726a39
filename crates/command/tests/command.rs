//! The built command as a user calls it.

#![allow(clippy::expect_used, reason = "the helpers of these tests fail loudly")]
#![allow(clippy::print_stderr, clippy::panic, reason = "a test says what it passed over")]

#[path = "command/batch.rs"]
mod batch;
#[path = "command/calls.rs"]
mod calls;
#[path = "command/codes.rs"]
mod codes;
#[path = "command/explanations.rs"]
mod explanations;
#[path = "command/exports.rs"]
mod exports;
#[path = "command/families.rs"]
mod families;
#[path = "command/launch.rs"]
mod launch;
#[path = "command/production.rs"]
mod production;
#[path = "command/prove.rs"]
mod prove;
#[path = "command/read.rs"]
mod read;
#[path = "command/studies.rs"]
mod studies;
#[path = "command/write.rs"]
mod write;
