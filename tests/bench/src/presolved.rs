//! Root relaxations with presolve beside the same without: ours, and HiGHS.

use crate::arguments::Arguments;
use crate::classes::{Comparison, line};
use crate::problems::Named;
use crate::solvers::{Sample, Solver};
use crate::statistics::median;
use crate::table::{by_class, measure};

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
    let measured = measure(arguments, &WHO, HIGHS, print_line);
    println!();
    by_class(&measured, |_, name, here| {
        for (title, who) in [
            ("ours p/ours", (PRESOLVED, OURS)),
            ("ours p/HiGHS p", (PRESOLVED, HIGHS_PRESOLVED)),
            ("HiGHS p/HiGHS", (HIGHS_PRESOLVED, HIGHS)),
        ] {
            line(name, here, Comparison { title, who, goal: None });
        }
    });
    println!();
}

fn print_line(problem: &Named, samples: &[Vec<f64>], first: &[Sample]) {
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
