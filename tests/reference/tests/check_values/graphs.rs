//! Stable sets, colourings and matchings.

use std::collections::BTreeMap;

use hullward_tests_reference::graphs::{Edges, colours_and_sets, graph, network};
use hullward_tests_reference::round_trip::{formulation, instance, rival, root};

use super::{Record, row, shipped, value_of, whole};

pub(crate) fn stable(record: &Record) -> Option<f64> {
    if !record.is("stable set") || record.instance == "queen8" && !whole() {
        return None;
    }
    let (nodes, edges) = graph(&record.instance)?;
    let ones = row("n", &vec![1.0; nodes]);
    let on = instance(&format!("{}\nw by i\n{ones}\n", network(nodes, &edges)));
    match record.formulation.split(' ').next().unwrap() {
        "edge" => Some(value_of(shipped("stable-set/edges"), &on, true)),
        "all" => root(&rival("stable-set/cliques", &on)).bound,
        _ => Some(value_of(shipped("stable-set/edges"), &on, false)),
    }
}

pub(crate) fn colours(record: &Record) -> Option<f64> {
    if !record.is("graph colouring") {
        return None;
    }
    let (nodes, edges) = graph(&record.instance)?;
    let text = network(nodes, &edges);
    let form = record.formulation.split(' ').next().unwrap();
    if form == "asymmetric" {
        return Some(value_of(shipped("colouring/representatives"), &instance(&text), true));
    }
    if !["any", "set"].contains(&form) {
        return None;
    }
    let labels: Vec<String> = (0..nodes).map(|k| format!("n{k}")).collect();
    let ends: Vec<Vec<String>> =
        edges.iter().map(|&(a, b)| vec![labels[a].clone(), labels[b].clone()]).collect();
    let on = instance(&(text + &colours_and_sets(&labels, &ends, nodes)));
    Some(value_of(shipped("colouring/stable-sets"), &on, record.bounds()))
}

/// Each node matched: the degree rows as equations, minimised.
pub(crate) fn matching(record: &Record) -> Option<f64> {
    if !record.is("min-weight perfect matching") {
        return None;
    }
    let triangles = record.instance.starts_with("two triangles");
    let costs = if triangles {
        let pair = |a: usize, b: usize| if a / 3 == b / 3 { 1.0 } else { 5.0 };
        (0..6).map(|a| (0..6).map(|b| pair(a, b)).collect()).collect()
    } else {
        distances(&record.instance)?
    };
    if costs.len() > 30 && !whole() {
        return None;
    }
    let all = costs.len();
    let pairs: Edges = (0..all).flat_map(|a| (a + 1..all).map(move |b| (a, b))).collect();
    let worths: String =
        pairs.iter().map(|&(a, b)| format!("n{a} n{b} {}\n", costs[a][b])).collect();
    let on = instance(&format!("{}\nw by i, j\n{worths}\n", network(all, &pairs)));
    let odd = record.formulation.contains("odd");
    let text = shipped(if odd { "matching/odd-sets" } else { "matching/degree" });
    let text = text.replace("maximise", "minimise").replace("x(δ(i)) ≤ 1", "x(δ(i)) = 1");
    root(&formulation(&text, &on)).bound
}

fn distances(name: &str) -> Option<Vec<Vec<f64>>> {
    let on = hullward_tests_reference::round_trip::tsplib(name)?;
    let stops = hullward_tests_reference::theory::labels(&on, "V");
    let table: BTreeMap<Vec<String>, f64> = hullward_tests_reference::theory::table(&on, "c");
    let way = |a: &String, b: &String| table.get(&vec![a.clone(), b.clone()]).copied();
    let line = |a: &String| stops.iter().map(|b| way(a, b).unwrap_or(0.0)).collect();
    Some(stops.iter().map(line).collect())
}
