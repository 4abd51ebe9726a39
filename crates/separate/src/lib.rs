//! Recognises families over subsets and separates them.
