//! Whether a model that was written and read again is the same: columns, rows and non-zeros as
//! floating-point numbers, which is what every reader takes, and the linear relaxation.

use lp::{Limits, Outcome, Problem, Simplex};
use model::{FamilyState, Model, Row, RowId, nearest_f64};

/// More iterations are not spent on the comparison.
const MOST_ITERATIONS: u64 = 50_000;

/// Relative to the bound.
const TOLERANCE: f64 = 1e-9;

/// Notes on what could not be compared.
///
/// # Errors
/// What differs.
pub(super) fn compare(before: &Model, after: &Model) -> Result<Vec<String>, String> {
    let (old, new) = (rows(before), rows(after));
    if before.sense() != after.sense() {
        return Err("the direction of the objective differs".to_owned());
    }
    if nearest_f64(before.offset()).to_bits() != nearest_f64(after.offset()).to_bits() {
        return Err("the constant of the objective differs".to_owned());
    }
    let (columns, read) = (before.columns().len(), after.columns().len());
    if columns != read {
        return Err(format!("{columns} columns were written, {read} read"));
    }
    if let Some(differs) = (0..columns).find(|&at| column(before, at) != column(after, at)) {
        let name = before.column_name(model::ColumnId::from_index(differs));
        return Err(format!("column {name} differs"));
    }
    if old.len() != new.len() {
        return Err(format!("{} rows were written, {} read", old.len(), new.len()));
    }
    if let Some(differs) = (0..old.len()).find(|&at| row(&old[at]) != row(&new[at])) {
        return Err(format!("row {} of the file differs", differs + 1));
    }
    relaxations(bound(before, &old), bound(after, &new))
}

/// The relaxation of both, where each could be solved.
fn relaxations(old: Option<Bound>, new: Option<Bound>) -> Result<Vec<String>, String> {
    match (old, new) {
        (Some(Bound::Value(old)), Some(Bound::Value(new)))
            if (old - new).abs() > TOLERANCE * (1.0 + old.abs()) =>
        {
            Err(format!("the relaxation has the bound {old}, after reading {new}"))
        }
        (Some(Bound::Value(_)), Some(Bound::Value(_))) => Ok(Vec::new()),
        (Some(old), Some(new)) if old != new => {
            Err(format!("the relaxation is {old:?}, after reading {new:?}"))
        }
        (Some(_), Some(_)) => Ok(Vec::new()),
        _ => Ok(vec!["the bounds of the relaxations were not compared: too long".to_owned()]),
    }
}

/// The rows that a file holds: those of families that are in, but for rows without sides.
fn rows(model: &Model) -> Vec<Row> {
    let families = model.families().iter().filter(|family| family.state == FamilyState::In);
    let rows = families.flat_map(|family| family.rows.clone()).map(|row| model.row(RowId(row)));
    rows.filter(|row| row.lower.is_some() || row.upper.is_some()).collect()
}

/// Cost, bounds and integrality of a column, comparable bit by bit.
fn column(model: &Model, at: usize) -> (u64, Option<u64>, Option<u64>, bool) {
    let column = model.columns()[at];
    let bits = |id| model.numbers().float(id).to_bits();
    (bits(column.cost), column.lower.map(bits), column.upper.map(bits), column.integer)
}

/// Entries and sides of a row, comparable bit by bit.
fn row(row: &Row) -> (Vec<(u32, u64)>, Option<u64>, Option<u64>) {
    let bits = |number: &model::Number| nearest_f64(number).to_bits();
    let entries = row.entries.iter().map(|(column, number)| (column.0, bits(number))).collect();
    (entries, row.lower.as_ref().map(bits), row.upper.as_ref().map(bits))
}

/// How a relaxation ends.
#[derive(Debug, Clone, Copy, PartialEq)]
enum Bound {
    Value(f64),
    Infeasible,
    Unbounded,
}

/// The linear relaxation of the columns of a model with some rows; `None` where it was too much.
fn bound(model: &Model, rows: &[Row]) -> Option<Bound> {
    let sign = if model.sense() == model::Sense::Maximise { -1.0 } else { 1.0 };
    let mut problem = Problem::new();
    let mut columns = Vec::new();
    for column in model.columns() {
        let float = |id| model.numbers().float(id);
        let lower = column.lower.map_or(f64::NEG_INFINITY, float);
        let upper = column.upper.map_or(f64::INFINITY, float);
        columns.push(problem.add_column(sign * float(column.cost), lower, upper).ok()?);
    }
    for row in rows {
        let entries = row.entries.iter().map(|(c, a)| (columns[c.index()], nearest_f64(a)));
        let entries: Vec<_> = entries.collect();
        let lower = row.lower.as_ref().map_or(f64::NEG_INFINITY, nearest_f64);
        let upper = row.upper.as_ref().map_or(f64::INFINITY, nearest_f64);
        problem.add_row(&entries, lower, upper).ok()?;
    }
    let limits = Limits { iterations: Some(MOST_ITERATIONS), ..Limits::default() };
    match Simplex::new(problem).solve(limits) {
        Outcome::Optimal(solution) => Some(Bound::Value(sign * solution.objective)),
        Outcome::Infeasible(_) => Some(Bound::Infeasible),
        Outcome::Unbounded { .. } => Some(Bound::Unbounded),
        Outcome::Stopped { .. } => None,
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    const TEXT: &str = "NAME t\nROWS\n N cost\n L cap\n G low\nCOLUMNS\n x cost 1 cap 2\n x low 1\n y cost 3 low 1\nRHS\n RHS cap 4 low 3\nENDATA\n";

    fn read(text: &str) -> Model {
        model::mps::read(text).expect("a model").0
    }

    #[test]
    fn every_difference_is_found() {
        let model = read(TEXT);
        assert_eq!(compare(&model, &model), Ok(Vec::new()));
        for (from, to, says) in [
            ("y cost 3", "y cost 3.5", "column y"),
            ("cap 4", "cap 4.5", "row 1"),
            ("y cost 3 low 1", "y cost 3 low 1.5", "row 2"),
            ("ROWS", "OBJSENSE\n MAX\nROWS", "direction"),
            ("RHS\n RHS", "RHS\n RHS cost -1\n RHS", "constant"),
            (" y cost 3 low 1\n", "", "2 columns were written, 1 read"),
            (" G low", " N low", "2 rows were written, 1 read"),
        ] {
            let other = read(&TEXT.replacen(from, to, 1));
            let found = compare(&model, &other).expect_err(to);
            assert!(found.contains(says), "{to}: {found}");
        }
        assert!(relaxations(Some(Bound::Value(5.0)), Some(Bound::Value(6.0))).is_err());
        assert!(relaxations(Some(Bound::Unbounded), Some(Bound::Infeasible)).is_err());
        assert_eq!(relaxations(None, Some(Bound::Unbounded)).map(|notes| notes.len()), Ok(1));
        // x + y ≥ 3 with 2 x ≤ 4: x = 2 and y = 1 cost 5.
        assert_eq!(bound(&model, &rows(&model)), Some(Bound::Value(5.0)));
    }
}
