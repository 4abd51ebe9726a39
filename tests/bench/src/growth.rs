//! Time against size, with the exponent of the power law that fits best, ours beside HiGHS.

use crate::clock;
use crate::highs_peer;
use crate::problems::named;
use crate::shadow::Shadow;
use crate::solvers::problem;
use crate::statistics::exponent;
use lp::{Limits, Outcome, Progress, Simplex};

/// Seconds that a solve may take: longer ones are left out, and larger ones of the family as well.
const MOST_SECONDS: f64 = 60.0;

/// Nonzeros touched between two looks at the clock.
const SLICE: u64 = 50_000_000;

/// The families, smallest first.
const FAMILIES: [(&str, &[&str]); 2] = [
    (
        "multi-commodity round trip",
        &["tsp10-mcf", "tsp15-mcf", "tsp20-mcf", "tsp25-mcf", "tsp30-mcf"],
    ),
    (
        "split location",
        &["ufl20x50-strong", "ufl50x100-strong", "ufl100x150-strong", "ufl200x200-strong"],
    ),
];

/// Measures and prints.
pub(crate) fn run() {
    println!("Growth: CPU milliseconds of one solve, at most {MOST_SECONDS} s each");
    for (family, names) in FAMILIES {
        println!(
            "{family:<28}{:>8}{:>10} {:>11}{:>11} {:>7}  {:>8}{:>8}",
            "rows", "nonzeros", "ours", "HiGHS", "o/H", "it ours", "HiGHS"
        );
        let (mut ours, mut highs) = (Vec::new(), Vec::new());
        let mut open = [true, true];
        for name in names {
            let lp = named(name, 1).unwrap().lp;
            let mine = if open[0] { ours_once(&lp) } else { None };
            let theirs = if open[1] { highs_once(&lp) } else { None };
            open = [mine.is_some(), theirs.is_some()];
            let size = lp.nonzeros() as f64;
            ours.extend(mine.map(|found| (size, found.0)));
            highs.extend(theirs.map(|found| (size, found.0)));
            print_line(name, &lp, mine, theirs);
        }
        println!(
            "{:<28}{:>18} {:>11.2}{:>11.2}\n",
            "exponent in nonzeros",
            "",
            exponent(&ours),
            exponent(&highs)
        );
    }
}

fn print_line(name: &str, lp: &Shadow, ours: Option<(f64, u64)>, highs: Option<(f64, u64)>) {
    let time = |found: Option<(f64, u64)>| {
        found.map_or_else(|| "over".to_owned(), |found| format!("{:.1}", found.0 * 1e3))
    };
    let count =
        |found: Option<(f64, u64)>| found.map_or_else(String::new, |found| found.1.to_string());
    let ratio = ours.zip(highs).map_or_else(String::new, |(a, b)| format!("{:.2}", a.0 / b.0));
    println!(
        "{name:<28}{:>8}{:>10} {:>11}{:>11} {ratio:>7}  {:>8}{:>8}",
        lp.rows.len(),
        lp.nonzeros(),
        time(ours),
        time(highs),
        count(ours),
        count(highs)
    );
}

/// Seconds and iterations; none when it takes too long.
fn ours_once(lp: &Shadow) -> Option<(f64, u64)> {
    let ready = problem(lp);
    let begun = clock::now();
    let mut simplex = Simplex::new(ready);
    simplex.start(Limits::default());
    while simplex.advance(SLICE) == Progress::Working {
        if clock::now() - begun > MOST_SECONDS {
            return None;
        }
    }
    let seconds = clock::now() - begun;
    let optimal = matches!(simplex.outcome(), Some(Outcome::Optimal(_)));
    optimal.then_some((seconds, simplex.stats().iterations))
}

fn highs_once(lp: &Shadow) -> Option<(f64, u64)> {
    let (mut model, _) = highs_peer::model(lp);
    model.set_option("time_limit", MOST_SECONDS);
    let (solved, seconds) = clock::timed(|| model.solve());
    let optimal = solved.status() == highs::HighsModelStatus::Optimal;
    optimal.then(|| (seconds, solved.simplex_iteration_count().unsigned_abs()))
}
