//! CPU time of this thread.

use rustix::time::{ClockId, clock_gettime};

/// Seconds of CPU time that this thread has used.
pub(crate) fn now() -> f64 {
    let time = clock_gettime(ClockId::ThreadCPUTime);
    time.tv_sec as f64 + time.tv_nsec as f64 * 1e-9
}

/// What `act` gives, and the CPU time it took in seconds.
pub(crate) fn timed<T>(act: impl FnOnce() -> T) -> (T, f64) {
    let begun = now();
    let result = act();
    (result, now() - begun)
}
