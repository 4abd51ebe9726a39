//! The relaxation.

use record::results::{RootReport, Status};

use super::{finite, status, tidy};

/// The report of a solved root.
pub(crate) fn root_report(root: &tree::RootResult) -> RootReport {
    RootReport {
        status: status(root.status),
        bound: root.bound.and_then(finite),
        checked: root.checked,
        checked_bound: root.checked_bound.as_ref().map(ToString::to_string),
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

/// The report of a root that was stopped before it was solved.
pub(crate) fn stopped_root(why: &str) -> RootReport {
    RootReport {
        status: Status::Limit,
        bound: None,
        checked: false,
        checked_bound: None,
        second_opinion: None,
        iterations: 0,
        fractional: 0,
        rounds: 0,
        added: 0,
        added_by_family: Vec::new(),
        ray: Vec::new(),
        stopped: Some(why.to_owned()),
    }
}
