//! The golden models again, from our notation: each on its data, which were taken from its
//! coefficients (`fixtures/golden_data`), has the stored bound and the stored optimum. What a
//! golden model has beyond the shipped text, or lacks of it, is said as an edit of that text: so are
//! the start windows of the two time-indexed job shops, from heads and tails within fourteen hours.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeSet;
use std::path::Path;

use hullward_tests_reference::round_trip::{formulation, instance, root, solve};
use hullward_tests_reference::{agree, golden};
use tree::{Settings, Status};

/// A golden model's name without its seed, the data, and the shipped rival.
const SHIPPED: &[(&str, &str, &str)] = &[
    ("atsp7__AP", "atsp7", "atsp/assignment"),
    ("atsp7__DFJ", "atsp7", "atsp/subtours"),
    ("atsp7__DL", "atsp7", "atsp/lifted-labels"),
    ("atsp7__FGG", "atsp7", "atsp/time-staged"),
    ("atsp7__L1RMTZ", "atsp7", "atsp/lifted-precedence-labels"),
    ("atsp7__MCF", "atsp7", "atsp/multi-commodity"),
    ("atsp7__MTZ", "atsp7", "atsp/labels"),
    ("atsp7__PQ", "atsp7", "atsp/legs"),
    ("atsp7__RMTZ", "atsp7", "atsp/precedence-labels"),
    ("atsp7__SCF", "atsp7", "atsp/one-commodity"),
    ("atsp7__SCF_strong", "atsp7", "atsp/tight-one-commodity"),
    ("atsp7__SD", "atsp7", "atsp/rlt-labels"),
    ("atsp7__SSB", "atsp7", "atsp/precedence"),
    ("atsp7__TCF", "atsp7", "atsp/two-commodity"),
    ("binpack__arcflow", "binpack", "bins/arc-flow"),
    ("binpack__kant", "binpack", "bins/assignment"),
    ("binpack__kant_link", "binpack", "bins/linked"),
    ("binpack__kant_sym", "binpack", "bins/ordered"),
    ("binpack__pattern_binary", "binpack_proper", "bins/patterns"),
    ("binpack__pattern_int", "binpack", "bins/patterns"),
    ("binpack__repr", "binpack", "bins/heads"),
    ("cfl__cap_only", "cfl", "cfl/joined"),
    ("cfl__cap_strong", "cfl", "cfl/split"),
    ("colouring__POP", "colouring", "colouring/partial-order"),
    ("colouring__assign", "colouring", "colouring/assignment"),
    ("colouring__assign_clique", "colouring", "colouring/cliques"),
    ("colouring__assign_sym", "colouring", "colouring/ordered"),
    ("colouring__repr", "colouring", "colouring/representatives"),
    ("colouring__setcover", "colouring", "colouring/stable-sets"),
    ("cvrp__RCC", "cvrp", "cvrp/capacity-cuts"),
    ("cvrp__setpart", "cvrp", "cvrp/routes"),
    ("gap__setpart", "gap", "gap/patterns"),
    ("gap__std", "gap", "gap/plain"),
    ("gap__std_extcover", "gap", "gap/covers"),
    ("jobshop__liao", "jobshop", "job-shop/surplus"),
    ("jobshop__manne_H", "jobshop", "job-shop/disjunctive"),
    ("jobshop__manne_tight", "jobshop", "job-shop/tight"),
    ("linord__3dicycle", "linord", "ordering/dicycles"),
    ("linord__potential_bigM", "linord", "ordering/labels"),
    ("lotsize__bigM_tight", "lotsize", "lot/big-m"),
    ("lotsize__bigM_total", "lotsize", "lot/all-demand"),
    ("lotsize__facility", "lotsize", "lot/location-form"),
    ("lotsize__lS", "lotsize", "lot/l-s"),
    ("lotsize__shortest_path", "lotsize", "lot/shortest-path-form"),
    ("lotsize__ww", "lotsize", "lot/wagner-whitin"),
    ("matching__degree", "matching", "matching/degree"),
    ("matching__odd", "matching", "matching/odd-sets"),
    ("mst__bidir_cut", "mst", "tree/directed-cuts"),
    ("mst__martin", "mst", "tree/arborescences"),
    ("mst__mcf_dir", "mst", "tree/multi-commodity"),
    ("mst__mtz", "mst", "tree/labels"),
    ("mst__subtour", "mst", "tree/subtours"),
    ("pmedian__radius", "pmedian", "p-median/radius"),
    ("pmedian__strong", "pmedian", "p-median/split"),
    ("pmedian__weak", "pmedian", "p-median/joined"),
    ("qap__AJ", "qap", "qap/rlt-1"),
    ("qap__FY", "qap", "qap/four-sums"),
    ("qap__KB", "qap", "qap/big-m"),
    ("qap__glover_mccormick", "qap", "qap/products"),
    ("single_machine__TI", "machine", "machine/time-indexed"),
    ("single_machine__bigM", "machine", "machine/big-m"),
    ("single_machine__bigM_queyranne", "machine", "machine/parallel"),
    ("single_machine__lin_order", "machine", "machine/linear-ordering"),
    ("single_machine__positional", "machine", "machine/positions"),
    ("stableset__clique", "stableset", "stable-set/cliques"),
    ("stableset__edge", "stableset", "stable-set/edges"),
    ("stableset__edge_odd", "stableset", "stable-set/odd-cycles"),
    ("stableset__star_agg", "stableset", "stable-set/stars"),
    ("steiner__bidir_cut", "steiner", "steiner/directed-cuts"),
    ("steiner__mcf_dir", "steiner", "steiner/multi-commodity"),
    ("steiner__mcf_undir", "steiner", "steiner/undirected-flow"),
    ("steiner__scf", "steiner", "steiner/one-commodity"),
    ("steiner__ucut", "steiner", "steiner/cuts"),
    ("ucnd__strong", "design", "design/split"),
    ("ucnd__weak", "design", "design/joined"),
    ("ufl__strong", "ufl", "ufl/split"),
    ("ufl__weak", "ufl", "ufl/joined"),
    ("unitcommit__1bin_agg", "unit", "unit/aggregated"),
    ("unitcommit__1bin_pairwise", "unit", "unit/pairwise"),
    ("unitcommit__3bin_agg", "unit", "unit/three-binary-summed"),
    ("unitcommit__3bin_pair", "unit", "unit/three-binary"),
    ("unitcommit__3bin_turn", "unit", "unit/turn-on-off"),
];

/// The same, with the shipped text edited: what is replaced, and by what.
type Edited = (&'static str, &'static str, &'static str, &'static [(&'static str, &'static str)]);

const EDGES: (&str, &str) = ("  x(E) = |V| − 1 ", "  x(E) ≥ 0 ");
/// The golden flows on ways enter a node as often as they want.
const WAYS: (&str, &str) = ("  z_{i,j} + z_{j,i} = x_{i,j} ", "  z_{i,j} + z_{j,i} ≤ x_{i,j} ");
const ENTER: (&str, &str) =
    ("  Σ_{i : (i,j) ∈ A} z_{i,j} = 1 ", "  Σ_{i : (i,j) ∈ A} z_{i,j} ≥ 0 ");
const ROOT: (&str, &str) = ("  Σ_{i : (i,r) ∈ A} z_{i,r} = 0 ", "  Σ_{i : (i,r) ∈ A} z_{i,r} ≥ 0 ");
const NEED: (&str, &str) =
    ("  Σ_{i ∈ I} x_i ≥ d ", "  Σ_{i ∈ I} ω_i x_i ≤ Ω  (resource)\n  Σ_{i ∈ I} x_i = d ");
const RESOURCE: (&str, &str) = ("definitions\n", "  ω_i ∀ i ∈ I\n  Ω  resource\ndefinitions\n");
const PENTAGONS: (&str, &str) = (
    "  x_i ∈ {0,1} ",
    "  x_i + x_j + x_k + x_l + x_m ≤ 2  ∀ (i,j) ∈ N, (l,m) ∈ N, k ∈ V : i < j, i < k, i < l, j < m, \
     (m,i) ∈ N, (j,k) ∈ N, (k,l) ∈ N, j ≠ l, k ≠ m\n  x_i ∈ {0,1} ",
);
const NEIGHBOURS: (&str, &str) =
    ("maximise", "definitions\n  N = {(i,j) ∈ V × V : (i,j) ∈ E ∨ (j,i) ∈ E}\nmaximise");

const WINDOWS: (&str, &str) =
    ("definitions\n", "  a_{j,m} ∀ j ∈ J, m ∈ M\n  b_{j,m} ∀ j ∈ J, m ∈ M\ndefinitions\n");
const WITHIN: (&str, &str) = (" : t + p_{j,m} ≤ H}", " : a_{j,m} ≤ t, t ≤ b_{j,m}}");

/// Two vehicles at least, which is what the demands need.
const VEHICLES: (&str, &str) =
    ("  x_{i,j} ∈ {0,1} ", "  Σ_{j : (r,j) ∈ A} x_{r,j} ≥ 2  (vehicles)\n  x_{i,j} ∈ {0,1} ");

const EDITED: &[Edited] = &[
    (
        "atsp7__MTZ_loose",
        "atsp7",
        "atsp/labels",
        &[
            ("(n−1) x_{i,j} ≤ n − 2 ", "10 n x_{i,j} ≤ 10 n − 1 "),
            ("1 ≤ u_i ≤ n − 1", "0 ≤ u_i ≤ 10 n"),
        ],
    ),
    ("jobshop__TI_agg", "jobshop_windows", "job-shop/time-indexed", &[WINDOWS, WITHIN]),
    ("jobshop__TI_dis", "jobshop_windows", "job-shop/time-indexed-split", &[WINDOWS, WITHIN]),
    ("cvrp__DL_lift", "cvrp", "cvrp/lifted-load-labels", &[VEHICLES]),
    ("cvrp__MTZ", "cvrp", "cvrp/load-labels", &[VEHICLES]),
    ("cvrp__SCF", "cvrp", "cvrp/load-flow", &[VEHICLES]),
    ("cvrp__SCF_GG", "cvrp", "cvrp/tight-load-flow", &[VEHICLES]),
    ("cvrp__fracCC", "cvrp", "cvrp/fractional-cuts", &[VEHICLES]),
    (
        "cfl__cap_strong_agg",
        "cfl",
        "cfl/split",
        &[("  x_{i,j} ≥ 0 ", "  Σ_{i ∈ I} q_i y_i ≥ Σ_{j ∈ J} d_j  (total)\n  x_{i,j} ≥ 0 ")],
    ),
    ("mst__ucut", "mst", "tree/cuts", &[EDGES]),
    ("mst__mcf_undir", "mst", "tree/undirected-flow", &[EDGES]),
    ("mst__scf", "mst", "tree/one-commodity", &[EDGES]),
    ("mst__scf_dir", "mst", "tree/directed-flow", &[WAYS, ENTER, ROOT]),
    ("steiner__scf_dir", "steiner", "steiner/directed-flow", &[ENTER, ROOT]),
    ("stableset__clique_odd", "stableset", "stable-set/cliques", &[NEIGHBOURS, PENTAGONS]),
    (
        "qap__XY",
        "qap",
        "qap/big-m",
        &[
            (
                "definitions\n  M_{i,k} = Σ_{j ∈ V} Σ_{l ∈ L} f_{i,j} d_{k,l}  ∀ i ∈ V, k ∈ L\n",
                "  M_{i,k} ∀ i ∈ V, k ∈ L\n  s_{i,k} ∀ i ∈ V, k ∈ L\n",
            ),
            (
                "  w_{i,k} ≥ 0 ",
                "  w_{i,k} ≥ s_{i,k} x_{i,k}  ∀ i ∈ V, k ∈ L (least)\n  w_{i,k} ≥ 0 ",
            ),
        ],
    ),
    (
        "piecewise__bigM",
        "piecewise",
        "piecewise/big-m",
        &[
            RESOURCE,
            NEED,
            (
                "  x_i ≥ Σ_{k ∈ K} B_{i,k−1} y_{i,k}         ∀ i ∈ I ",
                "  x_i ≥ B_{i,k−1} y_{i,k}  ∀ i ∈ I, k ∈ K ",
            ),
            (
                "  x_i ≤ Σ_{k ∈ K} B_{i,k} y_{i,k}           ∀ i ∈ I ",
                "  x_i ≤ B_{i,n} − (B_{i,n} − B_{i,k}) y_{i,k}  ∀ i ∈ I, k ∈ K ",
            ),
        ],
    ),
    ("piecewise__CC_old", "piecewise", "piecewise/convex-combination", &[RESOURCE, NEED]),
    ("piecewise__CC_tight", "piecewise", "piecewise/tight-combination", &[RESOURCE, NEED]),
    ("piecewise__DCC", "piecewise", "piecewise/split-combination", &[RESOURCE, NEED]),
    ("piecewise__INC", "piecewise", "piecewise/incremental", &[RESOURCE, NEED]),
    ("piecewise__LOG", "piecewise", "piecewise/logarithmic", &[RESOURCE, NEED]),
    ("piecewise__MC", "piecewise", "piecewise/multiple-choice", &[RESOURCE, NEED]),
];

/// One of several boxes, with a limit on the sum: what differs is how a box holds.
const BOXES: &str = "Boxes\n\ndata\n  D  sides\n  K  boxes\n  c_i ∀ i ∈ D\n  f_k ∀ k ∈ K\n  \
    l_{k,i} ∀ k ∈ K, i ∈ D\n  h_{k,i} ∀ k ∈ K, i ∈ D\n  Q  limit\nminimise\n  \
    Σ_{i ∈ D} c_i x_i + Σ_{k ∈ K} f_k y_k\nsubject to\n  Σ_{k ∈ K} y_k = 1\n  \
    Σ_{i ∈ D} x_i ≤ Q\n  0 ≤ x_i ≤ 100 ∀ i ∈ D\n  y_k ∈ {0,1} ∀ k ∈ K\n";

const DISJUNCTIONS: [(&str, &str); 3] = [
    (
        "disjunction__bigM_loose",
        "  x_i ≥ l_{k,i} y_k  ∀ k ∈ K, i ∈ D\n  x_i ≤ 100 − (100 − h_{k,i}) y_k  ∀ k ∈ K, i ∈ D\n",
    ),
    (
        "disjunction__bigM",
        "  x_i ≥ l_{k,i} − (l_{k,i} − min_{q ∈ K} l_{q,i}) (1 − y_k)  ∀ k ∈ K, i ∈ D\n  \
         x_i ≤ h_{k,i} + (max_{q ∈ K} h_{q,i} − h_{k,i}) (1 − y_k)  ∀ k ∈ K, i ∈ D\n",
    ),
    (
        "disjunction__hull",
        "  x_i = Σ_{k ∈ K} z_{k,i}  ∀ i ∈ D\n  l_{k,i} y_k ≤ z_{k,i}  ∀ k ∈ K, i ∈ D\n  \
         z_{k,i} ≤ h_{k,i} y_k  ∀ k ∈ K, i ∈ D\n  z_{k,i} ≥ 0  ∀ k ∈ K, i ∈ D\n",
    ),
];

fn shipped(id: &str) -> String {
    catalogue::find(id).unwrap_or_else(|| panic!("no rival {id}")).text.to_owned()
}

fn edited(id: &str, edits: &[(&str, &str)]) -> String {
    edits.iter().fold(shipped(id), |text, (from, to)| {
        assert!(text.contains(from), "{id}: {from}");
        text.replacen(from, to, 1)
    })
}

/// All texts with the golden model and the data that they are held to.
fn texts() -> Vec<(&'static str, &'static str, String)> {
    let wrong = Path::new(env!("CARGO_MANIFEST_DIR"))
        .join("../../crates/catalogue/tests/wrong/qap/no-symmetry.txt");
    let plain = SHIPPED.iter().map(|&(golden, data, id)| (golden, data, shipped(id)));
    let others = EDITED.iter().map(|&(golden, data, id, edits)| (golden, data, edited(id, edits)));
    let boxes =
        DISJUNCTIONS.map(|(golden, rows)| (golden, "disjunction", format!("{BOXES}{rows}")));
    let wrong = ("qap__AJ_noSymGL", "qap", std::fs::read_to_string(wrong).unwrap());
    plain.chain(others).chain(boxes).chain([wrong]).collect()
}

#[test]
fn golden_models_are_restated_from_their_data() {
    let folder = Path::new(env!("CARGO_MANIFEST_DIR")).join("fixtures/golden_data");
    let (mut missed, mut met) = (Vec::new(), BTreeSet::new());
    let golden = golden::all();
    for (name, data, text) in texts() {
        let stored = golden.iter().find(|one| one.name.rsplit_once("__").unwrap().0 == name);
        let stored = stored.unwrap_or_else(|| panic!("no golden model {name}"));
        let data = std::fs::read_to_string(folder.join(format!("{data}.txt"))).unwrap();
        let model = formulation(&text, &instance(&data));
        let bound = root(&model).bound.unwrap_or(f64::NAN);
        let summary = solve(&model, Settings { node_limit: Some(50_000), ..Settings::default() });
        let optimum = summary.incumbent.unwrap_or(f64::NAN);
        let held = agree(bound, stored.lp, 1e-6) && agree(optimum, stored.mip, 1e-6);
        if !held || summary.status != Status::Optimal {
            missed.push(format!("{name}: {bound}, {optimum} for {}, {}", stored.lp, stored.mip));
        }
        met.insert(name);
    }
    assert!(missed.is_empty(), "{}", missed.join("\n"));
    let left = golden.iter().filter(|one| !met.contains(one.name.rsplit_once("__").unwrap().0));
    let left: Vec<&str> = left.map(|one| one.name.as_str()).collect();
    assert!(left.is_empty(), "not restated: {left:?}");
}
