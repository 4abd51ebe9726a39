//! Who solves, and one sample of each: copies made ready off the clock, solved on it.

use crate::clock;
use crate::highs_peer;
use crate::shadow::Shadow;
use lp::{Col, Limits, Outcome, Problem, Simplex, solve_presolved};

/// One who solves.
#[derive(Clone, Copy, Debug, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) enum Solver {
    /// Our simplex.
    Ours,
    /// The same once more, to see what the machine's noise makes of it.
    Again,
    /// HiGHS.
    Highs,
    /// microlp.
    Microlp,
    /// Our simplex after our presolve, with the way back.
    Presolved,
    /// HiGHS after its own presolve, with the way back.
    HighsPresolved,
}

impl Solver {
    pub(crate) const ALL: [Self; 4] = [Self::Ours, Self::Again, Self::Highs, Self::Microlp];

    pub(crate) fn name(self) -> &'static str {
        match self {
            Self::Ours => "ours",
            Self::Again => "again",
            Self::Highs => "HiGHS",
            Self::Microlp => "microlp",
            Self::Presolved => "presolved",
            Self::HighsPresolved => "HiGHS presolved",
        }
    }
}

/// One loop of solves.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Sample {
    /// CPU seconds a solve.
    pub(crate) seconds: f64,
    /// Iterations of a solve.
    pub(crate) iterations: u64,
    /// The objective value found.
    pub(crate) objective: f64,
}

/// `count` solves from scratch.
pub(crate) fn sample(solver: Solver, lp: &Shadow, count: usize) -> Sample {
    let (last, seconds) = match solver {
        Solver::Ours | Solver::Again => ours(lp, count),
        Solver::Highs => highs(lp, count, "off"),
        Solver::HighsPresolved => highs(lp, count, "on"),
        Solver::Presolved => presolved(lp, count),
        Solver::Microlp => microlp(lp, count),
    };
    Sample { seconds: seconds / count as f64, iterations: last.0, objective: last.1 }
}

/// The problem for our kernel.
pub(crate) fn problem(lp: &Shadow) -> Problem {
    let mut problem = Problem::new();
    for j in 0..lp.cost.len() {
        problem.add_column(lp.cost[j], lp.lower[j], lp.upper[j]).unwrap();
    }
    for (entries, lower, upper) in &lp.rows {
        let entries: Vec<(Col, f64)> =
            entries.iter().map(|&(j, value)| (Col(j as u32), value)).collect();
        problem.add_row(&entries, *lower, *upper).unwrap();
    }
    problem
}

type Timed = ((u64, f64), f64);

fn ours(lp: &Shadow, count: usize) -> Timed {
    let ready: Vec<Problem> = vec![problem(lp); count];
    let (solved, seconds) = clock::timed(|| {
        let solve = |problem| {
            let mut simplex = Simplex::new(problem);
            simplex.solve(Limits::default());
            simplex
        };
        ready.into_iter().map(solve).collect::<Vec<Simplex>>()
    });
    let last = &solved[count - 1];
    let Some(Outcome::Optimal(solution)) = last.outcome() else { panic!("{:?}", last.outcome()) };
    ((last.stats().iterations, solution.objective), seconds)
}

fn presolved(lp: &Shadow, count: usize) -> Timed {
    let ready: Vec<Problem> = vec![problem(lp); count];
    let (solved, seconds) = clock::timed(|| ready.iter().map(solve_presolved).collect::<Vec<_>>());
    let last = &solved[count - 1];
    let outcome = last.simplex.outcome();
    let Some(Outcome::Optimal(solution)) = outcome else { panic!("{outcome:?}") };
    let iterations = last.reduced.iterations + last.simplex.stats().iterations;
    ((iterations, solution.objective), seconds)
}

fn highs(lp: &Shadow, count: usize, presolve: &str) -> Timed {
    let ready = (0..count).map(|_| {
        let mut model = highs_peer::model(lp).0;
        model.set_option("presolve", presolve);
        model
    });
    let ready: Vec<highs::Model> = ready.collect();
    let (solved, seconds) = clock::timed(|| {
        ready.into_iter().map(highs::Model::solve).collect::<Vec<highs::SolvedModel>>()
    });
    let last = &solved[count - 1];
    ((last.simplex_iteration_count().unsigned_abs(), last.objective_value()), seconds)
}

fn microlp(lp: &Shadow, count: usize) -> Timed {
    let problem = microlp_problem(lp, 0);
    let mut options = microlp::SolveOptions::default();
    options.presolve = false;
    let (solved, seconds) = clock::timed(|| {
        (0..count)
            .map(|_| problem.solve_with(options.clone()).unwrap())
            .collect::<Vec<microlp::SolveOutcome>>()
    });
    let last = solved[count - 1].solution().unwrap();
    ((last.stats().lp_iterations, last.objective()), seconds)
}

/// The problem for microlp, so many leading columns whole.
pub(crate) fn microlp_problem(lp: &Shadow, whole: usize) -> microlp::Problem {
    let mut problem = microlp::Problem::new(microlp::OptimizationDirection::Minimize);
    let columns: Vec<microlp::Variable> = (0..lp.cost.len())
        .map(|j| {
            if j < whole {
                let bounds = (lp.lower[j] as i32, lp.upper[j] as i32);
                problem.add_integer_var(lp.cost[j], bounds)
            } else {
                problem.add_var(lp.cost[j], (lp.lower[j], lp.upper[j]))
            }
        })
        .collect();
    for (entries, lower, upper) in &lp.rows {
        let terms: Vec<_> = entries.iter().map(|&(j, value)| (columns[j], value)).collect();
        if lower == upper {
            problem.add_constraint(&terms, microlp::ComparisonOp::Eq, *lower);
            continue;
        }
        if lower.is_finite() {
            problem.add_constraint(&terms, microlp::ComparisonOp::Ge, *lower);
        }
        if upper.is_finite() {
            problem.add_constraint(&terms, microlp::ComparisonOp::Le, *upper);
        }
    }
    problem
}
