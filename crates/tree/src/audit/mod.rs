//! A finished search proved again from its log, by someone who did not run it.
//!
//! The log says how the tree was branched, why each leaf is closed and which plan is best. The
//! audit believes none of it: it checks that the branchings leave out no whole value, that the
//! plan meets every row and costs what it is said to cost, that each tightened bound takes no
//! better plan away, and proves each leaf by multipliers or a ray of its own in exact arithmetic.
//! Its linear programs are solved anew, so no number of the search's own path is used.
//!
//! General cuts are told with how each follows from rows; each derivation is checked in exact
//! arithmetic before the cut is used. Where a leaf is not closed by the rows in hand, as in a log
//! without derivations, the audit branches on within the leaf. A log is refused with the node at which it is
//! wrong; a leaf that the limits leave unproved is named as open.

mod closure;
mod derived;
mod leaf;
mod shape;
mod testimony;

use std::cmp::Ordering;
use std::rc::Rc;

use model::{Model, Number, nearest_f64};

use crate::branching::Chooser;
use crate::event::{Branch, NodeId, NodeState, Side};
use crate::relaxation::{Addition, Relaxation, RowOrigin};
use crate::rounds::Rounds;
use crate::solution::{Checker, Completed, Solution, Verdict};
use crate::target::{Target, decimal, signed};

use derived::Derived;
use leaf::{Goal, Leaf, Outcome};
pub use testimony::{Claim, LoggedRow, Source, Testimony};

/// How far a value of the log may be from the exact one, relative to max(1, |value|): it is
/// printed as a float.
const ROUNDED: f64 = 1e-7;

/// How many faults are listed at most.
const MOST_FAULTS: usize = 20;

/// Where a log is wrong.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Fault {
    /// The node.
    pub node: NodeId,
    /// What is wrong with it, as a sentence without its number at the head.
    pub why: String,
}

/// What an audit came to.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Judgement {
    /// Not at its end yet.
    Running,
    /// Every leaf, every tightened bound and the plan were proved.
    Proved,
    /// Something in the log is wrong.
    Refused,
    /// Nothing is wrong, and not every leaf is proved.
    Open,
}

/// What an audit found so far or at its end.
#[derive(Debug, Clone, PartialEq)]
pub struct AuditResult {
    /// The whole in a word.
    pub judgement: Judgement,
    /// The exact value of the plan, in the direction of the objective.
    pub value: Option<Number>,
    /// Whether leaves are closed by a value that was given, without a plan that has it.
    pub given: bool,
    /// Leaves proved to hold no better plan, those without a point among them.
    pub leaves: u32,
    /// Leaves proved to have no point.
    pub empty: u32,
    /// Tightened bounds proved.
    pub tightened: u32,
    /// General cuts whose derivations were proved.
    pub cuts: u32,
    /// Parts into which leaves were branched on to prove them.
    pub parts: u32,
    /// Leaves that are not proved.
    pub open: Vec<NodeId>,
    /// What is wrong.
    pub faults: Vec<Fault>,
}

/// What is done next.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Stage {
    Shape,
    /// The general cuts from this place on.
    Cuts(usize),
    Plan,
    Completing,
    /// The tightened bounds of a node, from this one on, and then the node itself.
    Node(usize, usize),
    Done,
}

/// An audit under way. See [`Testimony`] for what it is made of.
#[derive(Debug)]
pub struct Audit {
    model: Rc<Model>,
    testimony: Testimony,
    tools: Tools,
    stage: Stage,
    derived: Option<Derived>,
    leaf: Option<Leaf>,
    result: AuditResult,
    ticks: u64,
}

/// What proofs need.
#[derive(Debug)]
struct Tools {
    relaxation: Relaxation,
    rounds: Rounds,
    checker: Checker,
    chooser: Chooser,
    target: Target,
    /// The multipliers of the box solved last.
    duals: Vec<f64>,
}

impl Audit {
    /// Begins with what a log says about a model. `O(non-zeros + rows of the log)`.
    ///
    /// # Errors
    /// The kernel refuses the model, as a clause.
    pub fn new(model: Rc<Model>, testimony: Testimony) -> Result<Self, String> {
        let mut target = Target::new(&model, true);
        if let Some(value) = testimony.cutoff.and_then(decimal) {
            target.improve(signed(&model, value));
        }
        let tools = Tools {
            relaxation: Relaxation::new(&model).map_err(|error| error.to_string())?,
            rounds: Rounds::whole(&model),
            checker: Checker::new(&model),
            chooser: Chooser::new(&model, &[]),
            target,
            duals: Vec::new(),
        };
        let result = AuditResult {
            judgement: Judgement::Running,
            value: None,
            given: testimony.cutoff.is_some() && testimony.incumbent.is_none(),
            leaves: 0,
            empty: 0,
            tightened: 0,
            cuts: 0,
            parts: 0,
            open: Vec::new(),
            faults: testimony.faults.clone(),
        };
        let stage = Stage::Shape;
        let mut audit =
            Self { model, testimony, tools, stage, derived: None, leaf: None, result, ticks: 0 };
        audit.add_rows();
        Ok(audit)
    }

    /// Works on for about `ticks` non-zeros touched, at least one step; true when it is done.
    pub fn advance(&mut self, ticks: u64) -> bool {
        let stop = self.ticks().saturating_add(ticks);
        while self.stage != Stage::Done {
            let now = self.ticks();
            self.step(stop.saturating_sub(now).max(1));
            if self.ticks() >= stop {
                break;
            }
        }
        self.stage == Stage::Done
    }

    /// Non-zeros touched so far.
    #[must_use]
    pub fn ticks(&self) -> u64 {
        let tools = &self.tools;
        let leaf = self.leaf.as_ref().map_or(0, Leaf::ticks);
        let solved = tools.relaxation.simplex.stats().ticks + tools.rounds.ticks();
        self.ticks + solved + tools.checker.ticks() + leaf
    }

    /// What it found so far.
    #[must_use]
    pub fn result(&self) -> AuditResult {
        self.result.clone()
    }

    /// How many nodes the log has, and how many of them are done.
    #[must_use]
    pub fn progress(&self) -> (usize, usize) {
        let all = self.testimony.claims.len();
        match self.stage {
            Stage::Node(node, _) => (node, all),
            Stage::Done => (all, all),
            Stage::Shape | Stage::Cuts(_) | Stage::Plan | Stage::Completing => (0, all),
        }
    }

    /// Takes in the rows of families that the log names, each checked to be a member.
    fn add_rows(&mut self) {
        let rows = std::mem::take(&mut self.testimony.rows);
        let mut additions = Vec::new();
        for row in rows {
            match row.addition(&self.model) {
                Some(addition) => additions.push(addition),
                None => {
                    self.fault(NodeId::ROOT, "the log names a row that the model does not have");
                }
            }
        }
        if self.tools.relaxation.add(additions).is_err() {
            self.fault(NodeId::ROOT, "its rows cannot be added");
        }
    }

    fn step(&mut self, ticks: u64) {
        self.ticks += 1;
        match self.stage {
            Stage::Shape => {
                for fault in shape::faults(&self.model, &self.testimony.claims) {
                    self.fault(fault.node, fault.why);
                }
                self.stage = Stage::Cuts(0);
                self.refuse();
            }
            Stage::Cuts(place) => {
                self.cut(place);
                self.refuse();
            }
            Stage::Plan => {
                self.check_plan();
                self.refuse();
            }
            Stage::Completing => {
                if let Some(point) = self.tools.checker.advance(ticks) {
                    self.completed(point);
                    self.refuse();
                }
            }
            Stage::Node(node, place) => self.node(node, place, ticks),
            Stage::Done => {}
        }
    }

    /// Ends where something is wrong on which all leaves rest.
    fn refuse(&mut self) {
        if !self.result.faults.is_empty() {
            self.stage = Stage::Done;
            self.result.judgement = Judgement::Refused;
        }
    }

    fn fault(&mut self, node: NodeId, why: impl Into<String>) {
        if self.result.faults.len() < MOST_FAULTS {
            self.result.faults.push(Fault { node, why: why.into() });
        }
    }

    /// The derivation of the cut at a place; behind the last all of them become rows.
    fn cut(&mut self, place: usize) {
        let Testimony { sources, cuts, .. } = &self.testimony;
        if place == 0 && !cuts.is_empty() {
            match Derived::new(&self.model, sources, cuts) {
                Ok(derived) => self.derived = Some(derived),
                Err(why) => return self.fault(NodeId::ROOT, format!("has a cut that {why}")),
            }
        }
        let Some(derived) = self.derived.as_ref().filter(|_| place < cuts.len()) else {
            self.derived = None;
            self.stage = Stage::Plan;
            let rows: Vec<_> = cuts.iter().cloned().enumerate().collect();
            if self.tools.relaxation.add_cuts(&rows).is_err() {
                self.fault(NodeId::ROOT, "has cuts that cannot be added");
            }
            return;
        };
        let (holds, ticks) = derived.proves(place, sources, cuts);
        self.ticks += ticks;
        self.stage = Stage::Cuts(place + 1);
        if holds {
            self.result.cuts += 1;
        } else {
            let (class, number) = (cuts[place].class.word(), place + 1);
            let why =
                format!("rests on cut {number} ({class}), which does not follow from its rows");
            self.fault(NodeId::ROOT, why);
        }
    }

    /// The plan against every row, and its value against the one that the log says.
    fn check_plan(&mut self) {
        self.stage = Stage::Node(0, 0);
        let Some((node, _)) = self.testimony.incumbent else { return };
        if self.testimony.plan.len() != self.model.columns().len() {
            return self.fault(node, "its plan is not in the log");
        }
        let plan = self.testimony.plan.clone();
        let tools = &mut self.tools;
        match tools.checker.check(tools.rounds.separators(), &plan) {
            Verdict::Solution(solution) if solution.exact => self.plan_is(solution),
            _ if tools.checker.has_continuous() => {
                let whole = tools.chooser.whole().iter();
                let fixes: Vec<_> = whole.map(|&c| (c, plan[c.index()].round())).collect();
                if tools.checker.begin(&fixes) {
                    self.stage = Stage::Completing;
                } else {
                    self.fault(node, "its plan cannot be checked");
                }
            }
            Verdict::Solution(_) => {
                self.fault(node, "a family over subsets cannot say whether it meets the plan");
            }
            Verdict::Violates(_) | Verdict::Broken => self.broken_plan(node, &plan),
        }
    }

    fn broken_plan(&mut self, node: NodeId, plan: &[f64]) {
        let point = proof::Point::new(&self.model, plan);
        let first = point.violations.first().map(|violation| violation.name.clone());
        let row = first.unwrap_or_else(|| "a family over subsets".to_owned());
        self.fault(node, format!("its plan breaks {row}"));
    }

    fn completed(&mut self, point: Option<Completed>) {
        self.stage = Stage::Node(0, 0);
        let Some((node, _)) = self.testimony.incumbent else { return };
        let separators = self.tools.rounds.separators();
        match point.map(|point| self.tools.checker.check_completed(separators, point)) {
            Some(Verdict::Solution(solution)) if solution.exact => self.plan_is(solution),
            _ => {
                let plan = self.testimony.plan.clone();
                self.broken_plan(node, &plan);
            }
        }
    }

    fn plan_is(&mut self, solution: Solution) {
        let Some((node, said)) = self.testimony.incumbent else { return };
        let value = nearest_f64(&solution.value);
        if (value - said).abs() > ROUNDED * one_or_size(value) {
            return self.fault(node, format!("its plan costs {value}, not {said}"));
        }
        self.result.value = Some(solution.value.clone());
        self.tools.target.improve(signed(&self.model, solution.value));
    }

    /// Goes on with a node: its tightened bounds from `place` on, then itself.
    fn node(&mut self, node: usize, place: usize, ticks: u64) {
        if let Some(leaf) = &mut self.leaf {
            if let Some(outcome) = leaf.advance(&self.model, &mut self.tools, ticks) {
                self.take(node, place, outcome);
            }
            return;
        }
        let Some(claim) = self.testimony.claims.get(node) else { return self.finish() };
        match place.cmp(&claim.tightened()) {
            Ordering::Less => self.begin_tightened(node, place),
            Ordering::Equal => self.begin_leaf(node, place),
            Ordering::Greater => self.stage = Stage::Node(node + 1, 0),
        }
    }

    /// Begins to prove a tightened bound. The multipliers of the box solved last often do.
    fn begin_tightened(&mut self, node: usize, place: usize) {
        let id = number(node);
        let (path, bound) = self.testimony.removed(id, place);
        let column = self.model.columns().get(bound.column.index());
        if !column.is_some_and(|column| column.integer) {
            self.fault(id, "tightens a bound of what need not be whole");
        } else if !is_whole(bound.bound) {
            self.fault(id, "tightens a bound to what is not whole");
        } else if self.tools.duals_close(&self.model, &path) {
            self.result.tightened += 1;
        } else {
            self.leaf = Some(Leaf::new(path, Goal::Close, None));
            return;
        }
        self.stage = Stage::Node(node, place + 1);
    }

    /// Begins to prove a leaf; goes past a node that was branched on.
    fn begin_leaf(&mut self, node: usize, place: usize) {
        let (id, claim) = (number(node), &self.testimony.claims[node]);
        let bound = claim.bound.map(|bound| self.internal(bound));
        if let Some(why) = closure::contradiction(claim, &self.tools, bound) {
            self.stage = Stage::Node(node, place + 1);
            return self.fault(id, why);
        }
        let said = bound.filter(|_| self.testimony.own_bounds);
        let (goal, said) = match claim.state {
            _ if claim.children > 0 => {
                self.stage = Stage::Node(node, place + 1);
                return;
            }
            NodeState::Infeasible => (Goal::Empty, None),
            NodeState::Pruned | NodeState::Integer | NodeState::Closed => (Goal::Close, said),
            NodeState::Unsolved => (Goal::Close, None),
            NodeState::Open | NodeState::Branched | NodeState::Unbounded => {
                self.result.open.push(id);
                self.stage = Stage::Node(node, place + 1);
                return;
            }
        };
        self.leaf = Some(Leaf::new(self.testimony.path(id), goal, said));
    }

    /// Takes in how a proof ended.
    fn take(&mut self, node: usize, place: usize, outcome: Outcome) {
        let parts = self.leaf.take().map_or(0, |leaf| {
            self.ticks += leaf.ticks();
            leaf.parts()
        });
        self.result.parts += parts;
        let id = number(node);
        let claim = &self.testimony.claims[node];
        let tightened = place < claim.tightened();
        let empty = claim.state == NodeState::Infeasible;
        self.stage = Stage::Node(node, place + 1);
        match outcome {
            Outcome::Proved if tightened => self.result.tightened += 1,
            Outcome::Proved => {
                self.result.leaves += 1;
                self.result.empty += u32::from(empty);
            }
            Outcome::Open => self.result.open.push(id),
            Outcome::False(why) if tightened => {
                self.fault(id, format!("a bound that it tightens takes a better plan away: {why}"));
            }
            Outcome::False(why) => self.fault(id, why),
        }
    }

    fn internal(&self, value: f64) -> f64 {
        crate::relaxation::direction(&self.model) * value
    }

    /// The end: the bound of the whole tree is at most what is proved.
    fn finish(&mut self) {
        self.stage = Stage::Done;
        let best = self.tools.target.best();
        if let (Some(said), Some(best)) = (self.testimony.bound, best)
            && (said.is_nan() || self.internal(said) > best + ROUNDED * one_or_size(best))
        {
            self.fault(NodeId::ROOT, format!("the bound of the whole tree, {said}, is not proved"));
        }
        self.result.judgement = if !self.result.faults.is_empty() {
            Judgement::Refused
        } else if self.result.open.is_empty() {
            Judgement::Proved
        } else {
            Judgement::Open
        };
    }
}

impl Tools {
    /// Whether the multipliers of the last box leave no better plan in this one.
    fn duals_close(&self, model: &Model, path: &[Branch]) -> bool {
        let proved = self.relaxation.prove_at(path, &self.duals);
        proved.is_some_and(|bound| self.target.proves(&signed(model, bound)))
    }
}

impl LoggedRow {
    /// The row; `None` where the model has no such row.
    pub(crate) fn addition(&self, model: &Model) -> Option<Addition> {
        match self {
            Self::Written(row) => {
                let there =
                    row.index() < model.row_count() && crate::relaxation::is_meant(model, *row);
                let origin = RowOrigin::Written(*row);
                there.then(|| Addition { origin, row: model.row(*row) })
            }
            Self::Member(id, subset) => {
                let family = model.subset_families().get(id.index())?;
                let inside = subset.iter().all(|label| family.ground.contains(label));
                let meant =
                    model.families()[family.family.index()].state != model::FamilyState::Out;
                let origin = RowOrigin::Member { family: *id, subset: subset.clone() };
                (inside && meant && family.admits(subset))
                    .then(|| Addition { origin, row: family.member(subset) })
            }
        }
    }
}

fn number(place: usize) -> NodeId {
    NodeId(u32::try_from(place + 1).unwrap_or(u32::MAX))
}

fn is_whole(value: f64) -> bool {
    value.is_finite() && value == value.round()
}

fn one_or_size(value: f64) -> f64 {
    if value.abs() > 1.0 { value.abs() } else { 1.0 }
}

/// The side of a branching that it takes away: for `x ≤ v` that is `x ≥ v + 1`.
fn opposite(branch: Branch) -> Branch {
    match branch.side {
        Side::AtMost => Branch { side: Side::AtLeast, bound: branch.bound + 1.0, ..branch },
        Side::AtLeast => Branch { side: Side::AtMost, bound: branch.bound - 1.0, ..branch },
    }
}
