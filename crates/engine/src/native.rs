//! A rival from text to results with the same worker that a page drives, without a page and
//! without a clock: who calls may look at one between slices.

use record::event::Event;
use record::ground::Evidence;
use record::message::{Acted, LaneJob, Reply, Request, RivalReport};
use record::results::{
    ConflictReport, ErrorReport, FamilyReport, RivalResult, RootReport, SearchReport, Status,
};
use record::scenario::{Act, ActKind, Rival, Role, Scenario, letter};

use crate::fault::fault;
use crate::map::stopped_root;
use crate::worker::Worker;

/// Ticks a slice where nothing else is asked for: some milliseconds.
pub const USUAL_SLICE: u64 = 2_000_000;

/// What a run is doing between two slices.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Phase {
    /// The model is being made, or its relaxation solved.
    Root,
    /// The tree is being searched.
    Search,
}

/// Between two slices.
#[derive(Debug, Clone, Copy)]
pub struct Moment<'r> {
    /// What is being done.
    pub phase: Phase,
    /// The last word of the worker on it, if there was one.
    pub progress: Option<&'r record::message::Progress>,
    /// Nodes solved, and the bound of the whole tree, as far as the events tell.
    pub nodes: u32,
    /// The bound of the whole tree, once there is one.
    pub bound: Option<f64>,
    /// The value of the best solution, once there is one.
    pub incumbent: Option<f64>,
}

/// What the one who watches wants.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Watch {
    /// Go on.
    GoOn,
    /// Stop here; the results so far are given.
    Stop,
}

/// What a rival gave.
#[derive(Debug, Clone, Default)]
pub struct RivalRun {
    /// What it is, once expanded.
    pub report: Option<RivalReport>,
    /// Its relaxation, once solved.
    pub root: Option<RootReport>,
    /// Its search, if it was searched.
    pub search: Option<SearchReport>,
    /// Which families cannot hold together, where the search found no plan.
    pub conflict: Option<ConflictReport>,
    /// Why there is no result.
    pub error: Option<ErrorReport>,
    /// Its root's relaxation for a second LP code, as bytes, or why it is not handed over.
    pub relaxation: Option<Result<Vec<u8>, String>>,
    /// Everything that happened.
    pub events: Vec<Event>,
    /// What the search found on the way.
    pub evidence: Option<Evidence>,
    /// Acts by hand that the scenario holds and that did not apply, one sentence each.
    pub refused: Vec<String>,
    /// Whether the one who watched stopped it.
    pub stopped: bool,
}

/// Runs a rival on an instance of a scenario (both by place from 0) in slices of `slice`
/// ticks. `watch` is asked between slices; it cannot change what is found, only end it.
pub fn run_rival(
    scenario: &Scenario,
    (instance, rival): (usize, usize),
    slice: u64,
    watch: &mut dyn FnMut(Moment<'_>) -> Watch,
) -> RivalRun {
    let Some(text) = scenario.rivals.get(rival) else {
        let error = Some(fault("scenario", "the scenario has no such rival"));
        return RivalRun { error, ..RivalRun::default() };
    };
    let job = LaneJob {
        instance: scenario.instances().nth(instance).cloned(),
        rival: text.clone(),
        settings: scenario.run.clone(),
        seed: scenario.seed,
        ..LaneJob::default()
    };
    let mut drive = Drive::default();
    drive.worker.handle(Request::Load(Box::new(job)));
    if scenario.run.search && !is_relaxation(text) {
        drive.worker.handle(Request::Run { nodes: None });
    }
    drive.finish(slice, watch);
    if drive.run.root.is_some() {
        drive.worker.handle(Request::Relaxation);
        drive.worker.handle(Request::Evidence);
        drive.finish(slice, watch);
    }
    drive.run
}

/// Whether a rival is bounded and not compared for its optimum: by its role, or because the
/// catalogue says so.
fn is_relaxation(rival: &Rival) -> bool {
    let shipped = || rival.from.as_deref().and_then(catalogue::find);
    rival.role == Some(Role::Relaxation) || shipped().is_some_and(|entry| entry.relaxation)
}

/// The result of a run as the command prints it, without times.
#[must_use]
pub fn result(
    scenario: &Scenario,
    (instance, rival): (usize, usize),
    run: &RivalRun,
) -> RivalResult {
    let given = scenario.rivals.get(rival);
    let mut result = RivalResult {
        scenario: scenario.title.clone(),
        instance: instance_title(scenario, instance),
        rival: letter(rival),
        title: given.map_or_else(String::new, |rival| rival.title.clone()),
        root: run.root.clone(),
        search: run.search.clone(),
        conflict: run.conflict.clone(),
        error: run.error.clone(),
        relaxation: given.is_some_and(is_relaxation),
        left_out: left_out(given, run),
        preset: scenario.run.mode().to_owned(),
        ..RivalResult::default()
    };
    if run.stopped && result.root.is_none() {
        result.error = None;
        result.search = None;
        result.root = Some(stopped_root("stopped before it was solved"));
    }
    result.status = status(&result);
    if let Some(report) = &run.report {
        result.maximise = report.maximise;
        result.title.clone_from(&report.title);
        result.rows = report.rows;
        result.columns = report.columns;
        result.integer_columns = report.integer_columns;
        result.nonzeros = report.nonzeros;
        let notes = report.complaints.iter().filter(|complaint| complaint.is_note());
        result.assumed = notes.map(|note| note.message.clone()).collect();
        result.families = families(report, run.root.as_ref());
    }
    result
}

/// How results name an instance: empty where the scenario has no other.
#[must_use]
pub fn instance_title(scenario: &Scenario, instance: usize) -> String {
    if scenario.further_instances.is_empty() {
        return String::new();
    }
    let title = scenario.instances().nth(instance).map(|text| text.title.clone());
    let title = title.filter(|title| !title.is_empty());
    title.unwrap_or_else(|| format!("instance {}", instance + 1))
}

/// What was not done of what the scenario asks for.
fn left_out(rival: Option<&Rival>, run: &RivalRun) -> Vec<String> {
    let mut sentences = run.refused.clone();
    if rival.is_some_and(|rival| is_relaxation(rival) && !rival.acts.is_empty()) {
        sentences.push("acts by hand were left out: a relaxation is not searched".to_owned());
    }
    sentences
}

/// An act that did not apply, in a sentence.
fn refusal(acted: &Acted) -> Option<String> {
    let why = acted.refused.as_ref()?;
    let Act { after, what, node, on } = &acted.act;
    let what = match what {
        ActKind::Branch => "branch",
        ActKind::Close => "close",
        ActKind::Cut => "cut",
        ActKind::Stop => "stop",
        ActKind::Rule => "rule",
    };
    let at = node.map_or_else(String::new, |node| format!(" at node {node}"));
    let on = if on.is_empty() { String::new() } else { format!(" on {}", on.join(", ")) };
    let nodes = if *after == 1 { "node" } else { "nodes" };
    Some(format!("an act by hand ({what}{at}{on}) was left out after {after} {nodes}: {why}"))
}

/// How a rival ended as a whole.
fn status(result: &RivalResult) -> Status {
    let search = result.search.as_ref().map(|search| search.status);
    let ended = search.or(result.root.as_ref().map(|root| root.status));
    ended.filter(|_| result.error.is_none()).unwrap_or(Status::Error)
}

/// The families with the rows that were added at the root.
fn families(report: &RivalReport, root: Option<&RootReport>) -> Vec<FamilyReport> {
    let mut families = report.families.clone();
    let added = root.map_or(&[][..], |root| &root.added_by_family);
    for (family, added) in families.iter_mut().zip(added) {
        family.added = *added;
    }
    families
}

/// A run on its way.
#[derive(Default)]
struct Drive {
    worker: Worker,
    run: RivalRun,
    progress: Option<record::message::Progress>,
    nodes: u32,
    bound: Option<f64>,
    incumbent: Option<f64>,
}

impl Drive {
    fn finish(&mut self, slice: u64, watch: &mut dyn FnMut(Moment<'_>) -> Watch) {
        loop {
            let busy = self.worker.advance(slice);
            self.receive();
            if !busy {
                return;
            }
            if !self.run.stopped && watch(self.moment()) == Watch::Stop {
                self.run.stopped = true;
                self.worker.handle(Request::Stop);
            }
        }
    }

    fn moment(&self) -> Moment<'_> {
        Moment {
            phase: if self.run.root.is_some() { Phase::Search } else { Phase::Root },
            progress: self.progress.as_ref(),
            nodes: self.nodes,
            bound: self.bound,
            incumbent: self.incumbent,
        }
    }

    fn receive(&mut self) {
        for envelope in self.worker.take() {
            match envelope.reply {
                Reply::Understood(report) => self.run.report = Some(*report),
                Reply::Progress(progress) => self.progress = Some(progress),
                Reply::Root(root) => self.run.root = Some(*root),
                Reply::Batch(events) => self.note(events),
                Reply::Paused(report) | Reply::Done(report) => self.run.search = Some(*report),
                Reply::Conflict(conflict) => self.run.conflict = Some(conflict),
                Reply::Failed(error) => self.run.error = Some(error),
                Reply::Relaxation(relaxation) => self.run.relaxation = Some(relaxation),
                Reply::Evidence(evidence) => self.run.evidence = Some(*evidence),
                Reply::Acted(acted) => self.run.refused.extend(refusal(&acted)),
                Reply::Ready { .. }
                | Reply::InstanceRead(_)
                | Reply::Catalogue(_)
                | Reply::Guide(_)
                | Reply::Node(_)
                | Reply::Checked(_)
                | Reply::Explained(_)
                | Reply::Written(_)
                | Reply::Studied(_)
                | Reply::Audited(_)
                | Reply::Log(_)
                | Reply::Bound(..)
                | Reply::Stated(_)
                | Reply::Memory { .. } => {}
            }
        }
    }

    fn note(&mut self, events: Vec<Event>) {
        for event in &events {
            match event {
                Event::Solved { .. } => self.nodes += 1,
                Event::Bound { bound, .. } => self.bound = Some(*bound),
                Event::Incumbent { value, .. } => self.incumbent = Some(*value),
                Event::Created { .. } | Event::Dropped { .. } => {}
            }
        }
        self.run.events.extend(events);
    }
}
