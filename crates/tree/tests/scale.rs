//! A million nodes in one run: memory, and a node's detail from its stored difference.
//!
//! A fortieth of it within the usual tests; all of it with
//! `HULLWARD_NODES=1000000 cargo test -p hullward-tree --test scale -- --nocapture`.

#![expect(clippy::expect_used, reason = "the helpers of these tests fail loudly")]

use std::rc::Rc;

use hullward_tree::{Event, NodeId, Progress, Search, Settings};
use model::{ColumnId, ColumnSpec, Model, ModelBuilder, Number, Row, Sense};

/// Nodes unless `HULLWARD_NODES` says how many.
const NODES: u32 = 25_000;

/// What a million nodes may take, in bytes; fewer may take as much.
const MOST: u64 = 1 << 30;

/// Jeroslow 1974 (Mathematical Programming 6): 2 Σ x = n with n odd takes more than 2^(n/2) nodes.
/// The rows beside it make bases of a usual size.
fn model(n: i32) -> Rc<Model> {
    let mut builder = ModelBuilder::new("Jeroslow", Sense::Minimise);
    let spec = ColumnSpec {
        lower: Some(Number::ZERO),
        upper: Some(Number::ONE),
        cost: Number::ONE,
        integer: true,
    };
    let columns: Vec<ColumnId> =
        (0..n).map(|_| builder.column(&[], &spec).expect("a column")).collect();
    let two = Number::from(2);
    let entries = columns.iter().map(|&column| (column, two.clone())).collect();
    let side = Some(Number::from(n));
    builder.row(&[], Row { entries, lower: side.clone(), upper: side }).expect("a row");
    for pair in columns.windows(2) {
        let entries = pair.iter().map(|&column| (column, Number::ONE)).collect();
        let upper = Some(two.clone());
        builder.row(&[], Row { entries, lower: None, upper }).expect("a row");
    }
    Rc::new(builder.build())
}

/// The most memory that this process had, in bytes, as the kernel counts it.
fn peak() -> Option<u64> {
    let status = std::fs::read_to_string("/proc/self/status").ok()?;
    let line = status.lines().find(|line| line.starts_with("VmHWM:"))?;
    line.split_whitespace().nth(1)?.parse::<u64>().ok().map(|kib| kib << 10)
}

#[test]
fn a_million_nodes_fit_into_a_gibibyte_and_open_again() {
    let nodes = std::env::var("HULLWARD_NODES").ok().and_then(|nodes| nodes.parse().ok());
    let nodes = nodes.unwrap_or(NODES);
    let settings = Settings { node_limit: Some(nodes), ..Settings::default() };
    let mut search = Search::new(model(41), settings);
    let mut seen = Vec::new();
    loop {
        let progress = search.advance(10_000_000);
        for event in search.take_events() {
            if let Event::Solved { node, bound: Some(bound), .. } = event
                && node.0 % (nodes / 10) == 7
            {
                seen.push((node, bound));
            }
        }
        match progress {
            Progress::Working => {}
            Progress::RootSolved | Progress::Paused => search.run(None),
            Progress::Finished => break,
        }
    }
    assert_eq!(search.summary().nodes, nodes);
    assert!(seen.len() > 5, "{seen:?}");
    for (node, bound) in seen {
        let view = search.inspect(NodeId(node.0)).expect("a node");
        assert_eq!(view.bound, Some(bound), "{node:?}");
    }
    let Some(peak) = peak() else { return };
    println!("{nodes} nodes: {} MiB at most", peak >> 20);
    assert!(peak < MOST, "{peak}");
}
