//! From the types of the other crates to those that are saved and sent; one idea a file.
//!
//! Zeros are +0 and nothing is NaN on the way out.

mod act;
mod catalogue;
mod complaint;
mod derivation;
mod drawing;
mod event;
mod ground;
mod guide;
mod instance;
mod measures;
mod model;
mod node;
mod relaxation;
mod root;
mod search;
mod settings;
mod typeset;

use act::column_words;
pub(crate) use act::{act_of, acted, refused};
pub(crate) use catalogue::catalogue_entries;
pub(crate) use complaint::{of_diagnostic, of_instance};
pub(crate) use drawing::Drawings;
pub(crate) use event::event;
pub(crate) use ground::{audit_report, evidence, testimony};
pub(crate) use guide::guide_sections;
pub(crate) use instance::instance_report;
pub(crate) use model::rival_report;
pub(crate) use node::node_detail;
pub(crate) use relaxation::relaxation;
pub(crate) use root::{root_report, stopped_root};
pub(crate) use search::{conflict_report, nothing_searched, search_report};
pub(crate) use settings::{HELP as RUN_HELP, complaints, settings};
pub(crate) use typeset::of_typeset;

/// How a relaxation or a search ended; one that goes on is stopped for now.
fn status(status: tree::Status) -> record::results::Status {
    use record::results::Status;
    match status {
        tree::Status::Optimal => Status::Optimal,
        tree::Status::Infeasible => Status::Infeasible,
        tree::Status::Unbounded => Status::Unbounded,
        tree::Status::Limit | tree::Status::Running => Status::Limit,
    }
}

/// The value with −0 as 0.
pub(crate) fn tidy(value: f64) -> f64 {
    value + 0.0
}

/// A bound or value; `None` when it is infinite or not a number.
pub(crate) fn finite(value: f64) -> Option<f64> {
    value.is_finite().then(|| tidy(value))
}
