//! General cuts at the root, in rounds: the relaxation is solved, rows are looked at, the best cuts
//! that are not parallel are added, until none is found, the bound no longer rises or the limit is
//! reached. The root stays as it was reported; its children start from the basis with the cuts.

use std::rc::Rc;

use lp::Basis;
use model::{Model, nearest_f64};
use separate::general::{Class, Frame, choose};

use crate::cut_round::{CutRound, count};
use crate::event::{NodeId, NodeState};
use crate::relaxation::Relaxation;
use crate::search::{Hand, Job, Progress, Purpose, Search};
use crate::solution::{Solution, Verdict};
use crate::target::{float_below, signed};

/// Rounds at most.
const MOST_ROUNDS: u32 = 30;
/// Cuts that a round adds at most.
const MOST_CUTS: usize = 40;
/// A rise of the bound that is less than this share of it does not count.
const RISE: f64 = 1e-5;
/// Rounds in a row without a rise that end the cuts.
const STALLED: u32 = 4;
/// By how much a solution may break a cut by the rounding of its floats.
const ROUNDED: f64 = 1e-6;

/// What general cuts gave.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct CutsResult {
    /// The bound of the root's relaxation with them, in the direction of the objective.
    pub bound: Option<f64>,
    /// Rounds that added some.
    pub rounds: u32,
    /// How many of each class were added: Gomory, mixed-integer rounding, cover.
    pub added: [u32; 3],
}

/// The state of the rounds.
#[derive(Debug)]
pub(crate) struct Cutting {
    frame: Frame,
    result: CutsResult,
    done: bool,
    stalled: u32,
    last: f64,
    basis: Option<Basis>,
    point: Option<(f64, Vec<f64>)>,
}

impl Cutting {
    pub(crate) fn new(model: &Rc<Model>) -> Self {
        Self {
            frame: Frame::new(model),
            result: CutsResult::default(),
            done: false,
            stalled: 0,
            last: f64::NEG_INFINITY,
            basis: None,
            point: None,
        }
    }

    /// The basis of the last relaxation with cuts.
    pub(crate) fn basis(&self) -> Option<&Basis> {
        self.basis.as_ref()
    }

    /// The internal bound and the point of that relaxation, once.
    pub(crate) fn take_point(&mut self) -> Option<(f64, Vec<f64>)> {
        self.point.take()
    }

    /// Notes the bound of a round; whether it has stalled.
    fn stalls(&mut self, bound: f64) -> bool {
        if bound > self.last + RISE * (1.0 + bound.abs()) {
            self.last = bound;
            self.stalled = 0;
        } else {
            self.stalled += 1;
        }
        self.stalled >= STALLED
    }
}

/// The class of a cut in a word.
pub(crate) fn class_name(class: Class) -> &'static str {
    match class {
        Class::Gomory => "Gomory",
        Class::Mir => "rounding",
        Class::Cover => "cover",
    }
}

impl Search {
    /// What general cuts gave; `None` where none were asked for, or they have not ended.
    #[must_use]
    pub fn cuts(&self) -> Option<CutsResult> {
        self.cutting.as_ref().filter(|cutting| cutting.done).map(|cutting| cutting.result)
    }

    /// Takes the root in hand once more, where general cuts are wanted and can help.
    pub(crate) fn begin_cuts(&mut self) -> Option<Progress> {
        let open = self.plan.is_some() && !self.target.closes(self.tree.node(NodeId::ROOT).bound);
        let (Some(_), Some(relaxation), true) = (&self.cutting, &mut self.relaxation, open) else {
            return None;
        };
        relaxation.enter(&[]);
        relaxation.load(self.tree.node(NodeId::ROOT).basis.as_deref());
        let mut hand = Hand::new(NodeId::ROOT, relaxation.simplex.stats().iterations);
        hand.cutting = true;
        self.hand = Some(hand);
        self.solve()
    }

    /// The relaxation with the cuts so far is solved: looks for more, or ends.
    pub(crate) fn cut_round(&mut self) -> Option<Progress> {
        let (Some(cutting), Some(hand), Some(relaxation)) =
            (&mut self.cutting, &self.hand, &self.relaxation)
        else {
            return None;
        };
        let point = hand.point.as_ref()?;
        let whole = self.chooser.fractional(&point.x) == 0;
        let stalled = cutting.stalls(point.bound);
        let enough = cutting.result.rounds >= MOST_ROUNDS;
        if whole || stalled || enough || self.target.closes(point.bound) {
            return self.finish_cuts();
        }
        let wanted = (self.settings.cuts, self.chooser.whole());
        let round = CutRound::new(relaxation, &cutting.frame, wanted, &point.x);
        self.ledger.ticks += round.ticks;
        self.job = Job::Cut(Box::new(round));
        None
    }

    /// Goes on with a round by one row; adds what it found at its end.
    pub(crate) fn advance_cuts(&mut self) -> Option<Progress> {
        let (Job::Cut(round), Some(relaxation), Some(cutting)) =
            (&mut self.job, &mut self.relaxation, &mut self.cutting)
        else {
            return None;
        };
        let before = round.ticks;
        let more = round.step(relaxation, &cutting.frame);
        self.ledger.ticks += 1 + round.ticks - before;
        if more {
            return None;
        }
        let cuts = choose(std::mem::take(&mut round.found), MOST_CUTS);
        if cuts.is_empty() {
            return self.finish_cuts();
        }
        cutting.result.rounds += 1;
        let classes = [Class::Gomory, Class::Mir, Class::Cover];
        for (added, class) in cutting.result.added.iter_mut().zip(classes) {
            *added += count(&cuts, class);
        }
        match relaxation.add_cuts(cuts) {
            Ok(()) => self.solve(),
            Err(_) => self.finish_cuts(),
        }
    }

    /// Ends the rounds: the children of the root start from here.
    pub(crate) fn finish_cuts(&mut self) -> Option<Progress> {
        self.job = Job::None;
        let hand = self.hand.take()?;
        let (Some(point), Some(relaxation)) = (hand.point, &self.relaxation) else {
            self.note_cuts(None);
            return None;
        };
        let proved = relaxation.prove(&point.duals).map(|bound| signed(&self.model, bound));
        let proved = proved.as_ref().map_or(f64::NEG_INFINITY, float_below);
        let basis = relaxation.simplex.basis();
        let root = self.tree.node_mut(NodeId::ROOT);
        root.proved = if proved > root.proved { proved } else { root.proved };
        let choice = self.chooser.choose(self.settings.branching, &point.x);
        if self.acts.column(NodeId::ROOT).is_none() {
            self.plan = choice.or(self.plan);
        }
        self.note_cuts(Some(self.user(point.bound)));
        if let Verdict::Solution(solution) = self.checker.check(self.rounds.separators(), &point.x)
        {
            self.accept(solution, Purpose::Relaxation);
        }
        if let Some(cutting) = &mut self.cutting {
            cutting.basis = Some(basis);
            cutting.point = Some((point.bound, point.x));
        }
        None
    }

    fn note_cuts(&mut self, bound: Option<f64>) {
        if let Some(cutting) = &mut self.cutting {
            cutting.done = true;
            cutting.result.bound = bound;
        }
    }

    /// With the cuts the root has no point: there is no solution.
    pub(crate) fn cut_off(&mut self, ray: &[f64]) -> Option<Progress> {
        let checked = self.relaxation.as_ref()?.refutes(ray);
        self.job = Job::None;
        self.hand = None;
        self.plan = None;
        self.note_cuts(None);
        self.tree.node_mut(NodeId::ROOT).state = NodeState::Infeasible;
        self.count(checked);
        None
    }

    /// Whether a solution breaks a general cut, which none may.
    pub(crate) fn breaks_a_cut(&self, solution: &Solution) -> bool {
        let cuts = self.relaxation.as_ref().map_or(&[][..], Relaxation::cuts);
        cuts.iter().any(|row| {
            let size = row.entries.iter().fold(1.0, |sum: f64, (column, a)| {
                sum + (nearest_f64(a) * solution.x[column.index()]).abs()
            });
            let side = row.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
            row.activity(&solution.x) > side + ROUNDED * size
        })
    }
}
