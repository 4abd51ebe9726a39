//! What becomes of a node once its relaxation is solved, and the account of leaves.

use model::{ColumnId, Number};

use crate::branching::Choice;
use crate::event::{Event, NodeId, NodeState};
use crate::search::{Hand, Job, PointInHand, Progress, Search};
use crate::target::{float_below, signed};

/// How far the value of a solution may be over the bound of the node whose point it is, for the
/// node to be closed; relative to max(1, |value|). Such a leaf counts as unchecked unless
/// it is proved.
const ROUNDED: f64 = 1e-6;

/// Sums that a careful proof from multipliers takes: one for each way of rounding them.
pub(crate) const CAREFUL: u64 = 2;

/// What the `Solved` event says beside the node.
struct Verdict {
    state: NodeState,
    bound: Option<f64>,
    fractional: u32,
    branch_column: Option<ColumnId>,
}

impl Search {
    /// The node in hand is solved and its candidates are tried: close it or branch.
    pub(crate) fn decide(&mut self) -> Option<Progress> {
        self.job = Job::None;
        if self.prove_root() || self.begin_probing() || self.prove_closed() {
            return None;
        }
        let mut hand = self.hand.take()?;
        let point = hand.point.as_ref()?;
        if !hand.tried {
            let quick = self.proved_quickly(point);
            hand.proved = self.better(hand.proved.take(), quick);
        }
        let short = self.falls_short(&hand);
        let seems_closed = self.closed(&hand, point);
        let choice = if seems_closed && !short { None } else { self.choice(&hand, &point.x) };
        let closed = seems_closed && choice.is_none();
        if choice.is_none() && !hand.tried && !self.suffices(hand.proved.clone()) {
            let careful = self.proved_carefully(point);
            hand.proved = self.better(hand.proved.take(), careful);
        }
        let held = self.is_to_be_held(hand.node);
        let state = match (closed, choice, hand.accepted) {
            (true, _, Some(_)) | (false, None, Some(_)) => NodeState::Integer,
            (true, _, None) => NodeState::Pruned,
            (false, Some(_), _) if held => NodeState::Open,
            (false, Some(_), _) => NodeState::Branched,
            (false, None, None) => {
                self.hand = Some(hand);
                return self.unsolved("its point breaks a row by more than the tolerance");
            }
        };
        let inherited = self.record(&hand, point, state);
        if state == NodeState::Branched || state == NodeState::Open {
            self.fix(hand.node, point);
        }
        let root = hand.node == NodeId::ROOT;
        let waits = root && state == NodeState::Branched && !self.settings.search;
        let state = if waits { NodeState::Open } else { state };
        let verdict = Verdict {
            state,
            bound: Some(self.user(point.bound)),
            fractional: self.chooser.fractional(&point.x),
            branch_column: choice
                .map(|choice| choice.column)
                .filter(|_| state == NodeState::Branched),
        };
        self.solved(&hand, &verdict);
        if root {
            return self.root_decided(hand, choice);
        }
        match choice {
            Some(_) if held => self.hold(hand.node, inherited, point.x.clone()),
            Some(choice) => self.branch(hand.node, inherited, &choice, &point.x),
            None => {
                self.ledger.node_work.cut_off += u32::from(hand.was_cut);
                self.leaf(&hand);
            }
        }
        self.announce();
        None
    }

    /// What the multipliers of a point prove, with little care.
    fn proved_quickly(&mut self, point: &PointInHand) -> Option<Number> {
        let relaxation = self.relaxation.as_ref()?;
        self.ledger.ticks += relaxation.exact().work();
        relaxation.prove_quickly(&point.duals, self.user(point.bound))
    }

    /// The same with care.
    fn proved_carefully(&mut self, point: &PointInHand) -> Option<Number> {
        let relaxation = self.relaxation.as_ref()?;
        self.ledger.ticks += CAREFUL * relaxation.exact().work();
        relaxation.prove(&point.duals)
    }

    pub(crate) fn closed(&self, hand: &Hand, point: &PointInHand) -> bool {
        let near = |value: f64| {
            let size = if value.abs() > 1.0 { value.abs() } else { 1.0 };
            point.bound >= value - ROUNDED * size
        };
        self.target.closes(point.bound) || hand.accepted.is_some_and(near)
    }

    fn choice(&self, hand: &Hand, x: &[f64]) -> Option<Choice> {
        let simplex = &self.relaxation.as_ref()?.simplex;
        let by_hand = self.choice_by_hand(hand.node, x).or(hand.probed_choice);
        let chosen = by_hand.or_else(|| self.chooser.choose(self.settings.branching, x));
        let chosen = chosen.or(hand.sliver);
        chosen.or_else(|| self.chooser.any(x, |column| simplex.bounds(lp::Col(column.0))))
    }

    /// Writes what was found into the node, and learns from it. Gives the bound for its
    /// children: its own, or one of its ancestors' where that is better by rounding.
    fn record(&mut self, hand: &Hand, point: &PointInHand, state: NodeState) -> f64 {
        let Some(relaxation) = &self.relaxation else { return point.bound };
        let proved = hand.proved.clone().map(|bound| signed(&self.model, bound));
        let proved = proved.as_ref().map_or(f64::NEG_INFINITY, float_below);
        self.ledger.ticks += point.x.len() as u64;
        let parent = self.tree.node(hand.node).parent();
        let above = parent.map(|parent| self.tree.node(parent).bound);
        let (rows, basis) = (relaxation.row_count(), relaxation.simplex.basis());
        self.tree.keep_basis(hand.node, basis);
        let node = self.tree.node_mut(hand.node);
        if let (Some(above), Some(branch)) = (above, node.branch()) {
            self.chooser.learn(&branch, node.distance, point.bound - above);
        }
        let inherited = larger(node.bound, point.bound);
        node.bound = point.bound;
        node.proved = larger(node.proved, proved);
        node.state = state;
        node.rows = u32::try_from(rows).unwrap_or(u32::MAX);
        inherited
    }

    /// Says that the node in hand is solved.
    fn solved(&mut self, hand: &Hand, verdict: &Verdict) {
        let iterations =
            self.relaxation.as_ref().map_or(0, |relaxation| relaxation.simplex.stats().iterations);
        self.ledger.nodes += 1;
        self.quota =
            self.quota.map(|left| left.saturating_sub(u32::from(hand.node != NodeId::ROOT)));
        self.events.push(Event::Solved {
            node: hand.node,
            state: verdict.state,
            bound: verdict.bound,
            fractional: verdict.fractional,
            iterations: u32::try_from(iterations - hand.iterations_before).unwrap_or(u32::MAX),
            rows_added: hand.rows_added,
            branch_column: verdict.branch_column,
        });
    }

    /// Makes the two children of a node whose relaxation's point is `x`.
    pub(crate) fn branch(&mut self, node: NodeId, bound: f64, choice: &Choice, x: &[f64]) {
        let estimates = self.chooser.estimates(x, choice);
        for ((branch, distance), estimate) in choice.sides().into_iter().zip(estimates) {
            let child = self.tree.child(node, branch, distance, bound);
            self.open.insert_child(child, bound, bound + estimate);
            self.events.push(Event::Created {
                node: child,
                parent: Some(node),
                branching: Some(branch),
            });
        }
    }

    /// Counts a leaf in hand that was closed by its value.
    pub(crate) fn leaf(&mut self, hand: &Hand) {
        let checked = self.suffices(hand.proved.clone())
            || self.target.proves_float(self.tree.node(hand.node).proved);
        if checked || hand.tried {
            self.close_leaf(hand.node, checked);
        } else {
            self.doubt_leaf(hand.node);
        }
    }

    /// Counts a leaf that was closed by its value.
    fn close_leaf(&mut self, node: NodeId, checked: bool) {
        self.note_leaf(node);
        self.count(checked);
    }

    /// Puts a leaf that was closed by its value aside, to be proved.
    fn doubt_leaf(&mut self, node: NodeId) {
        self.note_leaf(node);
        self.doubtful.push(node);
    }

    fn note_leaf(&mut self, node: NodeId) {
        self.ledger.pruned = true;
        let by_step = self.target.closes_by_step(self.tree.node(node).bound);
        self.ledger.node_work.stepped += u32::from(by_step);
    }

    pub(crate) fn count(&mut self, checked: bool) {
        let counter = if checked {
            &mut self.ledger.leaves_checked
        } else {
            &mut self.ledger.leaves_unchecked
        };
        *counter += 1;
    }

    /// The node in hand has no point, as `ray` says.
    pub(crate) fn infeasible(&mut self, ray: &[f64]) -> Option<Progress> {
        if self.hand.as_ref()?.cutting {
            return self.cut_off(ray);
        }
        let refuted = self.hand.as_ref()?.exact;
        let relaxation = self.relaxation.as_ref()?;
        self.ledger.ticks += CAREFUL * relaxation.exact().work();
        let checked = refuted || relaxation.refutes(ray);
        if !checked && self.refute_root(ray) {
            return None;
        }
        let hand = self.hand.take()?;
        let relaxation = self.relaxation.as_ref()?;
        self.ledger.node_work.cut_off += u32::from(hand.was_cut);
        self.tree.keep_basis(hand.node, relaxation.simplex.basis());
        let node = self.tree.node_mut(hand.node);
        node.state = NodeState::Infeasible;
        node.rows = u32::try_from(relaxation.row_count()).unwrap_or(u32::MAX);
        self.ledger.ticks += ray.len() as u64;
        if checked || hand.node == NodeId::ROOT {
            self.count(checked);
        } else {
            self.doubtful.push(hand.node);
        }
        self.close_without_bound(&hand, NodeState::Infeasible);
        if hand.node == NodeId::ROOT {
            return self.root_infeasible(&hand, ray, checked);
        }
        self.announce();
        None
    }

    /// The node in hand cannot be solved: its parent's bound stands.
    pub(crate) fn unsolved(&mut self, why: &str) -> Option<Progress> {
        if self.hand.as_ref()?.cutting {
            return self.finish_cuts();
        }
        if self.hand.as_ref()?.node == NodeId::ROOT {
            return self.root_stopped(why.to_owned());
        }
        let hand = self.hand.take()?;
        self.tree.node_mut(hand.node).state = NodeState::Unsolved;
        why.clone_into(&mut self.ledger.trouble);
        self.ledger.unsolved.push(hand.node);
        self.close_without_bound(&hand, NodeState::Unsolved);
        self.announce();
        None
    }

    /// Says that the node in hand ended without a bound of its own.
    pub(crate) fn close_without_bound(&mut self, hand: &Hand, state: NodeState) {
        self.job = Job::None;
        self.solved(hand, &Verdict { state, bound: None, fractional: 0, branch_column: None });
    }

    /// Drops every open node that the best known value closes; those of which that is not proved yet
    /// are put aside.
    pub(crate) fn drop_closed(&mut self) {
        let target = &self.target;
        for node in self.open.drain(|bound| target.closes(bound)) {
            if self.target.proves_float(self.tree.node(node).proved) {
                self.drop_node(node, true);
            } else {
                self.doubtful.push_dropped(node);
            }
        }
        self.announce();
    }

    /// Closes a node by its value without solving it; `checked` says whether that is proved.
    pub(crate) fn drop_node(&mut self, node: NodeId, checked: bool) {
        self.ledger.ticks += 1;
        self.tree.node_mut(node).state = NodeState::Pruned;
        self.events.push(Event::Dropped { node, state: NodeState::Pruned });
        self.close_leaf(node, checked);
    }

    /// At the end: nodes that could not be solved, and nodes closed by hand, count as closed by
    /// value where the bound that they inherited closes them.
    pub(crate) fn settle(&mut self) {
        let unsolved = std::mem::take(&mut self.ledger.unsolved);
        self.ledger.unsolved = self.not_closed(unsolved);
        let closed = std::mem::take(&mut self.ledger.closed);
        self.ledger.closed = self.not_closed(closed);
    }

    /// Counts those nodes as leaves that the best known value closes, and gives the others.
    fn not_closed(&mut self, nodes: Vec<NodeId>) -> Vec<NodeId> {
        let mut left = Vec::new();
        for node in nodes {
            if self.target.proves_float(self.tree.node(node).proved) {
                self.close_leaf(node, true);
            } else if self.target.closes(self.tree.node(node).bound) {
                self.doubt_leaf(node);
            } else {
                left.push(node);
            }
        }
        left
    }

    /// Says the bound of the whole tree when it has risen.
    pub(crate) fn announce(&mut self) {
        let Some(bound) = self.global_bound().filter(|bound| bound.is_finite()) else { return };
        if self.ledger.announced.is_none_or(|last| bound > last) {
            self.ledger.announced = Some(bound);
            let (work, nodes) = (self.work().ticks, self.ledger.nodes);
            self.ledger.course.rise(work, nodes, bound);
            self.events.push(Event::Bound { bound: self.user(bound), nodes: self.ledger.nodes });
        }
    }

    /// The internal bound of the whole tree: the least over nodes that are not closed, and no
    /// more than the best known value. `None` when there is neither.
    pub(crate) fn global_bound(&self) -> Option<f64> {
        let in_hand = self.hand.as_ref().map(|hand| self.tree.node(hand.node).bound);
        let root = self.plan.map(|_| self.tree.node(NodeId::ROOT).bound);
        let set_aside = self.ledger.unsolved.iter().chain(&self.ledger.closed);
        let set_aside = set_aside.map(|&node| self.tree.node(node).bound);
        let open = [self.open.least(), in_hand, root, self.target.best()];
        open.into_iter().flatten().chain(set_aside).reduce(smaller)
    }
}

fn smaller(a: f64, b: f64) -> f64 {
    if a < b { a } else { b }
}

fn larger(a: f64, b: f64) -> f64 {
    if a > b { a } else { b }
}
