//! What a log says of a search, gathered node by node.

use std::collections::BTreeSet;

use model::{LabelId, RowId, SubsetFamilyId};
use separate::general::GeneralCut;

use super::{Fault, opposite};
use crate::cutting::Cutting;
use crate::event::{Branch, Event, NodeId, NodeState};
use crate::relaxation::RowOrigin;
use crate::search::Search;

/// What is said of one node.
#[derive(Debug, Clone, PartialEq)]
pub struct Claim {
    /// The node it was branched from; `None` for the root.
    pub parent: Option<NodeId>,
    /// The branching that made it.
    pub branching: Option<Branch>,
    /// How it ended.
    pub state: NodeState,
    /// The bound of its relaxation, in the direction of the objective, where it was solved.
    pub bound: Option<f64>,
    /// Whether its own relaxation closed it, and not an incumbent or a person later.
    pub solved: bool,
    /// How many nodes were made of it.
    pub children: u32,
    /// Bounds that were tightened before it was solved.
    pub before: Vec<Branch>,
    /// Bounds that were tightened after that.
    pub after: Vec<Branch>,
}

impl Claim {
    /// How many of its bounds were tightened.
    pub(super) fn tightened(&self) -> usize {
        self.before.len() + self.after.len()
    }
}

/// A row of a family on demand.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum LoggedRow {
    /// A written row.
    Written(RowId),
    /// A member of a family over subsets.
    Member(SubsetFamilyId, BTreeSet<LabelId>),
}

/// A row that the derivation of a general cut rests on.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Source {
    /// A row of the model.
    Row(LoggedRow),
    /// A cut, by place.
    Cut(usize),
}

/// What is said of a whole search.
#[derive(Debug, Clone, Default, PartialEq)]
pub struct Testimony {
    /// The nodes in order.
    pub claims: Vec<Claim>,
    /// Where the best plan was found and what it costs.
    pub incumbent: Option<(NodeId, f64)>,
    /// The bound of the whole tree that was said last.
    pub bound: Option<f64>,
    /// The best plan: one value a column.
    pub plan: Vec<f64>,
    /// Rows that separation added.
    pub rows: Vec<LoggedRow>,
    /// The rows that derivations of cuts speak of by place.
    pub sources: Vec<Source>,
    /// General cuts, each with a derivation from sources, of which the cuts come before it.
    pub cuts: Vec<GeneralCut>,
    /// A value known to be reachable that was given.
    pub cutoff: Option<f64>,
    /// Whether each node's bound is that of its rows, of those that separation added and of the cuts
    /// that are told.
    pub own_bounds: bool,
    /// What is wrong with the order of the events.
    pub faults: Vec<Fault>,
}

impl Testimony {
    /// Takes in the next event of a log.
    pub fn note(&mut self, event: &Event) {
        match event {
            Event::Created { node, parent, branching } => self.created(*node, *parent, *branching),
            Event::Solved { node, state, bound, .. } => self.ended(*node, *state, *bound),
            Event::Dropped { node, state } => self.ended(*node, *state, None),
            Event::Incumbent { node, value, .. } => self.incumbent = Some((*node, *value)),
            Event::Bound { bound, .. } => self.bound = Some(*bound),
        }
    }

    fn created(&mut self, node: NodeId, parent: Option<NodeId>, branching: Option<Branch>) {
        let next = super::number(self.claims.len());
        let above = parent.filter(|above| *above < next);
        let rooted = node == NodeId::ROOT && parent.is_none() && branching.is_none();
        if node != next {
            return self.fault(next, "is not in the log");
        }
        if !rooted && (above.is_none() || branching.is_none()) {
            return self.fault(node, "comes from no node before it");
        }
        if let Some(above) = above {
            self.claims[above.0 as usize - 1].children += 1;
        }
        self.claims.push(Claim {
            parent,
            branching,
            state: NodeState::Open,
            bound: None,
            solved: false,
            children: 0,
            before: Vec::new(),
            after: Vec::new(),
        });
    }

    fn ended(&mut self, node: NodeId, state: NodeState, bound: Option<f64>) {
        let place = (node.0 as usize).wrapping_sub(1);
        match self.claims.get_mut(place) {
            Some(claim) if !matches!(claim.state, NodeState::Open | NodeState::Branched) => {
                self.fault(node, "ends twice");
            }
            Some(claim) => {
                claim.state = state;
                // cuts and heuristics close the root when it is solved
                let own = node != NodeId::ROOT || state == NodeState::Integer;
                claim.solved = own && bound.is_some();
                claim.bound = bound.or(claim.bound);
            }
            None => self.fault(node, "ends before it is made"),
        }
    }

    /// Notes the bounds that were tightened at a node.
    pub fn tighten(&mut self, node: NodeId, before: Vec<Branch>, after: Vec<Branch>) {
        match self.claims.get_mut((node.0 as usize).wrapping_sub(1)) {
            Some(claim) => (claim.before, claim.after) = (before, after),
            None => self.fault(node, "tightens bounds and is not in the log"),
        }
    }

    fn fault(&mut self, node: NodeId, why: &str) {
        if self.faults.is_empty() {
            self.faults.push(Fault { node, why: why.to_owned() });
        }
    }

    /// The bounds of a node in the order in which they were set. `O(depth + tightened)`.
    pub(crate) fn path(&self, node: NodeId) -> Vec<Branch> {
        let mut path = self.above(node);
        path.extend(&self.claim(node).before);
        path
    }

    /// The same without what was tightened at the node itself.
    fn above(&self, node: NodeId) -> Vec<Branch> {
        let mut line = Vec::new();
        let mut at = Some(node);
        while let Some(here) = at {
            line.push(here);
            at = self.claim(here).parent;
        }
        let mut path = Vec::with_capacity(line.len());
        for &here in line.iter().rev() {
            let claim = self.claim(here);
            path.extend(claim.branching);
            if here != node {
                path.extend(claim.before.iter().chain(&claim.after));
            }
        }
        path
    }

    /// What the tightened bound at a place of a node's list takes away, and the bound.
    pub(super) fn removed(&self, node: NodeId, place: usize) -> (Vec<Branch>, Branch) {
        let claim = self.claim(node);
        let mut path = self.above(node);
        let all: Vec<Branch> = claim.before.iter().chain(&claim.after).copied().collect();
        path.extend(&all[..place]);
        path.push(opposite(all[place]));
        (path, all[place])
    }

    fn claim(&self, node: NodeId) -> &Claim {
        &self.claims[node.0 as usize - 1]
    }
}

fn source(origin: &RowOrigin) -> Source {
    match origin {
        RowOrigin::Written(row) => Source::Row(LoggedRow::Written(*row)),
        RowOrigin::Member { family, subset } => {
            Source::Row(LoggedRow::Member(*family, subset.clone()))
        }
        RowOrigin::Cut(_, number) => Source::Cut(*number),
    }
}

impl Search {
    /// What the search says of itself, to be proved by an [`Audit`](crate::Audit): what a log holds
    /// of it. `O(nodes + tightened + rows)`.
    #[must_use]
    pub fn testimony(&self) -> Testimony {
        let mut told = self.evidence();
        for node in self.tree.ids() {
            let record = self.tree.node(node);
            let (parent, branching) = (record.parent(), record.branch());
            told.created(node, parent, branching);
            let solved = record.is_solved()
                && matches!(record.state, NodeState::Pruned | NodeState::Integer);
            told.ended(node, record.state, solved.then(|| self.user(record.bound)));
            if let Some(claim) = told.claims.last_mut() {
                claim.before = self.tree.tightened.before(node).to_vec();
                claim.after = self.tree.tightened.after(node).to_vec();
            }
        }
        told.bound = self.summary().bound;
        told
    }

    /// What a log holds beside its events: the plan, the rows that separation added, what was given.
    #[must_use]
    pub fn evidence(&self) -> Testimony {
        let origins = self.relaxation.as_ref().map_or(&[][..], |r| r.origins());
        let added = origins.iter().filter(|origin| match origin {
            RowOrigin::Written(row) => !self.model.row_is_in(*row),
            RowOrigin::Member { .. } | RowOrigin::Cut(..) => true,
        });
        let added = added.filter_map(|origin| match source(origin) {
            Source::Row(row) => Some(row),
            Source::Cut(_) => None,
        });
        let (sources, cuts) = self.cutting.as_ref().map(Cutting::told).unwrap_or_default();
        let incumbent = self.incumbent.as_ref();
        Testimony {
            incumbent: incumbent.map(|found| (found.node, found.value)),
            plan: incumbent.map_or_else(Vec::new, |found| found.solution.x.clone()),
            rows: added.collect(),
            cutoff: self.settings.cutoff,
            own_bounds: true,
            sources: sources.iter().map(source).collect(),
            cuts,
            ..Testimony::default()
        }
    }

    /// The bounds that node work tightened: node, before it was solved, after that.
    pub fn tightened(&self) -> impl Iterator<Item = (NodeId, &[Branch], &[Branch])> {
        let all = self
            .tree
            .ids()
            .map(|node| (node, self.tree.tightened.before(node), self.tree.tightened.after(node)));
        all.filter(|(_, before, after)| !before.is_empty() || !after.is_empty())
    }
}
