//! The sign test, and Holm's correction for several tests.

/// Two-sided p of the sign test (Arbuthnott 1710; Dixon, Mood 1946, Journal of the American
/// Statistical Association 41): under no difference wins are binomial with ½; ties are left out.
/// `O(wins + losses)`.
pub(crate) fn sign_test(wins: u32, losses: u32) -> f64 {
    let (trials, few) = (wins + losses, wins.min(losses));
    if trials == 0 {
        return 1.0;
    }
    // ln C(n, k) step by step, so that nothing overflows.
    let half = f64::from(trials) * libm::log(0.5);
    let (mut log_choose, mut tail) = (0.0, libm::exp(half));
    for k in 1..=few {
        log_choose += libm::log(f64::from(trials - k + 1)) - libm::log(f64::from(k));
        tail += libm::exp(log_choose + half);
    }
    let p = 2.0 * tail;
    if p > 1.0 { 1.0 } else { p }
}

/// Holm's step-down correction (Holm 1979, Scandinavian Journal of Statistics 6): the i-th
/// smallest of m values is multiplied by m − i + 1, none below the one before it.
pub(crate) fn holm(values: &[f64]) -> Vec<f64> {
    let mut order: Vec<usize> = (0..values.len()).collect();
    order.sort_by(|&a, &b| values[a].total_cmp(&values[b]).then(a.cmp(&b)));
    let (mut adjusted, mut least) = (vec![0.0; values.len()], 0.0);
    for (rank, &place) in order.iter().enumerate() {
        let value = values[place] * super::count(values.len() - rank);
        if value > least {
            least = value;
        }
        adjusted[place] = if least > 1.0 { 1.0 } else { least };
    }
    adjusted
}

#[cfg(test)]
mod tests {
    use super::*;

    /// Exact binomial tails, worked out by hand: 2·(1 + 10)/2¹⁰ and so on.
    #[test]
    fn the_sign_test_is_the_binomial_tail() {
        for (wins, losses, expected) in [
            (9, 1, 2.0 * 11.0 / 1024.0),
            (1, 9, 2.0 * 11.0 / 1024.0),
            (5, 5, 1.0),
            (8, 0, 2.0 / 256.0),
            (0, 0, 1.0),
        ] {
            let p = sign_test(wins, losses);
            assert!((p - expected).abs() < 1e-12, "{wins} {losses}: {p}");
        }
        assert!(sign_test(4_000, 1_000) < 1e-100);
    }

    /// The procedure on four values, by its definition: 0.01·4, 0.02·3, 0.03·2, 0.04·1, made to rise.
    #[test]
    fn holm_steps_down() {
        let adjusted = holm(&[0.03, 0.01, 0.04, 0.02]);
        for (value, expected) in adjusted.iter().zip([0.06, 0.04, 0.06, 0.06]) {
            assert!((value - expected).abs() < 1e-12, "{adjusted:?}");
        }
        assert_eq!(holm(&[0.9, 0.8]), [1.0, 1.0]);
    }
}
