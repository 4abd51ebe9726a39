//! How much work to ask for at a time.
//!
//! The engine counts its work in ticks (non-zeros touched), the browser wants answers in
//! milliseconds. The pace learns how many ticks pass in a millisecond, and asks for portions short
//! enough that a slice ends in time. It only cuts: results are the same for every pace.

/// Milliseconds after which a slice ends and messages are heard.
pub(crate) const SLICE: f64 = 15.0;
/// Milliseconds that one portion of a slice should take.
const PORTION: f64 = 3.0;
/// Milliseconds between two sendings while work goes on: at most 20 a second.
const BETWEEN_SENDINGS: f64 = 50.0;
/// The smallest portion: below it, asking would cost more than the work.
const FEWEST: f64 = 1_000.0;
/// The largest portion: a millisecond or two on a fast machine, so that a run of portions that
/// ended early cannot make the next full one long.
const MOST: f64 = 2_000_000.0;

/// Portions of work that fit into slices, and when to send.
#[derive(Debug, Clone)]
pub(crate) struct Pace {
    ticks: f64,
    sent: f64,
}

impl Pace {
    /// Starts with a portion that is short on a slow machine.
    pub(crate) fn new() -> Self {
        Self { ticks: 20_000.0, sent: 0.0 }
    }

    /// The ticks to ask for.
    pub(crate) fn ticks(&self) -> u64 {
        self.ticks as u64
    }

    /// Learns from a portion that took this many milliseconds. Grows at most twofold at a time,
    /// because a portion may have ended early, and shrinks at once.
    pub(crate) fn learn(&mut self, milliseconds: f64) {
        let fitting = if milliseconds > 0.0 { self.ticks * (PORTION / milliseconds) } else { MOST };
        self.ticks = larger(smaller(smaller(fitting, 2.0 * self.ticks), MOST), FEWEST);
    }

    /// Whether there is time for another portion in a slice that began and now stands at these
    /// times.
    pub(crate) fn fits(&self, begun: f64, now: f64) -> bool {
        now - begun + PORTION <= SLICE
    }

    /// Whether to send now: at once when the work is over, otherwise seldom enough.
    pub(crate) fn send(&mut self, busy: bool, now: f64) -> bool {
        let due = !busy || now - self.sent >= BETWEEN_SENDINGS;
        if due {
            self.sent = now;
        }
        due
    }
}

fn smaller(a: f64, b: f64) -> f64 {
    if a < b { a } else { b }
}

fn larger(a: f64, b: f64) -> f64 {
    if a > b { a } else { b }
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Runs slices on a machine of the given speed (ticks a millisecond) and returns the length of
    /// the longest one after the first few, in milliseconds.
    fn longest_slice(speed: f64) -> f64 {
        let mut pace = Pace::new();
        let mut now = 0.0;
        let mut longest = 0.0;
        for slice in 0..200 {
            let begun = now;
            loop {
                let took = pace.ticks() as f64 / speed;
                now += took;
                pace.learn(took);
                if !pace.fits(begun, now) {
                    break;
                }
            }
            if slice > 20 && now - begun > longest {
                longest = now - begun;
            }
        }
        longest
    }

    #[test]
    fn slices_end_in_time_on_slow_and_fast_machines() {
        for speed in [1_000.0, 50_000.0, 500_000.0] {
            let longest = longest_slice(speed);
            assert!(longest <= SLICE + 1e-6, "speed {speed}: {longest} ms");
            assert!(longest >= SLICE / 2.0, "speed {speed}: {longest} ms wastes the slice");
        }
    }

    #[test]
    fn a_slow_portion_shrinks_the_next_at_once() {
        let mut pace = Pace::new();
        for _ in 0..10 {
            pace.learn(0.0);
        }
        let before = pace.ticks();
        pace.learn(30.0);
        assert_eq!(pace.ticks(), before / 10);
    }

    #[test]
    fn at_most_twenty_sendings_a_second_while_busy_and_one_at_the_end() {
        let mut pace = Pace::new();
        let sendings = (1..=1_000).filter(|&now| pace.send(true, f64::from(now))).count();
        assert_eq!(sendings, 20);
        assert!(pace.send(false, 1_001.0));
    }
}
