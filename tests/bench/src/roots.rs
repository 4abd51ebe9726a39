//! Root relaxations from scratch.

use crate::arguments::Arguments;
use crate::classes::{CLASSES, Comparison, Measured, line, self_check};
use crate::problems::Named;
use crate::random::Random;
use crate::sampling::{interleaved, solves};
use crate::solvers::{Sample, Solver, sample};
use crate::statistics::median;

const OURS: usize = 0;
const AGAIN: usize = 1;
const HIGHS: usize = 2;
const MICROLP: usize = 3;

/// The goals against HiGHS by class.
const GOALS: [f64; 3] = [0.8, 1.5, 2.0];

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    println!("Root relaxations: CPU milliseconds a solve (medians), presolve off");
    println!(
        "{:<24}{:>7}{:>8}{:>9} {:>9}{:>9}{:>9}{:>9} {:>7}{:>7}  {:>7}{:>7}{:>8}",
        "problem",
        "rows",
        "columns",
        "nonzeros",
        "ours",
        "again",
        "HiGHS",
        "microlp",
        "o/H",
        "o/m",
        "it ours",
        "HiGHS",
        "microlp"
    );
    let mut random = Random::new(arguments.order_seed());
    let measured: Vec<Measured> =
        arguments.problems().iter().map(|p| one(p, arguments, &mut random)).collect();
    println!();
    for ((class, least, below), goal) in CLASSES.into_iter().zip(GOALS) {
        let here: Vec<&Measured> =
            measured.iter().filter(|m| (least..below).contains(&m.rows)).collect();
        if !here.is_empty() {
            let against = |title, other, goal| Comparison { title, who: (OURS, other), goal };
            line(class, &here, against("ours/HiGHS", HIGHS, Some(goal)));
            line(class, &here, against("ours/microlp", MICROLP, None));
            self_check(class, &here, (OURS, AGAIN));
        }
    }
    let all: Vec<&Measured> = measured.iter().collect();
    if !all.is_empty() {
        let who = (OURS, MICROLP);
        line("all", &all, Comparison { title: "ours/microlp", who, goal: Some(1.0) });
        line("all", &all, Comparison { title: "ours/HiGHS", who: (OURS, HIGHS), goal: None });
    }
    println!();
}

/// One problem: a first solve of each to see how long it takes and that all agree, then the rounds.
fn one(problem: &Named, arguments: &Arguments, random: &mut Random) -> Measured {
    let lp = &problem.lp;
    let first = Solver::ALL.map(|solver| sample(solver, lp, 1));
    for (solver, found) in Solver::ALL.into_iter().zip(&first) {
        let (a, b) = (found.objective, first[HIGHS].objective);
        assert!(
            (a - b).abs() <= 1e-6 * (1.0 + b.abs()),
            "{}: {} finds {a}, HiGHS {b}",
            problem.name,
            solver.name()
        );
    }
    let counts = first.map(|found| solves(found.seconds));
    let samples = interleaved(Solver::ALL.len(), arguments.effort, random, |who| {
        let found = sample(Solver::ALL[who], lp, counts[who]);
        (found.seconds, found.seconds * counts[who] as f64)
    });
    print_line(problem, &samples, &first);
    Measured { name: problem.name.clone(), rows: lp.rows.len(), samples }
}

fn print_line(problem: &Named, samples: &[Vec<f64>], first: &[Sample; 4]) {
    let lp = &problem.lp;
    let ms: Vec<f64> = samples.iter().map(|samples| median(samples) * 1e3).collect();
    println!(
        "{:<24}{:>7}{:>8}{:>9} {:>9.3}{:>9.3}{:>9.3}{:>9.3} {:>7.2}{:>7.2}  {:>7}{:>7}{:>8}",
        problem.name,
        lp.rows.len(),
        lp.cost.len(),
        lp.nonzeros(),
        ms[OURS],
        ms[AGAIN],
        ms[HIGHS],
        ms[MICROLP],
        ms[OURS] / ms[HIGHS],
        ms[OURS] / ms[MICROLP],
        first[OURS].iterations,
        first[HIGHS].iterations,
        first[MICROLP].iterations
    );
}
