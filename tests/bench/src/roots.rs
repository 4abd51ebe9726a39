//! Root relaxations from scratch.

use crate::arguments::Arguments;
use crate::classes::{Comparison, line, self_check};
use crate::problems::Named;
use crate::solvers::{Sample, Solver};
use crate::statistics::median;
use crate::table::{by_class, measure};

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
    let measured = measure(arguments, &Solver::ALL, HIGHS, print_line);
    println!();
    by_class(&measured, |class, name, here| {
        let against = |title, other, goal| {
            line(name, here, Comparison { title, who: (OURS, other), goal });
        };
        match class {
            Some(number) => {
                against("ours/HiGHS", HIGHS, Some(GOALS[number]));
                against("ours/microlp", MICROLP, None);
                self_check(name, here, (OURS, AGAIN));
            }
            None => {
                against("ours/microlp", MICROLP, Some(1.0));
                against("ours/HiGHS", HIGHS, None);
            }
        }
    });
    println!();
}

fn print_line(problem: &Named, samples: &[Vec<f64>], first: &[Sample]) {
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
