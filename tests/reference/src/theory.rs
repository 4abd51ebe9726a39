//! Optima by other roads than integer programming: the label-setting method for paths, all
//! sets of open facilities, the dynamic program for lots. And what the OR-Library holds.

use std::collections::BTreeMap;

use instance::{Datum, Instance};
use model::nearest_f64;
use petgraph::algo::dijkstra;
use petgraph::graph::DiGraph;

/// The labels of a set, in its order.
///
/// # Panics
/// When the instance holds no such set.
#[must_use]
pub fn labels(instance: &Instance, name: &str) -> Vec<String> {
    match instance.get(name) {
        Some(Datum::Labels(labels)) => labels.clone(),
        Some(Datum::Integers(values)) => values.iter().map(ToString::to_string).collect(),
        other => panic!("{name} is {other:?}"),
    }
}

/// The numbers of a table by their labels.
///
/// # Panics
/// When the instance holds no such table.
#[must_use]
pub fn table(instance: &Instance, name: &str) -> BTreeMap<Vec<String>, f64> {
    let Some(Datum::Table { cells, .. }) = instance.get(name) else { panic!("no table {name}") };
    cells.iter().map(|(key, value)| (key.clone(), nearest_f64(value))).collect()
}

/// The least of some numbers; infinity of none.
pub fn least(numbers: impl Iterator<Item = f64>) -> f64 {
    numbers.fold(f64::INFINITY, |least, number| if number < least { number } else { least })
}

/// The length of the shortest path from `s` to `t` on lengths that are not negative (Dijkstra,
/// Numerische Mathematik 1 (1959) 269-271, by petgraph).
///
/// # Panics
/// When the instance is no network, or `t` cannot be reached.
#[must_use]
pub fn shortest_path(instance: &Instance) -> f64 {
    let mut graph = DiGraph::<(), f64>::new();
    let names = labels(instance, "V").into_iter();
    let nodes: BTreeMap<String, _> = names.map(|name| (name, graph.add_node(()))).collect();
    for (arc, length) in table(instance, "c") {
        graph.add_edge(nodes[&arc[0]], nodes[&arc[1]], length);
    }
    let end = |name: &str| match instance.get(name) {
        Some(Datum::Element(label)) => nodes[label],
        other => panic!("{name} is {other:?}"),
    };
    let found = dijkstra(&graph, end("s"), Some(end("t")), |arc| *arc.weight());
    found[&end("t")]
}

/// The cheapest set of open facilities, by trying them all; each client goes to the cheapest.
///
/// # Panics
/// When the instance is not one of facility location.
#[must_use]
pub fn cheapest_sites(instance: &Instance) -> f64 {
    let (sites, clients) = (labels(instance, "I"), labels(instance, "J"));
    let (opening, serving) = (table(instance, "f"), table(instance, "c"));
    least((1..1_u32 << sites.len()).map(|mask| {
        let open = || sites.iter().enumerate().filter(|(i, _)| mask >> i & 1 == 1);
        let opened: f64 = open().map(|(_, site)| opening[&vec![site.clone()]]).sum();
        let served = clients.iter().map(|client| {
            least(open().map(|(_, site)| serving[&vec![site.clone(), client.clone()]]))
        });
        opened + served.sum::<f64>()
    }))
}

/// The cheapest lots for the first 1, 2, … periods: `F(l)` is the least of `F(l−1)`, when
/// period `l` has no demand, and of `F(t−1)` with one lot in `t` for all demand from `t` to `l`
/// (Wagner & Whitin, Management Science 5 (1958) 89-96; for any costs because of two open
/// periods the same is the cheaper for all demand from the later one on).
///
/// # Panics
/// When the instance is not one of lot sizing.
#[must_use]
pub fn cheapest_lots(instance: &Instance) -> Vec<f64> {
    let periods = labels(instance, "T");
    let [demand, set_up, making, holding] = ["d", "f", "p", "h"].map(|name| {
        let cells = table(instance, name);
        periods.iter().map(|period| cells[&vec![period.clone()]]).collect::<Vec<f64>>()
    });
    let lot = |from: usize, to: usize| {
        let (mut cost, mut unit) = (set_up[from], making[from]);
        for period in from..to {
            cost += demand[period] * unit;
            unit += holding[period];
        }
        cost
    };
    let mut best = vec![0.0];
    for l in 1..=periods.len() {
        let idle = (demand[l - 1] == 0.0).then(|| best[l - 1]);
        let made = (0..l).map(|t| best[t] + lot(t, l));
        let value = least(made.chain(idle));
        best.push(value);
    }
    best.split_off(1)
}

/// A file of the OR-Library for uncapacitated facility location, as named blocks: sites with
/// capacity (not used) and cost of opening; clients with demand (not used) and the costs of
/// serving all of it from each site.
///
/// # Panics
/// When the file is not of that form.
#[must_use]
pub fn sites_of_or_library(text: &str) -> String {
    let mut words = text.split_whitespace();
    let mut count = || words.next().unwrap().parse::<usize>().unwrap();
    let (sites, clients) = (count(), count());
    let names = |letter: char, count: usize| -> Vec<String> {
        (1..=count).map(|i| format!("{letter}{i}")).collect()
    };
    let (sites, clients) = (names('f', sites), names('c', clients));
    let mut out = format!("I\n{}\n\nJ\n{}\n\nf by i\n", sites.join(" "), clients.join(" "));
    for site in &sites {
        let _capacity = words.next().unwrap();
        out.push_str(&format!("{site} {}\n", words.next().unwrap().trim_end_matches('.')));
    }
    out.push_str("\nc by i, j\n");
    for client in &clients {
        let _demand = words.next().unwrap();
        for site in &sites {
            out.push_str(&format!("{site} {client} {}\n", words.next().unwrap()));
        }
    }
    out
}

/// All stable sets that hold no further node, by their nodes, for up to 64 nodes: the search of Bron & Kerbosch,
/// Communications of the ACM 16 (1973) 575-577, in the complement, with the node as pivot that leaves least to try.
///
/// # Panics
/// When an edge has an end that is no node.
#[must_use]
pub fn stable_sets(nodes: &[String], edges: &[Vec<String>]) -> Vec<Vec<String>> {
    let place = |label: &String| nodes.iter().position(|node| node == label).unwrap();
    let all = u64::MAX >> (64 - nodes.len());
    let mut apart: Vec<u64> = (0..nodes.len()).map(|i| all & !(1 << i)).collect();
    for edge in edges {
        let (i, j) = (place(&edge[0]), place(&edge[1]));
        apart[i] &= !(1 << j);
        apart[j] &= !(1 << i);
    }
    let members = |set: u64| (0..nodes.len()).filter(move |&i| set >> i & 1 == 1);
    let (mut open, mut out) = (vec![(0_u64, all, 0_u64)], Vec::new());
    while let Some((set, mut left, mut done)) = open.pop() {
        if left | done == 0 {
            out.push(members(set).map(|i| nodes[i].clone()).collect());
            continue;
        }
        let pivot = members(left | done).max_by_key(|&i| (left & apart[i]).count_ones());
        for i in members(left & !pivot.map_or(0, |i| apart[i])) {
            open.push((set | 1 << i, left & apart[i], done & apart[i]));
            left &= !(1 << i);
            done |= 1 << i;
        }
    }
    out
}
