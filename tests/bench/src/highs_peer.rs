//! HiGHS: dual simplex, one thread, presolve off, nothing printed.

use crate::shadow::Shadow;
use highs::{Col, Model, RowProblem, Sense};

/// A model with its columns.
pub(crate) fn model(lp: &Shadow) -> (Model, Vec<Col>) {
    let mut problem = RowProblem::default();
    let columns: Vec<Col> = (0..lp.cost.len())
        .map(|j| problem.add_column(lp.cost[j], lp.lower[j]..=lp.upper[j]))
        .collect();
    for (entries, lower, upper) in &lp.rows {
        let entries: Vec<(Col, f64)> =
            entries.iter().map(|&(j, value)| (columns[j], value)).collect();
        problem.add_row(*lower..=*upper, entries);
    }
    let mut model = problem.optimise(Sense::Minimise);
    model.make_quiet();
    model.set_option("threads", 1);
    model.set_option("parallel", "off");
    model.set_option("presolve", "off");
    model.set_option("solver", "simplex");
    model.set_option("simplex_strategy", 1);
    (model, columns)
}
