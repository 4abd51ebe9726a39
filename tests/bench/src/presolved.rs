//! Root relaxations with presolve beside the same without: ours, and HiGHS.

use crate::arguments::Arguments;
use crate::classes::{CLASSES, Comparison, Measured, line};
use crate::problems::Named;
use crate::random::Random;
use crate::sampling::{interleaved, solves};
use crate::solvers::{Sample, Solver, sample};
use crate::statistics::median;

const WHO: [Solver; 4] = [Solver::Ours, Solver::Presolved, Solver::Highs, Solver::HighsPresolved];

const OURS: usize = 0;
const PRESOLVED: usize = 1;
const HIGHS: usize = 2;
const HIGHS_PRESOLVED: usize = 3;

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    println!("Roots with presolve (p): CPU milliseconds a solve (medians), way back included");
    println!(
        "{:<24}{:>9}{:>9}{:>9}{:>9} {:>7}{:>7}  {:>7}{:>7}{:>7}{:>7}",
        "problem",
        "ours",
        "ours p",
        "HiGHS",
        "HiGHS p",
        "p/ours",
        "p/H p",
        "it ours",
        "p",
        "HiGHS",
        "p"
    );
    let mut random = Random::new(arguments.order_seed());
    let measured: Vec<Measured> =
        arguments.problems().iter().map(|p| one(p, arguments, &mut random)).collect();
    println!();
    let all: Vec<&Measured> = measured.iter().collect();
    let compare = |class: &str, some: &[&Measured]| {
        for (title, who) in [
            ("ours p/ours", (PRESOLVED, OURS)),
            ("ours p/HiGHS p", (PRESOLVED, HIGHS_PRESOLVED)),
            ("HiGHS p/HiGHS", (HIGHS_PRESOLVED, HIGHS)),
        ] {
            line(class, some, Comparison { title, who, goal: None });
        }
    };
    for (class, least, below) in CLASSES {
        let here: Vec<&Measured> =
            measured.iter().filter(|m| (least..below).contains(&m.rows)).collect();
        if !here.is_empty() {
            compare(class, &here);
        }
    }
    if !all.is_empty() {
        compare("all", &all);
    }
    println!();
}

/// One problem: a first solve of each to see that all agree, then the rounds.
fn one(problem: &Named, arguments: &Arguments, random: &mut Random) -> Measured {
    let lp = &problem.lp;
    let first = WHO.map(|solver| sample(solver, lp, 1));
    for found in &first {
        let (a, b) = (found.objective, first[HIGHS].objective);
        assert!((a - b).abs() <= 1e-6 * (1.0 + b.abs()), "{}: {a}, HiGHS {b}", problem.name);
    }
    let counts = first.map(|found| solves(found.seconds));
    let samples = interleaved(WHO.len(), arguments.effort, random, |who| {
        let found = sample(WHO[who], lp, counts[who]);
        (found.seconds, found.seconds * counts[who] as f64)
    });
    print_line(problem, &samples, &first);
    Measured { name: problem.name.clone(), rows: lp.rows.len(), samples }
}

fn print_line(problem: &Named, samples: &[Vec<f64>], first: &[Sample; 4]) {
    let ms: Vec<f64> = samples.iter().map(|samples| median(samples) * 1e3).collect();
    println!(
        "{:<24}{:>9.3}{:>9.3}{:>9.3}{:>9.3} {:>7.2}{:>7.2}  {:>7}{:>7}{:>7}{:>7}",
        problem.name,
        ms[OURS],
        ms[PRESOLVED],
        ms[HIGHS],
        ms[HIGHS_PRESOLVED],
        ms[PRESOLVED] / ms[OURS],
        ms[PRESOLVED] / ms[HIGHS_PRESOLVED],
        first[OURS].iterations,
        first[PRESOLVED].iterations,
        first[HIGHS].iterations,
        first[HIGHS_PRESOLVED].iterations
    );
}
