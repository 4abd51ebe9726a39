//! Jobs whose answer is one piece: a study, and a log.

use serde::{Deserialize, Serialize};

use super::RunNumber;

/// What a log that is handed over says of itself.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct LogJob {
    /// The text of the scenario that gives the same log.
    pub scenario: String,
    /// The instance, by place.
    pub instance: u32,
    /// The rival, by place.
    pub rival: u32,
}

/// A study to make.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct StudyJob {
    /// The run that replies carry.
    pub run: RunNumber,
    /// The text of a scenario whose first study is made.
    pub scenario: String,
    /// The instance, by place.
    pub instance: u32,
}
