//! The cut adviser: what each class of general cuts gains, and the fewest that gain most of it.

use serde::{Deserialize, Serialize};

/// All rivals on an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct CutAdvice {
    /// The rivals in order.
    pub rivals: Vec<RivalCuts>,
}

/// One rival.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct RivalCuts {
    /// Its letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// The bound of its relaxation.
    pub bound: Option<f64>,
    /// The bound with every class.
    pub with_all: Option<f64>,
    /// Each class alone, those that find nothing not included.
    pub classes: Vec<ClassGain>,
    /// Classes that find nothing.
    pub idle: Vec<String>,
    /// Classes chosen one after the other, each the one that gains most beside those before it, until
    /// 90 % of what all gain is reached; with the bound after each.
    pub chosen: Vec<(String, f64)>,
    /// The cuts of the chosen classes that are in the relaxation at the end.
    pub rows: u32,
    /// The model with these as rows of their own, in MPS; empty where there are none, or rows on demand
    /// would be lost.
    pub model: String,
}

/// What a class gains alone.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct ClassGain {
    /// The class, as a scenario's `cuts` names it.
    pub class: String,
    /// The bound with it.
    pub bound: Option<f64>,
    /// The bound gained, 0 or more.
    pub gained: Option<f64>,
    /// Cuts added.
    pub added: u32,
    /// Non-zeros touched.
    pub work: u64,
    /// Cuts that are in the relaxation at the end: those that are slack are taken out again.
    pub kept: u32,
    /// The mean share of the columns that such a cut has an entry in, 0 to 1.
    pub density: Option<f64>,
    /// Whether its cuts are rather written up front than separated on demand.
    pub up_front: bool,
    /// Why, in a clause.
    pub why: String,
    /// How its cuts are found, in words.
    pub separation: String,
}
