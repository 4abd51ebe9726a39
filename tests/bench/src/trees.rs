//! Searches: in bare mode the time of a node beside that of microlp's own search; as a production
//! solver would beside HiGHS as it comes, on one thread, with nodes and the root bound after cuts.

use std::rc::Rc;

use model::{ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use tree::{Branching, Heuristics, Progress, Search, Selection, Settings};

use crate::arguments::Arguments;
use crate::classes::{Comparison, Measured, line, self_check};
use crate::clock;
use crate::highs_peer;
use crate::problems::{Named, named};
use crate::random::Random;
use crate::sampling::{interleaved, solves};
use crate::solvers::microlp_problem;
use crate::statistics::median;

/// Problems whose trees are of a size to wait for.
const NAMES: [&str; 9] = [
    "tsp8-mtz",
    "tsp10-scf",
    "tsp10-mcf",
    "ufl10x20-weak",
    "ufl20x50-strong",
    "uls15-bigm",
    "uls20-fl",
    "bp8x4",
    "ti8",
];

/// Problems of the set whose trees are larger: in bare mode, which ends after some nodes, they are
/// searched as well.
const LARGER: [&str; 6] =
    ["tsp20-mtz", "tsp20-scf", "ufl20x50-weak", "uls50-bigm", "bp25x12", "ti20"];

/// Nodes of a search in bare mode at most, for both.
const MOST_NODES: u32 = 500;
/// Nodes of a full search at most, and seconds.
const MOST_FULL: (u32, f64) = (20_000, 60.0);
/// The goal of the time a node against microlp.
const GOAL: f64 = 0.8;

/// What a search gave.
#[derive(Clone, Copy, Debug)]
struct Found {
    seconds: f64,
    nodes: f64,
    iterations: u64,
    value: Option<f64>,
    root: Option<f64>,
}

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    let problems = |names: &[&'static str]| -> Vec<Named> {
        let wanted = names.iter().filter(|name| arguments.wants(name));
        let names: Vec<&str> = wanted.copied().collect();
        let all =
            arguments.seeds().flat_map(|seed| names.iter().map(move |name| named(name, seed)));
        all.flatten().collect()
    };
    let all = problems(&[&NAMES[..], &LARGER[..]].concat());
    bare("best bound, most fractional", &all, &bare_settings(), arguments);
    bare("plunging, pseudocosts, as microlp's", &all, &plunging(), arguments);
    full(&problems(&NAMES));
}

/// One search in bare mode, plunging, for a profile.
pub(crate) fn once(name: &str, seed: u64) {
    let problem = named(name, seed).unwrap_or_else(|| panic!("there is no problem {name}"));
    println!("{:?}", ours(&whole_model(&problem), &plunging()));
}

/// Nothing on, and walking as microlp's own search does.
fn plunging() -> Settings {
    Settings {
        branching: Branching::Pseudocost,
        selection: Selection::BestEstimate,
        ..bare_settings()
    }
}

/// Time a node in bare mode, at most so many nodes, ours twice and microlp.
fn bare(rules: &str, problems: &[Named], settings: &Settings, arguments: &Arguments) {
    println!(
        "Searches in bare mode ({rules}): CPU milliseconds a node, at most {MOST_NODES} nodes"
    );
    println!(
        "{:<24}{:>9}{:>9}{:>9} {:>7}{:>9}{:>9} {:>9}{:>9}",
        "problem", "ours", "again", "microlp", "o/m", "nodes", "microlp", "it/node", "microlp"
    );
    let mut random = Random::new(arguments.order_seed());
    let mut measured = Vec::new();
    for problem in problems {
        let model = whole_model(problem);
        let one = |who: usize| if who == 2 { microlp(problem) } else { ours(&model, settings) };
        let first = [one(0), one(1), one(2)];
        if first.iter().any(|found| found.nodes < 2.0) {
            println!("{:<24} closed at the root", problem.name);
            continue;
        }
        let counts = first.map(|found| solves(found.seconds));
        let samples = interleaved(3, arguments.effort, &mut random, |who| {
            let found: Vec<Found> = (0..counts[who]).map(|_| one(who)).collect();
            let seconds: f64 = found.iter().map(|found| found.seconds).sum();
            (seconds / counts[who] as f64 / first[who].nodes, seconds)
        });
        let ms: Vec<f64> = samples.iter().map(|samples| median(samples) * 1e3).collect();
        println!(
            "{:<24}{:>9.3}{:>9.3}{:>9.3} {:>7.2}{:>9}{:>9} {:>9.1}{:>9.1}",
            problem.name,
            ms[0],
            ms[1],
            ms[2],
            ms[0] / ms[2],
            first[0].nodes,
            first[2].nodes,
            first[0].iterations as f64 / first[0].nodes,
            first[2].iterations as f64 / first[2].nodes
        );
        measured.push(Measured {
            name: problem.name.clone(),
            rows: problem.lp.rows.len(),
            samples,
        });
    }
    let all: Vec<&Measured> = measured.iter().collect();
    if !all.is_empty() {
        let comparison = Comparison { title: "ours/microlp", who: (0, 2), goal: Some(GOAL) };
        line("time a node", &all, comparison);
        self_check("time a node", &all, (0, 1));
    }
    println!();
}

/// Everything on, once each, beside HiGHS as it comes.
fn full(problems: &[Named]) {
    let (nodes, seconds) = MOST_FULL;
    println!("As a production solver would: at most {nodes} nodes for ours, {seconds} s for HiGHS");
    println!(
        "{:<24}{:>10}{:>10} {:>7}{:>8}{:>8} {:>12}{:>12}{:>12}{:>12}",
        "problem", "ours s", "HiGHS s", "o/H", "nodes", "HiGHS", "root", "HiGHS", "ours", "HiGHS"
    );
    let mut within = 0;
    for problem in problems {
        let ours = ours(&whole_model(problem), &Settings::production());
        let highs = highs(problem);
        let number =
            |value: Option<f64>| value.map_or_else(|| "–".to_owned(), |v| format!("{v:.3}"));
        println!(
            "{:<24}{:>10.3}{:>10.3} {:>7.2}{:>8}{:>8} {:>12}{:>12}{:>12}{:>12}",
            problem.name,
            ours.seconds,
            highs.seconds,
            ours.seconds / highs.seconds,
            ours.nodes,
            highs.nodes,
            number(ours.root),
            number(highs.root),
            number(ours.value),
            number(highs.value)
        );
        within += usize::from(ours.value.is_some() && ours.seconds <= 3.0 * highs.seconds);
        if let (Some(a), Some(b)) = (ours.value, highs.value) {
            assert!((a - b).abs() <= 1e-4 * (1.0 + b.abs()), "{}: {a} and {b}", problem.name);
        }
    }
    println!("within 3 times: {within} of {}\n", problems.len());
}

/// Nothing on: neither search looks for plans beside the points of its relaxations.
fn bare_settings() -> Settings {
    let heuristics = Heuristics { rounding: false, trip: false, diving: false, pump: false };
    Settings { heuristics, node_limit: Some(MOST_NODES), ..Settings::default() }
}

/// The problem as a model whose leading columns are whole.
fn whole_model(problem: &Named) -> Rc<Model> {
    let lp = &problem.lp;
    let mut builder = ModelBuilder::new(&problem.name, Sense::Minimise);
    let exact = |value: f64| Number::try_from(value).ok();
    let columns: Vec<_> = (0..lp.cost.len())
        .map(|j| {
            let spec = ColumnSpec {
                lower: exact(lp.lower[j]),
                upper: exact(lp.upper[j]),
                cost: exact(lp.cost[j]).unwrap(),
                integer: j < problem.whole,
            };
            builder.column(&[], &spec).unwrap()
        })
        .collect();
    builder.family("rows", FamilyState::In, false);
    for (entries, lower, upper) in &lp.rows {
        let mut entries: Vec<_> =
            entries.iter().map(|&(j, a)| (columns[j], exact(a).unwrap())).collect();
        entries.sort_by_key(|(column, _)| *column);
        builder.row(&[], Row { entries, lower: exact(*lower), upper: exact(*upper) }).unwrap();
    }
    Rc::new(builder.build())
}

/// One search of ours, leaves proved and all.
fn ours(model: &Rc<Model>, settings: &Settings) -> Found {
    let (search, seconds) = clock::timed(|| {
        let mut search = Search::new(Rc::clone(model), settings.clone());
        while !matches!(search.advance(u64::MAX), Progress::RootSolved | Progress::Finished) {}
        search.run(None);
        while search.advance(u64::MAX) != Progress::Finished {}
        search
    });
    let summary = search.summary();
    let cuts = search.cuts().and_then(|cuts| cuts.bound);
    Found {
        seconds,
        nodes: f64::from(summary.nodes),
        iterations: summary.iterations,
        value: summary.incumbent.filter(|_| summary.status == tree::Status::Optimal),
        root: cuts.or(search.root().and_then(|root| root.bound)),
    }
}

fn microlp(problem: &Named) -> Found {
    let model = microlp_problem(&problem.lp, problem.whole);
    let mut options = microlp::SolveOptions::default();
    options.presolve = false;
    options.node_limit = Some(u64::from(MOST_NODES));
    let (outcome, seconds) = clock::timed(|| model.solve_with(options));
    let outcome = outcome.unwrap();
    let stats = outcome.stats();
    Found {
        seconds,
        nodes: stats.nodes_solved as f64,
        iterations: stats.lp_iterations,
        value: None,
        root: stats.best_bound,
    }
}

/// HiGHS as it comes but for one thread; its root bound after cuts from a run of one node, its nodes
/// from its own report.
fn highs(problem: &Named) -> Found {
    let log = std::env::temp_dir().join(format!("hullward-bench-{}.log", std::process::id()));
    let solve = |nodes: Option<i32>| {
        let mut model = highs_peer::whole(&problem.lp, problem.whole);
        model.set_option("time_limit", MOST_FULL.1);
        model.set_option("output_flag", true);
        model.set_option("log_to_console", false);
        model.set_option("log_file", log.to_str().unwrap());
        if let Some(nodes) = nodes {
            model.set_option("mip_max_nodes", nodes);
        }
        clock::timed(|| model.solve())
    };
    let (root, _) = solve(Some(1));
    let root = root.double_info_value(c"mip_dual_bound").ok().filter(|bound| bound.is_finite());
    let _ = std::fs::remove_file(&log);
    let (solved, seconds) = solve(None);
    let optimal = solved.status() == highs::HighsModelStatus::Optimal;
    let value = optimal.then(|| solved.objective_value());
    drop(solved); // the report is written out when the model is gone
    let report = std::fs::read_to_string(&log).unwrap_or_default();
    let _ = std::fs::remove_file(&log);
    Found { seconds, nodes: nodes_of(&report).unwrap_or(f64::NAN), iterations: 0, value, root }
}

/// The nodes that a report tells of at its end: `Nodes  1`. The table above it has a column of that
/// name too.
fn nodes_of(report: &str) -> Option<f64> {
    let told = report.lines().filter_map(|line| line.trim().strip_prefix("Nodes"));
    told.filter_map(|rest| rest.split_whitespace().next()?.parse().ok()).next_back()
}

#[cfg(test)]
mod tests {
    /// The head of the table was taken for the count, which it is not: every count was no number.
    #[test]
    fn nodes_are_read_from_the_end_of_a_report() {
        let report = "        Nodes      |    B&B Tree     |   Work\n     0       0\n\nSolving report\n  \
                      Status            Optimal\n  Nodes             17\n  LP iterations     36 (total)\n";
        assert_eq!(super::nodes_of(report), Some(17.0));
        assert_eq!(super::nodes_of("  Nodes | x"), None);
    }
}
