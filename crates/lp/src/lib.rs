//! Floating-point simplex: rows and columns in, basis, duals and rays out.
