//! The page: Yew, no mathematics.
