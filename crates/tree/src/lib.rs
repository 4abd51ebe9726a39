//! Branch and cut, one slice at a time.
