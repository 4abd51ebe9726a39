//! Where a bound comes from: what each family is worth, by solving anew without it.

use serde::{Deserialize, Serialize};

/// The families of all rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Families {
    /// The rivals in order.
    pub rivals: Vec<RivalFamilies>,
}

/// What each family of a rival is worth.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalFamilies {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// The bound with every family.
    pub bound: Option<f64>,
    /// The bound with none: domains alone; `None` where it is unbounded.
    pub bare: Option<f64>,
    /// Its families in order, those left out not included.
    pub families: Vec<FamilyShare>,
    /// Its variables that must be whole, each with what that is worth.
    pub integrality: Vec<IntegralityShare>,
    /// Relaxations solved.
    pub solved: u32,
    /// Why there is no Shapley value, where there is none.
    pub no_shapley: String,
}

/// What one family is worth.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct FamilyShare {
    /// Its name.
    pub name: String,
    /// The bound without it; `None` where it is unbounded.
    pub without: Option<f64>,
    /// The bound lost without it (leave one out), 0 or more; `None` where the bound is lost
    /// altogether.
    pub lost: Option<f64>,
    /// The bound with it alone.
    pub alone: Option<f64>,
    /// The bound gained by it alone over none (add one in).
    pub gained: Option<f64>,
    /// Its Shapley value: the mean gain over every order of adding the families.
    pub shapley: Option<f64>,
    /// The dual share, Σ y·side over its rows, from the least to the most over all optimal
    /// multipliers, `None` where that has no end; nothing where rows on demand belong to it. It is no
    /// measure of what the family is worth: 0 wherever all its sides are 0.
    pub dual: Option<(Option<f64>, Option<f64>)>,
}

/// What it is worth that a variable must be whole.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct IntegralityShare {
    /// The variable.
    pub variable: String,
    /// Its whole columns.
    pub columns: u32,
    /// The optimum when they may be fractional and the others not.
    pub optimum: Option<f64>,
    /// Whether the optimum stays as it is, on this instance; `None` where a limit left it open.
    pub free: Option<bool>,
}
