//! The lines of the drawn order of relaxations against petgraph: its transitive reduction of all that is
//! known, on random partial orders whose pairs are given in full, as the study of the order gives them.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeSet;

use petgraph::algo::toposort;
use petgraph::algo::tred::{dag_to_toposorted_adjacency_list, dag_transitive_reduction_closure};
use petgraph::graph::{DiGraph, NodeIndex};
use rand_core::{Rng, SeedableRng};
use rand_pcg::Pcg32;
use record::study::{Order, OrderLevel, Relation, Report};
use report::study::overview;

/// Letters of rivals.
const LETTERS: [&str; 7] = ["A", "B", "C", "D", "E", "F", "G"];

/// Which rivals are above which: random, then closed.
fn above(random: &mut Pcg32) -> Vec<Vec<bool>> {
    let n = LETTERS.len();
    let mut above = vec![vec![false; n]; n];
    for (from, row) in above.iter_mut().enumerate() {
        for it in row.iter_mut().skip(from + 1) {
            *it = random.next_u32().is_multiple_of(3);
        }
    }
    for middle in 0..n {
        for from in 0..n {
            for to in 0..n {
                above[from][to] |= above[from][middle] && above[middle][to];
            }
        }
    }
    above
}

/// A report for each pair, the letters given out in an order of their own.
fn reports(above: &[Vec<bool>], letters: &[&str]) -> Vec<Report> {
    let mut out = Vec::new();
    for from in 0..above.len() {
        for to in from + 1..above.len() {
            // The rival with the smaller letter stands first, as in a study.
            let turned = letters[from] > letters[to];
            let pair = if turned { [to, from] } else { [from, to] };
            let relation = match (above[from][to], turned) {
                (true, false) => Relation::NeverWeaker,
                (true, true) => Relation::NeverStronger,
                (false, _) => Relation::Incomparable,
            };
            let rivals = pair.map(|place| letters[place].to_owned());
            let level = OrderLevel::Theorem;
            out.push(Report::Order(Box::new(Order {
                rivals,
                relation,
                level,
                ..Order::default()
            })));
        }
    }
    out
}

/// The lines of the transitive reduction by petgraph, as words.
fn reduced(above: &[Vec<bool>], letters: &[&str]) -> BTreeSet<String> {
    let mut graph = DiGraph::<(), (), u32>::new();
    let nodes: Vec<NodeIndex> = above.iter().map(|_| graph.add_node(())).collect();
    for (from, row) in above.iter().enumerate() {
        for (to, _) in row.iter().enumerate().filter(|(_, is)| **is) {
            graph.add_edge(nodes[from], nodes[to], ());
        }
    }
    let order = toposort(&graph, None).unwrap();
    let (sorted, _) = dag_to_toposorted_adjacency_list::<_, u32>(&graph, &order);
    let (reduction, _) = dag_transitive_reduction_closure(&sorted);
    let letter = |place: u32| letters[order[place as usize].index()];
    let edges = reduction.edge_indices().filter_map(|edge| reduction.edge_endpoints(edge));
    edges.map(|(from, to)| format!("{} above {} (theorem)", letter(from), letter(to))).collect()
}

#[test]
fn the_lines_are_those_of_the_transitive_reduction() {
    let mut random = Pcg32::seed_from_u64(8);
    let mut lines = 0;
    for _ in 0..200 {
        let above = above(&mut random);
        let mut letters = LETTERS;
        for place in (1..letters.len()).rev() {
            letters.swap(place, random.next_u32() as usize % (place + 1));
        }
        let wanted = reduced(&above, &letters);
        let reports = reports(&above, &letters);
        let reports: Vec<&Report> = reports.iter().collect();
        let drawn = overview(&reports).unwrap();
        let figure = drawn.figure.unwrap();
        assert_eq!(figure.lines.len(), wanted.len(), "{above:?}");
        let words = drawn.verdict[0].trim_end_matches('.').replace(" and ", ", ");
        let found: BTreeSet<String> = words.split(", ").map(str::to_owned).collect();
        if !wanted.is_empty() {
            assert_eq!(found, wanted, "{above:?}");
        }
        lines += wanted.len();
    }
    assert!(lines > 500, "{lines}");
}
