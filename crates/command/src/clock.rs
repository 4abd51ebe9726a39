//! The clock: it measures, and it stops a rival whose time is over. It steers nothing.

#![expect(clippy::disallowed_types, reason = "the one place of the native command with a clock")]

use std::time::{Duration, Instant};

/// Time since it was made.
#[derive(Debug, Clone, Copy)]
pub(crate) struct Clock(Instant);

impl Clock {
    /// A clock that starts now.
    pub(crate) fn start() -> Self {
        Self(Instant::now())
    }

    /// Milliseconds since the start.
    pub(crate) fn milliseconds(&self) -> f64 {
        self.0.elapsed().as_secs_f64() * 1_000.0
    }

    /// The time that is left of so many seconds; `None` when 0, which is no limit.
    pub(crate) fn left(&self, seconds: f64) -> Option<Duration> {
        let all = Duration::try_from_secs_f64(seconds).unwrap_or(Duration::MAX);
        (seconds > 0.0).then(|| all.saturating_sub(self.0.elapsed()))
    }

    /// Whether more than so many seconds have passed; 0 is no limit.
    pub(crate) fn is_over(&self, seconds: f64) -> bool {
        seconds > 0.0
            && self.0.elapsed() >= Duration::try_from_secs_f64(seconds).unwrap_or(Duration::MAX)
    }
}
