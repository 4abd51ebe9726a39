//! The loop of a table: every problem solved by everyone from scratch, and the classes of problems.

use crate::arguments::Arguments;
use crate::classes::{CLASSES, Measured};
use crate::problems::Named;
use crate::random::Random;
use crate::sampling::{interleaved, solves};
use crate::solvers::{Sample, Solver, sample};

/// Solves each problem once with everyone, to see how long it takes and that all agree with the one
/// at `judge`, then in rounds; `print` gets the problem, the samples and the first solves.
pub(crate) fn measure(
    arguments: &Arguments,
    who: &[Solver],
    judge: usize,
    print: impl Fn(&Named, &[Vec<f64>], &[Sample]),
) -> Vec<Measured> {
    let mut random = Random::new(arguments.order_seed());
    let one = |problem: &Named| {
        let first: Vec<Sample> = who.iter().map(|&solver| sample(solver, &problem.lp, 1)).collect();
        agree(problem, who, &first, judge);
        let counts: Vec<usize> = first.iter().map(|found| solves(found.seconds)).collect();
        let samples = interleaved(who.len(), arguments.effort, &mut random, |at| {
            let found = sample(who[at], &problem.lp, counts[at]);
            (found.seconds, found.seconds * counts[at] as f64)
        });
        print(problem, &samples, &first);
        Measured { name: problem.name.clone(), rows: problem.lp.rows.len(), samples }
    };
    arguments.problems().iter().map(one).collect()
}

fn agree(problem: &Named, who: &[Solver], first: &[Sample], judge: usize) {
    let right = first[judge].objective;
    for (solver, found) in who.iter().zip(first) {
        let value = found.objective;
        assert!(
            (value - right).abs() <= 1e-6 * (1.0 + right.abs()),
            "{}: {} finds {value}, {} {right}",
            problem.name,
            solver.name(),
            who[judge].name()
        );
    }
}

/// Calls `act` with the number, the name and the problems of each class that has any, and last, with
/// no number, with all of them.
pub(crate) fn by_class(measured: &[Measured], act: impl Fn(Option<usize>, &str, &[&Measured])) {
    for (number, (class, least, below)) in CLASSES.into_iter().enumerate() {
        let here: Vec<&Measured> =
            measured.iter().filter(|m| (least..below).contains(&m.rows)).collect();
        if !here.is_empty() {
            act(Some(number), class, &here);
        }
    }
    if !measured.is_empty() {
        act(None, "all", &measured.iter().collect::<Vec<_>>());
    }
}
