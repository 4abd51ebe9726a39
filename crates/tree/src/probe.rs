//! Strong and reliability branching: both sides of candidate columns are tried on the relaxation
//! in hand, from its own basis, and the column with the best product of gains is taken.
//!
//! Sources: Applegate, Bixby, Chvátal, Cook 1995 (strong branching); Achterberg, Koch, Martin 2005
//! (reliability branching).

use lp::{Checkpoint, Col, Limits, Outcome, Progress as LpProgress};

use crate::branching::{Choice, Chooser, is_better, product};
use crate::event::Side;
use crate::relaxation::Relaxation;
use crate::search::{Job, Progress, Search};
use crate::settings::Branching;

/// Gains known on a side from which a pseudocost counts as reliable.
const RELIABLE: u32 = 8;
/// Columns in a row that are no better after which a reliability search ends.
const LOOK_AHEAD: u32 = 8;
/// Iterations of one side in reliability branching.
const ITERATIONS: u64 = 100;
/// The gain of a side without a point, relative to max(1, |bound|).
const NO_POINT: f64 = 1e6;

/// Columns being tried at one node.
#[derive(Debug)]
pub(crate) struct Probing {
    /// Columns in the order in which they are tried, each with its score by pseudocosts.
    candidates: Vec<(Choice, f64)>,
    reliability: bool,
    checkpoint: Checkpoint,
    bound: f64,
    at: usize,
    /// The gains of the sides tried so far, and whether each is one of a solved relaxation.
    gains: Vec<(f64, bool)>,
    /// The bounds of the column whose side is being solved.
    running: Option<(f64, f64)>,
    best: Option<(f64, Choice)>,
    idle: u32,
}

impl Probing {
    fn new(
        relaxation: &mut Relaxation,
        chooser: &Chooser,
        (x, bound): (&[f64], f64),
        reliability: bool,
    ) -> Self {
        let mut candidates: Vec<(Choice, f64)> = chooser
            .candidates(x)
            .into_iter()
            .map(|choice| (choice, chooser.score(&choice)))
            .collect();
        if reliability {
            candidates.sort_by(|a, b| b.1.total_cmp(&a.1).then(a.0.column.cmp(&b.0.column)));
        }
        Self {
            candidates,
            reliability,
            checkpoint: relaxation.simplex.checkpoint(),
            bound,
            at: 0,
            gains: Vec::new(),
            running: None,
            best: None,
            idle: 0,
        }
    }

    /// Works on for about `ticks`; true when the best column is known.
    fn advance(&mut self, relaxation: &mut Relaxation, chooser: &mut Chooser, ticks: u64) -> bool {
        let enough = self.reliability && self.idle >= LOOK_AHEAD;
        let Some(&(choice, score)) = self.candidates.get(self.at).filter(|_| !enough) else {
            relaxation.simplex.restore(&self.checkpoint);
            return true;
        };
        if self.reliability && chooser.is_reliable(choice.column, RELIABLE) {
            self.rank(score, choice);
            return false;
        }
        let (branch, distance) = choice.sides()[self.gains.len()];
        let column = Col(branch.column.0);
        if self.running.is_none() {
            let (lower, upper) = relaxation.simplex.bounds(column);
            self.running = Some((lower, upper));
            relaxation.simplex.restore(&self.checkpoint);
            match branch.side {
                Side::AtMost => relaxation.simplex.set_bounds(column, lower, branch.bound),
                Side::AtLeast => relaxation.simplex.set_bounds(column, branch.bound, upper),
            }
            let iterations = self.reliability.then_some(ITERATIONS);
            relaxation.simplex.start(Limits { iterations, cutoff: None });
        }
        if relaxation.simplex.advance(ticks) == LpProgress::Working {
            return false;
        }
        let (gain, solved) = self.gain(relaxation);
        if let Some((lower, upper)) = self.running.take() {
            relaxation.simplex.set_bounds(column, lower, upper);
        }
        if solved {
            chooser.learn(&branch, distance, gain);
        }
        self.gains.push((gain, solved));
        if let [(down, _), (up, _)] = self.gains[..] {
            self.gains.clear();
            self.rank(product(down, up), choice);
        }
        false
    }

    /// The gain of the side just solved, and whether it has an optimum.
    fn gain(&self, relaxation: &Relaxation) -> (f64, bool) {
        let over = |objective: f64| {
            let gain = relaxation.internal(objective) - self.bound;
            if gain > 0.0 { gain } else { 0.0 }
        };
        let size = if self.bound.abs() > 1.0 { self.bound.abs() } else { 1.0 };
        match relaxation.simplex.outcome() {
            Some(Outcome::Optimal(solution)) => (over(solution.objective), true),
            Some(Outcome::Infeasible(_)) => (NO_POINT * size, false),
            Some(Outcome::Stopped { bound: Some(bound), .. }) if bound.is_finite() => {
                (over(*bound), false)
            }
            _ => (0.0, false),
        }
    }

    fn rank(&mut self, score: f64, choice: Choice) {
        self.at += 1;
        if self.best.is_none_or(|(top, _)| is_better(score, top)) {
            self.best = Some((score, choice));
            self.idle = 0;
        } else {
            self.idle += 1;
        }
    }
}

impl Search {
    /// Begins to try columns at the node in hand, once; false when there is nothing to try.
    pub(crate) fn begin_probing(&mut self) -> bool {
        let reliability = match self.settings.branching {
            Branching::Strong => false,
            Branching::Reliability => true,
            _ => return false,
        };
        let (Some(hand), Some(relaxation)) = (&mut self.hand, &mut self.relaxation) else {
            return false;
        };
        let by_hand = self.acts.column(hand.node).is_some() || !self.settings.search;
        let Some(point) = hand.point.as_ref().filter(|_| !by_hand && !hand.probed) else {
            return false;
        };
        hand.probed = true;
        if self.chooser.fractional(&point.x) == 0 || self.target.closes(point.bound) {
            return false;
        }
        let at = (point.x.as_slice(), point.bound);
        let probing = Probing::new(relaxation, &self.chooser, at, reliability);
        self.job = Job::Probe(Box::new(probing));
        true
    }

    /// Goes on trying columns; decides on the node when the best is known.
    pub(crate) fn probe(&mut self, ticks: u64) -> Option<Progress> {
        let (Job::Probe(probing), Some(relaxation)) = (&mut self.job, &mut self.relaxation) else {
            return None;
        };
        if !probing.advance(relaxation, &mut self.chooser, ticks) {
            return None;
        }
        let best = probing.best.map(|(_, choice)| choice);
        self.job = Job::None;
        self.hand.as_mut()?.probed_choice = best;
        self.decide()
    }
}
