//! A saved log proved again: its model is made anew from the scenario that it holds.

use std::rc::Rc;

use record::event::Log;
use record::file;
use record::message::LaneJob;
use record::results::{AuditReport, ErrorReport};
use record::scenario::Run;
use tree::Audit;

use crate::fault::fault;
use crate::load::{Loading, job};
use crate::map;
use crate::readings::Readings;

/// How far a proof is.
#[derive(Debug)]
enum Stage {
    /// The rival is to be read.
    Begin(Box<LaneJob>),
    /// Its rows are written.
    Loading(Box<Loading>),
    /// The log is proved.
    Proving(Box<Audit>),
    /// It has failed.
    Failed,
}

/// A log on its way to a judgement, one slice at a time.
#[derive(Debug)]
pub struct LogAudit {
    title: String,
    log: Log,
    run: Run,
    readings: Readings,
    stage: Stage,
}

impl LogAudit {
    /// Begins with a log that says what it rests on. `O(scenario)`.
    ///
    /// # Errors
    /// The log does not say what it rests on, or its scenario cannot be read.
    pub fn new(log: Log) -> Result<Self, ErrorReport> {
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
        let job = job(&scenario, (ground.instance as usize, ground.rival as usize))?;
        let (stage, readings) = (Stage::Begin(Box::new(job)), Readings::default());
        Ok(Self { title: String::new(), run: scenario.run, log, readings, stage })
    }

    /// Works on for about `ticks` non-zeros touched; true when it is done.
    ///
    /// # Errors
    /// The scenario does not become a model that has what the log names.
    pub fn advance(&mut self, ticks: u64) -> Result<bool, ErrorReport> {
        match std::mem::replace(&mut self.stage, Stage::Failed) {
            Stage::Begin(job)
                if job.instance.as_ref().is_some_and(|t| self.readings.advance(t, ticks)) =>
            {
                self.stage = Stage::Begin(job);
                Ok(false)
            }
            Stage::Begin(job) => {
                self.stage = Stage::Loading(Box::new(Loading::begin(&mut self.readings, &job)?));
                Ok(false)
            }
            Stage::Loading(mut loading) => {
                let more = loading.advance(ticks);
                self.stage = if more { Stage::Loading(loading) } else { self.begin(*loading)? };
                Ok(false)
            }
            Stage::Proving(mut audit) => {
                let done = audit.advance(ticks);
                self.stage = Stage::Proving(audit);
                Ok(done)
            }
            Stage::Failed => Ok(true),
        }
    }

    fn begin(&mut self, loading: Loading) -> Result<Stage, ErrorReport> {
        let loaded = loading.finish()?;
        let evidence = self.log.ground.take().map(|ground| ground.evidence).unwrap_or_default();
        let told = map::testimony(&loaded.model, &self.log.events, &evidence, &self.run)
            .map_err(|why| fault("log", why))?;
        let audit =
            Audit::new(Rc::clone(&loaded.model), told).map_err(|why| fault("rival", why))?;
        self.title = loaded.title;
        Ok(Stage::Proving(Box::new(audit)))
    }

    /// The title of the rival, once its model is made.
    #[must_use]
    pub fn title(&self) -> &str {
        &self.title
    }

    /// What is being done, as a clause.
    #[must_use]
    pub fn doing(&self) -> String {
        let Stage::Proving(audit) = &self.stage else { return "writing the rows".to_owned() };
        let (done, all) = audit.progress();
        format!("proving: {done} of {all} nodes")
    }

    /// Work so far, in non-zeros touched.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        if let Stage::Proving(audit) = &self.stage { audit.ticks() } else { 0 }
    }

    /// What it found so far.
    #[must_use]
    pub fn report(&self) -> AuditReport {
        let title = self.title.clone();
        match &self.stage {
            Stage::Proving(audit) => AuditReport { title, ..map::audit_report(audit) },
            _ => AuditReport { title, ..AuditReport::default() },
        }
    }
}
