//! A saved log proved again: its model is made anew from the scenario that it holds.

use std::rc::Rc;

use record::event::Log;
use record::file;
use record::results::{AuditReport, ErrorReport};
use tree::Audit;

use crate::fault::fault;
use crate::load::load;
use crate::map;

/// A log on its way to a judgement, one slice at a time.
#[derive(Debug)]
pub struct LogAudit {
    title: String,
    audit: Audit,
}

impl LogAudit {
    /// Begins with a log that says what it rests on. The model is made all at once.
    ///
    /// # Errors
    /// The log does not say what it rests on, or its scenario does not become a model that has what
    /// the log names.
    pub fn new(log: &Log) -> Result<Self, ErrorReport> {
        let Some(ground) = &log.ground else {
            let why = "the log does not say what it rests on: save it again with this version";
            return Err(fault("log", why));
        };
        let parsed = file::parse(&ground.scenario);
        let Some(scenario) = parsed.scenario else {
            let message = "the log's scenario cannot be read".to_owned();
            let place = "scenario".to_owned();
            return Err(ErrorReport { message, complaints: parsed.complaints, place });
        };
        let place = (ground.instance as usize, ground.rival as usize);
        let loaded = load(&scenario, place)?;
        let evidence = &ground.evidence;
        let told = map::testimony(&loaded.model, &log.events, evidence, &scenario.run)
            .map_err(|why| fault("log", why))?;
        let audit =
            Audit::new(Rc::clone(&loaded.model), told).map_err(|why| fault("rival", why))?;
        Ok(Self { title: loaded.title, audit })
    }

    /// Works on for about `ticks` non-zeros touched; true when it is done.
    pub fn advance(&mut self, ticks: u64) -> bool {
        self.audit.advance(ticks)
    }

    /// The title of the rival.
    #[must_use]
    pub fn title(&self) -> &str {
        &self.title
    }

    /// Nodes done, and nodes in all.
    #[must_use]
    pub fn progress(&self) -> (usize, usize) {
        self.audit.progress()
    }

    /// What it found so far.
    #[must_use]
    pub fn report(&self) -> AuditReport {
        map::audit_report(&self.audit)
    }
}
