//! How long and in how much memory two million non-zeros are expanded, beside what it takes to write
//! the same model as MPS text and what the matrix takes: `cargo xtask bench expand`.
//!
//! Time is that of the thread's processor, the median of five runs. Memory is counted by the
//! allocator of this program, so that it does not depend on the machine. The command fails where a
//! goal is missed.

#![allow(clippy::print_stdout, clippy::print_stderr, reason = "a tool: it speaks to the terminal")]
#![allow(clippy::unwrap_used, reason = "what cannot be measured ends the run")]

use std::collections::BTreeMap;
use std::process::ExitCode;

use instance::Instance;
use model::{Model, Number};
use notation::{Bound, Expansion, Limits, bind, check, parse};
use peak_alloc::PeakAlloc;
use rustix::time::{ClockId, clock_gettime};

#[global_allocator]
static COUNTED: PeakAlloc = PeakAlloc;

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

/// So many stops have two million non-zeros.
const STOPS: usize = 1_000;
const RUNS: usize = 5;
const MEMORY_GOAL: f64 = 3.0;

/// What one run gave: seconds and bytes.
struct Run {
    bound: f64,
    expanded: f64,
    written: f64,
    /// The most that the expansion held at once, beside what was there before.
    most: usize,
    /// What the matrix takes by its sizes.
    matrix: usize,
    nonzeros: u64,
    text: usize,
}

/// Seconds of processor time that this thread has used.
fn now() -> f64 {
    let time = clock_gettime(ClockId::ThreadCPUTime);
    time.tv_sec as f64 + time.tv_nsec as f64 * 1e-9
}

fn timed<T>(act: impl FnOnce() -> T) -> (T, f64) {
    let begun = now();
    let made = act();
    (made, now() - begun)
}

/// Columns with their index pairs, entries, and rows with their sides and indices.
fn matrix(model: &Model) -> usize {
    let (rows, columns) = (model.row_count(), model.columns());
    let entries = 8 * usize::try_from(model.statistics().nonzeros).unwrap();
    size_of_val(columns) + 12 * columns.len() + entries + (8 + 24) * rows
}

fn bound(instance: &Instance) -> Bound {
    bind(&check(&parse(TEXT).tree).0, instance, &BTreeMap::new()).unwrap()
}

fn run(instance: &Instance) -> Run {
    let (bound, bound_in) = timed(|| bound(instance));
    let before = COUNTED.current_usage();
    COUNTED.reset_peak_usage();
    let limits = Limits { nonzeros: 4_000_000 };
    let expand = || Expansion::new(bound, &BTreeMap::new(), limits).finish().unwrap().0;
    let (model, expanded) = timed(expand);
    let most = COUNTED.peak_usage();
    let (text, written) = timed(|| model::mps::write(&model).unwrap().text);
    Run {
        bound: bound_in,
        expanded,
        written,
        most: most - before,
        matrix: matrix(&model),
        nonzeros: model.statistics().nonzeros,
        text: text.len(),
    }
}

fn median(mut values: Vec<f64>) -> f64 {
    values.sort_by(f64::total_cmp);
    values[values.len() / 2]
}

fn main() -> ExitCode {
    let labels = (0..STOPS).map(|i| format!("stop {i}")).collect();
    let cells: Vec<_> = (0..STOPS * STOPS).map(|i| Some(Number::from(7 + i * 31 % 997))).collect();
    let instance = Instance::round_trip(labels, &cells);
    let runs: Vec<Run> = (0..RUNS).map(|_| run(&instance)).collect();
    let of = |pick: fn(&Run) -> f64| median(runs.iter().map(pick).collect());
    let (expanded, written) = (of(|run| run.expanded), of(|run| run.written));
    let last = &runs[RUNS - 1];
    let mega = |bytes: usize| bytes as f64 / f64::from(1 << 20);
    println!("{} non-zeros, median of {RUNS} runs, processor time", last.nonzeros);
    println!("bound in      {:.3} s", of(|run| run.bound));
    println!("expanded in   {expanded:.3} s");
    println!("written in    {written:.3} s, {:.0} MB of MPS", mega(last.text));
    println!("matrix        {:.1} MB", mega(last.matrix));
    println!("expansion     {:.1} MB at most, beside what was bound", mega(last.most));
    let (time, memory) = (expanded / written, last.most as f64 / last.matrix as f64);
    println!("time {time:.2} of writing (goal 1), memory {memory:.2} times the matrix (goal 3)");
    if time > 1.0 || memory > MEMORY_GOAL {
        eprintln!("a goal is missed");
        return ExitCode::FAILURE;
    }
    ExitCode::SUCCESS
}
