//! CPU time of this thread.

use std::cell::Cell;

use rustix::time::{ClockId, clock_gettime};

thread_local! {
    static STANDS: Cell<bool> = const { Cell::new(false) };
}

/// Lets the clock stand at zero: under valgrind the system's page that it is read from is missing.
pub(crate) fn stop() {
    STANDS.set(true);
}

/// Seconds of CPU time that this thread has used.
pub(crate) fn now() -> f64 {
    if STANDS.get() {
        return 0.0;
    }
    let time = clock_gettime(ClockId::ThreadCPUTime);
    time.tv_sec as f64 + time.tv_nsec as f64 * 1e-9
}

/// What `act` gives, and the CPU time it took in seconds.
pub(crate) fn timed<T>(act: impl FnOnce() -> T) -> (T, f64) {
    let begun = now();
    let result = act();
    (result, now() - begun)
}
