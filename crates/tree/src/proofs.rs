//! Proofs in exact arithmetic in the course of a search: of the root's value, and of leaves whose
//! floating-point multipliers prove too little once they are rounded.
//!
//! A node that its floating-point bound alone would close is proved before it is closed. Where its
//! exact bound turns out to be under the best known value by what floats do not see (the rounded
//! numbers of a cut, a whole column that is off by a millionth), it is no leaf: it is branched on.
//! An open node that an incumbent would close is put aside and proved before the next node is solved,
//! from its nearest solved ancestor's basis; it is open again where that proves too little.

use model::{ColumnId, Number, Sense, nearest_f64};
use proof::{Budget, Certifier, ExactMultipliers, Wish};

use crate::branching::Choice;
use crate::cutting::Cutting;
use crate::decide::CAREFUL;
use crate::event::{NodeId, NodeState};
use crate::proving::Proving;
use crate::search::{Hand, Job, Progress, Purpose, Search};
use crate::solution::{Completed, Verdict};
use crate::target::signed;

/// What one leaf may cost: ticks, and bits of numbers.
const LEAF: Budget = Budget { ticks: 40_000_000, bits: 8_000 };

/// What a proof is about.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Proof {
    /// The value of the root.
    Root,
    /// That the root has no point.
    NoRoot,
    /// That the root is closed before it is branched on, by an incumbent or by general cuts.
    Opening,
    /// That the node in hand is closed.
    Hand,
    /// That an open node is closed, from the basis of a node.
    Dropped(NodeId, NodeId),
    /// A leaf, from the basis of a node.
    Leaf(NodeId, NodeId),
}

impl Proof {
    /// The open node that it may close.
    fn dropped(self) -> Option<NodeId> {
        if let Self::Dropped(node, _) = self { Some(node) } else { None }
    }
}

/// Leaves that are not proved yet.
#[derive(Debug, Default)]
pub(crate) struct Doubtful {
    nodes: Vec<NodeId>,
    /// Open nodes that an incumbent closes in floating-point arithmetic.
    dropped: Vec<NodeId>,
    /// Whether the root is closed before it is branched on, once that was tried.
    opening: Option<bool>,
    /// Whether that is proved.
    proved: bool,
    /// The multipliers of the last basis, and of which node.
    last: Option<(NodeId, ExactMultipliers)>,
    /// The floating-point ray of a root that seems to have no point.
    ray: Vec<f64>,
}

impl Doubtful {
    pub(crate) fn push(&mut self, node: NodeId) {
        self.nodes.push(node);
    }

    pub(crate) fn push_dropped(&mut self, node: NodeId) {
        self.dropped.push(node);
    }

    /// What the proof of the root before its branching came to.
    pub(crate) fn opening(&self) -> Option<bool> {
        self.opening
    }

    /// Whether that proof was reached.
    pub(crate) fn opening_is_proved(&self) -> bool {
        self.proved
    }
}

impl Search {
    /// Begins to prove the root's value, once; false when there is nothing to begin.
    pub(crate) fn prove_root(&mut self) -> bool {
        let Some(hand) = self.hand.as_mut().filter(|hand| hand.node == NodeId::ROOT) else {
            return false;
        };
        if std::mem::replace(&mut hand.tried, true) {
            return false;
        }
        self.begin_proof(Proof::Root, NodeId::ROOT, Wish::Optimum(None))
    }

    /// Begins to prove that the root has no point, once; false when there is nothing to begin.
    pub(crate) fn refute_root(&mut self, ray: &[f64]) -> bool {
        let Some(hand) = self.hand.as_mut().filter(|hand| hand.node == NodeId::ROOT) else {
            return false;
        };
        if std::mem::replace(&mut hand.tried, true) {
            return false;
        }
        self.doubtful.ray = ray.to_vec();
        self.begin_proof(Proof::NoRoot, NodeId::ROOT, Wish::Refutation)
    }

    fn begin_proof(&mut self, proof: Proof, node: NodeId, wish: Wish) -> bool {
        let Some(relaxation) = &self.relaxation else { return false };
        let (from, budget) = match proof {
            Proof::Leaf(_, from) | Proof::Dropped(_, from) => (self.last_basis(from), LEAF),
            Proof::Opening => (self.last_basis(NodeId::ROOT), LEAF),
            Proof::Hand => (Some(relaxation.simplex.basis()), LEAF),
            Proof::Root | Proof::NoRoot => (Some(relaxation.simplex.basis()), Budget::default()),
        };
        let Some(basis) = from else { return false };
        let bounds = relaxation.bounds_at(&self.tree.path(node));
        let proving = Proving::new(bounds, basis, wish, budget);
        self.job = Job::Prove(Box::new(proving), proof);
        true
    }

    /// Begins to prove that the node in hand is closed, where only its floating-point bound says so;
    /// false when there is nothing to begin. Keeps what its multipliers prove.
    pub(crate) fn prove_closed(&mut self) -> bool {
        let Some(mut hand) = self.hand.take() else { return false };
        let begins = self.is_doubtful(&mut hand);
        let node = hand.node;
        self.hand = Some(hand);
        begins && self.begin_proof(Proof::Hand, node, self.wish())
    }

    /// Whether a node in hand is to be closed and its multipliers do not prove it; once a node.
    fn is_doubtful(&mut self, hand: &mut Hand) -> bool {
        let (Some(point), Some(relaxation)) = (&hand.point, &self.relaxation) else { return false };
        if hand.tried || !self.closed(hand, point) {
            return false;
        }
        let mut work = relaxation.exact().work();
        let quick = relaxation.prove_quickly(&point.duals, self.user(point.bound));
        hand.proved = self.better(hand.proved.take(), quick);
        if !self.suffices(hand.proved.clone()) {
            work += CAREFUL * relaxation.exact().work();
            let careful = relaxation.prove(&point.duals);
            hand.proved = self.better(hand.proved.take(), careful);
        }
        self.ledger.ticks += work;
        hand.tried = true;
        !self.suffices(hand.proved.clone())
    }

    /// Begins to prove that the root is closed before it is branched on; false when there is nothing
    /// to begin.
    pub(crate) fn prove_opening(&mut self) -> bool {
        let closes = self.plan.is_some() && self.target.closes(self.opening_bound());
        let proved = self.target.proves_float(self.tree.node(NodeId::ROOT).proved);
        if !closes || proved || self.doubtful.opening.is_some() {
            return false;
        }
        self.begin_proof(Proof::Opening, NodeId::ROOT, self.wish())
    }

    /// What a leaf's proof is to reach.
    fn wish(&self) -> Wish {
        Wish::Optimum(self.target.goal().map(|goal| signed(&self.model, goal.clone())))
    }

    /// The basis that the children of a node start from: of the root that with the general cuts, where
    /// there is one, for its own may prove less than what closed the tree.
    fn last_basis(&self, node: NodeId) -> Option<lp::Basis> {
        let cut = self.cutting.as_ref().and_then(Cutting::basis);
        let cut = cut.filter(|_| node == NodeId::ROOT).cloned();
        cut.or_else(|| self.tree.basis(node))
    }

    /// The proof in hand is done.
    pub(crate) fn proved(&mut self) -> Option<Progress> {
        let Job::Prove(proving, proof) = std::mem::replace(&mut self.job, Job::None) else {
            return None;
        };
        self.ledger.ticks += proving.ticks();
        let certifier = proving.certifier;
        match proof {
            Proof::Root => {
                let bound = certifier.bound(self.relaxation.as_ref()?.exact());
                let hand = self.hand.as_mut()?;
                (hand.proved, hand.exact) = (bound, certifier.is_exact());
                self.take_exact_point(&certifier);
                self.look_for_sliver(&certifier);
                self.decide()
            }
            Proof::NoRoot => {
                self.hand.as_mut()?.exact = certifier.is_refuted();
                let ray = std::mem::take(&mut self.doubtful.ray);
                self.infeasible(&ray)
            }
            Proof::Hand => self.hand_proved(&certifier),
            Proof::Opening => {
                let bound = certifier.bound(self.relaxation.as_ref()?.exact());
                let short = certifier.is_exact() && !self.suffices(bound.clone());
                self.doubtful.opening = Some(!(short && self.is_exact()));
                self.doubtful.proved = self.suffices(bound);
                None
            }
            Proof::Dropped(node, from) => {
                let bound = certifier.bound(self.relaxation.as_ref()?.exact());
                if self.suffices(bound) {
                    self.drop_node(node, true);
                } else {
                    self.reopen_dropped(node);
                }
                self.doubtful.last = certifier.into_multipliers().map(|m| (from, m));
                None
            }
            Proof::Leaf(_, from) => {
                self.take_exact_point(&certifier);
                let bound = certifier.bound(self.relaxation.as_ref()?.exact());
                let reached = certifier.is_refuted() || self.suffices(bound);
                self.count(reached);
                self.doubtful.last = certifier.into_multipliers().map(|m| (from, m));
                None
            }
        }
    }

    /// The proof of the node in hand is done. Where its exact bound is too low a whole column that
    /// floats see as whole may have a fraction: it can be branched on.
    fn hand_proved(&mut self, certifier: &Certifier) -> Option<Progress> {
        let bound = certifier.bound(self.relaxation.as_ref()?.exact());
        let mut hand = self.hand.take()?;
        hand.proved = self.better(hand.proved.take(), bound);
        hand.exact = certifier.is_exact();
        hand.short = !certifier.is_spent();
        self.hand = Some(hand);
        self.take_exact_point(certifier);
        self.look_for_sliver(certifier);
        self.decide()
    }

    /// Takes the exact optimum of a relaxation as the incumbent, where its whole columns are whole and
    /// the incumbent is worse: the floats of that point may be a plan too, of a value that is worse by
    /// what its continuous columns were rounded by, and no bound then reaches it.
    fn take_exact_point(&mut self, certifier: &Certifier) {
        let Some(relaxation) = self.relaxation.as_ref().filter(|_| certifier.is_exact()) else {
            return;
        };
        let bound = certifier.bound(relaxation.exact());
        let improves = bound.is_some_and(|b| self.target.improves(&signed(&self.model, b)));
        let Some(point) = certifier.point().filter(|_| improves && self.incumbent.is_some()) else {
            return;
        };
        if !self.chooser.whole().iter().all(|column| point[column.index()].is_int()) {
            return;
        }
        self.ledger.ticks += relaxation.exact().work();
        let checked =
            self.checker.check_completed(self.rounds.separators(), Completed::Exact(point));
        if let Verdict::Solution(solution) = checked
            && solution.exact
        {
            self.accept(solution, Purpose::Relaxation);
        }
    }

    /// Keeps the whole column of the node in hand with the widest fraction that only exact numbers
    /// show, where such a node stays open.
    fn look_for_sliver(&mut self, certifier: &Certifier) {
        let Some(hand) = self.hand.as_ref().filter(|hand| self.falls_short(hand)) else { return };
        let Some(point) = certifier.vertex() else { return };
        let node = hand.node;
        let all = self.chooser.whole().iter().filter_map(|&column| sliver(&point, column));
        let widest = all.reduce(|best, one| if one.0 > best.0 { one } else { best });
        let sliver = widest.map(|(_, choice)| choice);
        let free = |choice: &Choice| {
            let (lower, upper) = self.bounds_at(node, choice.column);
            lower <= choice.floor && choice.floor < upper
        };
        let sliver = sliver.filter(free);
        if let Some(hand) = &mut self.hand {
            hand.sliver = sliver;
        }
    }

    /// Whether a node that floats would close is to stay open: its basis does not prove that its
    /// relaxation is no better than the best known value, which has an exact plan.
    pub(crate) fn falls_short(&self, hand: &Hand) -> bool {
        (hand.exact || hand.short) && self.is_exact() && !self.suffices(hand.proved.clone())
    }

    /// Whether the incumbent, where there is one, meets everything exactly.
    fn is_exact(&self) -> bool {
        self.incumbent.as_ref().is_none_or(|incumbent| incumbent.solution.exact)
    }

    /// An open node that was put aside is open again.
    fn reopen_dropped(&mut self, node: NodeId) {
        self.open.insert(node, self.tree.node(node).bound);
    }

    /// How many open nodes are put aside.
    pub(crate) fn put_aside(&self) -> u32 {
        let proving = matches!(&self.job, Job::Prove(_, proof) if proof.dropped().is_some());
        u32::try_from(self.doubtful.dropped.len()).unwrap_or(u32::MAX) + u32::from(proving)
    }

    /// Goes on with the nodes put aside; true when a proof was begun.
    pub(crate) fn prove_doubtful(&mut self) -> bool {
        while let Some(node) = self.doubtful.dropped.pop() {
            let from = self.solved_above(node);
            let known = self.target.proves_float(self.tree.node(node).proved);
            if known || from.is_some_and(|from| self.last_suffices(node, from)) {
                self.drop_node(node, true);
                continue;
            }
            let proof = from.map(|from| Proof::Dropped(node, from));
            if proof.is_some_and(|proof| self.begin_proof(proof, node, self.wish())) {
                return true;
            }
            self.reopen_dropped(node);
        }
        while let Some(node) = self.doubtful.nodes.pop() {
            let Some(from) = self.solved_above(node) else {
                self.count(false);
                continue;
            };
            if self.last_suffices(node, from) {
                self.count(true);
                continue;
            }
            let wish = match self.tree.node(node).state {
                NodeState::Infeasible => Wish::Refutation,
                _ => self.wish(),
            };
            if self.begin_proof(Proof::Leaf(node, from), node, wish) {
                return true;
            }
            self.count(false);
        }
        false
    }

    /// The node, or its nearest ancestor, that has a final basis.
    fn solved_above(&self, node: NodeId) -> Option<NodeId> {
        let mut at = Some(node);
        while let Some(here) = at.filter(|&here| !self.tree.node(here).is_solved()) {
            at = self.tree.node(here).parent();
        }
        at
    }

    /// Whether the multipliers of the last proof do for this leaf too.
    fn last_suffices(&mut self, node: NodeId, from: NodeId) -> bool {
        let (Some((owner, multipliers)), Some(relaxation)) =
            (&self.doubtful.last, &self.relaxation)
        else {
            return false;
        };
        if *owner != from || self.tree.node(node).state == NodeState::Infeasible {
            return false;
        }
        let bounds = relaxation.bounds_at(&self.tree.path(node));
        self.ledger.ticks += bounds.len() as u64;
        let bound = multipliers.bound(relaxation.exact(), &bounds);
        self.suffices(bound)
    }

    /// Whether a bound proves that a leaf holds no better plan.
    pub(crate) fn suffices(&self, bound: Option<Number>) -> bool {
        bound.is_some_and(|bound| self.target.proves(&signed(&self.model, bound)))
    }

    /// Counts the leaves put aside as unproved and opens the others again: the search ends.
    pub(crate) fn give_up_proofs(&mut self) {
        let proving = if let Job::Prove(_, proof) = &self.job { proof.dropped() } else { None };
        for node in std::mem::take(&mut self.doubtful.dropped).into_iter().chain(proving) {
            self.reopen_dropped(node);
        }
        let in_hand = matches!(self.job, Job::Prove(_, Proof::Leaf(..)));
        let nodes = std::mem::take(&mut self.doubtful.nodes);
        for _ in 0..nodes.len() + usize::from(in_hand) {
            self.count(false);
        }
    }

    /// The stronger of two proved bounds, in the direction of the objective.
    pub(crate) fn better(&self, a: Option<Number>, b: Option<Number>) -> Option<Number> {
        match self.model.sense() {
            Sense::Minimise => a.max(b),
            Sense::Maximise => match (a, b) {
                (Some(a), Some(b)) => Some(if a < b { a } else { b }),
                (a, b) => a.or(b),
            },
        }
    }
}

/// A whole column split at its exact value, where that has a fraction; with the distance to the nearest
/// whole number.
fn sliver(point: &[Number], column: ColumnId) -> Option<(f64, Choice)> {
    let value = point.get(column.index()).filter(|value| !value.is_int())?;
    let floor = nearest_f64(&Number::from(value.clone().floor()));
    let value = nearest_f64(value);
    let distance = (value - value.round()).abs();
    Some((distance, Choice { column, value, floor }))
}
