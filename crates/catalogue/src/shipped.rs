//! What is shipped, as files: each family's own file and the notation texts of its rivals, in
//! the order in which they are listed.

/// A family's files.
pub(crate) struct Family {
    /// Its short name, the folder's.
    pub(crate) name: &'static str,
    /// `family.toml`.
    pub(crate) file: &'static str,
    /// The notation text of each rival by id.
    pub(crate) texts: &'static [(&'static str, &'static str)],
}

/// A family's files by its name and those of its rivals.
macro_rules! family {
    ($family:literal: $($rival:literal),+) => {
        Family {
            name: $family,
            file: include_str!(concat!("../formulations/", $family, "/family.toml")),
            texts: &[$((
                concat!($family, "/", $rival),
                include_str!(concat!("../formulations/", $family, "/", $rival, ".txt")),
            )),+],
        }
    };
}

/// All families.
pub(crate) const FAMILIES: &[Family] = &[
    family!(
        "atsp": "assignment", "labels", "lifted-labels", "one-commodity", "two-commodity",
        "multi-commodity", "subtours", "cuts", "tight-one-commodity", "time-staged", "legs",
        "precedence-labels", "precedence", "rlt-labels", "loose-labels",
        "lifted-precedence-labels", "one-at-a-time", "lifted-rows"
    ),
    family!("tsp": "subtours", "degrees", "two-commodity", "blossoms", "multi-commodity"),
    family!("path": "flow", "potentials"),
    family!("ufl": "joined", "split", "radii"),
    family!(
        "lot": "big-m", "l-s", "location-form", "shortest-path-form", "all-demand", "wagner-whitin"
    ),
    family!("limited-path": "flow", "layers"),
    family!(
        "cvrp": "load-labels", "lifted-load-labels", "load-flow", "tight-load-flow",
        "fractional-cuts", "capacity-cuts", "three-index", "routes", "two-commodity",
        "multi-commodity"
    ),
    family!("cfl": "joined", "total", "split"),
    family!("p-median": "joined", "split", "radius", "chained-radius"),
    family!("p-centre": "assignment", "radius"),
    family!(
        "tree": "labels", "one-commodity", "cuts", "subtours", "directed-cuts",
        "multi-commodity", "arborescences", "undirected-flow", "directed-flow"
    ),
    family!(
        "steiner": "one-commodity", "cuts", "undirected-flow", "directed-cuts",
        "multi-commodity", "balanced-cuts", "nodes", "directed-flow"
    ),
    family!("design": "joined", "split", "by-origin", "paths"),
    family!("capacitated-design": "joined", "by-origin", "split", "paths", "node-cuts"),
    family!("matching": "degree", "odd-sets"),
    family!(
        "stable-set": "stars", "edges", "cliques", "odd-cycles", "wheels", "every-odd-cycle"
    ),
    family!(
        "colouring": "assignment", "ordered", "cliques", "representatives", "partial-order",
        "tight-partial-order", "stable-sets"
    ),
    family!("ordering": "labels", "dicycles", "fences"),
    family!("max-cut": "sides", "odd-cycles", "triangles"),
    family!(
        "grouping": "triangles", "assignment", "representatives", "groups", "two-partitions"
    ),
    family!("hub": "paths", "flow", "bounded-paths"),
    family!("clsp": "big-m", "location-form", "l-s", "shortest-path-form"),
    family!(
        "bins": "assignment", "ordered", "arc-flow", "patterns", "heads", "one-cut", "linked"
    ),
    family!("knapsack": "plain", "covers", "states"),
    family!("gap": "plain", "covers", "patterns"),
    family!("cover": "plain", "triples"),
    family!(
        "machine": "big-m", "linear-ordering", "time-indexed", "parallel", "positions"
    ),
    family!(
        "job-shop": "disjunctive", "tight", "time-indexed", "time-indexed-split", "surplus", "ranks"
    ),
    family!("rcpsp": "pulse", "pulse-split", "step", "flow", "forbidden-sets", "events"),
    family!(
        "unit": "aggregated", "pairwise", "three-binary", "turn-on-off", "three-binary-summed",
        "intervals"
    ),
    family!(
        "piecewise": "incremental", "multiple-choice", "convex-combination", "logarithmic",
        "split-combination", "big-m", "tight-combination"
    ),
    family!("qap": "big-m", "rlt-1", "products", "four-sums", "least-ways", "rlt-2"),
    family!(
        "elementary-path": "labels", "one-commodity", "multi-commodity", "subtours"
    ),
    family!("multi-knapsack": "plain", "covers"),
    family!("quadratic": "products", "row-sums", "triangles", "rlt-2"),
    family!("cases": "loose", "big-m", "multi-m", "hull"),
    family!("tardiness": "big-m", "linear-ordering", "time-indexed"),
    family!("lines": "joined", "split", "multiple-choice"),
    family!("start-limits": "one-binary", "three-binary", "tight"),
];
