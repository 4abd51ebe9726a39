//! HiGHS and microlp on the written rows of a model: two solvers that share no code with ours.

use model::{Column, Model, NumberId, Row, RowId, Sense, nearest_f64};

/// What a solver says.
#[derive(Debug, Clone, Copy, PartialEq)]
pub enum Verdict {
    /// Solved; the objective value, offset included.
    Optimal(f64),
    /// There is no point.
    Infeasible,
    /// The objective has no bound.
    Unbounded,
    /// It could not say.
    Silent,
}

fn side(model: &Model, id: Option<NumberId>, infinite: f64) -> f64 {
    id.map_or(infinite, |id| model.numbers().float(id))
}

fn bounds(model: &Model, column: &Column) -> (f64, f64) {
    (side(model, column.lower, f64::NEG_INFINITY), side(model, column.upper, f64::INFINITY))
}

/// The rows of the relaxation: those written and in, then `added`.
fn rows(model: &Model, added: &[Row]) -> Vec<Row> {
    let count = u32::try_from(model.row_count()).unwrap();
    let written = (0..count).map(RowId).filter(|&r| model.row_is_in(r)).map(|r| model.row(r));
    written.chain(added.iter().cloned()).collect()
}

/// HiGHS on the model: its linear relaxation, or with `whole` the integer program.
///
/// # Panics
/// When HiGHS refuses the model.
#[must_use]
pub fn highs(model: &Model, added: &[Row], whole: bool) -> Verdict {
    let mut problem = highs::RowProblem::default();
    let mut columns = Vec::new();
    for column in model.columns() {
        let (lower, upper) = bounds(model, column);
        let cost = model.numbers().float(column.cost);
        columns.push(problem.add_column_with_integrality(
            cost,
            lower..=upper,
            whole && column.integer,
        ));
    }
    for row in rows(model, added) {
        let entries = row.entries.iter().map(|(c, a)| (columns[c.index()], nearest_f64(a)));
        let lower = row.lower.as_ref().map_or(f64::NEG_INFINITY, nearest_f64);
        let upper = row.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
        problem.add_row(lower..=upper, entries.collect::<Vec<_>>());
    }
    let sense = match model.sense() {
        Sense::Minimise => highs::Sense::Minimise,
        Sense::Maximise => highs::Sense::Maximise,
    };
    let mut solver = problem.optimise(sense);
    solver.make_quiet();
    solver.set_option("threads", 1);
    solver.set_option("mip_rel_gap", 0.0);
    solver.set_option("mip_abs_gap", 1e-9);
    let solved = solver.solve();
    match solved.status() {
        highs::HighsModelStatus::Optimal => {
            Verdict::Optimal(solved.objective_value() + nearest_f64(model.offset()))
        }
        highs::HighsModelStatus::Infeasible => Verdict::Infeasible,
        highs::HighsModelStatus::Unbounded => Verdict::Unbounded,
        _ => Verdict::Silent,
    }
}

/// microlp on the linear relaxation, with the feasibility tolerance 1e-10.
///
/// # Panics
/// Never on a model that was built.
#[must_use]
pub fn microlp(model: &Model, added: &[Row]) -> Verdict {
    let direction = match model.sense() {
        Sense::Minimise => microlp::OptimizationDirection::Minimize,
        Sense::Maximise => microlp::OptimizationDirection::Maximize,
    };
    let mut problem = microlp::Problem::new(direction);
    let columns: Vec<microlp::Variable> = model
        .columns()
        .iter()
        .map(|column| problem.add_var(model.numbers().float(column.cost), bounds(model, column)))
        .collect();
    for row in rows(model, added) {
        let entries: Vec<_> =
            row.entries.iter().map(|(c, a)| (columns[c.index()], nearest_f64(a))).collect();
        let sides = [
            (row.lower.as_ref(), microlp::ComparisonOp::Ge),
            (row.upper.as_ref(), microlp::ComparisonOp::Le),
        ];
        if row.lower == row.upper {
            let right = row.lower.as_ref().map_or(0.0, nearest_f64);
            problem.add_constraint(entries, microlp::ComparisonOp::Eq, right);
            continue;
        }
        for (right, relation) in sides {
            if let Some(right) = right {
                problem.add_constraint(entries.clone(), relation, nearest_f64(right));
            }
        }
    }
    let mut options = microlp::SolveOptions::default();
    options.tolerances.feasibility = 1e-10;
    match problem.solve_with(options) {
        Ok(outcome) => outcome.solution().map_or(Verdict::Silent, |solution| {
            Verdict::Optimal(solution.objective() + nearest_f64(model.offset()))
        }),
        Err(microlp::Error::Infeasible) => Verdict::Infeasible,
        Err(microlp::Error::Unbounded) => Verdict::Unbounded,
        Err(_) => Verdict::Silent,
    }
}
