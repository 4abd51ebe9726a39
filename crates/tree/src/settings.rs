//! The rules and limits of a search.

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
}

/// Rules and limits. A limit that is `None` does not hold.
#[derive(Debug, Clone, PartialEq)]
pub struct Settings {
    /// The branching rule.
    pub branching: Branching,
    /// The selection rule.
    pub selection: Selection,
    /// A value of the objective known to be reachable: nodes that cannot be better are
    /// closed, and solutions that are worse are not taken.
    pub cutoff: Option<f64>,
    /// The search ends when so many nodes are solved.
    pub node_limit: Option<u32>,
    /// The search ends when so many simplex iterations are made.
    pub iteration_limit: Option<u64>,
    /// Whether to search; otherwise the root relaxation only.
    pub search: bool,
    /// Where the round-trip heuristic takes its first start when there are too many stops to
    /// start from each.
    pub seed: u64,
}

impl Default for Settings {
    fn default() -> Self {
        Self {
            branching: Branching::default(),
            selection: Selection::default(),
            cutoff: None,
            node_limit: None,
            iteration_limit: None,
            search: true,
            seed: 0,
        }
    }
}
