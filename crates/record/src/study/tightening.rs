//! How much the coefficients of binaries can be tightened, from the data and from the relaxation.

use serde::{Deserialize, Serialize};

/// All rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Tightening {
    /// The rivals in order.
    pub rivals: Vec<RivalTightening>,
}

/// One rival.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalTightening {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// The bound as it is written.
    pub bound: Option<f64>,
    /// With the coefficients that follow from the data alone.
    pub bound_by_data: Option<f64>,
    /// With those that follow from the relaxation.
    pub bound_by_relaxation: Option<f64>,
    /// The families that have such rows.
    pub families: Vec<FamilyTightening>,
    /// Rows that were looked at, and those that were not, for the limit.
    pub rows: u32,
    /// Rows that the limit left out.
    pub left_out: u32,
    /// Bounds of columns that are tighter by the rows, in `model`.
    pub bounds: u32,
    /// The model with the smallest coefficients and bounds that are proved, in MPS; empty where
    /// nothing is tighter, or rows on demand would be lost.
    pub model: String,
}

/// One family with rows that a binary switches.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct FamilyTightening {
    /// Its name.
    pub name: String,
    /// Rows that a binary switches.
    pub rows: u32,
    /// Of these, rows whose coefficient can be made smaller, by the data and by the relaxation.
    pub tightened_by_data: u32,
    /// By the relaxation.
    pub tightened_by_relaxation: u32,
    /// The largest coefficient as it is written.
    pub largest: f64,
    /// The largest that the data need.
    pub largest_by_data: f64,
    /// The largest that the relaxation needs.
    pub largest_by_relaxation: f64,
    /// The row that gains most, in words: "order[Ash → Birch]: 17 → 16, since …".
    pub example: String,
}
