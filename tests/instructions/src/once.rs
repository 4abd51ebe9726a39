//! What runs under callgrind: a problem made ready, solved, and solved again with bounds changed.

use lp::{Col, Limits, Outcome, Problem, Simplex};

use crate::problems::named;
use crate::shadow::Shadow;

/// So many columns are closed, one after another.
const CHILDREN: u32 = 30;

/// Takes a problem as far as `step` says: `ready`, `root` or `children`.
pub(crate) fn run(step: &str, name: &str) {
    let lp = named(name, 1).unwrap_or_else(|| panic!("there is no problem {name}")).lp;
    let ready = problem(&lp);
    if step == "ready" {
        println!("{} rows", ready.row_count());
        return;
    }
    let mut simplex = Simplex::new(ready);
    let mut sum = value(simplex.solve(Limits::default()));
    if step == "children" {
        for column in 0..CHILDREN {
            let (lower, upper) = (lp.lower[column as usize], lp.upper[column as usize]);
            simplex.set_bounds(Col(column), lower, lower);
            sum += value(simplex.solve(Limits::default()));
            simplex.set_bounds(Col(column), lower, upper);
        }
    }
    println!("{sum}");
}

/// The optimum; 0 of a child that has no point.
fn value(outcome: &Outcome) -> f64 {
    match outcome {
        Outcome::Optimal(solution) => solution.objective,
        Outcome::Infeasible(_) => 0.0,
        other => panic!("{other:?}"),
    }
}

fn problem(lp: &Shadow) -> Problem {
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
