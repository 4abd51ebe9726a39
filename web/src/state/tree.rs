//! A search tree as its events tell it, node by node, with places for drawing.
//!
//! Nodes are numbered from 1 in the order of creation, so node `n` stands at place `n − 1` and
//! parents come before their children. A node without a bound of its own (open, infeasible)
//! stands at its parent's.

use record::event::{Branching, Event, NodeNumber, NodeState};
use report::layout::Layout;

/// No node.
const NONE: u32 = u32::MAX;

/// One node.
#[derive(Debug, Clone)]
pub(crate) struct Node {
    /// How it stands.
    pub(crate) state: NodeState,
    /// Its own bound, else its parent's; `None` before the root is solved.
    pub(crate) stand: Option<f64>,
    /// Whether the bound is its own.
    pub(crate) own_bound: bool,
    /// Whether its relaxation was solved: only then can its worker show it in full.
    pub(crate) solved: bool,
    /// Its distance from the root.
    pub(crate) depth: u32,
    /// What made it.
    pub(crate) branching: Option<Branching>,
    /// Nodes that grow from it, itself included.
    pub(crate) size: u32,
    /// Least and greatest stand of those nodes.
    pub(crate) reach: Option<(f32, f32)>,
    /// How many nodes had been solved when it was made, solved and closed; 0 for what has not
    /// happened.
    made: u32,
    settled: u32,
    closed: u32,
    parent: u32,
    first_child: u32,
    last_child: u32,
    next_sibling: u32,
}

/// How many nodes stand how.
#[derive(Debug, Clone, Copy, Default, PartialEq)]
pub(crate) struct Tally {
    /// Grows with every change: what was drawn at another version is stale.
    pub(crate) version: u64,
    /// Nodes made.
    pub(crate) made: u32,
    /// Nodes solved.
    pub(crate) solved: u32,
    /// Nodes open.
    pub(crate) open: u32,
    /// Simplex iterations spent on them.
    pub(crate) iterations: u64,
    /// The bound of the whole tree.
    pub(crate) bound: Option<f64>,
    /// The best solution's value.
    pub(crate) incumbent: Option<f64>,
    /// Least and greatest place of a node on the axis.
    pub(crate) extent: Option<(f64, f64)>,
}

/// The tree.
#[derive(Debug, Default)]
pub(crate) struct Tree {
    nodes: Vec<Node>,
    layout: Layout,
    tally: Tally,
    past: Past,
}

/// What the tree as a whole had come to, by how many nodes had been solved.
#[derive(Debug, Default)]
struct Past {
    /// Iterations after each solved node.
    iterations: Vec<u64>,
    bounds: Vec<(u32, f64)>,
    incumbents: Vec<(u32, f64)>,
}

impl Tree {
    /// Takes in events and, when much has grown, deals the places anew.
    pub(crate) fn grow(&mut self, events: &[Event]) {
        for event in events {
            self.apply(event);
        }
        if self.layout.is_overgrown() {
            self.layout.tidy();
        }
        self.tally.version += 1;
    }

    /// Spreads the leaves evenly: for a tree that stands still.
    pub(crate) fn settle(&mut self) {
        if !self.layout.is_tidy() {
            self.layout.tidy();
            self.tally.version += 1;
        }
    }

    fn apply(&mut self, event: &Event) {
        match event {
            Event::Created { parent, branching, .. } => self.create(*parent, branching.clone()),
            Event::Solved { node, state, bound, iterations, .. } => {
                self.tally.iterations += u64::from(*iterations);
                self.past.iterations.push(self.tally.iterations);
                self.solve(*node, *state, *bound);
            }
            Event::Dropped { node, state } => {
                self.set_state(*node, *state);
                let solved = self.tally.solved;
                if let Some(node) = self.place(*node).and_then(|place| self.nodes.get_mut(place)) {
                    node.closed = solved;
                }
            }
            Event::Incumbent { value, .. } => {
                self.tally.incumbent = Some(*value);
                self.past.incumbents.push((self.tally.solved, *value));
            }
            Event::Bound { bound, nodes } => {
                self.tally.bound = Some(*bound);
                self.tally.solved = self.tally.solved.max(*nodes);
                self.past.bounds.push((self.tally.solved, *bound));
            }
        }
    }

    fn create(&mut self, parent: Option<NodeNumber>, branching: Option<Branching>) {
        let place = self.nodes.len() as u32;
        let parent = parent.and_then(|number| self.place(number));
        let above = parent.map(|at| &self.nodes[at]);
        self.nodes.push(Node {
            state: NodeState::Open,
            stand: above.and_then(|node| node.stand),
            own_bound: false,
            solved: false,
            depth: above.map_or(0, |node| node.depth + 1),
            branching,
            size: 0,
            reach: None,
            made: self.tally.solved,
            settled: 0,
            closed: 0,
            parent: parent.map_or(NONE, |at| at as u32),
            first_child: NONE,
            last_child: NONE,
            next_sibling: NONE,
        });
        if let Some(at) = parent {
            self.adopt(at, place);
            self.release(at);
        }
        self.layout.push(parent);
        self.count(place as usize);
        self.widen(place as usize);
        self.tally.made += 1;
        self.tally.open += 1;
    }

    /// A new node counts in all that it grows from. O(depth).
    fn count(&mut self, place: usize) {
        let mut at = Some(place);
        while let Some(node) = at.and_then(|at| self.nodes.get_mut(at)) {
            node.size += 1;
            at = some(node.parent);
        }
    }

    /// What a node grows from reaches at least to where it stands. O(depth).
    fn widen(&mut self, place: usize) {
        let Some(stand) = self.nodes.get(place).and_then(|node| node.stand) else { return };
        let stand = stand as f32;
        let mut at = Some(place);
        while let Some(node) = at.and_then(|at| self.nodes.get_mut(at)) {
            let (low, high) = node.reach.unwrap_or((stand, stand));
            if node.reach.is_some() && low <= stand && stand <= high {
                break;
            }
            let low = if stand < low { stand } else { low };
            node.reach = Some((low, if stand > high { stand } else { high }));
            at = some(node.parent);
        }
    }

    /// A node that was solved and waited for its branching has it now.
    fn release(&mut self, place: usize) {
        if self.nodes[place].solved && self.nodes[place].state == NodeState::Open {
            self.set_state(Self::number(place), NodeState::Branched);
        }
    }

    fn adopt(&mut self, parent: usize, child: u32) {
        let elder = self.nodes[parent].last_child;
        self.nodes[parent].last_child = child;
        if elder == NONE {
            self.nodes[parent].first_child = child;
        } else {
            self.nodes[elder as usize].next_sibling = child;
        }
    }

    fn solve(&mut self, number: NodeNumber, state: NodeState, bound: Option<f64>) {
        self.set_state(number, state);
        self.tally.solved += 1;
        let Some(place) = self.place(number) else { return };
        let node = &mut self.nodes[place];
        node.solved = true;
        node.settled = self.tally.solved;
        let Some(bound) = bound else { return };
        (node.stand, node.own_bound) = (Some(bound), true);
        self.widen(place);
        let (low, high) = self.tally.extent.unwrap_or((bound, bound));
        let low = if bound < low { bound } else { low };
        let high = if bound > high { bound } else { high };
        self.tally.extent = Some((low, high));
    }

    fn set_state(&mut self, number: NodeNumber, state: NodeState) {
        let Some(place) = self.place(number) else { return };
        let node = &mut self.nodes[place];
        if node.state == NodeState::Open && state != NodeState::Open {
            self.tally.open -= 1;
        }
        node.state = state;
    }

    /// The place of a node's number, if there is such a node.
    pub(crate) fn place(&self, number: NodeNumber) -> Option<usize> {
        let place = (number.0 as usize).checked_sub(1)?;
        (place < self.nodes.len()).then_some(place)
    }

    /// The number of the node at a place.
    pub(crate) fn number(place: usize) -> NodeNumber {
        NodeNumber(place as u32 + 1)
    }

    /// All nodes by place.
    pub(crate) fn nodes(&self) -> &[Node] {
        &self.nodes
    }

    /// The counts.
    pub(crate) fn tally(&self) -> Tally {
        self.tally
    }

    /// The height of a node in [0, 1].
    pub(crate) fn height(&self, place: usize) -> f64 {
        f64::from(self.layout.height(place))
    }

    /// The slot of a node in [0, 1]: all that grows from it stands in it.
    pub(crate) fn slot(&self, place: usize) -> (f64, f64) {
        let (low, high) = self.layout.slot(place);
        (f64::from(low), f64::from(high))
    }

    /// How many nodes had been solved before `iterations` were exceeded.
    pub(crate) fn solved_within(&self, iterations: u64) -> u32 {
        self.past.iterations.partition_point(|&spent| spent <= iterations) as u32
    }

    /// The bound and the best solution's value when so many nodes had been solved.
    pub(crate) fn values_at(&self, solved: u32) -> (Option<f64>, Option<f64>) {
        let at = |list: &[(u32, f64)]| {
            let after = list.partition_point(|&(when, _)| when <= solved);
            after.checked_sub(1).and_then(|last| list.get(last)).map(|&(_, value)| value)
        };
        (at(&self.past.bounds), at(&self.past.incumbents))
    }

    /// The tree as it stood when so many nodes had been solved, at the heights it has now.
    /// O(nodes made by then × depth).
    pub(crate) fn at(&self, solved: u32) -> Self {
        let made = self.nodes.partition_point(|node| node.made <= solved);
        let mut past = Self { layout: self.layout.clone(), ..Self::default() };
        past.nodes.reserve(made);
        for node in &self.nodes[..made] {
            past.recall(node, solved);
        }
        (past.tally.bound, past.tally.incumbent) = self.values_at(solved);
        past.tally.solved = solved.min(self.tally.solved);
        past.tally.version = self.tally.version;
        past
    }

    /// Takes over a node of a later tree as it stood when so many nodes had been solved.
    fn recall(&mut self, later: &Node, solved: u32) {
        let place = self.nodes.len();
        let known = later.solved && later.settled <= solved;
        let open = if later.closed > 0 { later.closed > solved } else { !known };
        let above = some(later.parent).and_then(|parent| self.nodes.get(parent));
        let inherited = above.and_then(|node| node.stand);
        let own = known && later.own_bound;
        self.nodes.push(Node {
            state: if open { NodeState::Open } else { later.state },
            stand: if own { later.stand } else { inherited },
            own_bound: own,
            solved: known,
            branching: later.branching.clone(),
            size: 0,
            reach: None,
            first_child: NONE,
            last_child: NONE,
            next_sibling: NONE,
            ..*later
        });
        if let Some(parent) = some(later.parent) {
            self.adopt(parent, place as u32);
        }
        self.count(place);
        self.widen(place);
        self.tally.made += 1;
        self.tally.open += u32::from(open);
    }

    /// Nodes that grow from a node, itself included, with those still open and the weakest of
    /// their bounds, which is the least when minimising. O(nodes under it).
    pub(crate) fn under(&self, place: usize, maximise: bool) -> (u32, u32, Option<f64>) {
        let (mut open, mut bound) = (0, None::<f64>);
        let mut waiting = vec![place];
        while let Some(at) = waiting.pop() {
            let Some(node) = self.nodes.get(at) else { continue };
            if node.state == NodeState::Open {
                open += 1;
                let weaker = |stand: &f64| bound.is_none_or(|b| (*stand < b) != maximise);
                bound = node.stand.filter(weaker).or(bound);
            }
            let mut child = self.first_child(at);
            while let Some(next) = child {
                waiting.push(next);
                child = self.next_sibling(next);
            }
        }
        (self.nodes.get(place).map_or(0, |node| node.size), open, bound)
    }

    /// The parent of a node.
    pub(crate) fn parent(&self, place: usize) -> Option<usize> {
        some(self.nodes.get(place)?.parent)
    }

    /// The first child of a node.
    pub(crate) fn first_child(&self, place: usize) -> Option<usize> {
        some(self.nodes.get(place)?.first_child)
    }

    /// The child of the same parent that came next.
    pub(crate) fn next_sibling(&self, place: usize) -> Option<usize> {
        some(self.nodes.get(place)?.next_sibling)
    }

    /// The branchings from the root to a node, in order.
    pub(crate) fn path(&self, place: usize) -> Vec<Branching> {
        let mut path = Vec::new();
        let mut at = Some(place);
        while let Some(node) = at.and_then(|at| self.nodes.get(at)) {
            path.extend(node.branching.clone());
            at = some(node.parent);
        }
        path.reverse();
        path
    }

    /// The nearest node of the same depth above (`up`) or below. O(nodes).
    pub(crate) fn neighbour(&self, place: usize, up: bool) -> Option<usize> {
        let depth = self.nodes.get(place)?.depth;
        let height = self.height(place);
        let distance = |other: usize| {
            let step = self.height(other) - height;
            if up { -step } else { step }
        };
        (0..self.nodes.len())
            .filter(|&other| self.nodes[other].depth == depth && distance(other) > 0.0)
            .min_by(|&a, &b| distance(a).total_cmp(&distance(b)))
    }
}

fn some(link: u32) -> Option<usize> {
    (link != NONE).then_some(link as usize)
}

#[cfg(test)]
pub(crate) mod tests {
    use super::*;
    use record::event::{Origin, Side};

    /// A node that is made under a parent.
    pub(crate) fn created(node: u32, parent: u32) -> Event {
        Event::Created {
            node: NodeNumber(node),
            parent: (parent > 0).then_some(NodeNumber(parent)),
            branching: (parent > 0).then_some(Branching {
                column: 0,
                side: Side::AtMost,
                bound: 0.0,
            }),
        }
    }

    /// A node that is solved.
    pub(crate) fn solved(node: u32, state: NodeState, bound: Option<f64>) -> Event {
        Event::Solved {
            node: NodeNumber(node),
            state,
            bound,
            fractional: 0,
            iterations: 0,
            rows_added: 0,
            branch_column: None,
        }
    }

    /// A root with two children, the first of which is infeasible.
    pub(crate) fn small() -> Tree {
        let mut tree = Tree::default();
        tree.grow(&[
            created(1, 0),
            solved(1, NodeState::Branched, Some(10.0)),
            created(2, 1),
            created(3, 1),
            solved(2, NodeState::Infeasible, None),
        ]);
        tree
    }

    #[test]
    fn a_node_without_a_bound_stands_at_its_parents() {
        let tree = small();
        assert_eq!(tree.nodes()[1].stand, Some(10.0));
        assert!(!tree.nodes()[1].own_bound && tree.nodes()[0].own_bound);
        assert_eq!(tree.nodes()[2].depth, 1);
        assert_eq!(tree.tally().open, 1);
        assert_eq!(tree.tally().extent, Some((10.0, 10.0)));
    }

    #[test]
    fn one_walks_from_node_to_node() {
        let mut tree = small();
        tree.settle();
        assert_eq!(tree.first_child(0), Some(1));
        assert_eq!(tree.next_sibling(1), Some(2));
        assert_eq!(tree.parent(2), Some(0));
        assert_eq!(tree.neighbour(1, false), Some(2));
        assert_eq!(tree.neighbour(1, true), None);
        assert_eq!(tree.parent(0), None);
        assert_eq!((tree.path(2).len(), tree.path(0).len()), (1, 0));
    }

    #[test]
    fn a_node_that_waits_for_its_branching_is_open_until_it_has_children() {
        let mut tree = Tree::default();
        tree.grow(&[created(1, 0), solved(1, NodeState::Open, Some(10.0))]);
        assert_eq!((tree.tally().open, tree.nodes()[0].state), (1, NodeState::Open));
        tree.grow(&[created(2, 1), created(3, 1)]);
        assert_eq!((tree.tally().open, tree.nodes()[0].state), (2, NodeState::Branched));
    }

    #[test]
    fn a_node_knows_how_much_grows_from_it_and_how_far() {
        let mut tree = small();
        tree.grow(&[solved(3, NodeState::Branched, Some(14.0)), created(4, 3), created(5, 3)]);
        let sizes: Vec<u32> = tree.nodes().iter().map(|node| node.size).collect();
        assert_eq!(sizes, [5, 1, 3, 1, 1]);
        assert_eq!(tree.nodes()[0].reach, Some((10.0, 14.0)));
        assert_eq!(tree.nodes()[1].reach, Some((10.0, 10.0)));
        assert_eq!(tree.under(0, false), (5, 2, Some(14.0)));
        tree.grow(&[solved(5, NodeState::Open, Some(16.0))]);
        assert_eq!(tree.under(0, false), (5, 2, Some(14.0)));
        assert_eq!(tree.under(0, true), (5, 2, Some(16.0)));
    }

    #[test]
    fn a_tree_is_shown_as_it_stood() {
        let mut tree = small();
        tree.grow(&[
            Event::Bound { bound: 10.0, nodes: 2 },
            solved(3, NodeState::Branched, Some(14.0)),
            created(4, 3),
            created(5, 3),
            Event::Bound { bound: 14.0, nodes: 3 },
            Event::Incumbent { node: NodeNumber(4), value: 15.0, origin: Origin::Relaxation },
            Event::Dropped { node: NodeNumber(5), state: NodeState::Pruned },
        ]);
        tree.settle();
        let states =
            |tree: &Tree| tree.nodes().iter().map(|node| node.state).collect::<Vec<NodeState>>();
        let before = tree.at(2);
        assert_eq!(states(&before), [NodeState::Branched, NodeState::Infeasible, NodeState::Open]);
        assert_eq!((before.tally().open, before.tally().bound), (1, Some(10.0)));
        assert_eq!((before.nodes()[2].stand, before.nodes()[0].size), (Some(10.0), 3));
        assert_eq!(before.tally().incumbent, None);
        assert_eq!(before.height(2), tree.height(2), "nothing moves");
        let root = tree.at(0);
        assert_eq!((root.nodes().len(), root.tally().open), (1, 1));
        let whole = tree.at(3);
        assert_eq!(states(&whole), states(&tree));
        assert_eq!(whole.tally().incumbent, Some(15.0));
    }

    #[test]
    fn an_unknown_number_changes_nothing() {
        let mut tree = small();
        let before = tree.tally();
        tree.grow(&[Event::Dropped { node: NodeNumber(99), state: NodeState::Pruned }]);
        assert_eq!(Tally { version: before.version, ..tree.tally() }, before);
        assert_eq!(tree.place(NodeNumber(0)), None);
    }

    #[test]
    fn a_node_that_is_dropped_is_open_no_more() {
        let mut tree = small();
        tree.grow(&[Event::Dropped { node: NodeNumber(3), state: NodeState::Pruned }]);
        assert_eq!(tree.tally().open, 0);
    }
}
