//! Recognises families over subsets and separates them.
//!
//! A member of a family over subsets is one row for one set S. How far a point x violates it
//! is a function of S; for all the cut, subtour, forest and closure shapes this function is
//!
//! ```text
//! violation(S) = −( constant + Σ_{i∈S} h_i + Σ_{i∈S, j∉S} a_ij ),    a_ij ≥ 0
//! ```
//!
//! so that its maximum is a minimum cut (Picard, Ratliff 1975), whatever the weights. The
//! conditions on S are met by branching on the elements that must be in or out, which takes
//! one cut for each forced element. Odd sets take a minimum odd cut, covers a knapsack, cliques
//! branch and bound; capacity cuts with a rounded demand are found by that cut without the
//! rounding and by greedy growth, which is said to be heuristic. Other shapes are listed where
//! they have no more than 2^12 members.
//!
//! | item | use it for |
//! |---|---|
//! | [`Separator`] | one family over subsets: violated members at a point, membership |
//! | [`general`] | cuts that no family has: Gomory, mixed-integer rounding, lifted covers |
//! | [`RowSeparator`] | an ordinary family on demand: violated written rows |

mod clique;
mod compiled;
mod components;
mod conditions;
mod cover;
mod cut_tree;
mod degree;
mod flow;
pub mod general;
mod growth;
mod list;
mod member;
mod method;
mod parity;
mod quadratic;
mod rounding;
mod rows;
mod search;
mod separator;
#[cfg(test)]
mod tests;
mod tolerance;

pub use method::Exactness;
pub use rows::{RowSeparator, ViolatedRow};
pub use separator::{Membership, Progress, Separator, Violated};
