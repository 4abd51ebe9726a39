//! A basis as a system of whole numbers: the rows that hold with equality over the columns that
//! are basic. Rows whose slack is basic, and columns at a bound, drop out.

use dashu_int::{IBig, UBig};
use model::Number;

use crate::kernel::Objective;
use crate::lifting::{Fractions, Square};
use crate::multipliers::Multipliers;
use crate::rows::{Bounds, Coefficients, ExactRows, common_denominator};

/// Where a column, or a row, stands in a basis.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub enum Standing {
    /// Basic: its value follows from the others; a row may be slack.
    Basic,
    /// At its lower bound or side; at the other where that is missing, at zero without any.
    Lower,
    /// At its upper bound or side; at the other where that is missing.
    Upper,
}

/// A basis: where each column and each row stands. Rows that are missing at the end are no part
/// of the relaxation.
#[derive(Debug, Clone, PartialEq, Eq, Default)]
pub struct Standings {
    /// One a column.
    pub columns: Vec<Standing>,
    /// One a row.
    pub rows: Vec<Standing>,
}

/// No place: the column or row is not in the system.
const NONE: u32 = u32::MAX;

/// The system of a basis.
#[derive(Debug, Clone)]
pub(crate) struct System {
    pub(crate) matrix: Square,
    /// The rows and columns of the matrix.
    pub(crate) rows: Vec<u32>,
    pub(crate) columns: Vec<u32>,
    /// The place of each column in `columns`.
    places: Vec<u32>,
}

/// One value a column over a common denominator.
#[derive(Debug, Clone)]
pub(crate) struct Vertex {
    pub(crate) values: Vec<IBig>,
    pub(crate) denominator: UBig,
}

impl System {
    /// `None` where the rows and columns are not equal in number.
    pub(crate) fn new(rows: &ExactRows, basis: &Standings) -> Option<Self> {
        if basis.columns.len() != rows.column_count() || basis.rows.len() > rows.row_count() {
            return None;
        }
        let mut system = Self {
            matrix: Square::new(),
            rows: places(&basis.rows, |standing| standing != Standing::Basic),
            columns: places(&basis.columns, |standing| standing == Standing::Basic),
            places: vec![NONE; basis.columns.len()],
        };
        if system.rows.len() != system.columns.len() {
            return None;
        }
        for (place, &column) in (0..).zip(&system.columns) {
            system.places[column as usize] = place;
        }
        for &row in &system.rows {
            let (columns, coefficients) = rows.entries(row as usize);
            let mut at: Vec<(u32, usize)> = Vec::with_capacity(columns.len());
            at.extend((0..columns.len()).map(|k| (system.places[columns[k] as usize], k)));
            at.retain(|&(place, _)| place != NONE);
            at.sort_unstable();
            for (place, k) in at {
                match coefficients {
                    Coefficients::Small(values) => system.matrix.push_small(place, values[k]),
                    Coefficients::Wide(values) => system.matrix.push(place, &values[k]),
                }
            }
            system.matrix.end_row();
        }
        Some(system)
    }

    /// The costs of the basic columns.
    pub(crate) fn costs(&self, rows: &ExactRows) -> Vec<IBig> {
        self.columns.iter().map(|&column| rows.costs[column as usize].clone()).collect()
    }

    /// A row over the basic columns.
    pub(crate) fn row(&self, rows: &ExactRows, row: usize) -> Vec<IBig> {
        let mut out = vec![IBig::ZERO; self.columns.len()];
        let (columns, coefficients) = rows.entries(row);
        for (k, &column) in columns.iter().enumerate() {
            let place = self.places[column as usize];
            if place != NONE {
                out[place as usize] += coefficients.at(k);
            }
        }
        out
    }

    /// The place of a basic column.
    pub(crate) fn place(&self, column: usize) -> usize {
        self.places[column] as usize
    }

    /// The values of the columns that are not basic, over a common denominator, and what they
    /// leave of the sides of the rows.
    pub(crate) fn right(
        &self,
        rows: &ExactRows,
        bounds: &[Bounds],
        basis: &Standings,
    ) -> (Vertex, Vec<IBig>) {
        let zero = Number::ZERO;
        let at = |(&standing, bound): (&Standing, &'_ Bounds)| match standing {
            Standing::Basic => None,
            Standing::Upper => bound.1.clone().or_else(|| bound.0.clone()),
            Standing::Lower => bound.0.clone().or_else(|| bound.1.clone()),
        };
        let values: Vec<Option<Number>> = basis.columns.iter().zip(bounds).map(at).collect();
        let denominator = common_denominator(values.iter().flatten());
        let whole = |value: &Option<Number>| {
            let value = value.as_ref().unwrap_or(&zero);
            value.numerator() * IBig::from(&denominator / value.denominator())
        };
        let values: Vec<IBig> = values.iter().map(whole).collect();
        let times = IBig::from(denominator.clone());
        let mut right = Vec::with_capacity(self.rows.len());
        for &row in &self.rows {
            let scaled = &rows.rows[row as usize];
            let (first, second) = match basis.rows[row as usize] {
                Standing::Upper => (&scaled.upper, &scaled.lower),
                _ => (&scaled.lower, &scaled.upper),
            };
            let side = first.as_ref().or(second.as_ref()).cloned().unwrap_or_default();
            right.push(side * &times - activity(rows, row as usize, &values));
        }
        (Vertex { values, denominator }, right)
    }

    /// The vertex from the values of the basic columns, of which `vertex` has the others.
    pub(crate) fn vertex(&self, mut vertex: Vertex, basic: Fractions) -> Vertex {
        if !basic.denominator.is_one() {
            let times = IBig::from(basic.denominator.clone());
            vertex.values.iter_mut().filter(|v| !v.is_zero()).for_each(|value| *value *= &times);
            vertex.denominator *= basic.denominator;
        }
        for (&column, value) in self.columns.iter().zip(basic.values) {
            vertex.values[column as usize] = value;
        }
        vertex
    }

    /// Multipliers of all rows from those of the system's.
    pub(crate) fn multipliers(&self, rows: &ExactRows, own: Fractions) -> Multipliers {
        let mut values = vec![IBig::ZERO; rows.row_count()];
        for (&row, value) in self.rows.iter().zip(own.values) {
            values[row as usize] = value;
        }
        Multipliers { values, denominator: own.denominator }
    }
}

fn places(standings: &[Standing], wanted: impl Fn(Standing) -> bool) -> Vec<u32> {
    (0..).zip(standings).filter(|&(_, &standing)| wanted(standing)).map(|(at, _)| at).collect()
}

/// A scaled row at whole values; in 128 bits where they suffice.
pub(crate) fn activity(rows: &ExactRows, row: usize, values: &[IBig]) -> IBig {
    let (columns, coefficients) = rows.entries(row);
    let mut sum = 0_i128;
    let mut big = IBig::ZERO;
    for (k, &column) in columns.iter().enumerate() {
        let value = &values[column as usize];
        if value.is_zero() {
            continue;
        }
        let small = match coefficients {
            Coefficients::Small(all) => i128::try_from(value)
                .ok()
                .and_then(|value| value.checked_mul(i128::from(all[k])))
                .and_then(|term| sum.checked_add(term)),
            Coefficients::Wide(_) => None,
        };
        match small {
            Some(next) => sum = next,
            None => big += coefficients.at(k) * value,
        }
    }
    big + IBig::from(sum)
}

/// The scaled reduced costs `Q·C − A'Y`.
pub(crate) fn reduced_costs(
    rows: &ExactRows,
    objective: Objective,
    multipliers: &Multipliers,
) -> Vec<IBig> {
    let q = IBig::from(multipliers.denominator.clone());
    let mut out: Vec<IBig> = match objective {
        Objective::Costs => rows.costs.iter().map(|cost| cost * &q).collect(),
        Objective::Nothing => vec![IBig::ZERO; rows.column_count()],
    };
    for (row, value) in multipliers.values.iter().enumerate().filter(|(_, v)| !v.is_zero()) {
        let (columns, coefficients) = rows.entries(row);
        for (k, &column) in columns.iter().enumerate() {
            out[column as usize] -= coefficients.at(k) * value;
        }
    }
    out
}
