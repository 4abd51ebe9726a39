//! The rules and limits of a search.

use separate::general::Classes;

use crate::heuristics::Heuristics;

/// Which column a node is branched on.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum Branching {
    /// The whole column whose value is nearest to a half between two whole numbers; ties go to
    /// the lower column.
    #[default]
    MostFractional,
    /// By the gains a unit seen so far (Bénichou et al. 1971, Mathematical Programming 1),
    /// joined by the product score (Achterberg, Koch, Martin 2005, Operations Research
    /// Letters 33). A column without a gain on a side takes the mean of all columns on that
    /// side; while there is no gain at all each unit counts 1, which is most fractional.
    Pseudocost,
    /// Both sides of every fractional column are solved to the end, and the column with the best
    /// product of gains is taken (full strong branching; Applegate, Bixby, Chvátal, Cook 1995).
    Strong,
    /// Pseudocosts, made reliable by trying both sides of a column while fewer than 8 gains are
    /// known on a side; columns are tried in the order of their scores until 8 in a row were no
    /// better (Achterberg, Koch, Martin 2005).
    Reliability,
    /// By a person at each node: a node that must be branched on is held, open, until an
    /// [`Act::Branch`](crate::Act::Branch) names its column.
    ByHand,
}

/// Which open node comes next.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub enum Selection {
    /// The one with the best bound; ties go to the lower node number (the older node).
    #[default]
    BestBound,
    /// The one made last. Of two children the *at least* side is made last.
    DepthFirst,
    /// A child of the node solved last while there is one (plunging), else the one with the best
    /// estimate: its bound and what rounding each fractional column costs by the gains seen so far
    /// (Bénichou et al. 1971). Ties go to the older node.
    BestEstimate,
}

/// What is done at a node beside its relaxation. The root's relaxation is never touched.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub struct NodeWork {
    /// Tightens bounds of whole columns by the written rows before a node is solved.
    pub propagation: bool,
    /// Tightens them by reduced costs and the best known value after a node is solved.
    pub fixing: bool,
    /// Closes nodes by the step of the objective, where every column with a cost is whole.
    pub lattice: bool,
}

impl Default for NodeWork {
    /// Bare: the step of the objective alone.
    fn default() -> Self {
        Self { propagation: false, fixing: false, lattice: true }
    }
}

/// Which classes of general cuts are added: at the root, after its relaxation is solved, in rounds
/// until they stall, and at nodes below it where that is asked for.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub struct Cuts {
    /// The classes.
    pub classes: Classes,
    /// Below the root: at nodes whose depth is a multiple of this; 0 is at none.
    pub every: u32,
    /// Rounds at such a node at most.
    pub rounds: u32,
}

impl Cuts {
    /// These classes at the root alone.
    #[must_use]
    pub fn at_root(classes: Classes) -> Self {
        Self { classes, every: 0, rounds: 0 }
    }

    /// Whether none is wanted.
    #[must_use]
    pub fn is_empty(self) -> bool {
        self.classes.is_empty()
    }
}

/// Rules and limits. A limit that is `None` does not hold.
#[derive(Debug, Clone, PartialEq)]
pub struct Settings {
    /// The branching rule.
    pub branching: Branching,
    /// The selection rule.
    pub selection: Selection,
    /// Variables by name: a node is branched on a fractional column of the first that has one,
    /// before any that is not named.
    pub priority: Vec<String>,
    /// What is done at a node beside its relaxation.
    pub node_work: NodeWork,
    /// General cuts.
    pub cuts: Cuts,
    /// How plans are looked for.
    pub heuristics: Heuristics,
    /// A value of the objective known to be reachable: nodes that cannot be better are
    /// closed, and solutions that are worse are not taken.
    pub cutoff: Option<f64>,
    /// The search ends when so many nodes are solved.
    pub node_limit: Option<u32>,
    /// The search ends when so many simplex iterations are made: at the root in the middle of it, later
    /// after the node in hand.
    pub iteration_limit: Option<u64>,
    /// Whether to search; otherwise the root relaxation only.
    pub search: bool,
    /// Where the round-trip heuristic takes its first start when there are too many stops to
    /// start from each.
    pub seed: u64,
}

impl Settings {
    /// Everything there is: as a production solver would. No limits.
    #[must_use]
    pub fn production() -> Self {
        Self {
            branching: Branching::Reliability,
            selection: Selection::BestEstimate,
            node_work: NodeWork { propagation: true, fixing: true, lattice: true },
            cuts: Cuts { classes: Classes::all(), every: 4, rounds: 1 },
            heuristics: Heuristics { rounding: true, trip: true, diving: true, pump: true },
            ..Self::default()
        }
    }
}

impl Default for Settings {
    fn default() -> Self {
        Self {
            branching: Branching::default(),
            selection: Selection::default(),
            priority: Vec::new(),
            node_work: NodeWork::default(),
            cuts: Cuts::default(),
            heuristics: Heuristics::default(),
            cutoff: None,
            node_limit: None,
            iteration_limit: None,
            search: true,
            seed: 0,
        }
    }
}
