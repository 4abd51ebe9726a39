//! The built page in Chromium. One browser a test, one test at a time.

#[path = "page/opening.rs"]
mod opening;
