//! Medians, ratios with their bootstrap interval, and the exponent of a power law.
//!
//! Source: Efron, Tibshirani, An Introduction to the Bootstrap (1993), percentile interval.

use crate::random::Random;

const RESAMPLES: usize = 1000;

/// The middle of some numbers; the mean of the two middle ones when their count is even.
pub(crate) fn median(values: &[f64]) -> f64 {
    let mut sorted = values.to_vec();
    sorted.sort_by(f64::total_cmp);
    let middle = sorted.len() / 2;
    if sorted.len() % 2 == 1 {
        sorted[middle]
    } else {
        f64::midpoint(sorted[middle - 1], sorted[middle])
    }
}

/// The samples of two on the same problem.
pub(crate) type Pair<'a> = (&'a [f64], &'a [f64]);

/// A geometric mean of ratios with its 95 % interval.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Ratio {
    pub(crate) mean: f64,
    pub(crate) low: f64,
    pub(crate) high: f64,
}

/// The geometric mean over problems of the ratio of medians; the interval comes from drawing the
/// samples of every problem anew.
pub(crate) fn ratio(pairs: &[Pair]) -> Ratio {
    let mut random = Random::new(1);
    let mut means: Vec<f64> = (0..RESAMPLES)
        .map(|_| {
            let drawn = pairs.iter().map(|(a, b)| (draw(a, &mut random), draw(b, &mut random)));
            geometric_mean(drawn.map(|(a, b)| median(&a) / median(&b)))
        })
        .collect();
    means.sort_by(f64::total_cmp);
    let mean = geometric_mean(pairs.iter().map(|(a, b)| median(a) / median(b)));
    Ratio { mean, low: means[RESAMPLES / 40], high: means[RESAMPLES - 1 - RESAMPLES / 40] }
}

/// As many as there are, with replacement.
fn draw(values: &[f64], random: &mut Random) -> Vec<f64> {
    let last = values.len() as i64 - 1;
    values.iter().map(|_| values[random.integer(0, last) as usize]).collect()
}

/// The geometric mean of positive numbers.
pub(crate) fn geometric_mean(values: impl Iterator<Item = f64>) -> f64 {
    let (mut sum, mut count) = (0.0, 0.0);
    for value in values {
        sum += libm::log(value);
        count += 1.0;
    }
    libm::exp(sum / count)
}

/// The exponent e of time ∝ sizeᵉ by least squares of the logarithms.
pub(crate) fn exponent(points: &[(f64, f64)]) -> f64 {
    let logs: Vec<(f64, f64)> =
        points.iter().map(|&(size, time)| (libm::log(size), libm::log(time))).collect();
    let count = logs.len() as f64;
    let (x, y) = (
        logs.iter().map(|point| point.0).sum::<f64>() / count,
        logs.iter().map(|point| point.1).sum::<f64>() / count,
    );
    let above: f64 = logs.iter().map(|point| (point.0 - x) * (point.1 - y)).sum();
    let below: f64 = logs.iter().map(|point| (point.0 - x) * (point.0 - x)).sum();
    above / below
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn medians() {
        assert_eq!(median(&[3.0, 1.0, 2.0]), 2.0);
        assert_eq!(median(&[4.0, 1.0, 2.0, 3.0]), 2.5);
    }

    #[test]
    fn the_ratio_of_a_constant_factor_has_no_spread() {
        let found = ratio(&[(&[2.0, 2.0, 2.0], &[1.0, 1.0]), (&[6.0], &[3.0])]);
        assert!((found.mean - 2.0).abs() < 1e-12);
        assert!((found.low - 2.0).abs() < 1e-12 && (found.high - 2.0).abs() < 1e-12);
    }

    #[test]
    fn the_exponent_of_a_power_is_found() {
        let points: Vec<(f64, f64)> =
            [1.0, 2.0, 5.0].iter().map(|&s: &f64| (s, 3.0 * s * s)).collect();
        assert!((exponent(&points) - 2.0).abs() < 1e-12);
    }
}
