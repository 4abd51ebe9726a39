//! What studies find: the objects of `hullward run --json` that begin with `"study"`. Field names
//! are fixed; new ones may be added. They are also sent between workers, so no field is left out.

mod cuts;
mod equivalence;
mod families;
mod growth;
mod infeasibility;
mod ladder;
mod numerics;
mod order;
mod production;
mod symmetry;
mod tightening;
mod variability;

use serde::{Deserialize, Serialize, Serializer};

pub use cuts::{ClassGain, CutAdvice, RivalCuts};
pub use equivalence::{
    Counterexample, Equivalence, EquivalenceKind, EquivalenceLevel, Evidence, Mutant,
};
pub use families::{Families, FamilyShare, IntegralityShare, RivalFamilies};
pub use growth::{Cell, Fit, Growth, GrowthPair, SizeMean};
pub use infeasibility::{ConflictRow, Infeasibility, Repair, RivalInfeasibility, Standing};
pub use ladder::{Ladder, RivalLadder, Rung};
pub use numerics::{FamilyNumerics, Numerics, RivalNumerics};
pub use order::{Certificate, MappedColumn, Order, OrderLevel, Relation, RowProof, SystemRow};
pub use production::{Against, Production};
pub use symmetry::{Generator, Interchangeable, RivalSymmetry, Symmetry};
pub use tightening::{FamilyTightening, RivalTightening, SwitchRow, Tightening, TooSmall};
pub use variability::{RivalVariability, Run, Variability, VariabilityPair};

/// What one study found, or one pair of rivals in it.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Report {
    /// The bound ladder of each rival.
    Ladder(Ladder),
    /// Where each rival's bound comes from.
    Families(Families),
    /// Whether two rivals are the same problem.
    Equivalence(Box<Equivalence>),
    /// Which of two rivals has the stronger relaxation.
    Order(Box<Order>),
    /// How much the coefficients of binaries can be tightened, and what that buys.
    Tightening(Tightening),
    /// Coefficients: their range, and how much can leak through them.
    Numerics(Numerics),
    /// What each class of general cuts gains.
    Cuts(CutAdvice),
    /// How rivals compare as instances grow.
    Growth(Box<Growth>),
    /// Rows that cannot hold together, and the cheapest way to relax them.
    Infeasibility(Infeasibility),
    /// What a model does not tell apart.
    Symmetry(Symmetry),
    /// How much a search varies when nothing but the order of rows and columns changes.
    Variability(Box<Variability>),
    /// Results of a production solver in the same statistics.
    Production(Box<Production>),
    /// A study that could not be made, and why.
    Left {
        /// Its kind.
        kind: String,
        /// Why.
        why: String,
    },
}

impl Report {
    /// The kind, as a scenario names it.
    #[must_use]
    pub fn kind(&self) -> &str {
        match self {
            Self::Ladder(_) => "ladder",
            Self::Families(_) => "families",
            Self::Equivalence(_) => "equivalence",
            Self::Order(_) => "order",
            Self::Tightening(_) => "tightening",
            Self::Numerics(_) => "numerics",
            Self::Cuts(_) => "cuts",
            Self::Growth(_) => "growth",
            Self::Infeasibility(_) => "infeasibility",
            Self::Symmetry(_) => "symmetry",
            Self::Variability(_) => "variability",
            Self::Production(_) => "production",
            Self::Left { kind, .. } => kind,
        }
    }

    /// The object with its kind and, where there are several, its instance, as JSON has it.
    #[must_use]
    pub fn line<'a>(&'a self, instance: &'a str) -> Line<'a> {
        Line { report: self, instance }
    }
}

/// A report as `hullward run --json` prints it.
#[derive(Debug, Clone, Copy)]
pub struct Line<'a> {
    report: &'a Report,
    instance: &'a str,
}

impl Serialize for Line<'_> {
    fn serialize<S: Serializer>(&self, serializer: S) -> Result<S::Ok, S::Error> {
        match self.report {
            Report::Ladder(report) => self.named(report, serializer),
            Report::Families(report) => self.named(report, serializer),
            Report::Equivalence(report) => self.named(report.as_ref(), serializer),
            Report::Order(report) => self.named(report.as_ref(), serializer),
            Report::Tightening(report) => self.named(report, serializer),
            Report::Numerics(report) => self.named(report, serializer),
            Report::Cuts(report) => self.named(report, serializer),
            Report::Growth(report) => self.named(report.as_ref(), serializer),
            Report::Infeasibility(report) => self.named(report, serializer),
            Report::Symmetry(report) => self.named(report, serializer),
            Report::Variability(report) => self.named(report.as_ref(), serializer),
            Report::Production(report) => self.named(report.as_ref(), serializer),
            Report::Left { why, .. } => self.named(&LeftOut { left_out: why }, serializer),
        }
    }
}

impl Line<'_> {
    fn named<T: Serialize, S: Serializer>(&self, report: &T, to: S) -> Result<S::Ok, S::Error> {
        Named { study: self.report.kind(), instance: self.instance, report }.serialize(to)
    }
}

#[derive(Serialize)]
struct Named<'a, T> {
    study: &'a str,
    #[serde(skip_serializing_if = "str::is_empty")]
    instance: &'a str,
    #[serde(flatten)]
    report: &'a T,
}

#[derive(Serialize)]
struct LeftOut<'a> {
    left_out: &'a str,
}
