//! Tests through the public face, against enumeration of all subsets.

mod build;
mod fractional;
mod integral;
mod others;
mod random;
mod shapes;
mod whole_points;
