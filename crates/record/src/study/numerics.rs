//! The range of coefficients, and how much can leak through them.

use serde::{Deserialize, Serialize};

/// All rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Numerics {
    /// The rivals in order.
    pub rivals: Vec<RivalNumerics>,
}

/// One rival.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalNumerics {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// Smallest and largest absolute coefficient of rows.
    pub matrix: (f64, f64),
    /// Of the objective.
    pub costs: (f64, f64),
    /// Of the sides of rows.
    pub sides: (f64, f64),
    /// The largest ratio of two coefficients in a row, and the row.
    pub row_ratio: (f64, String),
    /// In a column, and the column.
    pub column_ratio: (f64, String),
    /// Its families.
    pub families: Vec<FamilyNumerics>,
    /// The largest amount by which a binary that is 10⁻⁶ off opens a row, and the row.
    pub leak: (f64, String),
    /// The same added up over all rows that a binary switches.
    pub leak_in_all: f64,
    /// An estimate (from below) of the condition of the basis at the optimum of the relaxation, in
    /// scaled units.
    pub condition: Option<f64>,
    /// The bound of the relaxation in floating-point arithmetic.
    pub bound: Option<f64>,
    /// By how much what exact arithmetic proves is away from it; `None` where it proves nothing.
    pub bound_off: Option<f64>,
    /// Whether exact arithmetic found the optimum of the relaxation itself.
    pub exact: bool,
    /// The largest violation, in exact arithmetic, of the best plan with its whole values rounded;
    /// `None` where no plan was found.
    pub plan_off: Option<f64>,
    /// What is to be said of it, by named thresholds; empty where nothing is.
    pub verdicts: Vec<String>,
}

/// One family.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct FamilyNumerics {
    /// Its name.
    pub name: String,
    /// Smallest and largest absolute coefficient.
    pub range: (f64, f64),
    /// The largest ratio of two coefficients in a row.
    pub row_ratio: f64,
}
