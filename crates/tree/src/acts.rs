//! Steering by hand: what a person does to a search, and its replay.
//!
//! An act takes effect between two nodes and never inside one: an act that comes while a node
//! is in hand waits until that node is solved, also when the search is paused. So the number of
//! nodes solved before it says exactly when it was done, and [`Search::replay`] with that number
//! gives the same events. Acts on the root (which branching it gets), cuts and a stop that come
//! before the search proper are replayed there; all others once the root is branched on.
//!
//! What an act may claim:
//!
//! | act | why the tree stays true |
//! |---|---|
//! | branch | `column ≤ v` and `column ≥ v + 1` hold every whole value between them |
//! | close | the bound of each node closed stays in the bound of the whole tree |
//! | cut | a member of a family on demand, which is part of the model's meaning |
//! | rule | any column and any open node may come next; a limit ends the search as it stands |
//! | stop | the search ends as it stands |

use std::collections::{BTreeMap, BTreeSet, VecDeque};
use std::fmt;

use lp::Col;
use model::{ColumnId, FamilyState, LabelId, SubsetFamilyId};

use crate::branching::split;
use crate::event::{Event, NodeId, NodeState};
use crate::relaxation::{Addition, RowOrigin, float_bounds};
use crate::rules::Rule;
use crate::search::{Ending, Opening, Search, State};

/// What a person does to a search.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Act {
    /// Branch on a whole column at an open node, which is solved next, or at the root before it
    /// is branched on. Where the value is whole at the node's point the column is split beside
    /// it. A node that its own relaxation closes is not branched on.
    Branch {
        /// The node.
        node: NodeId,
        /// The column.
        column: ColumnId,
    },
    /// Close every open node of a subtree; not of the whole tree.
    Close {
        /// The top of the subtree.
        node: NodeId,
    },
    /// Add a member of a family on demand to the relaxation of every node from now on.
    Cut {
        /// The family.
        family: SubsetFamilyId,
        /// The subset whose member it is.
        subset: BTreeSet<LabelId>,
    },
    /// Let a rule or a limit hold from now on; in the same place as a stop.
    Rule(Rule),
    /// End the search after the node in hand; as the first node after the root is branched on
    /// at the earliest, unless it comes before that.
    Stop,
}

/// What became of an act.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Acted {
    /// The act.
    pub act: Act,
    /// Nodes solved before it took effect or was refused.
    pub after: u32,
    /// Whether it came from [`Search::replay`].
    pub replayed: bool,
    /// Why it was refused and changed nothing.
    pub refused: Option<Refusal>,
}

/// Why an act does not apply. Its text is a clause.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Refusal {
    /// There is no such node (yet).
    NoSuchNode(NodeId),
    /// The node is not open any more.
    NotOpen(NodeId, NodeState),
    /// The column is not one that must be whole.
    NotWhole,
    /// The bounds of the node leave one value for the column.
    Fixed(NodeId),
    /// The subtree is the whole tree.
    WholeTree,
    /// No node of the subtree is open.
    NothingOpen(NodeId),
    /// The family is not a family over subsets that is on demand.
    NotOnDemand,
    /// The set gives no member of the family.
    NoMember,
    /// The row is in the relaxation already.
    Present,
    /// The kernel does not take the row.
    Kernel(String),
    /// The search has ended.
    Ended,
}

impl fmt::Display for Refusal {
    fn fmt(&self, out: &mut fmt::Formatter<'_>) -> fmt::Result {
        match self {
            Self::NoSuchNode(node) => write!(out, "there is no node {}", node.0),
            Self::NotOpen(node, state) => {
                write!(out, "node {} is not open: {}", node.0, words(*state))
            }
            Self::NotWhole => out.write_str("the column need not be whole"),
            Self::Fixed(node) => write!(out, "the column is fixed at node {}", node.0),
            Self::WholeTree => out.write_str("node 1 is the whole tree: stop the search instead"),
            Self::NothingOpen(node) => write!(out, "no node under node {} is open", node.0),
            Self::NotOnDemand => out.write_str("the family is not one over subsets, on demand"),
            Self::NoMember => out.write_str("the set gives no member of the family"),
            Self::Present => out.write_str("the row is in the relaxation already"),
            Self::Kernel(why) => write!(out, "the row cannot be added: {why}"),
            Self::Ended => out.write_str("the search has ended"),
        }
    }
}

fn words(state: NodeState) -> &'static str {
    match state {
        NodeState::Open => "it is being solved",
        NodeState::Branched => "it is branched on",
        NodeState::Integer => "its point is a solution",
        NodeState::Infeasible => "it has no point",
        NodeState::Pruned => "its bound closed it",
        NodeState::Closed => "it was closed by hand",
        NodeState::Unbounded => "it is unbounded",
        NodeState::Unsolved => "it could not be solved",
    }
}

/// An act that has not taken effect; one to be replayed knows when.
#[derive(Debug, Clone)]
struct Waiting {
    act: Act,
    after: Option<u32>,
}

/// Acts that wait, what became of the others, and what they ask of nodes to come.
#[derive(Debug, Default)]
pub(crate) struct Acts {
    replays: VecDeque<Waiting>,
    live: VecDeque<Waiting>,
    done: Vec<Acted>,
    columns: BTreeMap<NodeId, ColumnId>,
    ahead: VecDeque<NodeId>,
}

impl Acts {
    /// Whether an act that was made now waits to take effect.
    pub(crate) fn is_waiting(&self) -> bool {
        !self.live.is_empty()
    }

    /// The column on which a person wants a node to be branched.
    pub(crate) fn column(&self, node: NodeId) -> Option<ColumnId> {
        self.columns.get(&node).copied()
    }

    /// Takes out the acts whose time has come: those to be replayed first.
    fn due(&mut self, nodes: u32) -> Vec<Waiting> {
        let come = |waiting: &Waiting| waiting.after.is_some_and(|after| after <= nodes);
        let count = self.replays.partition_point(come);
        let mut due: Vec<Waiting> = self.replays.drain(..count).collect();
        due.extend(self.live.drain(..));
        due
    }

    /// Puts acts back that were due too early, in their order.
    fn put_back(&mut self, early: Vec<Waiting>) {
        for waiting in early.into_iter().rev() {
            let queue = if waiting.after.is_some() { &mut self.replays } else { &mut self.live };
            queue.push_front(waiting);
        }
    }

    fn tell(&mut self, waiting: Waiting, after: u32, refused: Option<Refusal>) {
        let Waiting { act, after: asked } = waiting;
        self.done.push(Acted { act, after, replayed: asked.is_some(), refused });
    }

    /// Refuses every act that still waits: the search has ended after `nodes`. Those to be replayed
    /// are kept where it may go on.
    pub(crate) fn refuse_all(&mut self, nodes: u32, goes_on: bool) {
        let replays =
            if goes_on { self.replays.clone() } else { std::mem::take(&mut self.replays) };
        let live = std::mem::take(&mut self.live);
        for waiting in replays.into_iter().chain(live) {
            self.tell(waiting, nodes, Some(Refusal::Ended));
        }
    }
}

impl Search {
    /// Does `act` as soon as no node is in hand. [`Self::advance`] carries it out, also when the
    /// search is paused or waits; [`Self::take_acted`] says what became of it.
    pub fn act(&mut self, act: Act) {
        self.wait(Waiting { act, after: None });
    }

    /// Does `act` when `after` nodes are solved. Acts of the same count keep their order; a
    /// count that is passed means as soon as may be.
    pub fn replay(&mut self, after: u32, act: Act) {
        self.wait(Waiting { act, after: Some(after) });
    }

    fn wait(&mut self, waiting: Waiting) {
        if matches!(self.state, State::Finished(_)) {
            let refused = (!self.reopen(&waiting.act)).then_some(Refusal::Ended);
            self.acts.tell(waiting, self.ledger.nodes, refused);
            return;
        }
        let Some(after) = waiting.after else { return self.acts.live.push_back(waiting) };
        let earlier = |other: &Waiting| other.after.is_some_and(|other| other <= after);
        let place = self.acts.replays.partition_point(earlier);
        self.acts.replays.insert(place, waiting);
    }

    /// Lets a search that its limit of nodes or of iterations has ended go on, where an act allows it
    /// more; it stands still until [`Self::run`]. A replay raises the limit in the same place, before it
    /// is looked at. A root that ran out of iterations goes on in the middle of its LP.
    fn reopen(&mut self, act: &Act) -> bool {
        let Act::Rule(rule) = act else { return false };
        let reopens = match rule {
            Rule::Nodes(most) => {
                let more = most.is_none_or(|most| most > self.ledger.nodes);
                more && self.state == State::Finished(Ending::NodeLimit)
            }
            Rule::Iterations(most) => {
                let more = most.is_none_or(|most| most > self.work().iterations);
                more && self.state == State::Finished(Ending::IterationLimit)
            }
            _ => false,
        };
        if reopens {
            self.change(rule);
            self.paused = true;
            if !self.take_up_root() {
                self.state = State::Searching;
            }
        }
        reopens
    }

    /// Carries out what waits of changes to the limit of iterations: the root has none left.
    pub(crate) fn carry_out_limits(&mut self) {
        let nodes = self.ledger.nodes;
        let (limits, others): (Vec<Waiting>, Vec<Waiting>) = self
            .acts
            .due(nodes)
            .into_iter()
            .partition(|waiting| matches!(waiting.act, Act::Rule(Rule::Iterations(_))));
        self.acts.put_back(others);
        for waiting in limits {
            let refused = self.carry_out(&waiting.act).err();
            self.acts.tell(waiting, nodes, refused);
        }
    }

    /// Whether an act made with [`Self::act`] has not taken effect yet.
    #[must_use]
    pub fn has_acts_waiting(&self) -> bool {
        self.acts.is_waiting()
    }

    /// What became of acts since this was last asked, in order.
    pub fn take_acted(&mut self) -> Vec<Acted> {
        std::mem::take(&mut self.acts.done)
    }

    /// Carries out the acts whose time has come. No node is in hand.
    pub(crate) fn carry_out_acts(&mut self) {
        let mut early = Vec::new();
        for waiting in self.acts.due(self.ledger.nodes) {
            if self.is_early(&waiting) {
                early.push(waiting);
                continue;
            }
            let after = self.ledger.nodes;
            let refused = self.carry_out(&waiting.act).err();
            self.acts.tell(waiting, after, refused);
        }
        if matches!(self.state, State::Finished(_)) {
            for waiting in early {
                self.acts.tell(waiting, self.ledger.nodes, Some(Refusal::Ended));
            }
        } else {
            self.acts.put_back(early);
        }
    }

    /// Whether an act must wait for a later place between nodes, so that its count of nodes
    /// names one place only: before the root is branched on, or after that.
    fn is_early(&self, waiting: &Waiting) -> bool {
        let branched = self.opening == Opening::Done;
        match waiting.act {
            Act::Cut { .. } | Act::Branch { node: NodeId::ROOT, .. } => false,
            Act::Stop => branched && self.ledger.nodes <= 1,
            // A root that waits for a person is not branched on yet.
            Act::Rule(_) => branched && self.ledger.nodes <= 1 && !self.holding.holds(NodeId::ROOT),
            Act::Branch { .. } | Act::Close { .. } => !branched && waiting.after.is_some(),
        }
    }

    fn carry_out(&mut self, act: &Act) -> Result<(), Refusal> {
        if matches!(self.state, State::Finished(_)) {
            return Err(Refusal::Ended);
        }
        match act {
            Act::Branch { node, column } => self.branch_by_hand(*node, *column),
            Act::Close { node } => self.close_by_hand(*node),
            Act::Cut { family, subset } => self.cut_by_hand(*family, subset),
            Act::Rule(rule) => {
                self.change(rule);
                Ok(())
            }
            Act::Stop => {
                self.end(Ending::Stopped("stopped by hand".to_owned()));
                Ok(())
            }
        }
    }

    fn branch_by_hand(&mut self, node: NodeId, column: ColumnId) -> Result<(), Refusal> {
        if !self.tree.has(node) {
            return Err(Refusal::NoSuchNode(node));
        }
        if self.model.columns().get(column.index()).is_none_or(|column| !column.integer) {
            return Err(Refusal::NotWhole);
        }
        let refused = self.branching_refused(node).or_else(|| self.column_refused(node, column));
        if let Some(refused) = refused {
            return Err(refused);
        }
        if let (NodeId::ROOT, Some(_), Some(root)) = (node, self.plan, &self.root) {
            let bounds = float_bounds(&self.model, column);
            let value = root.x.get(column.index()).copied().unwrap_or_default();
            self.plan = Some(split(column, value, bounds).ok_or(Refusal::Fixed(node))?);
            self.acts.columns.insert(node, column);
            return Ok(());
        }
        if self.release(node, column)? {
            return Ok(());
        }
        self.acts.columns.insert(node, column);
        self.acts.ahead.push_back(node);
        Ok(())
    }

    /// Closes the open nodes of a subtree. `O(open nodes · depth)`.
    fn close_by_hand(&mut self, top: NodeId) -> Result<(), Refusal> {
        if let Some(refused) = self.closing_refused(top) {
            return Err(refused);
        }
        let below = self.open.iter().filter(|&node| self.tree.is_under(node, top));
        let below: Vec<NodeId> = below.collect();
        for node in below {
            self.open.remove(node, self.tree.node(node).bound);
            self.tree.node_mut(node).state = NodeState::Closed;
            self.ledger.ticks += 1;
            self.ledger.closed.push(node);
            self.events.push(Event::Dropped { node, state: NodeState::Closed });
        }
        Ok(())
    }

    fn cut_by_hand(
        &mut self,
        id: SubsetFamilyId,
        subset: &BTreeSet<LabelId>,
    ) -> Result<(), Refusal> {
        let family = self.model.subset_families().get(id.index()).ok_or(Refusal::NotOnDemand)?;
        if self.model.families()[family.family.index()].state != FamilyState::OnDemand {
            return Err(Refusal::NotOnDemand);
        }
        let inside = subset.iter().all(|label| family.ground.contains(label));
        if !inside || !family.admits(subset) {
            return Err(Refusal::NoMember);
        }
        let row = family.member(subset);
        let entries = row.entries.len() as u64;
        let origin = RowOrigin::Member { family: id, subset: subset.clone() };
        let relaxation = self.relaxation.as_mut().ok_or(Refusal::Ended)?;
        let added = relaxation.add(vec![Addition { origin, row }]);
        if added.map_err(|error| Refusal::Kernel(error.to_string()))?.is_empty() {
            return Err(Refusal::Present);
        }
        self.ledger.ticks += entries;
        Ok(())
    }

    /// Takes the node that comes next out of the open ones: one that a person wants branched,
    /// else the one that the rule selects. `None` when all that are open wait for a branching.
    pub(crate) fn take_open(&mut self) -> Option<NodeId> {
        let tree = &self.tree;
        while let Some(node) = self.acts.ahead.pop_front() {
            if self.open.remove(node, tree.node(node).bound) {
                return Some(node);
            }
        }
        let holding = &self.holding;
        let free = |node: NodeId| !holding.holds(node);
        self.open.take(self.settings.selection, free, |node| tree.node(node).bound)
    }

    /// The column on which a person wants the node in hand branched, split at its value.
    pub(crate) fn choice_by_hand(
        &self,
        node: NodeId,
        x: &[f64],
    ) -> Option<crate::branching::Choice> {
        let column = self.acts.column(node)?;
        let bounds = self.relaxation.as_ref()?.simplex.bounds(Col(column.0));
        split(column, x[column.index()], bounds)
    }
}
