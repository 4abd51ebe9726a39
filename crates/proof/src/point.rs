//! A point against the model, exactly: integers rounded, every row and bound evaluated in
//! rationals.

use dashu_int::{IBig, UBig};
use model::{ColumnId, FamilyState, Model, Number, NumberId, RowId};

use crate::multipliers::simple_fraction;
use crate::small::{Small, SmallSum, meets};

/// What a point violates.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub enum Place {
    /// A written row, in or on demand.
    Row(RowId),
    /// A bound of a column.
    Bound(ColumnId),
    /// A column has no finite value.
    Value(ColumnId),
}

/// One violated row or bound.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Violation {
    /// Where.
    pub place: Place,
    /// Its name as the page shows it.
    pub name: String,
    /// By how much, in the units of the row; positive.
    pub amount: Number,
}

/// A point made exact and checked.
#[derive(Debug, Clone, PartialEq, Eq)]
pub struct Point {
    /// One value a column.
    pub x: Vec<Number>,
    /// The objective at `x`, the offset included.
    pub objective: Number,
    /// What it violates, rows first; empty when it is feasible in exact arithmetic. Families
    /// over subsets are not looked at.
    pub violations: Vec<Violation>,
}

impl Point {
    /// Makes a floating-point point exact and checks it: whole columns are rounded to the
    /// nearest integer; each of the others becomes the simple fraction next to it (within
    /// 10⁻⁹), or, if that violates more, stays as it is. `O(non-zeros)` rational operations.
    #[must_use]
    pub fn new(model: &Model, x: &[f64]) -> Self {
        let simple = Self::checked(model, exact(model, x, as_fraction));
        if simple.violations.is_empty() {
            return simple;
        }
        let plain = Self::checked(model, exact(model, x, as_given));
        if plain.worst() < simple.worst() { plain } else { simple }
    }

    /// Checks a point that is exact already. `O(non-zeros)` rational operations.
    #[must_use]
    pub fn of_exact(model: &Model, x: Vec<Number>) -> Self {
        Self::checked(model, x.into_iter().map(Some).collect())
    }

    /// The largest amount by which a row or bound is violated; 0 when none is.
    #[must_use]
    pub fn worst(&self) -> Number {
        let amounts = self.violations.iter().map(|violation| &violation.amount);
        amounts.max().cloned().unwrap_or(Number::ZERO)
    }

    fn checked(model: &Model, values: Vec<Option<Number>>) -> Self {
        let mut violations = Vec::new();
        let missing = values.iter().enumerate().filter(|(_, value)| value.is_none());
        for column in missing.map(|(index, _)| ColumnId::from_index(index)) {
            let name = model.column_name(column);
            violations.push(Violation { place: Place::Value(column), name, amount: Number::ONE });
        }
        let x: Vec<Number> = values.into_iter().map(Option::unwrap_or_default).collect();
        let small: Vec<Option<Small>> = x.iter().map(Small::read).collect();
        for row in (0..model.row_count()).map(RowId::from_index) {
            if model.families()[model.row_family(row).index()].state == FamilyState::Out {
                continue;
            }
            if meets(model, row, &small) == Some(true) {
                continue;
            }
            if let Some(amount) = outside(model, &activity(model, row, &x), model.row_sides(row)) {
                let name = model.row_name(row);
                violations.push(Violation { place: Place::Row(row), name, amount });
            }
        }
        for (index, column) in model.columns().iter().enumerate() {
            let sides = (column.lower, column.upper);
            if small[index].and_then(|value| value.is_within(model, sides)) == Some(true) {
                continue;
            }
            if let Some(amount) = outside(model, &x[index], sides) {
                let id = ColumnId::from_index(index);
                let name = model.column_name(id);
                violations.push(Violation { place: Place::Bound(id), name, amount });
            }
        }
        let objective = model.offset() + cost(model, &x, &small);
        Self { x, objective, violations }
    }
}

/// What `x` violates, by name and exact amount: see [`Point`].
#[must_use]
pub fn violations(model: &Model, x: &[f64]) -> Vec<Violation> {
    Point::new(model, x).violations
}

/// One exact value a column; `None` where it is not finite or missing.
fn exact(model: &Model, x: &[f64], read: fn(f64) -> Option<Number>) -> Vec<Option<Number>> {
    let columns = model.columns().iter().enumerate();
    let value = |(index, column): (usize, &model::Column)| {
        let value = x.get(index).copied().filter(|value| value.is_finite())?;
        if column.integer { as_given(value.round()) } else { read(value) }
    };
    columns.map(value).collect()
}

fn as_given(value: f64) -> Option<Number> {
    Number::try_from(value).ok()
}

fn as_fraction(value: f64) -> Option<Number> {
    let Some((top, bottom)) = simple_fraction(value) else { return as_given(value) };
    Some(Number::from_parts(IBig::from(top), UBig::try_from(bottom).ok()?))
}

/// c'x: in machine words where they suffice.
fn cost(model: &Model, x: &[Number], small: &[Option<Small>]) -> Number {
    let costs = || model.columns().iter().map(|column| model.numbers().exact(column.cost));
    let in_words = || {
        let mut sum = SmallSum::ZERO;
        for (cost, &value) in costs().zip(small) {
            sum.add_product(Small::read(cost)?, value?)?;
        }
        sum.number()
    };
    in_words().unwrap_or_else(|| costs().zip(x).fold(Number::ZERO, |sum, (c, x)| sum + c * x))
}

fn activity(model: &Model, row: RowId, x: &[Number]) -> Number {
    let entries = model.row_entries(row).iter();
    entries
        .fold(Number::ZERO, |sum, &(column, a)| sum + model.numbers().exact(a) * &x[column.index()])
}

/// By how much a value is outside its sides.
fn outside(
    model: &Model,
    value: &Number,
    (lower, upper): (Option<NumberId>, Option<NumberId>),
) -> Option<Number> {
    let under = lower.map(|lower| model.numbers().exact(lower) - value);
    let over = upper.map(|upper| value - model.numbers().exact(upper));
    under.max(over).filter(|amount| *amount > Number::ZERO)
}
