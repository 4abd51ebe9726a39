//! Proofs in exact arithmetic in the course of a search: of the root's value, and of leaves whose
//! floating-point multipliers prove too little once they are rounded.
//!
//! Such a leaf is put aside and proved before the next node is solved, from its own final basis
//! or, when it was never solved, from its nearest solved ancestor's.

use model::{Number, Sense};
use proof::{Budget, ExactMultipliers, Wish};

use crate::cutting::Cutting;
use crate::event::{NodeId, NodeState};
use crate::proving::Proving;
use crate::search::{Job, Progress, Search};
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
    /// A leaf, from the basis of a node.
    Leaf(NodeId, NodeId),
}

/// Leaves that are not proved yet.
#[derive(Debug, Default)]
pub(crate) struct Doubtful {
    nodes: Vec<NodeId>,
    /// The multipliers of the last basis, and of which node.
    last: Option<(NodeId, ExactMultipliers)>,
    /// The floating-point ray of a root that seems to have no point.
    ray: Vec<f64>,
}

impl Doubtful {
    pub(crate) fn push(&mut self, node: NodeId) {
        self.nodes.push(node);
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
            Proof::Leaf(_, from) => (self.last_basis(from), LEAF),
            Proof::Root | Proof::NoRoot => (Some(relaxation.simplex.basis()), Budget::default()),
        };
        let Some(basis) = from else { return false };
        let bounds = relaxation.bounds_at(&self.tree.path(node));
        let proving = Proving::new(bounds, basis, wish, budget);
        self.job = Job::Prove(Box::new(proving), proof);
        true
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
                self.decide()
            }
            Proof::NoRoot => {
                self.hand.as_mut()?.exact = certifier.is_refuted();
                let ray = std::mem::take(&mut self.doubtful.ray);
                self.infeasible(&ray)
            }
            Proof::Leaf(_, from) => {
                let bound = certifier.bound(self.relaxation.as_ref()?.exact());
                let reached = certifier.is_refuted() || self.suffices(bound);
                self.count(reached);
                self.doubtful.last = certifier.into_multipliers().map(|m| (from, m));
                None
            }
        }
    }

    /// Goes on with the leaves put aside; true when a proof was begun.
    pub(crate) fn prove_doubtful(&mut self) -> bool {
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
                _ => {
                    Wish::Optimum(self.target.goal().map(|goal| signed(&self.model, goal.clone())))
                }
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

    /// Counts the leaves put aside as unproved: the search ends.
    pub(crate) fn give_up_proofs(&mut self) {
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
