//! The root relaxation: what it gave, and the step from it into the search.

use lp::{NewRow, Outcome};
use model::Number;

use crate::branching::Choice;
use crate::cutting::Cutting;
use crate::event::{NodeId, NodeState};
use crate::relaxation::direction;
use crate::search::{Ending, Hand, Progress, Search, State};

/// How a relaxation or a search stands.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Status {
    /// Not at its end yet.
    Running,
    /// Solved to the end.
    Optimal,
    /// There is no point.
    Infeasible,
    /// The objective has no bound.
    Unbounded,
    /// A limit, or something that stood in the way, stopped it.
    Limit,
}

/// The relaxation of the formulation as it is meant: families on demand separated.
#[derive(Debug, Clone, PartialEq)]
pub struct RootResult {
    /// How it ended.
    pub status: Status,
    /// The bound in the direction of the objective, offset included.
    pub bound: Option<f64>,
    /// The bound that the multipliers prove in exact arithmetic.
    pub checked_bound: Option<Number>,
    /// Whether the bound or the infeasibility was proved in exact arithmetic.
    pub checked: bool,
    /// Whether the checked bound is the exact optimum of the relaxation. Else the true optimum
    /// is between it and `bound`, up to the rounding of the latter.
    pub exact: bool,
    /// Simplex iterations.
    pub iterations: u64,
    /// Whole columns with a fractional value.
    pub fractional: u32,
    /// Rounds of separation that added rows.
    pub rounds: u32,
    /// Rows that separation added, one count a family of the model.
    pub added: Vec<u32>,
    /// The value of each column; empty unless optimal.
    pub x: Vec<f64>,
    /// The reduced cost of each column in the direction of the objective; empty unless optimal.
    pub reduced_costs: Vec<f64>,
    /// Rows of a Farkas ray with their multipliers, when infeasible; when unbounded, columns with
    /// the step along which the objective has no bound.
    pub ray: Vec<(String, f64)>,
    /// What ended it early, when the status is a limit.
    pub stopped: Option<String>,
}

impl Search {
    /// The rows that separation added to the root's relaxation beside the written rows that are
    /// in; `None` before it is solved, and where it could not be.
    #[must_use]
    pub fn root_rows(&self) -> Option<&[NewRow]> {
        let relaxation = self.relaxation.as_ref()?;
        let status = self.root.as_ref()?.status;
        match status {
            Status::Optimal | Status::Infeasible => {
                Some(relaxation.added_of(self.tree.node(NodeId::ROOT).rows as usize))
            }
            // The search is over with it: nothing was added since.
            Status::Unbounded => Some(relaxation.added_of(relaxation.row_count())),
            Status::Running | Status::Limit => None,
        }
    }

    /// An estimate (from below) of the condition of the basis that the kernel stands at, in scaled
    /// units; after a root without a search that is the optimal one.
    pub fn condition_estimate(&mut self) -> Option<f64> {
        self.relaxation.as_mut()?.simplex.condition_estimate()
    }

    fn root_result(&self, status: Status, hand: Option<&Hand>) -> RootResult {
        RootResult {
            status,
            bound: None,
            checked_bound: None,
            checked: false,
            exact: false,
            iterations: self.relaxation.as_ref().map_or(0, |r| r.simplex.stats().iterations),
            fractional: 0,
            rounds: hand.map_or(0, |hand| hand.rounds),
            added: self.root_added.clone(),
            x: Vec::new(),
            reduced_costs: Vec::new(),
            ray: Vec::new(),
            stopped: None,
        }
    }

    /// The root is solved. Without a choice of a column it is a leaf and the search is over.
    pub(crate) fn root_decided(&mut self, hand: Hand, choice: Option<Choice>) -> Option<Progress> {
        let mut result = self.root_result(Status::Optimal, Some(&hand));
        let point = hand.point?;
        result.bound = Some(self.user(point.bound));
        result.checked_bound = hand.proved;
        result.checked = result.checked_bound.is_some();
        result.exact = hand.exact;
        result.fractional = self.chooser.fractional(&point.x);
        let direction = direction(&self.model);
        result.reduced_costs = point.reduced_costs.iter().map(|d| direction * d + 0.0).collect();
        result.x = point.x;
        let closing =
            Hand { proved: result.checked_bound.clone(), tried: true, ..Hand::new(hand.node, 0) };
        self.root = Some(result);
        self.job = crate::search::Job::None;
        self.plan = choice;
        match choice {
            None => {
                self.leaf(&closing);
                self.end(Ending::Complete);
            }
            Some(_) if !self.settings.search => {
                self.end(Ending::Stopped("no search was asked for".to_owned()));
            }
            Some(_) => self.state = State::Waiting,
        }
        self.announce();
        Some(Progress::RootSolved)
    }

    pub(crate) fn root_infeasible(
        &mut self,
        hand: &Hand,
        ray: &[f64],
        checked: bool,
    ) -> Option<Progress> {
        let mut result = self.root_result(Status::Infeasible, Some(hand));
        result.ray = self.named_ray(ray);
        result.checked = checked;
        self.root = Some(result);
        self.end(Ending::Complete);
        Some(Progress::RootSolved)
    }

    pub(crate) fn root_unbounded(&mut self) -> Option<Progress> {
        self.root_over(Status::Unbounded, NodeState::Unbounded, Ending::Unbounded)
    }

    /// The root could not be solved.
    pub(crate) fn root_stopped(&mut self, why: String) -> Option<Progress> {
        self.root_over(Status::Limit, NodeState::Unsolved, Ending::Stopped(why))
    }

    fn root_over(&mut self, status: Status, state: NodeState, ending: Ending) -> Option<Progress> {
        let hand = self.hand.take();
        let mut result = self.root_result(status, hand.as_ref());
        if ending == Ending::Unbounded {
            result.ray = self.named_direction();
        }
        if let Ending::Stopped(why) = &ending {
            self.tell_stopped(&mut result, hand.as_ref(), why);
        }
        self.root = Some(result);
        self.tree.node_mut(NodeId::ROOT).state = state;
        if let Some(hand) = &hand {
            self.close_without_bound(hand, state);
        }
        self.end(ending);
        self.announce();
        Some(Progress::RootSolved)
    }

    /// Puts the bound that a root had when it was stopped into what is said of it.
    fn tell_stopped(&mut self, result: &mut RootResult, hand: Option<&Hand>, why: &str) {
        result.stopped = Some(why.to_owned());
        if let Some((bound, proved)) = self.bound_so_far(hand) {
            result.bound = Some(self.user(bound));
            result.checked = proved.is_some();
            result.checked_bound = proved;
            self.tree.node_mut(NodeId::ROOT).bound = bound;
            self.ledger.unsolved.push(NodeId::ROOT);
        }
    }

    /// Leaves a root whose iterations have run out: it is not solved, so the log has nothing of it, and
    /// goes on where more are allowed.
    pub(crate) fn leave_root(&mut self, hand: Hand) -> Option<Progress> {
        let mut result = self.root_result(Status::Limit, Some(&hand));
        self.tell_stopped(&mut result, Some(&hand), "iteration limit");
        self.root = Some(result);
        self.left_root = Some(hand);
        self.end(Ending::IterationLimit);
        Some(Progress::RootSolved)
    }

    /// Takes up a root that was left; false where none was.
    pub(crate) fn take_up_root(&mut self) -> bool {
        let Some(hand) = self.left_root.take() else { return false };
        self.hand = Some(hand);
        self.root = None;
        self.ledger.unsolved.clear();
        self.tree.node_mut(NodeId::ROOT).bound = f64::NEG_INFINITY;
        self.state = State::Root;
        self.go_on_with_root();
        true
    }

    /// The best bound that a root relaxation gave before it was stopped, internal, with what
    /// its multipliers prove: that of the last round of separation, or of the LP that was
    /// left.
    fn bound_so_far(&self, hand: Option<&Hand>) -> Option<(f64, Option<Number>)> {
        let relaxation = self.relaxation.as_ref()?;
        let round = hand.and_then(|hand| hand.point.as_ref());
        let round = round.map(|point| (point.bound, &point.duals));
        let left = match relaxation.simplex.outcome() {
            Some(Outcome::Stopped { bound: Some(bound), duals, .. }) if bound.is_finite() => {
                Some((relaxation.internal(*bound), duals))
            }
            _ => None,
        };
        let best = match (round, left) {
            (Some(round), Some(left)) if left.0 > round.0 => left,
            (Some(round), _) => round,
            (None, left) => left?,
        };
        Some((best.0, relaxation.prove(best.1)))
    }

    /// The bound with which the root is left: its own, or that with general cuts.
    pub(crate) fn opening_bound(&self) -> f64 {
        let own = self.tree.node(NodeId::ROOT).bound;
        let cut = self.cutting.as_ref().and_then(Cutting::cut_bound);
        cut.filter(|&cut| cut > own).unwrap_or(own)
    }

    /// Leaves the root: branches or holds it, or drops it where a heuristic or general cuts have closed
    /// it.
    pub(crate) fn open_root(&mut self) {
        let Some(choice) = self.plan.take() else { return };
        let (own, bound) = (self.tree.node(NodeId::ROOT).bound, self.opening_bound());
        let cut = self.cutting.as_mut().and_then(Cutting::take_point);
        let known = self.target.proves_float(self.tree.node(NodeId::ROOT).proved);
        if self.target.closes(bound) && (known || self.doubtful.opening() != Some(false)) {
            self.ledger.node_work.cut_off += u32::from(!self.target.closes(own));
            self.drop_node(NodeId::ROOT, known || self.doubtful.opening_is_proved());
        } else if self.is_to_be_held(NodeId::ROOT) {
            let x = self.root.as_ref().map(|root| root.x.clone()).unwrap_or_default();
            self.hold(NodeId::ROOT, bound, x);
        } else {
            let x = self.root.as_ref().map(|root| root.x.clone()).unwrap_or_default();
            let x = cut.map_or(x, |(_, x)| x);
            self.branch(NodeId::ROOT, bound, &choice, &x);
        }
        self.announce();
    }
}
