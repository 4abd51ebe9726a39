//! A square matrix of whole numbers, by row, as the basis of a relaxation gives it.

use dashu_int::{IBig, ops::BitTest};

use super::field;

/// The non-zeros: in 64 bits where all of them fit.
#[derive(Debug, Clone)]
enum Values {
    Small(Vec<i64>),
    Wide(Vec<IBig>),
}

/// A square matrix.
#[derive(Debug, Clone)]
pub(crate) struct Square {
    starts: Vec<usize>,
    columns: Vec<u32>,
    values: Values,
}

impl Square {
    pub(crate) fn new() -> Self {
        Self { starts: vec![0], columns: Vec::new(), values: Values::Small(Vec::new()) }
    }

    pub(crate) fn push(&mut self, column: u32, value: &IBig) {
        self.columns.push(column);
        match (&mut self.values, i64::try_from(value)) {
            (Values::Small(values), Ok(small)) => values.push(small),
            (Values::Small(values), Err(_)) => {
                let wide = values.iter().map(|&v| IBig::from(v)).chain([value.clone()]);
                self.values = Values::Wide(wide.collect());
            }
            (Values::Wide(values), _) => values.push(value.clone()),
        }
    }

    pub(crate) fn push_small(&mut self, column: u32, value: i64) {
        self.columns.push(column);
        match &mut self.values {
            Values::Small(values) => values.push(value),
            Values::Wide(values) => values.push(IBig::from(value)),
        }
    }

    /// Ends the row in hand.
    pub(crate) fn end_row(&mut self) {
        self.starts.push(self.columns.len());
    }

    pub(crate) fn size(&self) -> usize {
        self.starts.len() - 1
    }

    pub(crate) fn nonzeros(&self) -> usize {
        self.columns.len()
    }

    /// The columns of a row, in order.
    pub(crate) fn row(&self, row: usize) -> &[u32] {
        &self.columns[self.starts[row]..self.starts[row + 1]]
    }

    /// The value at a place of a row modulo p.
    pub(crate) fn in_field(&self, row: usize, place: usize) -> u64 {
        match &self.values {
            Values::Small(values) => field::of_small(values[self.starts[row] + place]),
            Values::Wide(values) => field::of_big(&values[self.starts[row] + place]),
        }
    }

    /// The columns of a row with their values modulo p, those that are 0 left out.
    pub(crate) fn row_in_field(&self, row: usize) -> Vec<(u32, u64)> {
        let columns = self.row(row).iter().enumerate();
        let entries = columns.map(|(place, &column)| (column, self.in_field(row, place)));
        entries.filter(|&(_, value)| value != 0).collect()
    }

    /// An upper bound on the bits of a row's (or a column's) sum of sizes.
    pub(crate) fn norm_bits(&self) -> usize {
        let largest = match &self.values {
            Values::Small(values) => {
                let most = values.iter().map(|v| v.unsigned_abs()).max().unwrap_or(0);
                64 - most.leading_zeros() as usize
            }
            Values::Wide(values) => values.iter().map(BitTest::bit_len).max().unwrap_or(0),
        };
        largest + usize::BITS as usize - self.size().leading_zeros() as usize
    }

    /// Whether products with digits fit 128 bits.
    pub(crate) fn is_small(&self) -> bool {
        matches!(self.values, Values::Small(_)) && self.norm_bits() < 64
    }

    /// `residual − M x`, or `residual − M'x`, in 128 bits. Only for a matrix that is small.
    pub(crate) fn subtract_small(&self, transposed: bool, x: &[u64], residual: &mut [i128]) {
        let Values::Small(values) = &self.values else { return };
        for row in 0..self.size() {
            let range = self.starts[row]..self.starts[row + 1];
            if transposed {
                if x[row] == 0 {
                    continue;
                }
                let digit = i128::from(x[row]);
                for (&column, &a) in self.columns[range.clone()].iter().zip(&values[range]) {
                    residual[column as usize] -= i128::from(a) * digit;
                }
            } else {
                for (&column, &a) in self.columns[range.clone()].iter().zip(&values[range]) {
                    residual[row] -= i128::from(a) * i128::from(x[column as usize]);
                }
            }
        }
    }

    /// The same in big numbers.
    pub(crate) fn subtract_big(&self, transposed: bool, x: &[u64], residual: &mut [IBig]) {
        for row in 0..self.size() {
            for k in self.starts[row]..self.starts[row + 1] {
                let column = self.columns[k] as usize;
                let (to, from) = if transposed { (column, row) } else { (row, column) };
                if x[from] != 0 {
                    residual[to] -= match &self.values {
                        Values::Small(values) => IBig::from(values[k]) * IBig::from(x[from]),
                        Values::Wide(values) => &values[k] * IBig::from(x[from]),
                    };
                }
            }
        }
    }
}
