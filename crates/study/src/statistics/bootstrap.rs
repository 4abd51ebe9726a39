//! The bootstrap (Efron 1979, Annals of Statistics 7): percentile intervals by resampling.

use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;

use super::count;

/// Resamples drawn.
const DRAWS: usize = 2_000;

/// The values of a statistic over resamples of groups: a group is drawn with all of its members,
/// for instances of one source are not independent.
pub(crate) fn resampled<T>(
    groups: &[Vec<T>],
    seed: u64,
    statistic: impl Fn(&[&T]) -> Option<f64>,
) -> Vec<f64> {
    if groups.is_empty() {
        return Vec::new();
    }
    let mut random = Pcg32::seed_from_u64(seed);
    let mut below = |bound: usize| {
        let wide = u64::from(random.next_u32()) * u64::try_from(bound).unwrap_or(u64::MAX);
        usize::try_from(wide >> 32).unwrap_or(0)
    };
    let mut values = Vec::with_capacity(DRAWS);
    let mut drawn: Vec<&T> = Vec::new();
    for _ in 0..DRAWS {
        drawn.clear();
        for _ in 0..groups.len() {
            drawn.extend(&groups[below(groups.len())]);
        }
        values.extend(statistic(&drawn));
    }
    values
}

/// The middle 95 % of values; `None` where there are none.
pub(crate) fn interval(mut values: Vec<f64>) -> Option<(f64, f64)> {
    values.sort_by(f64::total_cmp);
    let last = values.len().checked_sub(1)?;
    let at = |share: f64| {
        let place = libm::round(share * count(last));
        (0..=last).rev().find(|&index| count(index) <= place).unwrap_or(0)
    };
    Some((values[at(0.025)], values[at(0.975)]))
}

#[cfg(test)]
mod tests {
    use super::*;

    fn mean(values: &[&f64]) -> Option<f64> {
        Some(values.iter().copied().sum::<f64>() / count(values.len()))
    }

    /// The normal approximation of a mean's interval: ± 1.96 σ/√n, here σ = √(1/12), n = 400.
    #[test]
    fn the_interval_of_a_mean_is_that_of_the_normal_law() {
        let groups: Vec<Vec<f64>> = (0..400_u32).map(|i| vec![f64::from(i) / 400.0]).collect();
        let (low, high) = interval(resampled(&groups, 1, mean)).unwrap_or_default();
        let half = 1.96 * libm::sqrt(1.0 / 12.0 / 400.0);
        let middle = 0.5 - 1.0 / 800.0;
        assert!((low - (middle - half)).abs() < 0.004 && (high - (middle + half)).abs() < 0.004);
    }

    #[test]
    fn members_of_a_group_are_drawn_together() {
        let groups = vec![vec![0.0; 50], vec![1.0; 50]];
        let values = resampled(&groups, 3, mean);
        assert!(values.iter().all(|value| [0.0, 0.5, 1.0].contains(value)));
        assert_eq!(interval(values), Some((0.0, 1.0)));
        assert_eq!(interval(Vec::new()), None);
    }
}
