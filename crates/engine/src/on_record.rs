//! What a decision record repeats of its scenario: each rival as it is written, and the first instance.

use record::file;
use record::handover::{Stated, Statement};
use record::message::Reply;
use record::scenario::Scenario;

use crate::check::typeset;
use crate::fault::fault;
use crate::handover::notation_text;
use crate::readings::instance_report;

/// Each rival as it is written, and what is understood of the first instance.
#[must_use]
pub fn stated(scenario: &Scenario) -> Stated {
    let text = |rival| notation_text(scenario, rival).map_or_else(|_| String::new(), |it| it.text);
    let state = |rival| {
        let text = text(rival);
        Statement { typeset: typeset(&text), text }
    };
    let instance = scenario.instance.as_ref().map(instance_report).unwrap_or_default();
    Stated {
        rivals: (0..scenario.rivals.len()).map(state).collect(),
        facts: instance.facts,
        unit: instance.unit,
    }
}

/// The answer to a page that asks what a record repeats of a scenario.
pub(crate) fn stated_of(text: &str) -> Reply {
    match file::parse(text).scenario {
        Some(scenario) => Reply::Stated(Box::new(stated(&scenario))),
        None => Reply::Failed(fault("scenario", "the scenario cannot be read")),
    }
}
