//! The way of one node: its LP, rounds of separation until nothing is violated, then what its
//! point gives.

use lp::{Limits, Outcome, Progress as LpProgress, StopReason};

use crate::cutting::Cutting;
use crate::event::NodeId;
use crate::relaxation::Addition;
use crate::search::{Ending, Hand, Job, Opening, PointInHand, Progress, Search, State};
use crate::tour::TourSearch;

/// Rounds of separation at the root at most: far more than convergence takes.
const ROOT_ROUNDS: u32 = 10_000;

/// Rounds of separation at any other node at most, while its point is fractional. A node
/// stopped by it has a valid bound and is branched on; a point without fractions is always
/// separated to the end.
const NODE_ROUNDS: u32 = 100;

/// How far along a ray rows are looked for that bound it, in the units of its largest column.
const FAR: f64 = 1e6;

impl Search {
    /// One step of the job in hand, of about `ticks`.
    pub(crate) fn step(&mut self, ticks: u64) -> Option<Progress> {
        let ticks = ticks.max(1);
        match &mut self.job {
            Job::None => self.next_job(),
            Job::Relax => {
                let simplex = &mut self.relaxation.as_mut()?.simplex;
                if simplex.advance(ticks) == LpProgress::Working {
                    return None;
                }
                self.relaxed()
            }
            Job::Separate => {
                if !self.rounds.advance(ticks) {
                    return None;
                }
                self.separated()
            }
            Job::Complete(purpose) => {
                let purpose = *purpose;
                let point = self.checker.advance(ticks)?;
                self.completed(purpose, point)
            }
            Job::Probe(_) => self.probe(ticks),
            Job::Cut(_) => self.advance_cuts(),
            Job::Dive(_) => self.dive(ticks),
            Job::Tour(tour) => {
                if tour.advance(ticks) {
                    self.toured();
                }
                None
            }
            Job::Prove(proving, _) => {
                let relaxation = self.relaxation.as_ref()?;
                let problem = |residual: &proof::Residual| relaxation.residual(residual).ok();
                if proving.advance(relaxation.exact(), problem, ticks) {
                    self.proved()
                } else {
                    None
                }
            }
        }
    }

    fn next_job(&mut self) -> Option<Progress> {
        if self.state == State::Root {
            return self.begin(NodeId::ROOT);
        }
        match self.opening {
            Opening::Tour => {
                self.carry_out_acts();
                if matches!(self.state, State::Finished(_)) {
                    return Some(Progress::Finished);
                }
                self.opening = Opening::Rounding;
                if let Some(trip) = &self.trip {
                    self.job = Job::Tour(Box::new(TourSearch::new(trip, self.settings.seed)));
                }
                None
            }
            Opening::Rounding => {
                self.opening = Opening::Suggestions;
                let x = self.root.as_ref().map(|root| root.x.clone())?;
                self.round(&x)
            }
            Opening::Suggestions => {
                if !self.next_suggestion() {
                    self.opening = Opening::Dives;
                }
                None
            }
            Opening::Dives => {
                if !self.next_dive() {
                    self.opening = Opening::Cuts;
                }
                None
            }
            Opening::Cuts => {
                self.opening = Opening::Branch;
                self.begin_cuts()
            }
            Opening::Branch => {
                if self.prove_opening() {
                    return None;
                }
                self.opening = Opening::Done;
                self.open_root();
                None
            }
            Opening::Done => self.next_node(),
        }
    }

    fn next_node(&mut self) -> Option<Progress> {
        // Before acts, so that what is open then does not depend on when they were made.
        if self.prove_doubtful() {
            return None;
        }
        self.carry_out_acts();
        if matches!(self.state, State::Finished(_)) {
            return Some(Progress::Finished);
        }
        if self.open.len() == 0 {
            self.settle();
            if self.prove_doubtful() {
                return None;
            }
        }
        if self.open.len() == 0 {
            self.end(Ending::Complete);
            return Some(Progress::Finished);
        }
        let rest = self.paused || self.quota == Some(0);
        if rest && !self.acts.is_waiting() {
            self.paused = true;
            return Some(Progress::Paused);
        }
        if self.settings.node_limit.is_some_and(|limit| self.ledger.nodes >= limit) {
            self.end(Ending::NodeLimit);
            return Some(Progress::Finished);
        }
        let spent = self.work().iterations;
        if self.settings.iteration_limit.is_some_and(|limit| spent >= limit) {
            self.end(Ending::IterationLimit);
            return Some(Progress::Finished);
        }
        let Some(node) = self.take_open() else {
            self.paused = true;
            return Some(Progress::Paused);
        };
        self.begin(node)
    }

    /// Takes a node in hand: its bounds, its parent's basis, its LP.
    fn begin(&mut self, node: NodeId) -> Option<Progress> {
        if self.relaxation.is_none() {
            let trouble = self.ledger.trouble.clone();
            return self.root_stopped(trouble);
        }
        if let Some(progress) = self.narrow(node) {
            return progress;
        }
        let Some(relaxation) = &mut self.relaxation else { return None };
        let path = self.tree.path(node);
        let parent = self.tree.node(node).parent();
        relaxation.enter(&path);
        let own = parent.and_then(|parent| self.tree.basis(parent));
        let cut = self.cutting.as_ref().and_then(Cutting::basis);
        relaxation.load(cut.filter(|_| parent == Some(NodeId::ROOT)).or(own.as_ref()));
        self.hand = Some(Hand::new(node, relaxation.simplex.stats().iterations));
        self.solve()
    }

    /// Starts the LP in hand. The root alone is left where the iterations run out; later they are looked
    /// at between nodes, so that a search that goes on does what it would have done.
    pub(crate) fn solve(&mut self) -> Option<Progress> {
        let spent = self.work().iterations;
        let limit = self.settings.iteration_limit.filter(|_| self.state == State::Root);
        let left = limit.map(|limit| limit.saturating_sub(spent));
        if left == Some(0) {
            return self.out_of_iterations();
        }
        let simplex = &mut self.relaxation.as_mut()?.simplex;
        simplex.start(Limits { iterations: left, cutoff: None });
        if let Some(hand) = &mut self.hand {
            hand.iterations_in_lp = simplex.stats().iterations;
        }
        self.job = Job::Relax;
        None
    }

    /// The LP in hand has ended.
    fn relaxed(&mut self) -> Option<Progress> {
        let relaxation = self.relaxation.as_ref()?;
        match relaxation.simplex.outcome()? {
            Outcome::Optimal(solution) => {
                let point = PointInHand {
                    bound: relaxation.internal(solution.objective),
                    x: solution.x.clone(),
                    reduced_costs: solution.reduced_costs.clone(),
                    duals: solution.duals.clone(),
                };
                self.pointed(point)
            }
            Outcome::Infeasible(ray) => {
                let ray = ray.multipliers.clone();
                self.infeasible(&ray)
            }
            Outcome::Unbounded { point, ray } => {
                let (point, ray) = (point.clone(), ray.clone());
                self.unbounded(&point, &ray)
            }
            Outcome::Stopped { reason: StopReason::Iterations, .. } => self.out_of_iterations(),
            Outcome::Stopped { reason: StopReason::Numerical(why), .. } => {
                let why = why.clone();
                self.unsolved(&why)
            }
            Outcome::Stopped { reason: StopReason::Cutoff, .. } => {
                self.unsolved("the kernel stopped early")
            }
        }
    }

    /// The LP in hand has a point: separate it, or go on when there is no need.
    fn pointed(&mut self, point: PointInHand) -> Option<Progress> {
        let fractional = self.chooser.fractional(&point.x);
        let hand = self.hand.as_mut()?;
        let root = hand.node == NodeId::ROOT;
        let limit = if root { ROOT_ROUNDS } else { NODE_ROUNDS };
        let enough = hand.rounds >= limit && fractional > 0;
        let closed = !root && self.target.closes(point.bound);
        let x = &hand.point.insert(point).x;
        if self.rounds.is_empty() || closed || enough {
            return self.converged();
        }
        self.rounds.start(x);
        self.job = Job::Separate;
        None
    }

    /// The round of separation has ended.
    fn separated(&mut self) -> Option<Progress> {
        let found = self.rounds.take();
        match self.add_rows(found) {
            Ok(0) if self.hand.as_ref()?.point.is_none() => self.root_unbounded(),
            Ok(0) => self.converged(),
            Ok(_) => self.solve(),
            Err(why) => self.unsolved(&why),
        }
    }

    /// Adds rows to the relaxation and counts those that are new as one round.
    pub(crate) fn add_rows(&mut self, found: Vec<Addition>) -> Result<usize, String> {
        let (Some(relaxation), Some(hand)) = (&mut self.relaxation, &mut self.hand) else {
            return Ok(0);
        };
        let families = relaxation.add(found).map_err(|error| error.to_string())?;
        if !families.is_empty() {
            hand.rounds += 1;
            hand.rows_added += u32::try_from(families.len()).unwrap_or(u32::MAX);
        }
        if hand.node == NodeId::ROOT {
            families.iter().for_each(|family| self.root_added[family.index()] += 1);
        }
        Ok(families.len())
    }

    /// Adds rows and solves again; goes on to decide when they are not new.
    pub(crate) fn tighten(&mut self, addition: Addition) -> Option<Progress> {
        match self.add_rows(vec![addition]) {
            Ok(0) => self.decide(),
            Ok(_) => self.solve(),
            Err(why) => self.unsolved(&why),
        }
    }

    /// Nothing is violated any more (or the round limit is reached): look for solutions.
    pub(crate) fn converged(&mut self) -> Option<Progress> {
        let hand = self.hand.as_ref()?;
        if hand.cutting {
            return self.cut_round();
        }
        let root = hand.node == NodeId::ROOT;
        let point = hand.point.as_ref()?;
        let whole = self.chooser.fractional(&point.x) == 0;
        if !root && self.target.closes(point.bound) {
            return self.decide();
        }
        if whole {
            return self.propose();
        }
        if root {
            return self.decide();
        }
        if self.cuts_here() {
            return self.start_cut_round();
        }
        let x = self.hand.as_ref()?.point.as_ref()?.x.clone();
        self.round(&x)
    }

    /// The LP in hand falls without limit. At the root a row on demand may still bound it: one
    /// is looked for far along the ray.
    fn unbounded(&mut self, point: &[f64], ray: &[f64]) -> Option<Progress> {
        if self.hand.as_ref()?.node != NodeId::ROOT {
            return self.unsolved("its relaxation seems unbounded, though its parent's is bounded");
        }
        let longest =
            ray.iter().fold(0.0, |most: f64, r| if r.abs() > most { r.abs() } else { most });
        if self.rounds.is_empty() || longest == 0.0 {
            return self.root_unbounded();
        }
        let far: Vec<f64> = point.iter().zip(ray).map(|(x, r)| x + r * (FAR / longest)).collect();
        self.rounds.start(&far);
        self.job = Job::Separate;
        None
    }

    /// The root has no iterations left, unless an act that waits allows it more.
    fn out_of_iterations(&mut self) -> Option<Progress> {
        let hand = self.hand.take()?;
        self.carry_out_limits();
        let spent = self.work().iterations;
        if self.settings.iteration_limit.is_none_or(|limit| limit > spent) {
            self.hand = Some(hand);
            return self.go_on_with_root();
        }
        self.leave_root(hand)
    }

    /// Goes on with a root whose iterations had run out.
    pub(crate) fn go_on_with_root(&mut self) -> Option<Progress> {
        let spent = self.work().iterations;
        let before = self.hand.as_ref()?.iterations_in_lp;
        let left = self.settings.iteration_limit.map(|limit| limit.saturating_sub(spent));
        let simplex = &mut self.relaxation.as_mut()?.simplex;
        let of_solve = left.map(|left| left + simplex.stats().iterations - before);
        if !simplex.resume(of_solve) {
            return self.solve();
        }
        self.job = Job::Relax;
        None
    }
}
