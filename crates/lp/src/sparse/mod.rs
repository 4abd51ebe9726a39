//! Sparse storage: the matrix by row and by column, its rows as pricing sees them, and the work
//! vector with an index list.

mod matrix;
mod partition;
mod vector;

pub(crate) use matrix::Matrix;
pub(crate) use partition::Partition;
pub(crate) use vector::SparseVector;

/// The largest size of a number; 0 when there is none.
pub(crate) fn largest(values: impl IntoIterator<Item = f64>) -> f64 {
    let mut largest = 0.0;
    for value in values {
        if value.abs() > largest {
            largest = value.abs();
        }
    }
    largest
}
