//! Exact rays from the basis with which a floating-point kernel gave up: the row of the inverse
//! for a basic variable that is out of its bounds.

use dashu_int::IBig;

use crate::basis::{Standing, Standings, System};
use crate::lifting::Fractions;
use crate::multipliers::Multipliers;
use crate::rows::ExactRows;
use crate::vertex::{Excess, Variable};

/// The basic variables that are out of their bounds, those that are most so first, ties by index.
pub(crate) fn candidates(excesses: &[Excess], basis: &Standings) -> impl Iterator<Item = Variable> {
    let is_basic = |variable: &Variable| match *variable {
        Variable::Column(column) => basis.columns[column] == Standing::Basic,
        Variable::Row(row) => basis.rows[row] == Standing::Basic,
    };
    let mut all: Vec<&Excess> = excesses.iter().filter(|e| is_basic(&e.variable)).collect();
    all.sort_by(|a, b| b.amount.cmp(&a.amount).then(a.variable.cmp(&b.variable)));
    all.into_iter().map(|excess| excess.variable).collect::<Vec<_>>().into_iter()
}

/// The multipliers of all rows: for a column, those that leave it alone of the basic ones; for a
/// row, those that take all basic columns out of it.
pub(crate) fn ray(
    rows: &ExactRows,
    system: &System,
    variable: Variable,
    found: Fractions,
) -> Multipliers {
    let denominator = found.denominator.clone();
    let mut ray = system.multipliers(rows, found);
    if let Variable::Row(row) = variable {
        ray.values[row] -= IBig::from(denominator);
    }
    ray
}
