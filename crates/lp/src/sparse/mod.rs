//! Sparse storage: the matrix by row and by column, and the work vector with an index list.

mod matrix;
mod vector;

pub(crate) use matrix::Matrix;
pub(crate) use vector::SparseVector;
