//! The scenario file: TOML 1.0 text to [`Scenario`] and back.
//!
//! Reading accepts every field of version 1, also those that an engine does not act on, and
//! complains about everything else with its place and the nearest known name; [`print()`] writes
//! what was read, so that nothing is lost on the way.

mod decode;
mod fields;
mod nearest;
mod origin;
mod print;

pub use decode::{BRANCHING, SELECTION};
pub use nearest::nearest;
pub use origin::Origin;
pub use print::print;

use crate::message::Complaint;
use crate::place::{Finding, complaint};
use crate::scenario::Scenario;

/// The longest file, in bytes: 64 MiB.
pub const LONGEST_FILE: usize = 64 << 20;

/// At most this many complaints are made about one file.
const MOST_COMPLAINTS: usize = 50;

/// What came out of a text.
#[derive(Debug, Clone, PartialEq)]
pub struct Parsed {
    /// The scenario; `None` when a complaint is an error.
    pub scenario: Option<Scenario>,
    /// What is wrong, by place.
    pub complaints: Vec<Complaint>,
    /// Where the texts of the instances stand in the file, in their order.
    pub instance_origins: Vec<Origin>,
    /// Where the texts of the rivals stand in the file; `None` for a rival of the catalogue.
    pub rival_origins: Vec<Option<Origin>>,
}

/// Reads a scenario file. `O(length)`, but for complaints.
#[must_use]
pub fn parse(text: &str) -> Parsed {
    if text.len() > LONGEST_FILE {
        return refused(text, too_long());
    }
    let (document, failures) = toml::de::DeTable::parse_recoverable(text);
    if !failures.is_empty() {
        let findings = failures.iter().map(|failure| syntax(text, failure)).collect();
        return refused(text, findings);
    }
    let decoded = decode::document(text, document.get_ref());
    let complaints = placed(text, decoded.findings);
    let failed = complaints.iter().any(|c| c.error);
    Parsed {
        scenario: (!failed).then_some(decoded.scenario),
        complaints,
        instance_origins: decoded.instance_origins,
        rival_origins: decoded.rival_origins,
    }
}

/// Line and column, both from 1, of a field of `[run]`, where the text has it.
///
/// ```
/// let text = "hullward = 1\n[run]\nnodes = 5\npriority = [\"y\"]\n";
/// assert_eq!(hullward_record::file::place_in_run(text, "priority"), Some((4, 12)));
/// ```
#[must_use]
pub fn place_in_run(text: &str, field: &str) -> Option<(u32, u32)> {
    let (document, _) = toml::de::DeTable::parse_recoverable(text);
    let toml::de::DeValue::Table(run) = document.get_ref().get("run")?.get_ref() else {
        return None;
    };
    Some(crate::place::line_column(text, run.get(field)?.span().start))
}

/// Whether a text is meant as a scenario: one of its lines gives `hullward` a value.
#[must_use]
pub fn looks_like_a_scenario(text: &str) -> bool {
    text.lines().any(|line| {
        let rest = line.trim_start().strip_prefix("hullward").map(str::trim_start);
        rest.is_some_and(|rest| rest.starts_with('='))
    })
}

fn refused(text: &str, findings: Vec<Finding>) -> Parsed {
    Parsed {
        scenario: None,
        complaints: placed(text, findings),
        instance_origins: Vec::new(),
        rival_origins: Vec::new(),
    }
}

fn placed(text: &str, mut findings: Vec<Finding>) -> Vec<Complaint> {
    findings.sort_by_key(|finding| finding.span.start);
    findings.dedup();
    findings.truncate(MOST_COMPLAINTS);
    findings.into_iter().map(|finding| complaint(text, finding)).collect()
}

fn too_long() -> Vec<Finding> {
    vec![Finding {
        error: true,
        code: "too-long".to_owned(),
        span: 0..0,
        message: "the file is longer than 64 MiB".to_owned(),
        mend: "a scenario holds one instance and its rivals: split it".to_owned(),
    }]
}

/// A complaint of the TOML parser in our form.
fn syntax(text: &str, failure: &toml::de::Error) -> Finding {
    let span = failure.span().unwrap_or(text.len()..text.len());
    let message = failure.message();
    let mend = if message.contains("duplicate key") {
        "each key stands once in its table: remove or rename one"
    } else if message.contains("multi-line") {
        "a text that begins with three quotes ends with the same three"
    } else if message.contains("recursion") {
        "lists and tables stand in one another too deeply: no field needs more than a few levels"
    } else {
        "a line is a [table], or a key = value: texts in quotes, long texts between ''' and '''"
    };
    Finding {
        error: true,
        code: "syntax".to_owned(),
        span,
        message: format!("this is not TOML: {message}"),
        mend: mend.to_owned(),
    }
}

#[cfg(test)]
mod tests;
