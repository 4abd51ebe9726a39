//! What a scenario asks of a study: its limits and seeds.

use catalogue::Class;
use tree::Settings;

/// The limits and seeds of a study.
#[derive(Debug, Clone, PartialEq)]
pub struct Plan {
    /// Nodes at most for each search.
    pub nodes: u32,
    /// Non-zeros touched at most for each run of a growth study or of variability; `None` is no limit.
    pub work: Option<u64>,
    /// Every random choice derives from it.
    pub seed: u64,
    /// Random objectives of each sign that rivals are compared on.
    pub duels: u32,
    /// Plans of a sub-instance at most that are compared one by one.
    pub plans: u32,
    /// The sizes of sub-instances on which every plan is compared.
    pub sizes: Vec<u32>,
    /// The variables in which rivals are compared; found where none are named.
    pub shared: Vec<String>,
    /// Rows at most that are maximised over another relaxation, or over their own.
    pub rows: u32,
    /// A value of the objective that is known to be reachable.
    pub best_known: Option<f64>,
    /// Whether rivals are broken on purpose to see that it is noticed.
    pub mutants: bool,
    /// Orders of rows and columns that each rival is searched in, beside the one as written.
    pub orders: u32,
    /// The instances of a growth study.
    pub growth: GrowthPlan,
}

/// The instances of a growth study.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct GrowthPlan {
    /// Sizes, as the generator or the sets of the instance count them.
    pub sizes: Vec<u32>,
    /// Seeds.
    pub seeds: Vec<u64>,
    /// Classes of generated data; none where parts of the scenario's own instance are taken.
    pub classes: Vec<Class>,
    /// The size that fits are drawn out to; that of the instance where none is given.
    pub production: Option<u32>,
}

impl Default for GrowthPlan {
    fn default() -> Self {
        Self {
            sizes: vec![6, 8, 10, 12],
            seeds: vec![1, 2, 3, 4, 5],
            classes: Vec::new(),
            production: None,
        }
    }
}

impl Default for Plan {
    fn default() -> Self {
        Self {
            nodes: 5_000,
            work: None,
            seed: 0,
            duels: 12,
            plans: 200,
            sizes: vec![2, 3, 4, 5, 6],
            shared: Vec::new(),
            rows: 500,
            best_known: None,
            mutants: true,
            orders: 10,
            growth: GrowthPlan::default(),
        }
    }
}

impl Plan {
    /// How a model is searched in this study.
    pub(crate) fn search(&self) -> Settings {
        Settings { node_limit: Some(self.nodes), seed: self.seed, ..Settings::default() }
    }
}
