//! HiGHS: dual simplex, one thread, presolve off, nothing printed.

use crate::shadow::Shadow;
use highs::{Col, Model, RowProblem, Sense};
use lp::Basis;
use std::fmt::Write as _;

/// A model with so many leading columns whole, and every option as it comes but for one thread.
pub(crate) fn whole(lp: &Shadow, whole: usize) -> Model {
    let mut problem = RowProblem::default();
    let columns: Vec<Col> = (0..lp.cost.len())
        .map(|j| {
            let bounds = lp.lower[j]..=lp.upper[j];
            problem.add_column_with_integrality(lp.cost[j], bounds, j < whole)
        })
        .collect();
    for (entries, lower, upper) in &lp.rows {
        let entries: Vec<(Col, f64)> =
            entries.iter().map(|&(j, value)| (columns[j], value)).collect();
        problem.add_row(*lower..=*upper, entries);
    }
    let mut model = problem.optimise(Sense::Minimise);
    model.set_option("threads", 1);
    model.set_option("parallel", "off");
    model
}

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

/// A solved model with this basis of ours: written as a file of HiGHS's own format, which it reads
/// before it solves.
pub(crate) fn solved_from(mut model: Model, basis: &Basis) -> Model {
    let path = std::env::temp_dir().join(format!("hullward-bench-{}.basis", std::process::id()));
    std::fs::write(&path, basis_file(basis)).unwrap();
    model.set_option("read_basis_file", path.to_str().unwrap());
    let solved = model.solve();
    std::fs::remove_file(&path).unwrap();
    assert_eq!(solved.simplex_iteration_count(), 0, "the basis was to be optimal");
    let mut model: Model = solved.into();
    model.set_option("read_basis_file", "");
    model
}

/// Version 2 of the format: a name and a number a variable, 0 at the lower bound, 1 basic, 2 at the
/// upper bound.
fn basis_file(basis: &Basis) -> String {
    let number = |basic: bool, upper: bool| if basic { 1 } else { 2 * i32::from(upper) };
    let mut text = format!("HiGHS_basis_file v2\nValid\n# Columns {}\n", basis.column_count());
    for j in 0..basis.column_count() {
        let number = number(basis.is_basic_column(j), basis.is_upper_column(j));
        writeln!(text, "c{j} {number}").unwrap();
    }
    writeln!(text, "# Rows {}", basis.row_count()).unwrap();
    for i in 0..basis.row_count() {
        writeln!(text, "r{i} {}", number(basis.is_basic_row(i), basis.is_upper_row(i))).unwrap();
    }
    text
}
