//! One leaf, or one part that a tightened bound takes away, proved anew: its relaxation is solved
//! with the rows in hand, more are separated, and multipliers or a ray are judged in exact
//! arithmetic. Where the relaxation does not prove enough it is branched on.

use lp::{Limits, Outcome as LpOutcome, Progress as LpProgress};
use model::{Model, Number, nearest_f64};
use proof::{Budget, Wish};

use super::{ROUNDED, Tools, one_or_size};
use crate::branching::split;
use crate::event::Branch;
use crate::proving::Proving;
use crate::relaxation::Addition;
use crate::settings::Branching;
use crate::solution::Verdict;
use crate::target::signed;

/// Parts into which one leaf is branched on at most.
const MOST_PARTS: u32 = 2_000;

/// What an exact proof of one part may cost.
const EXACT: Budget = Budget { ticks: 40_000_000, bits: 8_000 };

/// Rounds of separation of one part at most.
const MOST_ROUNDS: u32 = 1_000;

/// What is to be proved of a leaf.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(super) enum Goal {
    /// That it holds no better plan.
    Close,
    /// That it holds no point.
    Empty,
}

/// How a proof ended.
#[derive(Debug, Clone, PartialEq, Eq)]
pub(super) enum Outcome {
    Proved,
    Open,
    False(String),
}

#[derive(Debug)]
enum Stage {
    Begin,
    Solve,
    Separate,
    Exact(Box<Proving>),
}

/// A proof under way.
#[derive(Debug)]
pub(super) struct Leaf {
    /// The parts that are left, the next one last.
    left: Vec<Vec<Branch>>,
    goal: Goal,
    /// The internal bound that its relaxation is said to have.
    said: Option<f64>,
    stage: Stage,
    parts: u32,
    rounds: u32,
    tried: bool,
    ticks: u64,
}

/// What the solved part gives for the next step.
enum Found {
    Point { bound: f64, x: Vec<f64>, duals: Vec<f64> },
    Nothing { ray: Vec<f64> },
    Trouble,
}

impl Leaf {
    pub(super) fn new(path: Vec<Branch>, goal: Goal, said: Option<f64>) -> Self {
        Self {
            left: vec![path],
            goal,
            said,
            stage: Stage::Begin,
            parts: 0,
            rounds: 0,
            tried: false,
            ticks: 0,
        }
    }

    pub(super) fn parts(&self) -> u32 {
        self.parts
    }

    pub(super) fn ticks(&self) -> u64 {
        let running = if let Stage::Exact(proving) = &self.stage { proving.ticks() } else { 0 };
        self.ticks + running
    }

    /// One step; the outcome at the end.
    pub(super) fn advance(
        &mut self,
        model: &Model,
        tools: &mut Tools,
        ticks: u64,
    ) -> Option<Outcome> {
        match &mut self.stage {
            Stage::Begin => {
                let Some(path) = self.left.last() else { return Some(Outcome::Proved) };
                tools.relaxation.enter(path);
                (self.rounds, self.tried) = (0, false);
                self.solve(tools);
                None
            }
            Stage::Solve => {
                if tools.relaxation.simplex.advance(ticks) == LpProgress::Working {
                    return None;
                }
                self.solved(model, tools)
            }
            Stage::Separate => {
                if !tools.rounds.advance(ticks) {
                    return None;
                }
                let found = tools.rounds.take();
                self.separated(model, tools, found)
            }
            Stage::Exact(proving) => {
                let relaxation = &tools.relaxation;
                let problem = |residual: &proof::Residual| relaxation.residual(residual).ok();
                if !proving.advance(relaxation.exact(), problem, ticks) {
                    return None;
                }
                self.certified(model, tools)
            }
        }
    }

    fn solve(&mut self, tools: &mut Tools) {
        self.ticks += 1;
        tools.relaxation.simplex.start(Limits::default());
        self.stage = Stage::Solve;
    }

    fn found(tools: &Tools) -> Found {
        match tools.relaxation.simplex.outcome() {
            Some(LpOutcome::Optimal(solution)) => Found::Point {
                bound: tools.relaxation.internal(solution.objective),
                x: solution.x.clone(),
                duals: solution.duals.clone(),
            },
            Some(LpOutcome::Infeasible(ray)) => Found::Nothing { ray: ray.multipliers.clone() },
            _ => Found::Trouble,
        }
    }

    fn solved(&mut self, model: &Model, tools: &mut Tools) -> Option<Outcome> {
        match Self::found(tools) {
            Found::Nothing { ray } if tools.relaxation.refutes(&ray) => self.next(),
            Found::Nothing { .. } => self.exact(tools, Wish::Refutation),
            Found::Trouble => Some(Outcome::Open),
            Found::Point { bound, x, duals } => {
                tools.duals.clone_from(&duals);
                if self.goal == Goal::Close {
                    let proved = tools.relaxation.prove(&duals);
                    if proved.is_some_and(|proved| self.suffices(model, tools, proved)) {
                        return self.next();
                    }
                    if self.seems_enough(tools, bound) && !self.tried {
                        return self.exact(tools, Wish::Optimum(None));
                    }
                }
                self.separate(tools, &x)
            }
        }
    }

    /// Whether a proved bound, in the direction of the objective, is all that is asked for.
    fn suffices(&self, model: &Model, tools: &Tools, proved: Number) -> bool {
        let proved = signed(model, proved);
        let own = self.said().is_none_or(|said| nearest_f64(&proved) >= said - slack(said));
        own && tools.target.proves(&proved)
    }

    fn seems_enough(&self, tools: &Tools, bound: f64) -> bool {
        let own = self.said().is_none_or(|said| bound >= said - slack(said));
        own && tools
            .target
            .best()
            .is_some_and(|best| tools.target.closes(bound) || bound >= best - slack(best))
    }

    /// The bound that the part in hand is said to have: only the leaf as a whole has one.
    fn said(&self) -> Option<f64> {
        self.said.filter(|_| self.parts == 0)
    }

    fn exact(&mut self, tools: &Tools, wish: Wish) -> Option<Outcome> {
        let Some(path) = self.left.last() else { return Some(Outcome::Proved) };
        self.tried = true;
        let bounds = tools.relaxation.bounds_at(path);
        let basis = tools.relaxation.simplex.basis();
        self.stage = Stage::Exact(Box::new(Proving::new(bounds, basis, wish, EXACT)));
        None
    }

    fn certified(&mut self, model: &Model, tools: &mut Tools) -> Option<Outcome> {
        let Stage::Exact(proving) = std::mem::replace(&mut self.stage, Stage::Begin) else {
            return None;
        };
        self.ticks += proving.ticks();
        let certifier = proving.certifier;
        let bound = certifier.bound(tools.relaxation.exact());
        let enough = self.goal == Goal::Close
            && bound.is_some_and(|bound| self.suffices(model, tools, bound));
        if certifier.is_refuted() || enough {
            return self.next();
        }
        match Self::found(tools) {
            Found::Point { x, .. } => self.separate(tools, &x),
            Found::Nothing { .. } | Found::Trouble => Some(Outcome::Open),
        }
    }

    fn separate(&mut self, tools: &mut Tools, x: &[f64]) -> Option<Outcome> {
        self.rounds += 1;
        if self.rounds > MOST_ROUNDS {
            return Some(Outcome::Open);
        }
        tools.rounds.start(x);
        self.stage = Stage::Separate;
        None
    }

    fn separated(
        &mut self,
        model: &Model,
        tools: &mut Tools,
        found: Vec<Addition>,
    ) -> Option<Outcome> {
        match tools.relaxation.add(found) {
            Err(_) => Some(Outcome::Open),
            Ok(added) if !added.is_empty() => {
                self.tried = false;
                self.solve(tools);
                None
            }
            Ok(_) => self.short(model, tools),
        }
    }

    /// The relaxation is as strong as the model's rows make it, and proves too little.
    fn short(&mut self, model: &Model, tools: &mut Tools) -> Option<Outcome> {
        let Found::Point { bound, x, .. } = Self::found(tools) else { return Some(Outcome::Open) };
        if let Some(said) = self.said().filter(|said| bound < said - slack(*said)) {
            let sign = crate::relaxation::direction(model);
            let (said, bound) = (sign * said, sign * bound);
            return Some(Outcome::False(format!(
                "is said to have the bound {said}, and its relaxation has {bound}"
            )));
        }
        if let Some(why) = self.counterexample(model, tools, &x) {
            return Some(Outcome::False(why));
        }
        self.parts += 2;
        let chosen = tools.chooser.choose(Branching::MostFractional, &x);
        let bounds = |column: model::ColumnId| tools.relaxation.simplex.bounds(lp::Col(column.0));
        let any = || {
            let whole = tools.chooser.whole().iter();
            whole.copied().find_map(|column| split(column, x[column.index()], bounds(column)))
        };
        let choice = chosen.or_else(any).filter(|_| self.parts <= MOST_PARTS);
        let (Some(choice), Some(path)) = (choice, self.left.pop()) else {
            return Some(Outcome::Open);
        };
        for (side, _) in choice.sides() {
            let mut part = path.clone();
            part.push(side);
            self.left.push(part);
        }
        self.stage = Stage::Begin;
        None
    }

    /// A plan within the part that it must not hold.
    fn counterexample(&self, model: &Model, tools: &mut Tools, x: &[f64]) -> Option<String> {
        if tools.chooser.fractional(x) > 0 {
            return None;
        }
        let verdict = tools.checker.check(tools.rounds.separators(), x);
        let Verdict::Solution(solution) = verdict else { return None };
        let value = nearest_f64(&solution.value);
        let internal = signed(model, solution.value);
        match self.goal {
            Goal::Empty => Some(format!("is said to have no point, and holds a plan of {value}")),
            Goal::Close if tools.target.proves(&internal) => None,
            Goal::Close => Some(format!("holds a plan of {value}, which is better")),
        }
    }

    /// The part in hand is proved.
    fn next(&mut self) -> Option<Outcome> {
        self.left.pop();
        self.stage = Stage::Begin;
        self.left.is_empty().then_some(Outcome::Proved)
    }
}

fn slack(value: f64) -> f64 {
    ROUNDED * one_or_size(value)
}
