//! The exact linear model with provenance: the whole contract between the front
//! half of Hullward (instances, notation) and the search.
//!
//! A [`Model`] is
//!
//! ```text
//! min or max  c'x   subject to   L ≤ Ax ≤ U,   l ≤ x ≤ u,   x_j whole for some j
//! ```
//!
//! in which every number is exact (a rational, with its nearest `f64` beside it),
//! every column knows its variable and index tuple, and every row its family and
//! index tuple. Families over subsets, which are never written out in full, are
//! held as [`SubsetFamily`]: neutral terms, sets and conditions that a separator
//! reads.
//!
//! | type | use it for |
//! |---|---|
//! | [`Model`] | reading: columns, rows, families, subset families |
//! | [`ModelBuilder`] | writing: notation's expansion and the readers |
//! | [`Row`] | one exact row outside the model: a separated member of a family |
//! | [`Statistics`] | size and coefficient ranges; [`Model::describe`] says them in words |
//! | [`mps`] | models of others, and models for others |

mod builder;
mod describe;
mod feasibility;
mod id;
mod labels;
mod model;
pub mod mps;
mod number;
mod reorder;
mod statistics;
mod subset;
mod variant;

pub use builder::{ColumnSpec, ModelBuilder, ModelError};
pub use id::{ColumnId, FamilyId, LabelId, NumberId, RowId, SubsetFamilyId, VariableId};
pub use labels::Labels;
pub use model::{Column, Family, FamilyState, Model, Row, Sense, Variable};
pub use number::{Number, Numbers, nearest_f64};
pub use statistics::{FamilyStatistics, Statistics};
pub use subset::{Relation, RoundedUp, Scope, SubsetCondition, SubsetFamily, SubsetTerm};
