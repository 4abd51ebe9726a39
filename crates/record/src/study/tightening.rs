//! How much the coefficients of binaries can be tightened, from the data, from the relaxation and with a
//! cut-off.

use serde::{Deserialize, Serialize};

use crate::results::SolutionEntry;

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
    /// A value of the objective that is known to be reachable: given by the scenario, else of the best
    /// plan of a search. `None` where there is none.
    pub cutoff: Option<f64>,
    /// The bound with the coefficients that plans at least as good need: an optimum stays, other plans may
    /// be lost. `None` without a cut-off.
    pub bound_by_cutoff: Option<f64>,
    /// The smallest and the largest absolute coefficient of its rows as they are written.
    pub range: (f64, f64),
    /// The same with the coefficients that follow from the relaxation.
    pub range_after: (f64, f64),
    /// The families that have such rows.
    pub families: Vec<FamilyTightening>,
    /// Every row that was looked at.
    pub switches: Vec<SwitchRow>,
    /// Rows that are more than a switch, one of a family: a plan that they cut off though the binary opens
    /// them.
    pub too_small: Vec<TooSmall>,
    /// Rows that were looked at, and those that were not, for the limit.
    pub rows: u32,
    /// Rows that the limit left out.
    pub left_out: u32,
    /// Bounds of columns that are tighter by the rows, in `model`.
    pub bounds: u32,
    /// Of these, bounds that the relaxation makes tighter than the rows one by one.
    pub bounds_by_relaxation: u32,
    /// The model with the smallest coefficients and bounds that are proved, in MPS; empty where
    /// nothing is tighter, or rows on demand would be lost.
    pub model: String,
    /// The same with the coefficients of the cut-off, which keeps an optimum only; empty where these
    /// are no smaller.
    pub model_by_cutoff: String,
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
    /// With the cut-off.
    pub tightened_by_cutoff: u32,
    /// The largest coefficient as it is written.
    pub largest: f64,
    /// The largest that the data need.
    pub largest_by_data: f64,
    /// The largest that the relaxation needs.
    pub largest_by_relaxation: f64,
    /// The largest that plans at least as good as the cut-off need.
    pub largest_by_cutoff: f64,
    /// The row that gains most, in words: "order[Ash → Birch]: 17 → 16, since …".
    pub example: String,
}

/// One row that a binary switches: the size of its coefficient, and what is needed.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct SwitchRow {
    /// The row.
    pub row: String,
    /// Its family.
    pub family: String,
    /// The column of the binary.
    pub switch: String,
    /// As it is written.
    pub coefficient: f64,
    /// By the data.
    pub by_data: f64,
    /// By the relaxation.
    pub by_relaxation: f64,
    /// With the cut-off.
    pub by_cutoff: f64,
}

/// A row that cuts off a plan though its binary opens it: meant as a switch alone, its coefficient is
/// too small.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct TooSmall {
    /// The row.
    pub row: String,
    /// Its family.
    pub family: String,
    /// What it says.
    pub says: String,
    /// The column of the binary.
    pub switch: String,
    /// The value of the binary that opens it.
    pub open: f64,
    /// What the rest may reach at most there.
    pub allows: f64,
    /// What it reaches in the plan.
    pub reaches: f64,
    /// The size of the coefficient.
    pub coefficient: f64,
    /// The size that admits the plan.
    pub needs: f64,
    /// The plan, every value other than 0: every other row admits it.
    pub plan: Vec<SolutionEntry>,
}
