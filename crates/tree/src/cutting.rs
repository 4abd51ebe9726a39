//! General cuts in rounds. At the root: the relaxation is solved, rows are looked at, the best cuts
//! that are not parallel are added and those that were slack for long are purged, until none is found,
//! the bound no longer rises or the limit is reached. The root stays as it was reported; its children
//! start from the basis with the cuts. Below the root: at the nodes that the settings name, from the
//! bounds of the root, so that the cuts hold everywhere.

use std::rc::Rc;

use lp::Basis;
use model::{Model, nearest_f64};
use separate::general::{Class, Frame, GeneralCut, choose, follows};

use crate::cut_round::CutRound;
use crate::decide::CAREFUL;
use crate::event::{Event, NodeId, NodeState};
use crate::ledger::Sources;
use crate::pool::Pool;
use crate::relaxation::{Relaxation, RowOrigin};
use crate::search::{Hand, Job, PointInHand, Progress, Purpose, Search};
use crate::solution::{Solution, Verdict};
use crate::target::{float_below, signed};

/// Rounds at the root at most.
const MOST_ROUNDS: u32 = 30;
/// Cuts that a round adds at most.
const MOST_CUTS: usize = 40;
/// Cuts below the root, of which the rows stay: as many as half of the model's rows, within these limits.
const BELOW: (usize, usize) = (50, 2_000);
/// A rise of the bound that is less than this share of it does not count.
const RISE: f64 = 1e-5;
/// Rounds in a row without a rise that end the cuts.
const STALLED: u32 = 4;
/// By how much a solution may break a cut by the rounding of its floats.
const ROUNDED: f64 = 1e-6;

/// Something for each class of cuts, in the order of [`Class::ALL`].
pub type ByClass<T> = [T; Class::ALL.len()];

/// What general cuts gave.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub struct CutsResult {
    /// The bound of the root's relaxation with them, in the direction of the objective.
    pub bound: Option<f64>,
    /// Rounds at the root that added some.
    pub rounds: u32,
    /// How many of each class were added, at the root and below.
    pub added: ByClass<u32>,
    /// How many of each class are in the relaxation.
    pub kept: ByClass<u32>,
    /// What each class moved the bound of the root by: the rise of each round is shared out by
    /// the violation of its cuts times their multipliers after it.
    pub moved: ByClass<f64>,
    /// How many were added below the root.
    pub below: u32,
    /// How many were purged.
    pub purged: u32,
    /// How many came back from the pool.
    pub returned: u32,
    /// How many were left out because they do not follow from their derivation: none should.
    pub refused: u32,
}

/// The state of the rounds.
#[derive(Debug)]
pub(crate) struct Cutting {
    frame: Frame,
    pool: Pool,
    sources: Sources,
    result: CutsResult,
    done: bool,
    /// Whether those of the root raised its bound: where they do not, those below are only rows.
    helps: bool,
    stalled: u32,
    last: f64,
    basis: Option<Basis>,
    point: Option<(f64, Vec<f64>)>,
    /// The cuts of the last round by number, with what the point before broke them by.
    fresh: Vec<(usize, f64)>,
    /// The bound before that round.
    before: Option<f64>,
}

impl Cutting {
    pub(crate) fn new(model: &Rc<Model>) -> Self {
        Self {
            frame: Frame::new(model),
            pool: Pool::default(),
            sources: Sources::default(),
            result: CutsResult::default(),
            done: false,
            helps: false,
            stalled: 0,
            last: f64::NEG_INFINITY,
            basis: None,
            point: None,
            fresh: Vec::new(),
            before: None,
        }
    }

    /// The rows that cuts rest on, and the cuts of the relaxation with those that they rest on.
    pub(crate) fn told(&self) -> (Vec<RowOrigin>, Vec<GeneralCut>) {
        self.sources.told(&self.pool)
    }

    /// The basis of the last relaxation with cuts.
    pub(crate) fn basis(&self) -> Option<&Basis> {
        self.basis.as_ref()
    }

    /// The internal bound of that relaxation, before its point is taken.
    pub(crate) fn cut_bound(&self) -> Option<f64> {
        self.point.as_ref().map(|(bound, _)| *bound)
    }

    /// The internal bound and the point of that relaxation, once.
    pub(crate) fn take_point(&mut self) -> Option<(f64, Vec<f64>)> {
        self.point.take()
    }

    /// Notes the bound of a round; whether it has stalled.
    fn stalls(&mut self, bound: f64) -> bool {
        if bound > self.last + RISE * (1.0 + bound.abs()) {
            self.helps = self.result.rounds > 0 || self.helps;
            self.last = bound;
            self.stalled = 0;
        } else {
            self.stalled += 1;
        }
        self.stalled >= STALLED
    }

    /// Shares the rise of the last round out among the classes of its cuts.
    fn share(&mut self, relaxation: &Relaxation, point: &PointInHand) {
        let rise = self.before.map_or(0.0, |before| point.bound - before);
        self.before = Some(point.bound);
        let fresh = std::mem::take(&mut self.fresh);
        let mut shares: Vec<(Class, f64)> = Vec::new();
        for (origin, y) in relaxation.origins().iter().zip(&point.duals) {
            let RowOrigin::Cut(class, number) = origin else { continue };
            let broken = fresh.iter().find(|(fresh, _)| fresh == number);
            shares.extend(broken.map(|(_, by)| (*class, (y * by).abs())));
        }
        let all = shares.iter().fold(0.0, |all, (_, share)| all + share);
        if all > 0.0 && rise > 0.0 {
            for (class, share) in shares {
                self.result.moved[class.index()] += rise * share / all;
            }
        }
    }

    /// Goes on with which cuts of a round are taken: the best that are not parallel, those of the
    /// pool among them, each checked in a step of its own. The work done; `None` at the end.
    fn choose_on(&mut self, round: &mut CutRound, relaxation: &Relaxation) -> Option<u64> {
        let Some(queue) = &mut round.queue else {
            let mut found = self.pool.violated(&round.x);
            found.append(&mut round.found);
            let work = found.iter().map(|cut| cut.row.entries.len() as u64).sum();
            let mut best = choose(found, MOST_CUTS);
            best.reverse();
            round.queue = Some(best);
            return Some(work);
        };
        let cut = queue.pop()?;
        let work = 1 + cut.row.entries.len() as u64;
        let fresh = round.taken.iter().filter(|(number, _)| *number >= self.pool.len()).count();
        match self.pool.find(&cut.row) {
            Some((_, true)) => {}
            Some((number, false)) => {
                self.result.returned += 1;
                round.taken.push((number, cut));
            }
            None if follows(&cut, &round.rows, &self.frame) => {
                let origin = |row: usize| round.origin(row, relaxation);
                let cut = self.sources.keep(cut, &origin);
                round.taken.push((self.pool.len() + fresh, cut));
            }
            None => self.result.refused += 1,
        }
        Some(work)
    }

    /// Enters the cuts that were taken into the pool.
    fn enter(&mut self, taken: &[(usize, GeneralCut)]) {
        for (number, cut) in taken {
            self.result.added[cut.class.index()] += u32::from(*number >= self.pool.len());
            self.pool.enter(*number, cut.clone());
        }
    }
}

impl Search {
    /// What general cuts gave; `None` where none were asked for, or those of the root have not
    /// ended.
    #[must_use]
    pub fn cuts(&self) -> Option<CutsResult> {
        let cutting = self.cutting.as_ref().filter(|cutting| cutting.done)?;
        Some(CutsResult { kept: cutting.pool.inside(), ..cutting.result })
    }

    /// Takes the root in hand once more, where general cuts are wanted and can help.
    pub(crate) fn begin_cuts(&mut self) -> Option<Progress> {
        let open = self.plan.is_some() && !self.target.closes(self.tree.node(NodeId::ROOT).bound);
        let (Some(_), Some(relaxation), true) = (&self.cutting, &mut self.relaxation, open) else {
            return None;
        };
        relaxation.enter(&[]);
        relaxation.load(self.tree.basis(NodeId::ROOT).as_ref());
        let mut hand = Hand::new(NodeId::ROOT, relaxation.simplex.stats().iterations);
        hand.cutting = true;
        self.hand = Some(hand);
        self.solve()
    }

    /// Whether a round of cuts is due at the node in hand, which is below the root.
    pub(crate) fn cuts_here(&self) -> bool {
        let (Some(cutting), Some(hand)) = (&self.cutting, &self.hand) else { return false };
        let cuts = self.settings.cuts;
        let depth = self.tree.node(hand.node).depth;
        let due = depth.checked_rem(cuts.every) == Some(0) && hand.node != NodeId::ROOT;
        let most = (self.model.row_count() / 2).clamp(BELOW.0, BELOW.1);
        let room = hand.cut_rounds < cuts.rounds && (cutting.result.below as usize) < most;
        cutting.done && due && room && cutting.helps
    }

    /// The relaxation of the root with the cuts so far is solved: looks for more, or ends.
    pub(crate) fn cut_round(&mut self) -> Option<Progress> {
        let (Some(cutting), Some(hand), Some(relaxation)) =
            (&mut self.cutting, &self.hand, &self.relaxation)
        else {
            return None;
        };
        let point = hand.point.as_ref()?;
        cutting.share(relaxation, point);
        let whole = self.chooser.fractional(&point.x) == 0;
        let stalled = cutting.stalls(point.bound);
        let enough = cutting.result.rounds >= MOST_ROUNDS;
        if whole || stalled || enough || self.target.closes(point.bound) {
            return self.finish_cuts();
        }
        self.start_cut_round()
    }

    /// Begins to look for cuts at the point in hand.
    pub(crate) fn start_cut_round(&mut self) -> Option<Progress> {
        let x = &self.hand.as_ref()?.point.as_ref()?.x;
        let wanted = (self.settings.cuts, self.chooser.whole());
        let round = CutRound::new(wanted, self.trip.as_ref(), x);
        self.ledger.ticks += x.len() as u64;
        self.job = Job::Cut(Box::new(round));
        None
    }

    /// Goes on with a round by one step; adds what it found at its end.
    pub(crate) fn advance_cuts(&mut self) -> Option<Progress> {
        let (Job::Cut(round), Some(relaxation), Some(cutting), Some(hand)) =
            (&mut self.job, &mut self.relaxation, &mut self.cutting, &mut self.hand)
        else {
            return None;
        };
        let before = round.ticks;
        let more = round.step(relaxation, &cutting.frame);
        self.ledger.ticks += 1 + round.ticks - before;
        if more {
            return None;
        }
        if let Some(work) = cutting.choose_on(round, relaxation) {
            self.ledger.ticks += work;
            return None;
        }
        let cuts = std::mem::take(&mut round.taken);
        cutting.enter(&cuts);
        if cuts.is_empty() {
            return self.no_more_cuts();
        }
        if hand.cutting {
            cutting.result.rounds += 1;
            let first = self.tree.node(NodeId::ROOT).rows as usize;
            let gone = cutting.pool.slack(relaxation, &round.x, (first, false));
            cutting.result.purged += u32::try_from(gone.len()).unwrap_or(u32::MAX);
            let broken = cuts.iter().map(|(number, cut)| (*number, cut.violation_at(&round.x)));
            cutting.fresh = broken.collect();
            if relaxation.drop_rows(&gone).is_err() {
                return self.finish_cuts();
            }
        } else {
            let count = u32::try_from(cuts.len()).unwrap_or(u32::MAX);
            (hand.cut_rounds, hand.was_cut) = (hand.cut_rounds + 1, true);
            hand.rows_added += count;
            cutting.result.below += count;
        }
        match relaxation.add_cuts(&cuts) {
            Ok(()) => self.solve(),
            Err(_) => self.no_more_cuts(),
        }
    }

    /// There are no more cuts for the node in hand.
    fn no_more_cuts(&mut self) -> Option<Progress> {
        let hand = self.hand.as_mut()?;
        if hand.cutting {
            return self.finish_cuts();
        }
        hand.cut_rounds = u32::MAX;
        self.job = Job::None;
        self.converged()
    }

    /// Ends the rounds at the root: its children start from here.
    pub(crate) fn finish_cuts(&mut self) -> Option<Progress> {
        self.job = Job::None;
        let hand = self.hand.take()?;
        let (Some(point), Some(relaxation), Some(cutting)) =
            (hand.point, &mut self.relaxation, &mut self.cutting)
        else {
            self.note_cuts(None);
            return None;
        };
        self.ledger.ticks += CAREFUL * relaxation.exact().work();
        let proved = relaxation.prove(&point.duals).map(|bound| signed(&self.model, bound));
        let proved = proved.as_ref().map_or(f64::NEG_INFINITY, float_below);
        let root = self.tree.node_mut(NodeId::ROOT);
        let gone = cutting.pool.slack(relaxation, &point.x, (root.rows as usize, true));
        cutting.result.purged += u32::try_from(gone.len()).unwrap_or(u32::MAX);
        root.proved = if proved > root.proved { proved } else { root.proved };
        cutting.basis = relaxation.drop_rows(&gone).is_ok().then(|| relaxation.simplex.basis());
        let choice = self.chooser.choose(self.settings.branching, &point.x);
        if self.acts.column(NodeId::ROOT).is_none() {
            self.plan = choice.or(self.plan);
        }
        self.note_cuts(Some(self.user(point.bound)));
        // One that breaks a row by rounding would claim more than there is: its nodes find it exactly.
        let verdict = self.checker.check(self.rounds.separators(), &point.x);
        if let Verdict::Solution(solution) = verdict
            && solution.exact
        {
            self.accept(solution, Purpose::Relaxation);
        }
        if let Some(cutting) = &mut self.cutting {
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
        self.ledger.node_work.cut_off += 1;
        self.note_cuts(None);
        self.tree.node_mut(NodeId::ROOT).state = NodeState::Infeasible;
        self.events.push(Event::Dropped { node: NodeId::ROOT, state: NodeState::Infeasible });
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
