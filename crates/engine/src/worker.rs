//! One worker: requests in, slices of work, replies out.

use std::collections::VecDeque;

use record::message::{Envelope, Progress, Reply, Request, RunNumber, StudyJob};
use record::wire::{read_request, write_envelope};

use crate::audit::LogAudit;
use crate::bindings::bindings;
use crate::check::check;
use crate::explain::explanation;
use crate::fault::fault;
use crate::handover::handed_over;
use crate::lane::Lane;
use crate::map::{catalogue_entries, guide_sections};
use crate::on_record::stated_of;
use crate::outbox::Outbox;
use crate::readings::Readings;
use crate::stripped::stripped_of;
use crate::studies::StudyRun;
use crate::warm::warm;

/// A lane's worker: it holds at most one rival, and reads instances and lists formulations.
#[derive(Debug, Default)]
pub struct Worker {
    requests: VecDeque<Request>,
    readings: Readings,
    lane: Option<Lane>,
    study: Option<StudyRun>,
    proof: Option<Box<LogAudit>>,
    run: RunNumber,
    outbox: Outbox,
}

impl Worker {
    /// A worker without a rival.
    #[must_use]
    pub fn new() -> Self {
        Self::default()
    }

    /// Takes a request; it is carried out by [`Self::advance`], in order.
    pub fn handle(&mut self, request: Request) {
        self.requests.push_back(request);
    }

    /// Takes a request as the bytes of [`record::wire`]; other bytes are answered by
    /// [`Reply::Failed`].
    pub fn handle_bytes(&mut self, bytes: &[u8]) {
        match read_request(bytes) {
            Ok(request) => self.handle(request),
            Err(error) => self.reply(Reply::Failed(fault("message", error.to_string()))),
        }
    }

    /// Works for about `ticks` (non-zeros touched), or carries out one request. Whether there
    /// is more to do.
    pub fn advance(&mut self, ticks: u64) -> bool {
        if self.reads_on(ticks) {
            // the next request waits for its text
        } else if let Some(request) = self.requests.pop_front() {
            self.carry_out(request);
        } else if let Some(lane) = &mut self.lane {
            lane.advance(ticks, &mut self.readings, &mut self.outbox);
        } else if self.study.is_some() {
            self.go_on_studying(ticks);
        } else if self.proof.is_some() {
            self.go_on_proving(ticks);
        }
        let busy = self.study.is_some()
            || self.proof.is_some()
            || self.lane.as_ref().is_some_and(Lane::is_busy);
        busy || !self.requests.is_empty()
    }

    /// Tells the page how much memory the host has given, and of how much. With `full` a search stands
    /// still, so that its tree can be kept.
    pub fn tell_memory(&mut self, bytes: u64, most: u64, full: bool) {
        self.reply(Reply::Memory { bytes, most, full });
        if let Some(lane) = self.lane.as_mut().filter(|lane| full && lane.is_busy()) {
            lane.act(&Request::Pause, &mut self.outbox);
        }
    }

    /// Non-zeros touched by what is in hand so far: by its search, its proof or its study.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        let lane = self.lane.as_ref().map_or(0, Lane::ticks);
        let study = self.study.as_ref().map_or(0, StudyRun::ticks);
        lane + study + self.proof.as_ref().map_or(0, |proof| proof.ticks())
    }

    /// The replies since the last call, in order.
    pub fn take(&mut self) -> Vec<Envelope> {
        self.outbox.take()
    }

    /// The replies since the last call as the bytes of [`record::wire`]. A reply too long to
    /// send is replaced by [`Reply::Failed`].
    pub fn take_bytes(&mut self) -> Vec<Vec<u8>> {
        let written = self.take().into_iter().map(|envelope| {
            write_envelope(&envelope).or_else(|error| {
                let reply = Reply::Failed(fault("message", error.to_string()));
                write_envelope(&Envelope { reply, ..envelope })
            })
        });
        written.filter_map(Result::ok).collect()
    }

    /// Reads on in the text that the next request needs; whether that is still to be done. A text
    /// to be read for itself gives way to one that came later.
    fn reads_on(&mut self, ticks: u64) -> bool {
        let newer = self.requests.iter().skip(1).any(|one| matches!(one, Request::Read(_)));
        match self.requests.front() {
            Some(Request::Read(text)) => {
                !newer
                    && (self.readings.advance(text, ticks)
                        || self.readings.advance_report(text, ticks))
            }
            Some(Request::Check(job)) => {
                job.instance.as_ref().is_some_and(|text| self.readings.advance(text, ticks))
            }
            Some(Request::Bind(job)) => self.readings.advance(&job.instance, ticks),
            _ => false,
        }
    }

    fn carry_out(&mut self, request: Request) {
        match request {
            Request::Warm => {
                warm();
                self.reply(Reply::Ready { engine: crate::VERSION.to_owned() });
            }
            Request::Read(_) if self.requests.iter().any(|r| matches!(r, Request::Read(_))) => {
                self.reply(Reply::InstanceRead(Box::default()));
            }
            Request::Read(text) => {
                let reply = match self.readings.report(&text) {
                    Ok(report) => Reply::InstanceRead(Box::new(report)),
                    Err(error) => Reply::Failed(error),
                };
                self.reply(reply);
            }
            Request::Check(job) => {
                let report = check(&job, &mut self.readings);
                self.reply(Reply::Checked(Box::new(report)));
            }
            Request::Explain(code) => self.reply(Reply::Explained(explanation(&code))),
            Request::Write(form, job) => self.reply(handed_over(form, *job)),
            Request::State(text) => self.reply(stated_of(&text)),
            Request::Strip { scenario, factor } => self.reply(stripped_of(&scenario, &factor)),
            Request::Bind(job) => {
                let (bound, suits) = bindings(&job, &mut self.readings);
                self.reply(Reply::Bound(bound, suits));
            }
            Request::Guide => self.reply(Reply::Guide(guide_sections())),
            Request::List => self.reply(Reply::Catalogue(catalogue_entries())),
            Request::Load(job) => {
                self.run = job.run;
                (self.lane, self.study, self.proof) = (Some(Lane::new(*job)), None, None);
            }
            Request::Prove(bytes) => self.begin_proof(&bytes),
            Request::Stop if self.proof.is_some() => self.end_proof(),
            Request::Study(job) => self.begin_study(&job),
            Request::Run { .. }
            | Request::RunToPlan
            | Request::Log(_)
            | Request::Pause
            | Request::Stop
            | Request::Inspect(_)
            | Request::Relaxation
            | Request::Evidence
            | Request::Audit
            | Request::Act(_) => match &mut self.lane {
                Some(lane) => lane.act(&request, &mut self.outbox),
                None => self.reply(Reply::Failed(fault("message", "no rival is loaded"))),
            },
        }
    }

    fn begin_study(&mut self, job: &StudyJob) {
        self.run = job.run;
        (self.lane, self.study, self.proof) = (None, None, None);
        let scenario = record::file::parse(&job.scenario).scenario;
        let study = scenario.as_ref().and_then(|scenario| scenario.studies.first());
        match (&scenario, study) {
            (Some(scenario), Some(study)) => {
                let place = job.instance as usize;
                self.study = Some(StudyRun::new(scenario, place, study));
            }
            _ => self.reply(Reply::Failed(fault("scenario", "the scenario holds no study"))),
        }
    }

    fn go_on_studying(&mut self, ticks: u64) {
        let Some(study) = &mut self.study else { return };
        let reply = if study.advance(ticks) {
            let found = study.take();
            self.study = None;
            Reply::Studied(found)
        } else {
            let (doing, _) = study.doing();
            Reply::Progress(Progress { doing, ticks: study.ticks(), iterations: 0 })
        };
        self.reply(reply);
    }

    fn begin_proof(&mut self, bytes: &[u8]) {
        (self.lane, self.study, self.proof) = (None, None, None);
        let log = record::log::decode(bytes).map_err(|error| fault("log", error.to_string()));
        match log.and_then(LogAudit::new) {
            Ok(proof) => self.proof = Some(Box::new(proof)),
            Err(error) => self.reply(Reply::Failed(error)),
        }
    }

    fn go_on_proving(&mut self, ticks: u64) {
        let Some(proof) = &mut self.proof else { return };
        match proof.advance(ticks) {
            Ok(true) => self.end_proof(),
            Ok(false) => {
                let (doing, ticks) = (proof.doing(), proof.ticks());
                self.reply(Reply::Progress(Progress { doing, ticks, iterations: 0 }));
            }
            Err(error) => {
                self.proof = None;
                self.reply(Reply::Failed(error));
            }
        }
    }

    /// Says what was proved, as far as it came.
    fn end_proof(&mut self) {
        if let Some(proof) = self.proof.take() {
            self.reply(Reply::Audited(Box::new(proof.report())));
        }
    }

    fn reply(&mut self, reply: Reply) {
        self.outbox.push(self.run, reply);
    }
}
