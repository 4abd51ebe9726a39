//! The matrix by row with the entries that are priced first.
//!
//! A row of the tableau needs the entries of nonbasic variables that can enter only. In each row
//! those stand first; a variable that enters or leaves the basis moves its entries across.
//!
//! Source: Hall, McKinnon 2005 (row-wise pricing); Koberstein 2005.

use super::Matrix;

/// Rows whose priced entries stand first.
#[derive(Clone, Debug, Default)]
pub(crate) struct Partition {
    start: Vec<u32>,
    middle: Vec<u32>,
    index: Vec<u32>,
    value: Vec<f64>,
    /// Room for the columns that are priced while the rows are made.
    is_priced: Vec<bool>,
    /// False when statuses or bounds changed behind its back.
    pub(crate) is_current: bool,
}

impl Partition {
    /// Takes a matrix over anew; `priced` says which columns stand first. Work: the nonzeros.
    pub(crate) fn rebuild(&mut self, matrix: &Matrix, priced: impl Fn(usize) -> bool) {
        self.start.clear();
        self.middle.clear();
        self.is_priced.clear();
        self.is_priced.extend((0..matrix.column_count()).map(priced));
        self.index.resize(matrix.nonzeros(), 0);
        self.value.resize(matrix.nonzeros(), 0.0);
        let mut end = 0;
        for row in 0..matrix.row_count() {
            let start = end;
            self.start.push(start as u32);
            end += matrix.row_length(row);
            // Priced entries from the start on, in order; the others from the end back.
            let (mut first, mut last) = (start, end);
            for (j, value) in matrix.row(row) {
                let place = if self.is_priced[j as usize] {
                    first += 1;
                    first - 1
                } else {
                    last -= 1;
                    last
                };
                self.index[place] = j;
                self.value[place] = value;
            }
            self.middle.push(first as u32);
        }
        self.start.push(end as u32);
        self.is_current = true;
    }

    /// The priced entries of a row: columns and values.
    pub(crate) fn row(&self, row: u32) -> (&[u32], &[f64]) {
        let range = self.start[row as usize] as usize..self.middle[row as usize] as usize;
        (&self.index[range.clone()], &self.value[range])
    }

    /// A column is priced no longer.
    pub(crate) fn take_out(&mut self, matrix: &Matrix, column: u32) {
        for (row, _) in matrix.column(column as usize) {
            let row = row as usize;
            let range = self.start[row] as usize..self.middle[row] as usize;
            if let Some(at) = self.index[range.clone()].iter().position(|&j| j == column) {
                self.middle[row] -= 1;
                self.swap(range.start + at, range.end - 1);
            }
        }
    }

    /// A column is priced from now on.
    pub(crate) fn put_in(&mut self, matrix: &Matrix, column: u32) {
        for (row, _) in matrix.column(column as usize) {
            let row = row as usize;
            let range = self.middle[row] as usize..self.start[row + 1] as usize;
            if let Some(at) = self.index[range.clone()].iter().position(|&j| j == column) {
                self.middle[row] += 1;
                self.swap(range.start + at, range.start);
            }
        }
    }

    fn swap(&mut self, a: usize, b: usize) {
        self.index.swap(a, b);
        self.value.swap(a, b);
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn columns_move_across_and_back() {
        let mut a = Matrix::new(3);
        let rows: [&[(u32, f64)]; 2] = [&[(0, 1.0), (1, 2.0), (2, 3.0)], &[(1, 4.0)]];
        a.append(rows.iter().copied());
        let mut partition = Partition::default();
        partition.rebuild(&a, |j| j != 1);
        assert_eq!(partition.row(0), (&[0, 2][..], &[1.0, 3.0][..]));
        assert_eq!(partition.row(1).0.len(), 0);
        partition.put_in(&a, 1);
        partition.take_out(&a, 0);
        let (mut columns, values) = partition.row(0);
        assert_eq!(values.iter().sum::<f64>(), 5.0);
        assert_eq!((columns.len(), columns.contains(&0)), (2, false));
        columns = partition.row(1).0;
        assert_eq!(columns, [1]);
    }
}
