//! The matrix A twice: by row and by column, indices `u32`, sorted.
//!
//! The copy by column is made from the copy by row whenever rows come or go, so both
//! depend on the rows alone and not on how they came.

/// A sparse matrix by row and by column.
#[derive(Clone, Debug, Default)]
pub(crate) struct Matrix {
    columns: usize,
    row_start: Vec<usize>,
    row_index: Vec<u32>,
    row_value: Vec<f64>,
    column_start: Vec<usize>,
    column_index: Vec<u32>,
    column_value: Vec<f64>,
}

impl Matrix {
    /// A matrix without rows.
    pub(crate) fn new(columns: usize) -> Self {
        Self { columns, row_start: vec![0], column_start: vec![0; columns + 1], ..Self::default() }
    }

    /// Number of rows.
    pub(crate) fn row_count(&self) -> usize {
        self.row_start.len() - 1
    }

    /// Number of columns.
    pub(crate) fn column_count(&self) -> usize {
        self.columns
    }

    /// Number of nonzeros.
    pub(crate) fn nonzeros(&self) -> usize {
        self.row_index.len()
    }

    /// Number of entries of a row.
    pub(crate) fn row_length(&self, row: usize) -> usize {
        self.row_start[row + 1] - self.row_start[row]
    }

    /// The entries (column, value) of a row, columns ascending.
    #[inline]
    pub(crate) fn row(&self, row: usize) -> impl Iterator<Item = (u32, f64)> + '_ {
        let range = self.row_start[row]..self.row_start[row + 1];
        self.row_index[range.clone()].iter().copied().zip(self.row_value[range].iter().copied())
    }

    /// The entries (row, value) of a column, rows ascending.
    #[inline]
    pub(crate) fn column(&self, column: usize) -> impl Iterator<Item = (u32, f64)> + '_ {
        let range = self.column_start[column]..self.column_start[column + 1];
        self.column_index[range.clone()]
            .iter()
            .copied()
            .zip(self.column_value[range].iter().copied())
    }

    /// Appends rows with sorted distinct columns.
    pub(crate) fn append<'a>(&mut self, rows: impl Iterator<Item = &'a [(u32, f64)]>) {
        for row in rows {
            for &(column, value) in row {
                self.row_index.push(column);
                self.row_value.push(value);
            }
            self.row_start.push(self.row_index.len());
        }
        self.rebuild_columns();
    }

    /// Keeps the rows marked true.
    pub(crate) fn retain(&mut self, keep: &[bool]) {
        let mut kept = Self::new(self.columns);
        for (row, _) in keep.iter().enumerate().filter(|(_, keep)| **keep) {
            let range = self.row_start[row]..self.row_start[row + 1];
            kept.row_index.extend_from_slice(&self.row_index[range.clone()]);
            kept.row_value.extend_from_slice(&self.row_value[range]);
            kept.row_start.push(kept.row_index.len());
        }
        kept.rebuild_columns();
        *self = kept;
    }

    /// Multiplies each entry by its column's factor and divides it by its row's.
    pub(crate) fn scale(&mut self, columns: &[f64], rows: &[f64]) {
        for (row, factor) in rows.iter().enumerate() {
            for k in self.row_start[row]..self.row_start[row + 1] {
                self.row_value[k] *= columns[self.row_index[k] as usize] / factor;
            }
        }
        for (column, factor) in columns.iter().enumerate() {
            for k in self.column_start[column]..self.column_start[column + 1] {
                self.column_value[k] *= factor / rows[self.column_index[k] as usize];
            }
        }
    }

    /// Says where the copy by column does not hold the entries of the copy by row, in order. Work:
    /// the nonzeros.
    pub(crate) fn check(&self) -> Result<(), String> {
        let mut next: Vec<_> = (0..self.columns).map(|j| self.column(j)).collect();
        for i in 0..self.row_count() {
            for (j, value) in self.row(i) {
                if next[j as usize].next() != Some((i as u32, value)) {
                    return Err(format!("row {i} and column {j} of the matrix disagree"));
                }
            }
        }
        if next.iter_mut().any(|column| column.next().is_some()) {
            return Err("a column of the matrix has an entry that no row has".to_owned());
        }
        Ok(())
    }

    /// Makes the copy by column from the copy by row: a counting sort.
    fn rebuild_columns(&mut self) {
        let mut start = vec![0usize; self.columns + 1];
        for &column in &self.row_index {
            start[column as usize + 1] += 1;
        }
        for column in 0..self.columns {
            start[column + 1] += start[column];
        }
        let mut next = start.clone();
        self.column_index.clear();
        self.column_index.resize(self.row_index.len(), 0);
        self.column_value.clear();
        self.column_value.resize(self.row_index.len(), 0.0);
        let mut first = 0;
        for (row, &end) in (0u32..).zip(&self.row_start[1..]) {
            for k in first..end {
                let place = &mut next[self.row_index[k] as usize];
                self.column_index[*place] = row;
                self.column_value[*place] = self.row_value[k];
                *place += 1;
            }
            first = end;
        }
        self.column_start = start;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn rows_and_columns_agree_after_appending_and_dropping() {
        let mut a = Matrix::new(3);
        let rows: [&[(u32, f64)]; 3] = [&[(0, 1.0), (2, 2.0)], &[(1, 3.0)], &[(0, 4.0), (1, 5.0)]];
        a.append(rows.iter().copied());
        assert_eq!(a.column(0).collect::<Vec<_>>(), vec![(0, 1.0), (2, 4.0)]);
        a.retain(&[true, false, true]);
        assert_eq!((a.row_count(), a.nonzeros()), (2, 4));
        assert_eq!(a.column(1).collect::<Vec<_>>(), vec![(1, 5.0)]);
        assert_eq!(a.row(1).collect::<Vec<_>>(), vec![(0, 4.0), (1, 5.0)]);
    }

    #[test]
    fn copies_that_disagree_are_named() {
        let mut sound = Matrix::new(2);
        let rows: [&[(u32, f64)]; 2] = [&[(0, 1.0), (1, 2.0)], &[(0, 3.0)]];
        sound.append(rows.iter().copied());
        assert_eq!(sound.check(), Ok(()));
        let mut other_value = sound.clone();
        other_value.column_value[1] = 4.0;
        assert_eq!(other_value.check().unwrap_err(), "row 1 and column 0 of the matrix disagree");
        let mut shorter_row = sound;
        shorter_row.row_start[2] -= 1;
        assert!(shorter_row.check().unwrap_err().contains("an entry that no row has"));
    }
}
