//! What a decision record needs of the engine: each rival as it is written; and a scenario without names
//! for the page.

use record::file;
use record::handover::{Stated, Statement, Written};
use record::message::Reply;
use record::scenario::Scenario;

use crate::check::typeset;
use crate::fault::fault;
use crate::handover::{Refusal, notation_text};
use crate::readings::instance_report;
use crate::stripped::stripped;

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

/// The answer to a page that strips a scenario of its names.
pub(crate) fn stripped_of(text: &str, factor: &str) -> Reply {
    let Some(scenario) = file::parse(text).scenario else {
        return Reply::Failed(fault("scenario", "the scenario cannot be read"));
    };
    match stripped(&scenario, factor) {
        Ok(bare) => {
            let (text, notes) = (file::print(&bare.scenario), bare.notes);
            Reply::Written(Box::new(Written { text, notes }))
        }
        Err(Refusal::Wrong(error)) => Reply::Failed(error),
        Err(Refusal::Broken(what)) => Reply::Failed(fault("scenario", what)),
    }
}
