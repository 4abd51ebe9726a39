//! How long and in how much memory two million non-zeros are expanded, beside what it takes to
//! write the same model as MPS text, and what the matrix takes. It looks at a clock, so it measures only where it is asked
//! to: `HULLWARD_SPEED=1 cargo test --release -p hullward-notation --test speed -- --nocapture`.
#![allow(
    clippy::unwrap_used,
    clippy::expect_used,
    clippy::panic,
    clippy::disallowed_types,
    reason = "a test ends where it fails, and this one measures time"
)]

use std::collections::BTreeMap;
use std::time::Instant;

use hullward_notation::{Expansion, Limits, bind, check, parse};
use instance::Instance;
use model::Number;

const TEXT: &str = "data
  V
  A ⊆ V × V
  c_{i,j} ∀ (i,j) ∈ A
minimise
  Σ_{(i,j) ∈ A} c_{i,j} x_{i,j}
subject to
  Σ_{j : (i,j) ∈ A} x_{i,j} = 1 ∀ i ∈ V (leave)
  Σ_{i : (i,j) ∈ A} x_{i,j} = 1 ∀ j ∈ V (enter)
  x_{i,j} ∈ {0,1} ∀ (i,j) ∈ A
";

/// A line of `/proc/self/status` in MB; 0 where there is none.
fn memory(field: &str) -> u64 {
    let status = std::fs::read_to_string("/proc/self/status").unwrap_or_default();
    let line = status.lines().find(|line| line.starts_with(field)).unwrap_or_default();
    line.split_whitespace().nth(1).and_then(|kb| kb.parse::<u64>().ok()).unwrap_or(0) / 1024
}

/// Blocks that take up what the allocator has kept free, so that what follows needs new memory.
fn filled_heap() -> Vec<Vec<u8>> {
    let begun = memory("VmRSS");
    let mut blocks = Vec::new();
    for size in [100_000, 10_000, 1_000] {
        let grown = memory("VmRSS").max(begun) + 8;
        while memory("VmRSS") < grown && blocks.len() < 2_000_000 {
            blocks.extend((0..100).map(|_| vec![1_u8; size]));
        }
    }
    blocks
}

/// What the matrix itself takes: columns with their index pairs, entries, rows with theirs.
fn bytes(model: &model::Model) -> u64 {
    let (rows, columns) = (model.row_count(), model.columns());
    let entries = 8 * usize::try_from(model.statistics().nonzeros).unwrap();
    let tuples = 12 * columns.len() + 8 * rows;
    let sides = 24 * rows;
    (std::mem::size_of_val(columns) + entries + tuples + sides) as u64
}

#[test]
fn two_million_nonzeros() {
    if std::env::var_os("HULLWARD_SPEED").is_none() {
        println!("HULLWARD_SPEED is not set: nothing is measured");
        return;
    }
    let stops = 1_000;
    let labels = (0..stops).map(|i| format!("stop {i}")).collect();
    let cells: Vec<_> = (0..stops * stops).map(|i| Some(Number::from(7 + i * 31 % 997))).collect();
    let instance = Instance::round_trip(labels, &cells);
    let begun = Instant::now();
    let bound = bind(&check(&parse(TEXT).tree).0, &instance, &BTreeMap::new()).unwrap();
    let bound_after = begun.elapsed();
    let ballast = filled_heap();
    // the most so far counts from here on
    let _ = std::fs::write("/proc/self/clear_refs", "5");
    let before = memory("VmRSS");
    let begun = Instant::now();
    let limits = Limits { nonzeros: 4_000_000 };
    let (model, _) = Expansion::new(bound, &BTreeMap::new(), limits).finish().unwrap();
    let expanded = begun.elapsed();
    let (peak, after) = (memory("VmHWM"), memory("VmRSS"));
    drop(ballast);
    let begun = Instant::now();
    let text = model::mps::write(&model).unwrap().text;
    let written = begun.elapsed();
    println!(
        "{} non-zeros: bound in {bound_after:?}, expanded in {expanded:?}, written as {} MB of MPS in {written:?}; \
         memory {before} MB before, {after} MB after, {peak} MB at most",
        model.statistics().nonzeros,
        text.len() >> 20,
    );
    let matrix = bytes(&model) >> 20;
    println!("matrix {matrix} MB, expansion {} MB", peak.saturating_sub(before));
    assert!(peak.saturating_sub(before) <= 3 * matrix, "{peak} − {before} MB over 3 × {matrix}");
    assert!(expanded <= written, "{expanded:?} to expand, {written:?} to write");
}
