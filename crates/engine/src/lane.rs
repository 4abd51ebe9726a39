//! One rival from its text to the end of its search.
//!
//! ```text
//! Begin → Read → Expanding → Expanded → Making → Root → Waiting ⇄ Running → Explaining → Over
//! ```
//!
//! A search that found no plan though its relaxation has a point is explained: which families
//! cannot hold together. Every other goes from running to over.
//!
//! Each step up to the root is at least a slice of its own, so that a request is heard between.
//! A request that comes too early waits: "run" before the root is solved is remembered.

use std::rc::Rc;

use model::Model;
use record::event::Log;
use record::ground::Ground;
use record::log::KeptEvents;
use record::message::{LaneJob, LogJob, Progress, Reply, Request};
use record::results::{ErrorReport, SearchReport, Status};
use record::scenario::Act;
use tree::{Audit, Conflict, ConflictLimits, Making, NodeId, Search};

use crate::family::suggestions;
use crate::fault::fault;
use crate::load::{Loaded, Loading};
use crate::map::{self, Drawings};
use crate::outbox::Outbox;
use crate::plan::Plan;
use crate::readings::Readings;

/// A word on how far the work is comes at most once in so many non-zeros touched.
const PROGRESS_EVERY: u64 = 1 << 20;

/// How far a search is to go.
#[derive(Debug, Clone, Copy)]
enum Goal {
    /// To the end, or so many nodes on.
    Nodes(Option<u32>),
    /// To the next plan that is better than all before.
    Plan,
}

impl Goal {
    fn set(self, search: &mut Search) {
        match self {
            Self::Nodes(nodes) => search.run(nodes),
            Self::Plan => search.run_to_a_plan(),
        }
    }
}

/// How far a lane is.
#[derive(Debug)]
enum Stage {
    Begin,
    Read,
    Expanding(Box<Loading>),
    Expanded(Box<Loaded>),
    Making(Box<(Loaded, Making)>),
    Root(Box<Solver>),
    Waiting(Box<Solver>),
    Running(Box<Solver>),
    Explaining(Box<Solver>, Box<Conflict>),
    Auditing(Box<Solver>, Box<Audit>),
    Over(Option<Box<Solver>>),
}

/// A search with what its replies need.
#[derive(Debug)]
struct Solver {
    model: Rc<Model>,
    drawings: Drawings,
    search: Search,
    /// The plan that a person gave.
    plan: Option<Plan>,
    told: u64,
}

impl Solver {
    fn report(&self) -> SearchReport {
        let plan = self.plan.as_ref().map(|plan| plan.report(&self.model, &self.search));
        SearchReport { plan, ..map::search_report(&self.model, &self.search) }
    }
}

/// A rival that is loaded.
#[derive(Debug)]
pub(crate) struct Lane {
    job: LaneJob,
    stage: Stage,
    /// A run that was asked for before the root was solved.
    asked: Option<Goal>,
    /// Everything that happened.
    log: KeptEvents,
}

impl Lane {
    /// A lane that has not begun.
    pub(crate) fn new(job: LaneJob) -> Self {
        Self { job, stage: Stage::Begin, asked: None, log: KeptEvents::default() }
    }

    /// Whether [`Self::advance`] has something to do.
    pub(crate) fn is_busy(&self) -> bool {
        !matches!(self.stage, Stage::Waiting(_) | Stage::Over(_))
    }

    /// Non-zeros touched by what it is at.
    pub(crate) fn ticks(&self) -> u64 {
        match &self.stage {
            Stage::Making(begun) => begun.1.ticks(),
            Stage::Root(solver) | Stage::Waiting(solver) | Stage::Running(solver) => {
                solver.search.work().ticks
            }
            Stage::Explaining(_, conflict) => conflict.ticks(),
            Stage::Auditing(_, audit) => audit.ticks(),
            Stage::Over(Some(solver)) => solver.search.work().ticks,
            _ => 0,
        }
    }

    /// Works for about `ticks`.
    pub(crate) fn advance(&mut self, ticks: u64, readings: &mut Readings, outbox: &mut Outbox) {
        let stage = std::mem::replace(&mut self.stage, Stage::Over(None));
        self.stage = match stage {
            Stage::Begin => self.read(ticks, readings, outbox),
            Stage::Read => match Loading::begin(readings, &self.job) {
                Ok(loading) => Stage::Expanding(Box::new(loading)),
                Err(error) => self.fail(error, outbox),
            },
            Stage::Expanding(loading) => self.expand(loading, ticks, outbox),
            Stage::Expanded(loaded) => {
                let settings = map::settings(&self.job.settings, self.job.seed);
                let making = Making::new(Rc::clone(&loaded.model), settings);
                Stage::Making(Box::new((*loaded, making)))
            }
            Stage::Making(mut begun) => match begun.1.advance(ticks) {
                Some(search) => self.begin_search(begun.0, search, outbox),
                None => Stage::Making(begun),
            },
            Stage::Root(solver) => self.solve(solver, ticks, outbox, Stage::Root),
            Stage::Running(solver) => self.solve(solver, ticks, outbox, Stage::Running),
            Stage::Explaining(solver, conflict) => self.explain(solver, conflict, ticks, outbox),
            Stage::Auditing(solver, audit) => self.audit(solver, audit, ticks, outbox),
            resting => resting,
        };
    }

    /// Carries out a request about this rival.
    pub(crate) fn act(&mut self, request: &Request, outbox: &mut Outbox) {
        match request {
            Request::Run { nodes } => self.run(Goal::Nodes(*nodes)),
            Request::RunToPlan => self.run(Goal::Plan),
            Request::Pause => self.pause(outbox),
            Request::Stop => self.stop(outbox),
            Request::Inspect(node) => self.inspect(NodeId(node.0), outbox),
            Request::Act(act) => self.steer(act, outbox),
            Request::Relaxation => self.hand_over_root(outbox),
            Request::Evidence => self.hand_over_evidence(outbox),
            Request::Log(job) => self.hand_over_log(job, outbox),
            Request::Audit => self.begin_audit(outbox),
            _ => {}
        }
    }

    /// Reads on in the instance.
    fn read(&mut self, ticks: u64, readings: &mut Readings, outbox: &mut Outbox) -> Stage {
        let Some(text) = &self.job.instance else { return Stage::Read };
        if !readings.advance(text, ticks) {
            return match readings.read(text) {
                Ok(_) => Stage::Read,
                Err(error) => self.fail(error, outbox),
            };
        }
        let doing = "reading the instance".to_owned();
        outbox.push(self.job.run, Reply::Progress(Progress { doing, ticks: 0, iterations: 0 }));
        Stage::Begin
    }

    fn expand(&mut self, mut loading: Box<Loading>, ticks: u64, outbox: &mut Outbox) -> Stage {
        if loading.advance(ticks) {
            let doing = "writing the rows".to_owned();
            let progress = Progress { doing, ticks: 0, iterations: 0 };
            outbox.push(self.job.run, Reply::Progress(progress));
            return Stage::Expanding(loading);
        }
        match loading.finish() {
            Ok(loaded) => Stage::Expanded(Box::new(loaded)),
            Err(error) => self.fail(error, outbox),
        }
    }

    fn begin_search(&mut self, loaded: Loaded, mut search: Search, outbox: &mut Outbox) -> Stage {
        let Loaded { title, model, mut complaints, stops } = loaded;
        complaints.extend(map::complaints(&self.job.settings, &model));
        let report = map::rival_report(&model, search.separators(), &title, complaints);
        outbox.push(self.job.run, Reply::Understood(Box::new(report)));
        for act in &self.job.rival.acts {
            match map::act_of(&model, act) {
                Ok(known) => search.replay(act.after, known),
                Err(why) => {
                    let acted = map::refused(act, act.after, true, why);
                    outbox.push(self.job.run, Reply::Acted(Box::new(acted)));
                }
            }
        }
        let drawings = Drawings::new(&model, &stops);
        let plan = self.job.settings.plan.as_ref().map(|text| Plan::read(&model, text));
        if let Some(suggestion) = plan.as_ref().and_then(Plan::suggestion) {
            search.suggest(suggestion);
        }
        let wanted = self.job.settings.heuristics.iter().flatten();
        if wanted.into_iter().any(|word| word == "family") {
            suggestions(&model).into_iter().for_each(|one| search.suggest(one));
        }
        Stage::Root(Box::new(Solver { model, drawings, search, plan, told: 0 }))
    }

    fn solve(
        &mut self,
        mut solver: Box<Solver>,
        ticks: u64,
        outbox: &mut Outbox,
        same: fn(Box<Solver>) -> Stage,
    ) -> Stage {
        let progress = solver.search.advance(ticks);
        self.tell(&mut solver, outbox);
        match progress {
            tree::Progress::Working => same(solver),
            tree::Progress::RootSolved => {
                self.tell_root(&solver, outbox);
                self.rest(solver)
            }
            tree::Progress::Paused => {
                let report = solver.report();
                outbox.push(self.job.run, Reply::Paused(Box::new(report)));
                Stage::Waiting(solver)
            }
            tree::Progress::Finished => self.end(solver, outbox),
        }
    }

    /// After the root: on when that was asked for, else wait.
    fn rest(&mut self, mut solver: Box<Solver>) -> Stage {
        match self.asked.take() {
            Some(goal) => {
                goal.set(&mut solver.search);
                Stage::Running(solver)
            }
            None => Stage::Waiting(solver),
        }
    }

    fn end(&mut self, solver: Box<Solver>, outbox: &mut Outbox) -> Stage {
        let report = solver.report();
        let unexplained = report.status == Status::Infeasible
            && solver.search.root().is_some_and(|root| root.status == tree::Status::Optimal);
        outbox.push(self.job.run, Reply::Done(Box::new(report)));
        if !unexplained {
            return Stage::Over(Some(solver));
        }
        let conflict = Conflict::new(Rc::clone(&solver.model), ConflictLimits::default());
        Stage::Explaining(solver, Box::new(conflict))
    }

    /// Goes on looking for the families that cannot hold together.
    fn explain(
        &self,
        solver: Box<Solver>,
        mut conflict: Box<Conflict>,
        ticks: u64,
        outbox: &mut Outbox,
    ) -> Stage {
        if conflict.advance(ticks) {
            return self.explained(solver, &conflict, outbox);
        }
        let doing = "looking for the families that cannot hold together".to_owned();
        let progress = Progress { doing, ticks: conflict.ticks(), iterations: 0 };
        outbox.push(self.job.run, Reply::Progress(progress));
        Stage::Explaining(solver, conflict)
    }

    /// Says which families cannot hold together, as far as that is known.
    fn explained(&self, solver: Box<Solver>, conflict: &Conflict, outbox: &mut Outbox) -> Stage {
        let report = map::conflict_report(&solver.model, &conflict.result());
        outbox.push(self.job.run, Reply::Conflict(report));
        Stage::Over(Some(solver))
    }

    /// Begins to prove a search that has ended again, by its branchings alone.
    fn begin_audit(&mut self, outbox: &mut Outbox) {
        let stage = std::mem::replace(&mut self.stage, Stage::Over(None));
        self.stage = match stage {
            Stage::Over(Some(solver)) => {
                match Audit::new(Rc::clone(&solver.model), solver.search.testimony()) {
                    Ok(audit) => Stage::Auditing(solver, Box::new(audit)),
                    Err(why) => {
                        outbox.push(self.job.run, Reply::Failed(fault("rival", why)));
                        Stage::Over(Some(solver))
                    }
                }
            }
            earlier => {
                let why = fault("rival", "the search has not ended");
                outbox.push(self.job.run, Reply::Failed(why));
                earlier
            }
        };
    }

    fn audit(
        &self,
        solver: Box<Solver>,
        mut audit: Box<Audit>,
        ticks: u64,
        outbox: &mut Outbox,
    ) -> Stage {
        if audit.advance(ticks) {
            return self.audited(solver, &audit, outbox);
        }
        let (done, all) = audit.progress();
        let doing = format!("proving again: {done} of {all} nodes");
        let progress = Progress { doing, ticks: audit.ticks(), iterations: 0 };
        outbox.push(self.job.run, Reply::Progress(progress));
        Stage::Auditing(solver, audit)
    }

    /// Says what was proved, as far as it came.
    fn audited(&self, solver: Box<Solver>, audit: &Audit, outbox: &mut Outbox) -> Stage {
        let report = map::audit_report(audit);
        outbox.push(self.job.run, Reply::Audited(Box::new(report)));
        Stage::Over(Some(solver))
    }

    fn fail(&mut self, error: ErrorReport, outbox: &mut Outbox) -> Stage {
        outbox.push(self.job.run, Reply::Failed(error));
        Stage::Over(None)
    }

    fn tell_root(&self, solver: &Solver, outbox: &mut Outbox) {
        if let Some(root) = solver.search.root() {
            let report = map::root_report(root);
            outbox.push(self.job.run, Reply::Root(Box::new(report)));
        }
    }

    /// Sends what happened, and now and then how far the work is.
    fn tell(&mut self, solver: &mut Solver, outbox: &mut Outbox) {
        let events: Vec<_> = solver.search.take_events().into_iter().map(map::event).collect();
        if !events.is_empty() {
            self.log.extend(&events);
            outbox.push(self.job.run, Reply::Batch(events));
        }
        self.tell_acted(solver, outbox);
        let work = solver.search.work();
        if work.ticks >= solver.told.saturating_add(PROGRESS_EVERY) {
            solver.told = work.ticks;
            let doing = work.doing.to_owned();
            let progress = Progress { doing, ticks: work.ticks, iterations: work.iterations };
            outbox.push(self.job.run, Reply::Progress(progress));
        }
    }

    /// Says what became of acts by hand.
    fn tell_acted(&self, solver: &mut Solver, outbox: &mut Outbox) {
        for acted in solver.search.take_acted() {
            let acted = map::acted(&solver.model, &acted);
            outbox.push(self.job.run, Reply::Acted(Box::new(acted)));
        }
    }

    /// Does an act by hand; one made while the search stands still is carried out at once.
    fn steer(&mut self, act: &Act, outbox: &mut Outbox) {
        let stage = std::mem::replace(&mut self.stage, Stage::Over(None));
        self.stage = match stage {
            Stage::Root(mut solver) => {
                self.hand_over(act, &mut solver, outbox);
                Stage::Root(solver)
            }
            Stage::Running(mut solver) => {
                self.hand_over(act, &mut solver, outbox);
                Stage::Running(solver)
            }
            Stage::Waiting(mut solver) => {
                self.hand_over(act, &mut solver, outbox);
                let at_once = solver.search.root().is_some() && solver.search.has_acts_waiting();
                if at_once { Stage::Running(solver) } else { Stage::Waiting(solver) }
            }
            Stage::Explaining(mut solver, conflict) => {
                self.hand_over(act, &mut solver, outbox);
                Stage::Explaining(solver, conflict)
            }
            Stage::Auditing(mut solver, audit) => {
                self.hand_over(act, &mut solver, outbox);
                Stage::Auditing(solver, audit)
            }
            Stage::Over(Some(mut solver)) => {
                self.hand_over(act, &mut solver, outbox);
                // An act that raises the limit at which it ended lets the search go on.
                self.go_on(solver)
            }
            earlier => {
                let acted = map::refused(act, 0, false, "there is no search yet".to_owned());
                outbox.push(self.job.run, Reply::Acted(Box::new(acted)));
                earlier
            }
        };
    }

    /// Lets a search that is not over any more go on, also where its root is not solved yet.
    fn go_on(&mut self, mut solver: Box<Solver>) -> Stage {
        if solver.search.is_over() {
            return Stage::Over(Some(solver));
        }
        solver.search.run(None);
        if solver.search.root().is_some() {
            return Stage::Running(solver);
        }
        self.asked = Some(Goal::Nodes(None));
        Stage::Root(solver)
    }

    fn hand_over(&self, act: &Act, solver: &mut Solver, outbox: &mut Outbox) {
        match map::act_of(&solver.model, act) {
            Ok(known) => solver.search.act(known),
            Err(why) => {
                let nodes = solver.search.summary().nodes;
                let acted = map::refused(act, nodes, false, why);
                outbox.push(self.job.run, Reply::Acted(Box::new(acted)));
            }
        }
        self.tell_acted(solver, outbox);
    }

    fn run(&mut self, goal: Goal) {
        let stage = std::mem::replace(&mut self.stage, Stage::Over(None));
        self.stage = match stage {
            Stage::Waiting(mut solver) if solver.search.root().is_none() => {
                self.asked = Some(goal);
                solver.search.run(None);
                Stage::Root(solver)
            }
            Stage::Waiting(mut solver) | Stage::Running(mut solver) => {
                goal.set(&mut solver.search);
                Stage::Running(solver)
            }
            over @ (Stage::Explaining(..) | Stage::Auditing(..) | Stage::Over(_)) => over,
            earlier => {
                self.asked = Some(goal);
                earlier
            }
        };
    }

    fn pause(&mut self, outbox: &mut Outbox) {
        self.asked = None;
        match &mut self.stage {
            Stage::Root(solver) | Stage::Running(solver) => solver.search.pause(),
            Stage::Waiting(solver) => {
                let report = solver.report();
                outbox.push(self.job.run, Reply::Paused(Box::new(report)));
            }
            _ => {}
        }
    }

    fn stop(&mut self, outbox: &mut Outbox) {
        self.asked = None;
        let stage = std::mem::replace(&mut self.stage, Stage::Over(None));
        self.stage = match stage {
            Stage::Root(mut solver) | Stage::Waiting(mut solver) | Stage::Running(mut solver) => {
                solver.search.stop();
                Stage::Running(solver)
            }
            Stage::Begin
            | Stage::Read
            | Stage::Expanding(_)
            | Stage::Expanded(_)
            | Stage::Making(_) => {
                let report = map::nothing_searched("stopped before its model was made");
                outbox.push(self.job.run, Reply::Done(Box::new(report)));
                Stage::Over(None)
            }
            Stage::Explaining(solver, conflict) => self.explained(solver, &conflict, outbox),
            Stage::Auditing(solver, audit) => self.audited(solver, &audit, outbox),
            over @ Stage::Over(_) => over,
        };
    }

    fn hand_over_root(&self, outbox: &mut Outbox) {
        let relaxation = match &self.stage {
            Stage::Root(solver)
            | Stage::Waiting(solver)
            | Stage::Running(solver)
            | Stage::Over(Some(solver)) => map::relaxation(&solver.model, &solver.search),
            _ => Err("the root is not solved".to_owned()),
        };
        outbox.push(self.job.run, Reply::Relaxation(relaxation));
    }

    fn hand_over_evidence(&self, outbox: &mut Outbox) {
        let (Stage::Waiting(solver) | Stage::Over(Some(solver))) = &self.stage else { return };
        let evidence = map::evidence(&solver.search);
        outbox.push(self.job.run, Reply::Evidence(Box::new(evidence)));
    }

    /// The log so far, as the bytes of its file.
    fn hand_over_log(&self, job: &LogJob, outbox: &mut Outbox) {
        let log = match &self.stage {
            Stage::Waiting(solver) | Stage::Over(Some(solver)) => {
                let LogJob { scenario, instance, rival } = job.clone();
                let evidence = map::evidence(&solver.search);
                let ground = Some(Ground { scenario, instance, rival, evidence });
                let version = record::log::version(ground.as_ref());
                let (engine, events) = (crate::VERSION.to_owned(), self.log.events());
                record::log::encode(&Log { version, engine, events, ground })
                    .map_err(|error| error.to_string())
            }
            _ => Err("the search has not come to a rest".to_owned()),
        };
        outbox.push(self.job.run, Reply::Log(log));
    }

    fn inspect(&mut self, node: NodeId, outbox: &mut Outbox) {
        let (Stage::Root(solver)
        | Stage::Waiting(solver)
        | Stage::Running(solver)
        | Stage::Explaining(solver, _)
        | Stage::Auditing(solver, _)
        | Stage::Over(Some(solver))) = &mut self.stage
        else {
            outbox.push(self.job.run, Reply::Failed(fault("rival", "there is no node yet")));
            return;
        };
        let reply = match solver.search.inspect(node) {
            Some(view) => {
                Reply::Node(Box::new(map::node_detail(&solver.model, &solver.drawings, &view)))
            }
            None => Reply::Failed(fault("rival", format!("node {} is not solved yet", node.0))),
        };
        outbox.push(self.job.run, reply);
    }
}
