//! Timers of the scenario's seconds.

use gloo_timers::callback::Timeout;

/// The longest time, in milliseconds, that a browser's timer can be set to: it takes a longer
/// one for none and goes off at once (HTML, section "Timers": a signed number of 32 bits).
const LONGEST: f64 = 2_147_483_647.0;

/// A timer that goes off after the scenario's limit of seconds; `None` where that is no limit,
/// or more than the 24 days that a browser can wait.
pub(crate) fn after(seconds: f64, then: impl FnOnce() + 'static) -> Option<Timeout> {
    milliseconds(seconds).map(|milliseconds| Timeout::new(milliseconds, then))
}

fn milliseconds(seconds: f64) -> Option<u32> {
    let milliseconds = seconds * 1000.0;
    (seconds > 0.0 && milliseconds <= LONGEST).then_some(milliseconds as u32)
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_limit_beyond_a_browsers_timer_is_none_and_does_not_end_the_search_at_once() {
        assert_eq!(milliseconds(0.0), None);
        assert_eq!(milliseconds(1.5), Some(1500));
        assert_eq!(milliseconds(2_000_000.0), Some(2_000_000_000));
        assert_eq!(milliseconds(2_200_000.0), None);
        assert_eq!(milliseconds(1e308), None);
        assert_eq!(milliseconds(f64::NAN), None);
    }
}
