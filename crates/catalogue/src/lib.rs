//! Published formulations as notation, with what is known of them.
