//! The protocol: everyone in a random interleaved order, loops long enough, and an end in sight.

use crate::random::Random;

/// How much is measured.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Effort {
    /// Samples of each.
    pub(crate) samples: usize,
    /// CPU seconds that one who is slow may use on a problem; at least three samples are taken.
    pub(crate) most_seconds: f64,
}

impl Effort {
    pub(crate) const FULL: Self = Self { samples: 15, most_seconds: 20.0 };
    pub(crate) const QUICK: Self = Self { samples: 5, most_seconds: 3.0 };
}

/// The least length of a sample in CPU seconds.
const LOOP: f64 = 0.05;

/// The most solves in a sample.
const MOST_SOLVES: f64 = 300.0;

/// Solves that fill a sample, from the time of one.
pub(crate) fn solves(seconds: f64) -> usize {
    let count = (LOOP / seconds).ceil();
    if count > MOST_SOLVES { MOST_SOLVES as usize } else { count as usize }
}

/// Calls `act` with the numbers 0 to `count` − 1, in rounds of a random order, and collects the
/// seconds that it says each took; `act` also says what to charge for it.
pub(crate) fn interleaved(
    count: usize,
    effort: Effort,
    random: &mut Random,
    mut act: impl FnMut(usize) -> (f64, f64),
) -> Vec<Vec<f64>> {
    let mut samples = vec![Vec::new(); count];
    let mut used = vec![0.0; count];
    for _ in 0..effort.samples {
        let mut order: Vec<usize> = (0..count).collect();
        for k in (1..count).rev() {
            order.swap(k, random.integer(0, k as i64) as usize);
        }
        for who in order {
            if used[who] < effort.most_seconds || samples[who].len() < 3 {
                let (seconds, charge) = act(who);
                samples[who].push(seconds);
                used[who] += charge;
            }
        }
    }
    samples
}
