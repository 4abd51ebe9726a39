//! What is known of the bounds of rivals, as it was gathered from the literature and from small
//! programs that share no code with this project, against what the catalogue's `family.toml` say:
//! each statement follows from theirs, a theorem from theorems alone. And each relaxation that is
//! integral by theorem is so on seeded instances of every class.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeSet;

use catalogue::Level::{Observed, Theorem};
use catalogue::{Level, Order, Relation, relations};
use hullward_tests_reference::agree;
use hullward_tests_reference::round_trip::{rival, root, solve};
use hullward_tests_reference::seeded::{extent, families, seeded};
use tree::Settings;

/// The left rival, how it stands to the right one, and how far that is known.
const KNOWN: [(&str, &str, &str, Level); 120] = [
    ("atsp/labels", "⪰", "atsp/assignment", Theorem),
    ("atsp/subtours", "⪰", "atsp/labels", Theorem),
    ("atsp/subtours", "⪰", "atsp/one-commodity", Theorem),
    ("atsp/multi-commodity", "=", "atsp/subtours", Theorem),
    ("atsp/subtours", "=", "atsp/cuts", Theorem),
    ("atsp/two-commodity", "=", "atsp/one-commodity", Theorem),
    ("atsp/time-staged", "=", "atsp/one-commodity", Observed),
    ("atsp/one-commodity", "⪰", "atsp/labels", Theorem),
    ("atsp/rlt-labels", "⪰", "atsp/lifted-labels", Theorem),
    ("atsp/lifted-labels", "⪰", "atsp/labels", Theorem),
    ("atsp/tight-one-commodity", "⪰", "atsp/one-commodity", Theorem),
    ("atsp/tight-one-commodity", "⪰", "atsp/labels", Theorem),
    ("atsp/lifted-precedence-labels", "⪰", "atsp/labels", Observed),
    ("atsp/lifted-precedence-labels", "⪰", "atsp/precedence-labels", Observed),
    ("atsp/precedence", "⪰", "atsp/precedence-labels", Observed),
    ("atsp/precedence", "⪰", "atsp/lifted-precedence-labels", Observed),
    ("atsp/precedence", "⪰", "atsp/labels", Observed),
    ("atsp/rlt-labels", "⪰", "atsp/labels", Theorem),
    ("atsp/rlt-labels", "⪰", "atsp/one-commodity", Observed),
    ("atsp/rlt-labels", "⪰", "atsp/tight-one-commodity", Observed),
    ("atsp/legs", "⪰", "atsp/labels", Observed),
    ("atsp/legs", "⪰", "atsp/one-commodity", Observed),
    ("atsp/legs", "⪰", "atsp/tight-one-commodity", Observed),
    ("atsp/subtours", "⪰", "atsp/tight-one-commodity", Observed),
    ("atsp/subtours", "⪰", "atsp/precedence-labels", Observed),
    ("atsp/subtours", "⪰", "atsp/lifted-precedence-labels", Observed),
    ("atsp/subtours", "⪰", "atsp/precedence", Observed),
    ("atsp/lifted-labels", "∥", "atsp/one-commodity", Theorem),
    ("atsp/lifted-labels", "∥", "atsp/subtours", Theorem),
    ("atsp/rlt-labels", "∥", "atsp/subtours", Theorem),
    ("atsp/legs", "∥", "atsp/subtours", Theorem),
    ("atsp/legs", "∥", "atsp/rlt-labels", Theorem),
    ("tsp/blossoms", "⪰", "tsp/subtours", Theorem),
    ("tsp/subtours", "⪰", "tsp/degrees", Theorem),
    ("path/flow", "=", "path/potentials", Theorem),
    ("cvrp/load-flow", "=", "cvrp/fractional-cuts", Theorem),
    ("cvrp/tight-load-flow", "⪰", "cvrp/load-flow", Theorem),
    ("cvrp/capacity-cuts", "⪰", "cvrp/fractional-cuts", Theorem),
    ("cvrp/lifted-load-labels", "⪰", "cvrp/load-labels", Observed),
    ("cvrp/routes", "∥", "cvrp/capacity-cuts", Theorem),
    ("ufl/split", "⪰", "ufl/joined", Theorem),
    ("ufl/radii", "=", "ufl/split", Theorem),
    ("cfl/split", "⪰", "cfl/joined", Theorem),
    ("cfl/total", "=", "cfl/joined", Observed),
    ("p-median/radius", "=", "p-median/split", Theorem),
    ("p-median/split", "⪰", "p-median/joined", Theorem),
    ("p-centre/radius", "⪰", "p-centre/assignment", Theorem),
    ("lot/l-s", "=", "lot/location-form", Theorem),
    ("lot/shortest-path-form", "=", "lot/location-form", Theorem),
    ("lot/l-s", "⪰", "lot/big-m", Theorem),
    ("lot/l-s", "⪰", "lot/wagner-whitin", Theorem),
    ("lot/big-m", "⪰", "lot/all-demand", Theorem),
    ("tree/subtours", "⪰", "tree/cuts", Theorem),
    ("tree/directed-cuts", "=", "tree/subtours", Theorem),
    ("tree/multi-commodity", "=", "tree/directed-cuts", Theorem),
    ("tree/undirected-flow", "=", "tree/cuts", Theorem),
    ("tree/arborescences", "=", "tree/subtours", Theorem),
    ("tree/cuts", "⪰", "tree/one-commodity", Observed),
    ("tree/subtours", "⪰", "tree/labels", Observed),
    ("steiner/multi-commodity", "=", "steiner/directed-cuts", Theorem),
    ("steiner/directed-cuts", "⪰", "steiner/cuts", Theorem),
    ("steiner/cuts", "=", "steiner/undirected-flow", Theorem),
    ("steiner/cuts", "⪰", "steiner/one-commodity", Theorem),
    ("steiner/balanced-cuts", "⪰", "steiner/directed-cuts", Theorem),
    ("steiner/nodes", "=", "steiner/directed-cuts", Theorem),
    ("design/split", "⪰", "design/joined", Theorem),
    ("design/split", "⪰", "design/by-origin", Theorem),
    ("capacitated-design/split", "⪰", "capacitated-design/joined", Theorem),
    ("lines/multiple-choice", "⪰", "lines/joined", Theorem),
    ("bins/arc-flow", "=", "bins/patterns", Theorem),
    ("bins/one-cut", "=", "bins/patterns", Theorem),
    ("bins/arc-flow", "⪰", "bins/assignment", Theorem),
    ("bins/linked", "=", "bins/assignment", Observed),
    ("bins/ordered", "=", "bins/assignment", Observed),
    ("bins/heads", "=", "bins/assignment", Observed),
    ("knapsack/covers", "⪰", "knapsack/plain", Theorem),
    ("knapsack/states", "⪰", "knapsack/covers", Theorem),
    ("gap/covers", "⪰", "gap/plain", Theorem),
    ("gap/patterns", "⪰", "gap/covers", Theorem),
    ("job-shop/surplus", "=", "job-shop/disjunctive", Theorem),
    ("job-shop/tight", "⪰", "job-shop/disjunctive", Theorem),
    ("job-shop/time-indexed", "⪰", "job-shop/disjunctive", Observed),
    ("job-shop/time-indexed-split", "⪰", "job-shop/time-indexed", Theorem),
    ("machine/parallel", "⪰", "machine/big-m", Theorem),
    ("machine/linear-ordering", "⪰", "machine/big-m", Observed),
    ("machine/time-indexed", "⪰", "machine/parallel", Theorem),
    ("rcpsp/pulse-split", "⪰", "rcpsp/pulse", Theorem),
    ("rcpsp/step", "=", "rcpsp/pulse-split", Theorem),
    ("stable-set/cliques", "⪰", "stable-set/edges", Theorem),
    ("stable-set/edges", "⪰", "stable-set/stars", Observed),
    ("colouring/assignment", "⪰", "colouring/partial-order", Observed),
    ("colouring/ordered", "=", "colouring/assignment", Observed),
    ("colouring/cliques", "⪰", "colouring/assignment", Theorem),
    ("colouring/representatives", "⪰", "colouring/assignment", Observed),
    ("colouring/stable-sets", "⪰", "colouring/cliques", Theorem),
    ("colouring/stable-sets", "⪰", "colouring/representatives", Theorem),
    ("matching/odd-sets", "⪰", "matching/degree", Theorem),
    ("unit/pairwise", "⪰", "unit/aggregated", Observed),
    ("unit/three-binary", "=", "unit/pairwise", Observed),
    ("unit/turn-on-off", "⪰", "unit/three-binary", Theorem),
    ("unit/intervals", "=", "unit/turn-on-off", Theorem),
    ("piecewise/incremental", "=", "piecewise/multiple-choice", Theorem),
    ("piecewise/incremental", "=", "piecewise/convex-combination", Theorem),
    ("piecewise/incremental", "=", "piecewise/tight-combination", Theorem),
    ("piecewise/incremental", "=", "piecewise/split-combination", Theorem),
    ("piecewise/incremental", "=", "piecewise/logarithmic", Theorem),
    ("piecewise/incremental", "⪰", "piecewise/big-m", Observed),
    ("qap/rlt-1", "⪰", "qap/least-ways", Theorem),
    ("qap/rlt-1", "⪰", "qap/four-sums", Theorem),
    ("qap/rlt-1", "⪰", "qap/big-m", Theorem),
    ("qap/rlt-2", "⪰", "qap/rlt-1", Theorem),
    ("ordering/dicycles", "⪰", "ordering/labels", Observed),
    ("quadratic/products", "⪰", "quadratic/row-sums", Theorem),
    ("quadratic/triangles", "⪰", "quadratic/products", Theorem),
    ("quadratic/rlt-2", "⪰", "quadratic/products", Theorem),
    ("max-cut/odd-cycles", "=", "max-cut/triangles", Theorem),
    ("grouping/two-partitions", "⪰", "grouping/triangles", Theorem),
    ("hub/paths", "⪰", "hub/flow", Theorem),
    ("cases/hull", "⪰", "cases/big-m", Theorem),
    ("cases/big-m", "⪰", "cases/loose", Observed),
];

/// Relaxations that are integral: total unimodularity (Hoffman & Kruskal 1956), Edmonds 1965 and
/// 1971, Martin 1991, Krarup & Bilde 1977, Barany, Van Roy & Wolsey 1984, Eppen & Martin 1987,
/// and paths in networks without circles.
const INTEGRAL: [&str; 13] = [
    "atsp/assignment",
    "path/flow",
    "path/potentials",
    "limited-path/layers",
    "lot/l-s",
    "lot/location-form",
    "lot/shortest-path-form",
    "tree/subtours",
    "tree/directed-cuts",
    "tree/multi-commodity",
    "tree/arborescences",
    "matching/odd-sets",
    "knapsack/states",
];

fn all() -> Vec<Relation> {
    families().iter().flat_map(|family| relations(family)).collect()
}

/// The rivals that are never stronger than one, by these relations and what follows of them.
fn below<'r>(first: &'r str, known: &[&'r Relation]) -> BTreeSet<&'r str> {
    let (mut reached, mut open) = (BTreeSet::from([first]), vec![first]);
    while let Some(id) = open.pop() {
        for one in known {
            let (left, right) = (one.left.as_str(), one.right.as_str());
            let next = match one.order {
                Order::NeverWeaker | Order::Equal if left == id => right,
                Order::Equal if right == id => left,
                _ => continue,
            };
            if reached.insert(next) {
                open.push(next);
            }
        }
    }
    reached
}

#[test]
fn what_the_literature_says_follows_from_what_the_catalogue_says() {
    let all = all();
    let mut missed = Vec::new();
    for (left, order, right, level) in KNOWN {
        let counts = |one: &&Relation| level == Observed || one.level == Theorem;
        let known: Vec<&Relation> = all.iter().filter(counts).collect();
        let said = |left: &str, right: &str| below(left, &known).contains(right);
        let follows = match order {
            "⪰" => said(left, right),
            "=" => said(left, right) && said(right, left),
            _ => all.iter().any(|one| {
                (one.left.as_str(), one.right.as_str()) == (left, right)
                    && one.order == Order::Incomparable
            }),
        };
        if !follows {
            missed.push(format!("{left} {order} {right}, {level:?}"));
        }
    }
    assert!(missed.is_empty(), "{}", missed.join("\n"));
}

/// No two statements contradict each other: of rivals of which neither dominates none is never
/// weaker, and nothing is said twice.
#[test]
fn statements_do_not_contradict_each_other() {
    let all = all();
    let known: Vec<&Relation> = all.iter().collect();
    let mut met = BTreeSet::new();
    for one in &all {
        assert!(met.insert((&one.left, &one.right, one.level == Theorem)), "{one:?} twice");
        if one.order == Order::Incomparable {
            assert!(!below(&one.left, &known).contains(one.right.as_str()), "{one:?}");
            assert!(!below(&one.right, &known).contains(one.left.as_str()), "{one:?}");
        }
    }
}

#[test]
fn relaxations_that_are_integral_by_theorem_are_so() {
    let entries = catalogue::entries().into_iter().filter(|entry| !entry.integral.is_empty());
    let said: BTreeSet<String> = entries.map(|entry| entry.id).collect();
    assert_eq!(said, INTEGRAL.map(str::to_owned).into(), "what the catalogue says");
    for id in INTEGRAL {
        let family = id.split('/').next().unwrap();
        let extent = extent(family);
        for (name, on) in seeded(family, extent.bounds, extent.seeds) {
            let model = rival(id, &on);
            let bound = root(&model).bound.unwrap();
            let best = solve(&model, Settings::default()).incumbent.unwrap();
            assert!(agree(bound, best, 1e-7), "{id} on {name}: {bound}, {best}");
        }
    }
}
