//! How careful a solve is, attempt by attempt.
//!
//! The first attempt is the fast one. When its outcome does not pass the check, solves are refined
//! and smaller entries count; then the solve begins again from the slack basis and keeps away from
//! small pivots, with tighter and with the usual tolerances, then with looser ones. All of these may
//! come to the same bad basis, for they go the same way. The last attempts go others: from a slack
//! basis with columns at either bound and with costs that chance has changed, at first; some with
//! rows of some width.

/// The settings of an attempt.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(crate) struct Care {
    /// Threshold pivoting: a pivot is at least this share of the largest entry of its row.
    pub(crate) threshold: f64,
    /// Pivots of the factorisation below this make the basis singular; absolute.
    pub(crate) singular: f64,
    /// Smallest pivot taken with fresh factors; relative to the largest entry of its column, and to
    /// 1 where that is larger.
    pub(crate) pivot: f64,
    /// Entries below this take no part in a ratio test; relative to the largest of them, and to 1
    /// where that is larger.
    pub(crate) entry: f64,
    /// Factor on the tolerances of feasibility.
    pub(crate) room: f64,
    /// Whether solves are refined.
    pub(crate) refines: bool,
    /// Whether the sides of the rows are moved apart by half of what a row may be violated by, which
    /// makes rows that hold up to rounding only, or repeat each other so, a region with an inside.
    pub(crate) widens: bool,
    /// Which other way is gone from the slack basis; 0 for none.
    pub(crate) detour: u32,
}

/// The first attempt.
const FAST: Care = Care {
    threshold: 0.1,
    singular: 1e-12,
    pivot: 1e-11,
    entry: 1e-9,
    room: 1.0,
    refines: false,
    widens: false,
    detour: 0,
};

/// The attempts from the slack basis.
const WARY: Care = Care { threshold: 0.5, singular: 1e-9, pivot: 1e-7, refines: true, ..FAST };

/// Pivots near the largest alone.
const CHOOSY: Care = Care { threshold: 0.9, entry: 1e-8, ..WARY };

/// The same with rows of some width.
const WIDE: Care = Care { widens: true, ..CHOOSY };

/// Small entries may be pivots: what they keep from being without bounds is small beside the rest of
/// a column alone.
const DARING: Care = Care { threshold: 0.3, entry: 1e-12, refines: true, ..FAST };

/// The attempts in turn. Two have tight tolerances, for points that are feasible within the usual
/// ones and are not once they are put within their bounds: large coefficients multiply the
/// difference.
pub(crate) const ATTEMPTS: [Care; 14] = [
    FAST,
    Care { threshold: 0.3, entry: 1e-12, refines: true, ..FAST },
    Care { threshold: 0.3, entry: 1e-12, room: 1e-3, refines: true, ..FAST },
    Care { room: 1e-3, ..WARY },
    CHOOSY,
    Care { room: 100.0, ..CHOOSY },
    Care { detour: 1, ..WIDE },
    Care { detour: 2, ..CHOOSY },
    Care { detour: 3, room: 1e-3, ..WIDE },
    Care { detour: 4, ..DARING },
    Care { detour: 5, widens: true, ..DARING },
    Care { detour: 6, room: 1e-3, ..DARING },
    Care { detour: 7, room: 100.0, ..DARING },
    Care { detour: 8, room: 100.0, ..WIDE },
];

/// The attempt that begins from the slack basis and goes no detour.
const FROM_SLACK: usize = 3;

/// Whether an attempt begins from the slack basis.
pub(crate) fn begins_from_slack(attempt: usize) -> bool {
    attempt == FROM_SLACK || ATTEMPTS[attempt].detour > 0
}

impl Care {
    /// The smallest entry of a ratio test when this is the largest.
    pub(crate) fn least_entry(&self, largest: f64) -> f64 {
        if largest < 1.0 { self.entry * largest } else { self.entry }
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::problem::{Col, Problem};
    use crate::simplex::{Limits, Simplex};

    /// A careful attempt once left its settings behind: what was asked of the solver afterwards then
    /// rested on other factors than the same question to a solver that had had no trouble.
    #[test]
    fn what_follows_a_careful_attempt_starts_from_the_first_ones_settings() {
        let mut problem = Problem::new();
        let columns: Vec<Col> =
            (0..5).map(|j| problem.add_column(f64::from(j % 3) - 2.0, 0.0, 9.0).unwrap()).collect();
        for i in 0..4 {
            let entry = |&j: &Col| (j, 1.0 + f64::from((3 * i + 5 * j.0 + i * j.0) % 11));
            let row: Vec<(Col, f64)> = columns.iter().map(entry).collect();
            problem.add_row(&row, f64::NEG_INFINITY, 20.0 + f64::from(i)).unwrap();
        }
        let mut smooth = Simplex::new(problem);
        smooth.solve(Limits::default());
        let mut careful = smooth.clone();
        careful.core.care = ATTEMPTS[5];
        careful.core.canonical = false;
        let (mut bound, mut estimate) = (careful.clone(), careful.clone());
        let mut set_aside = careful.clone();
        let bits = |value: Option<f64>| value.map(f64::to_bits);
        assert_eq!(bits(bound.dual_bound()), bits(smooth.dual_bound()));
        assert_eq!(bits(estimate.condition_estimate()), bits(smooth.condition_estimate()));
        set_aside.checkpoint();
        careful.load_basis(&smooth.basis());
        for simplex in [&bound, &estimate, &set_aside, &careful] {
            assert_eq!(simplex.core.care, FAST);
        }
        careful.set_bounds(Col(0), 0.0, 1.0);
        smooth.set_bounds(Col(0), 0.0, 1.0);
        let outcome = careful.solve(Limits::default()).clone();
        assert_eq!(&outcome, smooth.solve(Limits::default()));
    }
}
