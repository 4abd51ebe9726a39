//! The relaxation.

use model::{Number, nearest_f64};
use record::results::{Proof, RootReport, Status};

use super::{finite, status, tidy};

/// The report of a solved root.
pub(crate) fn root_report(root: &tree::RootResult) -> RootReport {
    let found = if root.checked_bound.is_some() {
        proved(root.bound, root.checked_bound.as_ref(), root.exact)
    } else if root.checked {
        (Proof::Exact, None)
    } else {
        (Proof::None, None)
    };
    let (proof, checked_within) = found;
    RootReport {
        status: status(root.status),
        bound: root.bound.and_then(finite),
        checked: root.checked,
        checked_bound: root.checked_bound.as_ref().map(ToString::to_string),
        proof,
        checked_within,
        second_opinion: None,
        iterations: root.iterations,
        fractional: root.fractional,
        rounds: root.rounds,
        added: root.added.iter().sum(),
        added_by_family: root.added.clone(),
        ray: root.ray.iter().map(|(row, y)| (row.clone(), tidy(*y))).collect(),
        stopped: root.stopped.clone(),
    }
}

/// What a proved bound says of the value that was found, and by how much they differ, rounded up.
pub(crate) fn proved(
    value: Option<f64>,
    proved: Option<&Number>,
    exact: bool,
) -> (Proof, Option<f64>) {
    let Some(proved) = proved else { return (Proof::None, None) };
    if exact {
        return (Proof::Exact, None);
    }
    let away = value.and_then(|value| Number::try_from(value).ok()).map(|value| {
        let away = if value < *proved { proved - value } else { value - proved };
        if away.is_zero() { 0.0 } else { nearest_f64(&away).next_up() }
    });
    (Proof::Within, away)
}

/// The report of a root that was stopped before it was solved.
pub(crate) fn stopped_root(why: &str) -> RootReport {
    RootReport { status: Status::Limit, stopped: Some(why.to_owned()), ..RootReport::default() }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn how_far_a_proved_bound_is_from_the_value_found() {
        let third = Number::ONE / Number::from(3);
        assert_eq!(proved(Some(1.0 / 3.0), None, false), (Proof::None, None));
        assert_eq!(proved(Some(1.0 / 3.0), Some(&third), true), (Proof::Exact, None));
        let (proof, within) = proved(Some(1.0 / 3.0), Some(&third), false);
        let within = within.unwrap();
        assert!(proof == Proof::Within && within > 0.0 && within < 1e-16, "{within}");
        for found in [0.25, 0.75] {
            let half = Number::ONE / Number::from(2);
            let away = proved(Some(found), Some(&half), false).1.unwrap();
            assert!((0.25..0.250_000_1).contains(&away), "never less than it is: {away}");
        }
        assert_eq!(proved(Some(0.5), Number::try_from(0.5).ok().as_ref(), false).1, Some(0.0));
    }
}
