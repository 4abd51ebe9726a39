//! Scaling by powers of two.
//!
//! Every variable j has a unit u_j: value = u_j · scaled value, where a logical's value is its
//! row's activity. So a_ij becomes a_ij u_j / u_{n+i}, bounds are divided by u_j, costs multiplied,
//! reduced costs (a row's dual is its logical's) divided. Powers of two change no digit.
//!
//! As a rule each row is divided by the power of two of its largest coefficient and columns stay as
//! they are: what a row is violated by then weighs the same in the choice of the leaving row
//! whatever units the row is written in (a capacity of 150 beside assignments of 1), which takes up
//! to a third off the pivots of packing and flow problems. A row's unit depends on the row alone,
//! so rows can be appended without a change to the others. Where coefficients differ much in size,
//! units are geometric means of rows and columns instead, found on binary exponents alone: in turn
//! each row and each column is centred about exponent 0. All depends on the rows alone, not on how
//! these came.
//!
//! Source: Tomlin 1975; Fourer 1982 (geometric scaling).

use crate::sparse::Matrix;
use crate::state::Core;

/// Spread of binary exponents up to which columns are left as they are.
const SPREAD: i32 = 12;

/// Rounds of centring rows and columns.
const ROUNDS: u32 = 4;

/// Largest binary exponent of a unit.
const LIMIT: i32 = 60;

/// floor(log2 |value|) of a normal number; far below every normal one for zero and subnormal
/// numbers.
fn exponent(value: f64) -> i32 {
    ((value.to_bits() >> 52) & 0x7ff) as i32 - 1023
}

/// 2 to a power between −1022 and 1023.
fn power_of_two(exponent: i32) -> f64 {
    f64::from_bits(((1023 + exponent) as u64) << 52)
}

/// Smallest and largest exponent seen.
#[derive(Clone, Copy)]
struct Span(i32, i32);

impl Span {
    const EMPTY: Self = Self(i32::MAX, i32::MIN);

    fn add(&mut self, exponent: i32) {
        self.0 = self.0.min(exponent);
        self.1 = self.1.max(exponent);
    }

    /// The middle; 0 when nothing was seen.
    fn middle(self) -> i32 {
        if self.0 > self.1 { 0 } else { (self.0 + self.1).div_euclid(2) }
    }
}

/// The exponents of the units, columns before rows.
fn unit_exponents(matrix: &Matrix) -> Vec<i32> {
    let mut all = Span::EMPTY;
    for i in 0..matrix.row_count() {
        matrix.row(i).for_each(|(_, value)| all.add(exponent(value)));
    }
    if all.0 > all.1 || all.1 - all.0 <= SPREAD { by_row(matrix) } else { geometric(matrix) }
}

/// The largest exponent of each row.
fn by_row(matrix: &Matrix) -> Vec<i32> {
    let mut units = vec![0; matrix.column_count()];
    for i in 0..matrix.row_count() {
        let largest = matrix.row(i).map(|(_, value)| exponent(value)).max();
        units.push(largest.unwrap_or(0).clamp(-LIMIT, LIMIT));
    }
    units
}

/// Rows and columns centred in turn.
fn geometric(matrix: &Matrix) -> Vec<i32> {
    let (n, m) = (matrix.column_count(), matrix.row_count());
    let mut units = vec![0i32; n + m];
    for _ in 0..ROUNDS {
        for i in 0..m {
            let mut span = Span::EMPTY;
            matrix.row(i).for_each(|(j, value)| span.add(exponent(value) + units[j as usize]));
            units[n + i] = span.middle();
        }
        for j in 0..n {
            let mut span = Span::EMPTY;
            matrix
                .column(j)
                .for_each(|(i, value)| span.add(exponent(value) - units[n + i as usize]));
            units[j] = -span.middle();
        }
    }
    units.into_iter().map(|unit| unit.clamp(-LIMIT, LIMIT)).collect()
}

impl Core {
    /// Takes the scaling away: costs, bounds and matrix in the caller's units. Returns the units
    /// that were in force.
    pub(crate) fn unscale(&mut self) -> Vec<f64> {
        if self.is_scaled {
            let inverse: Vec<f64> = self.unit.iter().map(|unit| 1.0 / unit).collect();
            self.apply(&inverse);
            self.is_scaled = false;
        }
        let one = vec![1.0; self.unit.len()];
        std::mem::replace(&mut self.unit, one)
    }

    /// Scales a problem in the caller's units. Steepest-edge weights stay where the units that were
    /// in force before, of the variables that were there, are still the units.
    pub(crate) fn scale(&mut self, before: &[f64]) {
        self.unit.clear();
        self.unit.extend(unit_exponents(&self.matrix).into_iter().map(power_of_two));
        self.is_scaled = self.unit.iter().any(|&unit| unit != 1.0);
        if self.is_scaled {
            let unit = std::mem::take(&mut self.unit);
            self.apply(&unit);
            self.unit = unit;
        }
        if !self.unit.starts_with(before) {
            self.weight.fill(1.0);
        }
        self.ticks += self.matrix.nonzeros() as u64;
    }

    /// Changes costs, bounds and matrix to other units.
    fn apply(&mut self, unit: &[f64]) {
        for (j, unit) in unit.iter().enumerate() {
            self.cost[j] *= unit;
            self.lower[j] /= unit;
            self.upper[j] /= unit;
        }
        let (columns, rows) = unit.split_at(self.matrix.column_count());
        self.matrix.scale(columns, rows);
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::problem::{CleanRow, Col, Problem};

    #[test]
    fn exponents_and_powers() {
        assert_eq!([1.0, -1.5, 2.0, 0.5, 1e6].map(exponent), [0, 0, 1, -1, 19]);
        assert_eq!([0, 3, -2].map(power_of_two), [1.0, 8.0, 0.25]);
        assert!(exponent(0.0) < -1000 && exponent(5e-324) < -1000);
    }

    fn problem(large: f64) -> Core {
        let mut problem = Problem::new();
        let x = problem.add_column(3.0, 0.0, 7.0).unwrap();
        let y = problem.add_column(5.0, 0.0, 1.0).unwrap();
        problem.add_row(&[(x, 1.0), (y, -large)], f64::NEG_INFINITY, 0.0).unwrap();
        problem.add_row(&[(Col(0), 0.001), (y, 3.0)], 1.0, 2.0).unwrap();
        Core::new(problem)
    }

    #[test]
    fn little_spread_leaves_columns_alone() {
        let mut problem = Problem::new();
        let x = problem.add_column(3.0, 0.0, 7.0).unwrap();
        problem.add_row(&[(x, 1000.0)], 0.0, 1.0).unwrap();
        problem.add_row(&[(x, 1.0)], 0.0, 1.0).unwrap();
        let core = Core::new(problem);
        assert_eq!(core.unit, [1.0, 512.0, 1.0]);
        assert_eq!((core.upper[1], core.upper[2]), (1.0 / 512.0, 1.0));
    }

    /// Weights that a solve has learned are kept when rows come that change no unit, and are
    /// started anew when units change under them.
    #[test]
    fn weights_stay_while_units_do() {
        let mut problem = Problem::new();
        let x = problem.add_column(3.0, 0.0, 7.0).unwrap();
        problem.add_column(1.0, 0.0, 1.0).unwrap();
        problem.add_row(&[(x, 100.0)], 0.0, 1.0).unwrap();
        let mut core = Core::new(problem);
        core.weight[0] = 5.0;
        let entries = |value| vec![(0, value), (1, 1.0)];
        let row = |value| CleanRow { entries: entries(value), lower: 0.0, upper: 1.0 };
        core.append_rows(&[row(3.0)]);
        assert_eq!(core.weight, [5.0, 1.0]);
        core.append_rows(&[row(1e-6)]);
        assert_eq!(core.weight, [1.0, 1.0, 1.0]);
        core.weight[1] = 7.0;
        core.retain_rows(&[true, true, false]);
        assert_eq!(core.weight, [1.0, 1.0]);
    }

    #[test]
    fn scaling_narrows_the_spread_and_is_undone_to_the_bit() {
        for large in [1e5, 1e9, 123_456.789] {
            let mut core = problem(large);
            assert!(core.is_scaled);
            let mut span = Span::EMPTY;
            (0..2)
                .flat_map(|i| core.matrix.row(i))
                .for_each(|(_, value)| span.add(exponent(value)));
            assert!(span.1 - span.0 < exponent(large) / 2 + 8, "{span:?}", span = (span.0, span.1));
            core.unscale();
            assert_eq!(core.matrix.row(0).collect::<Vec<_>>(), vec![(0, 1.0), (1, -large)]);
            assert_eq!((core.cost[0], core.upper[0], core.upper[3]), (3.0, 7.0, 2.0));
            assert_eq!(core.check(), Ok(()));
        }
    }
}
