//! Journal notation from text to model, in one program: so it is linked once, and its tests run side by side.

mod binding;
mod common;
mod constructs;
mod fixtures;
mod help;
mod latex;
mod lint_mps;
mod models;
mod published;
mod robust;
mod sizes;
mod specification;
mod spellings;
mod trees;
mod typeset_by_tex;
