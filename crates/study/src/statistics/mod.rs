//! Statistics of paired runs. Every function is deterministic; what is drawn is drawn by a seed.

mod bootstrap;
mod fit;
mod sign;

pub(crate) use bootstrap::{interval, resampled};
pub(crate) use fit::{Line, line};
pub(crate) use sign::{holm, sign_test};

/// Shifted geometric mean: exp(mean(ln(v + shift))) − shift (common practice in computational
/// studies; the shift keeps small values from counting too much). 0 for no values.
pub(crate) fn shifted_geometric_mean(values: &[f64], shift: f64) -> f64 {
    if values.is_empty() {
        return 0.0;
    }
    let sum: f64 = values.iter().map(|value| libm::log(value + shift)).sum();
    libm::exp(sum / count(values.len())) - shift
}

/// A length as a number.
pub(crate) fn count(length: usize) -> f64 {
    f64::from(u32::try_from(length).unwrap_or(u32::MAX))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_shift_keeps_small_values_small() {
        let mean = shifted_geometric_mean(&[1.0, 100.0], 0.0);
        assert!((mean - 10.0).abs() < 1e-12);
        // √(11 · 110) − 10
        let shifted = shifted_geometric_mean(&[1.0, 100.0], 10.0);
        assert!((shifted - (libm::sqrt(1210.0) - 10.0)).abs() < 1e-12, "{shifted}");
    }
}
