//! Seeded pseudo-random numbers for the tests.
//!
//! Source: splitmix64 (Steele, Lea, Flood 2014).

/// A generator with its state.
pub(crate) struct Random(u64);

impl Random {
    /// A generator; equal seeds give equal numbers.
    pub(crate) fn new(seed: u64) -> Self {
        Self(seed.wrapping_mul(0x9E37_79B9_7F4A_7C15) ^ 0xD1B5_4A32_D192_ED03)
    }

    /// The next 64 bits.
    pub(crate) fn next(&mut self) -> u64 {
        self.0 = self.0.wrapping_add(0x9E37_79B9_7F4A_7C15);
        let mut z = self.0;
        z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
        z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
        z ^ (z >> 31)
    }

    /// A number in [0, 1).
    pub(crate) fn unit(&mut self) -> f64 {
        (self.next() >> 11) as f64 / (1u64 << 53) as f64
    }

    /// An integer from `low` to `high`, both possible.
    pub(crate) fn integer(&mut self, low: i64, high: i64) -> i64 {
        low + (self.next() % (high - low + 1) as u64) as i64
    }

    /// The same as a float.
    pub(crate) fn whole(&mut self, low: i64, high: i64) -> f64 {
        self.integer(low, high) as f64
    }

    /// True once in `n`.
    pub(crate) fn one_in(&mut self, n: u64) -> bool {
        self.next().is_multiple_of(n)
    }
}
