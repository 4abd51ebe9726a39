//! Exact check of bounds, rays and points.
