//! Scaling by powers of two, for matrices whose coefficients differ much in size.
//!
//! Every variable j has a unit u_j: value = u_j · scaled value, where a logical's value is its
//! row's activity. So a_ij becomes a_ij u_j / u_{n+i}, bounds are divided by u_j, costs multiplied,
//! reduced costs (a row's dual is its logical's) divided. Powers of two change no digit. The units
//! are geometric means, found on binary exponents alone: in turn each row and each column is
//! centred about exponent 0. They depend on the rows alone, not on how these came. A matrix with
//! little spread is left as it is.
//!
//! Source: Tomlin 1975; Fourer 1982 (geometric scaling).

use crate::sparse::Matrix;
use crate::state::Core;

/// Spread of binary exponents up to which a matrix is left as it is.
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

/// The exponents of the units, columns before rows; none when the matrix has little spread.
fn unit_exponents(matrix: &Matrix) -> Option<Vec<i32>> {
    let (n, m) = (matrix.column_count(), matrix.row_count());
    let mut all = Span::EMPTY;
    (0..m).flat_map(|i| matrix.row(i)).for_each(|(_, value)| all.add(exponent(value)));
    if all.0 > all.1 || all.1 - all.0 <= SPREAD {
        return None;
    }
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
    Some(units.into_iter().map(|unit| unit.clamp(-LIMIT, LIMIT)).collect())
}

impl Core {
    /// Takes the scaling away: costs, bounds and matrix in the caller's units.
    pub(crate) fn unscale(&mut self) {
        if self.is_scaled {
            let inverse: Vec<f64> = self.unit.iter().map(|unit| 1.0 / unit).collect();
            self.apply(&inverse);
            self.is_scaled = false;
        }
        self.unit.clear();
        self.unit.resize(self.status.len(), 1.0);
    }

    /// Scales a problem in the caller's units where its coefficients ask for it.
    pub(crate) fn scale(&mut self) {
        self.unit.resize(self.status.len(), 1.0);
        if let Some(exponents) = unit_exponents(&self.matrix) {
            let unit: Vec<f64> = exponents.into_iter().map(power_of_two).collect();
            self.apply(&unit);
            self.unit = unit;
            self.is_scaled = true;
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
    use crate::problem::{Col, Problem};

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
    fn little_spread_is_left_alone() {
        let mut problem = Problem::new();
        let x = problem.add_column(3.0, 0.0, 7.0).unwrap();
        problem.add_row(&[(x, 1000.0)], 0.0, 1.0).unwrap();
        problem.add_row(&[(x, 1.0)], 0.0, 1.0).unwrap();
        assert!(!Core::new(problem).is_scaled);
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
