//! What the exact check of a root costs: from the rows as numbers to the optimum as a fraction,
//! beside the solve whose basis it starts from.

use crate::arguments::Arguments;
use crate::clock;
use crate::problems::Named;
use crate::random::Random;
use crate::sampling::{interleaved, solves};
use crate::shadow::Shadow;
use crate::solvers::{Solver, problem, sample};
use crate::statistics::median;
use lp::{Limits, Simplex};
use model::{ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use proof::{Budget, Certifier, ExactRows, Progress, Standings, Wish, bounds_of};
use tree::standings;

/// Measures and prints.
pub(crate) fn run(arguments: &Arguments) {
    println!("The exact check of a root: CPU milliseconds (medians), and its share of both");
    println!("{:<24}{:>9}{:>9} {:>8}  proved", "problem", "solve", "check", "share");
    let mut random = Random::new(arguments.order_seed());
    let shares: Vec<f64> =
        arguments.problems().iter().map(|p| one(p, arguments, &mut random)).collect();
    if !shares.is_empty() {
        let most = shares.iter().fold(0.0, |most, &share| if share > most { share } else { most });
        println!(
            "\nof {} problems: median share {:.0} %, largest {:.0} %\n",
            shares.len(),
            100.0 * median(&shares),
            100.0 * most
        );
    }
}

/// One problem; gives the check's share.
fn one(named: &Named, arguments: &Arguments, random: &mut Random) -> f64 {
    let lp = &named.lp;
    let model = model(lp);
    let mut simplex = Simplex::new(problem(lp));
    simplex.solve(Limits::default());
    let basis = standings(&simplex.basis());
    let (exact, first) = check(&model, &basis, 1);
    let counts = [solves(sample(Solver::Ours, lp, 1).seconds), solves(first)];
    let samples = interleaved(2, arguments.effort, random, |who| {
        let seconds = match who {
            0 => sample(Solver::Ours, lp, counts[0]).seconds,
            _ => check(&model, &basis, counts[1]).1,
        };
        (seconds, seconds * counts[who] as f64)
    });
    let [solve, check] = [&samples[0], &samples[1]].map(|samples| median(samples) * 1e3);
    let share = check / (solve + check);
    println!(
        "{:<24}{solve:>9.3}{check:>9.3} {:>6.0} %  {}",
        named.name,
        100.0 * share,
        if exact { "exactly" } else { "NOT as the optimum" }
    );
    share
}

/// Proves the optimum from a basis so many times: whether it is proved, and seconds each.
fn check(model: &Model, basis: &Standings, count: usize) -> (bool, f64) {
    let (exact, seconds) = clock::timed(|| {
        let mut exact = false;
        for _ in 0..count {
            let rows = ExactRows::new(model);
            let wish = Wish::Optimum(None);
            let mut certifier =
                Certifier::new(bounds_of(model), basis.clone(), wish, Budget::default());
            while certifier.advance(&rows, u64::MAX) == Progress::Working {}
            exact = certifier.is_exact();
        }
        exact
    });
    (exact, seconds / count as f64)
}

/// The problem in fractions: its numbers are whole or short, so each is its own float.
fn model(lp: &Shadow) -> Model {
    let number = |value: f64| Number::try_from(value).ok().filter(|_| value.is_finite());
    let mut builder = ModelBuilder::new("measured", Sense::Minimise);
    builder.variable("x", false);
    for j in 0..lp.cost.len() {
        let (lower, upper) = (number(lp.lower[j]), number(lp.upper[j]));
        let label = builder.label(&j.to_string());
        let cost = number(lp.cost[j]).unwrap();
        builder.column(&[label], &ColumnSpec { lower, upper, cost, integer: false }).unwrap();
    }
    builder.family("rows", FamilyState::In, false);
    for (i, (entries, lower, upper)) in lp.rows.iter().enumerate() {
        let entries = entries.iter();
        let entries =
            entries.map(|&(j, value)| (ColumnId::from_index(j), number(value).unwrap())).collect();
        let row = Row { entries, lower: number(*lower), upper: number(*upper) };
        let label = builder.label(&format!("r{i}"));
        builder.row(&[label], row).unwrap();
    }
    builder.build()
}
