//! The search: what is in hand, what comes next, and the public face.
//!
//! A search is always doing one job, and each job can be left after any slice: the LP of the node
//! in hand, one round of separation, the continuous part of a candidate, or the round-trip
//! heuristic. What follows a job depends only on what it found, never on the slices.

use std::rc::Rc;

use model::{Model, Number};
use separate::Separator;

use crate::acts::Acts;
use crate::branching::{Choice, Chooser};
use crate::course::Course;
use crate::cut_round::CutRound;
use crate::cutting::Cutting;
use crate::dive::Dive;
use crate::event::{Event, NodeId, Origin};
use crate::heuristics::{SuggestedBy, Suggestions};
use crate::hold::Holding;
use crate::making::{Making, Parts};
use crate::node::Tree;
use crate::open::Open;
use crate::probe::Probing;
use crate::proofs::{Doubtful, Proof};
use crate::propagate::Propagator;
use crate::propose::Roundings;
use crate::proving::Proving;
use crate::relaxation::{Relaxation, direction};
use crate::root::RootResult;
use crate::round_trip::RoundTrip;
use crate::rounds::Rounds;
use crate::settings::Settings;
use crate::solution::{Checker, Solution};
use crate::summary::NodeWorkCounts;
use crate::target::{Target, decimal, signed};
use crate::tour::TourSearch;

/// How far [`Search::advance`] came.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Progress {
    /// There is more to do.
    Working,
    /// The root relaxation is solved, or has no iterations left; the search waits for [`Search::run`].
    /// Said once, and once more of a root that went on where more iterations were allowed.
    RootSolved,
    /// The search stands still and can go on with [`Search::run`].
    Paused,
    /// The search has ended.
    Finished,
}

/// What was spent so far and what is being done.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct Work {
    /// Non-zeros touched: the same on every machine.
    pub ticks: u64,
    /// Simplex iterations.
    pub iterations: u64,
    /// What is being done, as a clause.
    pub doing: &'static str,
}

/// Where the search stands.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum State {
    Root,
    Waiting,
    Searching,
    Finished(Ending),
}

/// How it ended.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(crate) enum Ending {
    /// Every leaf is closed.
    Complete,
    /// The root relaxation is unbounded.
    Unbounded,
    /// As many nodes as the settings allow are solved: goes on where more are allowed.
    NodeLimit,
    /// As many simplex iterations are made as the settings allow: goes on where more are allowed.
    IterationLimit,
    /// Another limit, or something that stood in the way, in words.
    Stopped(String),
}

/// The job in hand.
#[derive(Debug)]
pub(crate) enum Job {
    None,
    Relax,
    Separate,
    Complete(Purpose),
    Tour(Box<TourSearch>),
    Probe(Box<Probing>),
    Cut(Box<CutRound>),
    Dive(Box<Dive>),
    Prove(Box<Proving>, Proof),
}

/// Where a candidate for a solution comes from.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Purpose {
    Relaxation,
    Rounding,
    Tour,
    Suggested(SuggestedBy),
}

impl Purpose {
    pub(crate) fn origin(self) -> Origin {
        match self {
            Self::Relaxation => Origin::Relaxation,
            Self::Rounding => Origin::Rounding,
            Self::Tour => Origin::Heuristic(crate::tour::NAME.to_owned()),
            Self::Suggested(by) => by.origin(),
        }
    }
}

/// What is done between the root relaxation and the first branching.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Opening {
    Tour,
    Rounding,
    Suggestions,
    Dives,
    Cuts,
    Branch,
    Done,
}

/// The relaxation's point at a node.
#[derive(Debug, Clone)]
pub(crate) struct PointInHand {
    /// Internal, offset included.
    pub(crate) bound: f64,
    pub(crate) x: Vec<f64>,
    pub(crate) reduced_costs: Vec<f64>,
    pub(crate) duals: Vec<f64>,
}

/// The node in hand.
#[derive(Debug)]
pub(crate) struct Hand {
    pub(crate) node: NodeId,
    pub(crate) iterations_before: u64,
    /// Those of the kernel before the LP that is solved now.
    pub(crate) iterations_in_lp: u64,
    pub(crate) rows_added: u32,
    pub(crate) rounds: u32,
    /// The internal value of its relaxation's point, where that is a solution.
    pub(crate) accepted: Option<f64>,
    pub(crate) point: Option<PointInHand>,
    /// The bound that is proved for it, in the direction of the objective.
    pub(crate) proved: Option<Number>,
    /// Whether that is the exact optimum of its relaxation.
    pub(crate) exact: bool,
    /// Whether a proof from its basis was tried.
    pub(crate) tried: bool,
    /// Whether that came to its end and left the node open.
    pub(crate) short: bool,
    /// A whole column that only its exact value shows to have a fraction.
    pub(crate) sliver: Option<Choice>,
    /// Whether it is the root once more, for general cuts.
    pub(crate) cutting: bool,
    /// Rounds of general cuts at a node below the root.
    pub(crate) cut_rounds: u32,
    /// Whether general cuts were added for it there.
    pub(crate) was_cut: bool,
    /// Whether columns were tried for branching, and the best of them.
    pub(crate) probed: bool,
    pub(crate) probed_choice: Option<Choice>,
}

impl Hand {
    /// A node whose relaxation is to be solved.
    pub(crate) fn new(node: NodeId, iterations_before: u64) -> Self {
        Self {
            node,
            iterations_before,
            iterations_in_lp: iterations_before,
            rows_added: 0,
            rounds: 0,
            accepted: None,
            point: None,
            proved: None,
            exact: false,
            tried: false,
            short: false,
            sliver: None,
            cutting: false,
            cut_rounds: 0,
            was_cut: false,
            probed: false,
            probed_choice: None,
        }
    }
}

/// The best solution.
#[derive(Debug, Clone)]
pub(crate) struct Incumbent {
    pub(crate) solution: Solution,
    /// The node at which it was found.
    pub(crate) node: NodeId,
    /// Its value as the user reads it.
    pub(crate) value: f64,
}

/// Counts and sums kept on the way.
#[derive(Debug, Default)]
pub(crate) struct Ledger {
    /// Nodes solved.
    pub(crate) nodes: u32,
    pub(crate) leaves_checked: u32,
    pub(crate) leaves_unchecked: u32,
    /// The internal bound that was said last.
    pub(crate) announced: Option<f64>,
    /// Nodes that could not be solved, and why the last could not.
    pub(crate) unsolved: Vec<NodeId>,
    pub(crate) trouble: String,
    /// Nodes closed by hand.
    pub(crate) closed: Vec<NodeId>,
    /// Whether a leaf was closed by its value.
    pub(crate) pruned: bool,
    /// What node work did.
    pub(crate) node_work: NodeWorkCounts,
    /// Bound and incumbents over work and nodes.
    pub(crate) course: Course,
    /// Simplex iterations of dives.
    pub(crate) iterations: u64,
    /// Work done outside of LP, separation and candidates.
    pub(crate) ticks: u64,
}

/// Branch and cut over one model, one slice at a time. See the crate for an example.
#[derive(Debug)]
pub struct Search {
    pub(crate) model: Rc<Model>,
    pub(crate) settings: Settings,
    pub(crate) relaxation: Option<Relaxation>,
    pub(crate) rounds: Rounds,
    pub(crate) checker: Checker,
    pub(crate) chooser: Chooser,
    pub(crate) trip: Option<Rc<RoundTrip>>,
    pub(crate) tree: Tree,
    pub(crate) propagator: Option<Propagator>,
    pub(crate) cutting: Option<Cutting>,
    pub(crate) open: Open,
    pub(crate) target: Target,
    pub(crate) incumbent: Option<Incumbent>,
    pub(crate) root: Option<RootResult>,
    pub(crate) root_added: Vec<u32>,
    pub(crate) plan: Option<Choice>,
    pub(crate) opening: Opening,
    pub(crate) hand: Option<Hand>,
    /// A root whose iterations ran out.
    pub(crate) left_root: Option<Hand>,
    pub(crate) job: Job,
    pub(crate) state: State,
    pub(crate) quota: Option<u32>,
    pub(crate) paused: bool,
    /// Whether it stands still at the next plan that is better than all before.
    pub(crate) to_a_plan: bool,
    pub(crate) acts: Acts,
    pub(crate) holding: Holding,
    pub(crate) roundings: Roundings,
    pub(crate) suggestions: Suggestions,
    pub(crate) ledger: Ledger,
    pub(crate) doubtful: Doubtful,
    pub(crate) events: Vec<Event>,
}

impl Search {
    /// A search that has done nothing yet, made at once; [`Making`] makes it in slices.
    /// `O(non-zeros)` for each of its parts.
    #[must_use]
    pub fn new(model: Rc<Model>, settings: Settings) -> Self {
        let mut making = Making::new(model, settings);
        loop {
            if let Some(search) = making.advance(u64::MAX) {
                return search;
            }
        }
    }

    /// A search of the parts that were made; those that are missing are made here.
    pub(crate) fn of_parts(model: Rc<Model>, settings: Settings, parts: Parts) -> Self {
        let lattice = settings.node_work.lattice;
        let mut target = parts.target.unwrap_or_else(|| Target::new(&model, lattice));
        if let Some(value) = settings.cutoff.and_then(decimal) {
            target.improve(signed(&model, value));
        }
        let chooser = parts.chooser.unwrap_or_else(|| Chooser::new(&model, &settings.priority));
        Self {
            rounds: parts.rounds.unwrap_or_else(|| Rounds::whole(&model)),
            checker: parts.checker.unwrap_or_else(|| Checker::new(&model)),
            chooser,
            trip: parts.trip,
            tree: Tree::new(),
            cutting: parts.cutting,
            propagator: parts.propagator,
            open: Open::default(),
            target,
            incumbent: None,
            root: None,
            root_added: vec![0; model.families().len()],
            plan: None,
            opening: Opening::Tour,
            hand: None,
            left_root: None,
            job: Job::None,
            state: State::Root,
            quota: None,
            paused: false,
            to_a_plan: false,
            acts: Acts::default(),
            holding: Holding::default(),
            roundings: Roundings::default(),
            suggestions: Suggestions::default(),
            ledger: Ledger { trouble: parts.trouble, ..Ledger::default() },
            doubtful: Doubtful::default(),
            events: vec![Event::Created { node: NodeId::ROOT, parent: None, branching: None }],
            relaxation: parts.relaxation,
            model,
            settings,
        }
    }

    /// Works on for about `ticks` non-zeros touched, at least one step.
    pub fn advance(&mut self, ticks: u64) -> Progress {
        let stop = self.work().ticks.saturating_add(ticks);
        loop {
            match self.state {
                State::Finished(_) => return Progress::Finished,
                State::Waiting => return self.rest(),
                State::Root if self.paused => return Progress::Paused,
                State::Searching if self.paused && !self.acts.is_waiting() => {
                    return Progress::Paused;
                }
                State::Root | State::Searching => {}
            }
            let now = self.work().ticks;
            let done = self.step(stop.saturating_sub(now));
            if let Some(progress) = done {
                return progress;
            }
            if self.work().ticks >= stop {
                return Progress::Working;
            }
        }
    }

    /// The search waits after the root: only acts are carried out.
    fn rest(&mut self) -> Progress {
        self.carry_out_acts();
        match self.state {
            State::Finished(_) => Progress::Finished,
            _ => Progress::Paused,
        }
    }

    /// Searches on: to the end, or until `nodes` more are solved. Also ends a pause.
    pub fn run(&mut self, nodes: Option<u32>) {
        self.paused = false;
        if self.state == State::Waiting {
            self.state = State::Searching;
        }
        self.quota = nodes;
        self.to_a_plan = false;
    }

    /// Searches on until a plan is found that is better than all before, or to the end. Also ends a
    /// pause. Where it stands still, also inside a node, changes no event.
    pub fn run_to_a_plan(&mut self) {
        self.run(None);
        self.to_a_plan = true;
    }

    /// Stands still after the slice in hand; nothing is lost. An act made while a node is in hand
    /// has that node solved first.
    pub fn pause(&mut self) {
        self.paused = true;
    }

    /// Gives up at once, also inside a node: the search ends as it stands. [`crate::Act::Stop`]
    /// ends it between two nodes, where it can be replayed.
    pub fn stop(&mut self) {
        if !matches!(self.state, State::Finished(_)) {
            self.end(Ending::Stopped("stopped".to_owned()));
        }
    }

    /// Whether it has ended.
    #[must_use]
    pub fn is_over(&self) -> bool {
        matches!(self.state, State::Finished(_))
    }

    /// The events since they were last taken.
    pub fn take_events(&mut self) -> Vec<Event> {
        std::mem::take(&mut self.events)
    }

    /// The root relaxation, once it is solved.
    #[must_use]
    pub fn root(&self) -> Option<&RootResult> {
        self.root.as_ref()
    }

    /// The model.
    #[must_use]
    pub fn model(&self) -> &Rc<Model> {
        &self.model
    }

    /// How each family over subsets is separated, in the order of the model.
    #[must_use]
    pub fn separators(&self) -> &[Separator] {
        self.rounds.separators()
    }

    /// What was spent so far and what is being done.
    #[must_use]
    pub fn work(&self) -> Work {
        let stats = self.relaxation.as_ref().map(|relaxation| relaxation.simplex.stats());
        let (ticks, iterations) = stats.map_or((0, 0), |stats| (stats.ticks, stats.iterations));
        let job = match &self.job {
            Job::Tour(tour) => tour.ticks(),
            Job::Dive(dive) => dive.ticks(),
            Job::Prove(proving, _) => proving.ticks(),
            _ => 0,
        };
        let dived = if let Job::Dive(dive) = &self.job { dive.iterations() } else { 0 };
        Work {
            ticks: self.ledger.ticks + ticks + self.rounds.ticks() + self.checker.ticks() + job,
            iterations: iterations + self.checker.iterations() + self.ledger.iterations + dived,
            doing: self.doing(),
        }
    }

    fn doing(&self) -> &'static str {
        match (&self.job, &self.state) {
            (_, State::Finished(_)) => "finished",
            (_, State::Waiting) => "waiting",
            (Job::Relax, State::Root) => "solving the relaxation",
            (Job::Relax, State::Searching) => "solving a node",
            (Job::Separate, _) => "separating",
            (Job::Complete(_), _) => "completing a solution",
            (Job::Tour(_), _) => "looking for a round trip",
            (Job::Dive(_), _) => "diving for a plan",
            (Job::Cut(_), _) => "looking for general cuts",
            (Job::Probe(_), _) => "trying branchings",
            (Job::Prove(..), _) => "proving a bound",
            (Job::None, _) => "choosing",
        }
    }

    /// Ends the search; a node in hand goes back to the open ones.
    pub(crate) fn end(&mut self, ending: Ending) {
        if let Some(hand) = self.hand.take() {
            let bound = self.tree.node(hand.node).bound;
            self.open.insert(hand.node, bound);
        }
        if ending == Ending::Complete {
            self.settle();
        }
        if let Job::Dive(dive) = &self.job {
            self.ledger.iterations += dive.iterations();
        }
        self.ledger.ticks += match &self.job {
            Job::Tour(tour) => tour.ticks(),
            Job::Dive(dive) => dive.ticks(),
            Job::Prove(proving, _) => proving.ticks(),
            _ => 0,
        };
        self.give_up_proofs();
        self.job = Job::None;
        let may_go_on = matches!(ending, Ending::NodeLimit | Ending::IterationLimit);
        self.state = State::Finished(ending);
        self.acts.refuse_all(self.ledger.nodes, may_go_on);
    }

    /// An internal value as the user reads it.
    pub(crate) fn user(&self, internal: f64) -> f64 {
        direction(&self.model) * internal + 0.0
    }
}
