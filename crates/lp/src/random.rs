//! Fixed pseudo-random numbers by index, for perturbations: the same in every run.
//!
//! Source: the finaliser of splitmix64 (Steele, Lea, Flood 2014).

/// A number in [1/2, 1) that depends on the index only.
pub(crate) fn half_to_one(index: usize) -> f64 {
    let mut z = (index as u64).wrapping_add(1).wrapping_mul(0x9E37_79B9_7F4A_7C15);
    z = (z ^ (z >> 30)).wrapping_mul(0xBF58_476D_1CE4_E5B9);
    z = (z ^ (z >> 27)).wrapping_mul(0x94D0_49BB_1331_11EB);
    z ^= z >> 31;
    0.5 + 0.5 * ((z >> 11) as f64 / (1u64 << 53) as f64)
}

/// The index whose number stands for this one's on a detour: other numbers on each.
pub(crate) fn detoured(index: usize, detour: u32) -> usize {
    index.wrapping_add((detour as usize) << 24)
}

#[cfg(test)]
mod tests {
    use super::half_to_one;

    #[test]
    fn numbers_are_in_range_and_differ() {
        let all: Vec<f64> = (0..1000).map(half_to_one).collect();
        assert!(all.iter().all(|v| (0.5..1.0).contains(v)));
        assert!(all.windows(2).all(|pair| pair[0] != pair[1]));
    }
}
