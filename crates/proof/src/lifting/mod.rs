//! Systems of whole numbers solved exactly: M x = b, or M'y = c.
//!
//! M is factorised modulo p once. Each digit of the solution base p is then a solve modulo p and
//! one product with M (Dixon 1982); from enough digits follow the fractions. They are certain:
//! digits that agree with n/d make M n − d b a multiple of pᵏ, which is 0 when its size is
//! under pᵏ.

mod factor;
pub(crate) mod field;
mod reconstruct;
mod singletons;
mod square;

pub(crate) use factor::{Elimination, Eliminator, Factor};
pub(crate) use reconstruct::Fractions;
pub(crate) use square::Square;

use dashu_int::{IBig, ops::BitTest};

use reconstruct::{bits, fractions};

/// What is left of the right side, over pᵏ.
#[derive(Debug, Clone)]
enum Residual {
    Small(Vec<i128>),
    Big(Vec<IBig>),
}

/// The digits of a solution, found one after the other.
#[derive(Debug, Clone)]
pub(crate) struct Lifting {
    transposed: bool,
    residual: Residual,
    right_bits: usize,
    norm_bits: usize,
    digits: Vec<Vec<u64>>,
    /// How many digits there are at the next attempt to find the fractions.
    attempt: usize,
}

impl Lifting {
    /// M x = b with b by row, or, `transposed`, M'y = c with c by column.
    pub(crate) fn new(matrix: &Square, transposed: bool, right: Vec<IBig>) -> Self {
        let right_bits = right.iter().map(BitTest::bit_len).max().unwrap_or(0);
        let small = (matrix.is_small() && right_bits < 125)
            .then(|| right.iter().map(|value| i128::try_from(value).unwrap_or_default()).collect());
        let residual = small.map_or(Residual::Big(right), Residual::Small);
        let norm_bits = matrix.norm_bits();
        Self { transposed, residual, right_bits, norm_bits, digits: Vec::new(), attempt: 1 }
    }

    /// The bits of pᵏ.
    pub(crate) fn bits(&self) -> usize {
        self.digits.len() * field::BITS
    }

    /// The digits with which fractions were looked for in the last step; 0 when they were not.
    pub(crate) fn attempted_words(&self) -> u64 {
        if self.attempt > self.digits.len() + self.digits.len() / 2 {
            self.digits.len() as u64
        } else {
            0
        }
    }

    /// Finds a digit more, and gives the solution where it is certain now.
    pub(crate) fn step(&mut self, matrix: &Square, factor: &Factor) -> Option<Fractions> {
        let right: Vec<u64> = match &self.residual {
            Residual::Small(values) => values.iter().map(|&v| field::of_wide(v)).collect(),
            Residual::Big(values) => values.iter().map(field::of_big).collect(),
        };
        let digit =
            if self.transposed { factor.solve_transposed(right) } else { factor.solve(right) };
        self.subtract(matrix, &digit);
        self.digits.push(digit);
        if self.digits.len() < self.attempt && !self.is_over() {
            return None;
        }
        self.attempt = self.digits.len() + self.digits.len().div_ceil(2);
        fractions(&self.digits).filter(|found| self.is_certain(found))
    }

    fn subtract(&mut self, matrix: &Square, digit: &[u64]) {
        match &mut self.residual {
            Residual::Small(values) => {
                matrix.subtract_small(self.transposed, digit, values);
                values.iter_mut().for_each(|value| *value = field::exact_quotient(*value));
            }
            Residual::Big(values) => {
                matrix.subtract_big(self.transposed, digit, values);
                let prime = IBig::from(field::PRIME);
                values.iter_mut().for_each(|value| *value = &*value / &prime);
            }
        }
    }

    /// Whether nothing is left, so that the digits are the solution, a whole one.
    fn is_over(&self) -> bool {
        match &self.residual {
            Residual::Small(values) => values.iter().all(|&value| value == 0),
            Residual::Big(values) => values.iter().all(IBig::is_zero),
        }
    }

    fn is_certain(&self, found: &Fractions) -> bool {
        let largest = found.values.iter().map(bits).max().unwrap_or(0);
        let product = self.norm_bits + largest;
        let right = self.right_bits + found.denominator.bit_len();
        // The sum of both is under pᵏ, which has one bit less than `bits` says.
        (if product > right { product } else { right }) + 2 < self.bits()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use dashu_int::UBig;
    use model::Number;
    use proptest::prelude::*;

    fn square(entries: &[Vec<i64>]) -> Square {
        let mut matrix = Square::new();
        for row in entries {
            for (column, &value) in (0..).zip(row).filter(|&(_, &value)| value != 0) {
                matrix.push_small(column, value);
            }
            matrix.end_row();
        }
        matrix
    }

    fn factor(matrix: &Square) -> Option<Factor> {
        let mut eliminator = Eliminator::new(matrix);
        loop {
            match eliminator.step() {
                Elimination::Working => {}
                Elimination::Done => return Some(eliminator.finish()),
                Elimination::Singular => return None,
            }
        }
    }

    fn solve(entries: &[Vec<i64>], transposed: bool, right: &[i64]) -> Option<Fractions> {
        let matrix = square(entries);
        let factor = factor(&matrix)?;
        let right = right.iter().map(|&v| IBig::from(v)).collect();
        let mut lifting = Lifting::new(&matrix, transposed, right);
        (0..2_000).find_map(|_| lifting.step(&matrix, &factor))
    }

    /// Whether M n = d b in rationals.
    fn holds(entries: &[Vec<i64>], transposed: bool, right: &[i64], found: &Fractions) -> bool {
        let size = entries.len();
        (0..size).all(|i| {
            let entry = |j: usize| if transposed { entries[j][i] } else { entries[i][j] };
            let sum =
                (0..size).fold(IBig::ZERO, |s, j| s + IBig::from(entry(j)) * &found.values[j]);
            sum == IBig::from(right[i]) * IBig::from(found.denominator.clone())
        })
    }

    fn system() -> impl Strategy<Value = (Vec<Vec<i64>>, Vec<i64>)> {
        (1_usize..14).prop_flat_map(|size| {
            let entry = prop_oneof![4 => Just(0_i64), 2 => -3_i64..4, 1 => any::<i32>().prop_map(i64::from)];
            let right = prop_oneof![Just(0_i64), any::<i64>().prop_map(|v| v >> 20)];
            (
                prop::collection::vec(prop::collection::vec(entry, size), size),
                prop::collection::vec(right, size),
            )
        })
    }

    proptest! {
        #![proptest_config(ProptestConfig::with_cases(400))]

        #[test]
        fn solutions_are_exact((mut entries, right) in system(), diagonal in any::<bool>()) {
            if diagonal {
                (0..entries.len()).for_each(|i| entries[i][i] += 1_000_003);
            }
            for transposed in [false, true] {
                if let Some(found) = solve(&entries, transposed, &right) {
                    prop_assert!(holds(&entries, transposed, &right, &found));
                } else {
                    prop_assert!(!diagonal || entries.len() > 1, "no solution");
                }
            }
        }
    }

    /// The inverse of the Hilbert matrix is known to be whole: H x = e₁ for the matrix of order 4
    /// times 420 has the first column of H⁻¹ over 420, (16, −120, 240, −140)/420.
    #[test]
    fn the_hilbert_matrix() {
        let entries: Vec<Vec<i64>> =
            (0..4).map(|i| (0..4).map(|j| 420 / (i + j + 1)).collect()).collect();
        let found = solve(&entries, false, &[1, 0, 0, 0]).unwrap();
        let value =
            |i: usize| Number::from_parts(found.values[i].clone(), found.denominator.clone());
        for (i, top) in [16, -120, 240, -140].into_iter().enumerate() {
            assert_eq!(value(i), Number::from_parts(IBig::from(top), UBig::from(420_u32)));
        }
    }

    /// A chain x_i = 10⁹ x_(i+1), x_200 = 1: solutions of 1,800 digits.
    #[test]
    fn long_solutions_take_more_digits() {
        let mut entries = vec![vec![0; 200]; 200];
        for (i, row) in entries.iter_mut().enumerate() {
            row[i] = 1;
            if i < 199 {
                row[i + 1] = -1_000_000_000;
            }
        }
        let mut right = vec![0; 200];
        right[199] = 1;
        let found = solve(&entries, false, &right).unwrap();
        assert_eq!(found.values[0], IBig::from(10).pow(9 * 199));
        assert!(holds(&entries, false, &right, &found));
    }

    #[test]
    fn singular_matrices_are_said_to_be() {
        assert!(solve(&[vec![1, 2], vec![2, 4]], false, &[1, 2]).is_none());
        assert!(
            solve(&[vec![1, 1, 0], vec![0, 1, 1], vec![1, 0, -1]], false, &[0, 0, 1]).is_none()
        );
        assert!(solve(&[vec![0]], false, &[0]).is_none());
    }
}
