//! Tree layout, axes and figures.
