//! The scenario: one TOML text that holds everything a teammate needs to see the same numbers.
//! [`crate::file`] reads and writes it.

use std::collections::BTreeMap;

use serde::{Deserialize, Serialize};

/// At most this many rivals in a scenario: each is a lane with a worker of its own.
pub const MOST_RIVALS: usize = 100;

/// At most this many instances in a scenario.
pub const MOST_INSTANCES: usize = 100;

/// At most this many acts by hand in a rival; each is shown and replayed.
pub const MOST_ACTS: usize = 10_000;

/// A scenario file, version 1.
#[derive(Debug, Clone, PartialEq)]
pub struct Scenario {
    /// The version of this format: 1.
    pub hullward: u32,
    /// A title.
    pub title: String,
    /// Every random choice of the engine derives from it.
    pub seed: u64,
    /// Notes in Markdown.
    pub notes: String,
    /// The version of the engine that gave the results, where there were any.
    pub engine: Option<String>,
    /// The digest of those results ([`crate::results::digest()`]): another machine says "same"
    /// or "differs".
    pub digest: Option<String>,
    /// The instance, or the first of several; a scenario whose rivals are all MPS needs none.
    pub instance: Option<InstanceText>,
    /// The second and later instances; every rival runs on each.
    pub further_instances: Vec<InstanceText>,
    /// The rivals in order: A, B, C…
    pub rivals: Vec<Rival>,
    /// How they are run.
    pub run: Run,
    /// The studies asked for.
    pub studies: Vec<Study>,
}

impl Default for Scenario {
    fn default() -> Self {
        Self {
            hullward: 1,
            title: String::new(),
            seed: 0,
            notes: String::new(),
            engine: None,
            digest: None,
            instance: None,
            further_instances: Vec::new(),
            rivals: Vec::new(),
            run: Run::default(),
            studies: Vec::new(),
        }
    }
}

/// The name of a reader apart from the number of an instance behind it, from 1.
#[must_use]
pub fn reader_and_part(reader: &str) -> (&str, Option<usize>) {
    let split = reader.rsplit_once(' ').and_then(|(name, part)| {
        let part = part.parse().ok().filter(|&part: &usize| part > 0)?;
        Some((name, Some(part)))
    });
    split.unwrap_or((reader, None))
}

impl Scenario {
    /// All instances in order.
    pub fn instances(&self) -> impl Iterator<Item = &InstanceText> {
        self.instance.iter().chain(&self.further_instances)
    }
}

/// The letter of the rival at `index`: A to Z, then AA, AB and so on.
#[must_use]
pub fn letter(index: usize) -> String {
    let mut rest = index;
    let mut letters = Vec::new();
    loop {
        letters.push(char::from(b'A' + u8::try_from(rest % 26).unwrap_or(0)));
        if rest < 26 {
            break;
        }
        rest = rest / 26 - 1;
    }
    letters.iter().rev().collect()
}

/// An instance exactly as pasted.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct InstanceText {
    /// The reader's name, and behind it the number of the instance in a file that holds several
    /// (`assignment 2`); guessed when left out.
    pub reader: Option<String>,
    /// A title of its own.
    pub title: String,
    /// The text.
    pub text: String,
    /// Formulation's name → instance's name, only where names must be mapped.
    pub bind: BTreeMap<String, String>,
}

/// One rival formulation: `from`, `text` or `mps`, exactly one of them.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct Rival {
    /// A title; the formulation's own when empty.
    pub title: String,
    /// A catalogue id, e.g. `atsp/labels`.
    pub from: Option<String>,
    /// Or journal notation.
    pub text: Option<String>,
    /// Or a model in MPS.
    pub mps: Option<String>,
    /// What it is meant for, where that is not a rival for the optimum.
    pub role: Option<Role>,
    /// The state of families that differ from the formulation's default.
    pub families: BTreeMap<String, FamilyState>,
    /// What a person did by hand, replayed in order.
    pub acts: Vec<Act>,
}

/// What a rival is meant for.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum Role {
    /// It is bounded, not compared for its optimum.
    Relaxation,
}

/// What a person did by hand.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Act {
    /// Nodes solved before it.
    pub after: u32,
    /// What was done.
    pub what: ActKind,
    /// The node it was done to.
    pub node: Option<u32>,
    /// What it was done on. A branching: the variable and its indices. A cut: the family, its
    /// outer index tuple where it has one, and the labels of the set. A rule: its name in `[run]`
    /// (`branching`, `selection`, `nodes` or `iterations`) and its value there.
    pub on: Vec<String>,
}

/// The kind of an act.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum ActKind {
    /// Branch on a column at a node that is open, or at the root.
    Branch,
    /// Close the open nodes of a subtree.
    Close,
    /// Add a member of a family over subsets that is on demand.
    Cut,
    /// Stop the search.
    Stop,
    /// Change a rule or a limit from here on.
    Rule,
}

/// Where the rows of a family stand.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub enum FamilyState {
    /// In the model.
    #[serde(rename = "in")]
    In,
    /// Separated.
    #[serde(rename = "on demand")]
    OnDemand,
    /// Left out.
    #[serde(rename = "out")]
    Out,
}

impl FamilyState {
    /// The state as a scenario names it.
    #[must_use]
    pub const fn word(self) -> &'static str {
        match self {
            Self::In => "in",
            Self::OnDemand => "on demand",
            Self::Out => "out",
        }
    }
}

/// How the rivals are run.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Run {
    /// Whether to search; otherwise root bounds only.
    pub search: bool,
    /// Node limit; 0 is none.
    pub nodes: u32,
    /// Simplex iteration limit; 0 is none.
    pub iterations: u64,
    /// Stops, never steers; 0 is none.
    pub seconds: f64,
    /// A value known to be reachable: a cut-off.
    pub best_known: Option<f64>,
    /// The branching rule.
    pub branching: BranchingRule,
    /// The node selection rule.
    pub selection: Selection,
    /// Variables in the order in which they are branched on, before any that is not named.
    pub priority: Vec<String>,
    /// What is done at a node beside its relaxation; `None` is the default: `objective step`.
    pub node_work: Option<Vec<String>>,
    /// General cuts by class, and "on demand"; `None` is the default: families on demand only.
    pub cuts: Option<Vec<String>>,
    /// Below the root: general cuts at nodes whose depth is a multiple of this; 0 is at none.
    pub cut_every: u32,
    /// Rounds of general cuts at such a node at most.
    pub cut_rounds: u32,
    /// What the settings start from; those beside it are what it does not set, or were changed.
    pub preset: Preset,
    /// How good plans are looked for; `None` is the default: `rounding` and `round trip`.
    pub heuristics: Option<Vec<String>>,
    /// A plan to begin with, in the instance's names.
    pub plan: Option<String>,
}

/// The classes of general cuts, as a scenario names them.
pub const CUT_CLASSES: [&str; 11] = [
    "gomory",
    "mir",
    "cover",
    "clique",
    "odd hole",
    "zero-half",
    "flow cover",
    "lot sizing",
    "blossom",
    "odd set",
    "round trip",
];

/// How good plans are looked for, as a scenario names it.
pub const HEURISTICS: [&str; 5] =
    ["rounding", "round trip", "diving", "feasibility pump", "family"];

/// Settings that go together.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum Preset {
    /// Nothing that hides what is compared: no presolve, no cuts, no propagation. Plans come from the
    /// relaxations, their roundings and, for round trips, a textbook heuristic, which close nodes and
    /// move no bound; an empty list of heuristics leaves the relaxations alone.
    #[default]
    Bare,
    /// As a production solver would: everything there is.
    Production,
}

/// The presets as a scenario names them.
pub const PRESETS: [(&str, Preset); 2] =
    [("bare", Preset::Bare), ("production", Preset::Production)];

impl Run {
    /// The settings of a preset.
    #[must_use]
    pub fn of(preset: Preset) -> Self {
        let usual = Self::default();
        let words = |words: &[&str]| Some(words.iter().map(|&word| word.to_owned()).collect());
        match preset {
            Preset::Bare => usual,
            Preset::Production => Self {
                branching: BranchingRule::Reliability,
                selection: Selection::BestEstimate,
                node_work: words(&["propagation", "reduced costs", "objective step"]),
                cuts: words(&CUT_CLASSES),
                cut_every: 4,
                cut_rounds: 1,
                heuristics: words(&HEURISTICS),
                preset,
                ..usual
            },
        }
    }

    /// These settings with those that a preset sets; limits, the cut-off and priorities stay.
    #[must_use]
    pub fn with(&self, preset: Preset) -> Self {
        Self {
            search: self.search,
            nodes: self.nodes,
            iterations: self.iterations,
            seconds: self.seconds,
            best_known: self.best_known,
            priority: self.priority.clone(),
            plan: self.plan.clone(),
            ..Self::of(preset)
        }
    }

    /// Which preset these settings are, in words. Rules for branching and the next node are free in
    /// the bare one.
    #[must_use]
    pub fn mode(&self) -> &'static str {
        let mut like = self.with(self.preset);
        if self.preset == Preset::Bare {
            (like.branching, like.selection) = (self.branching, self.selection);
        }
        match self.preset {
            _ if like != *self => "own settings",
            Preset::Bare => "bare",
            Preset::Production => "as a production solver would",
        }
    }
}

impl Default for Run {
    fn default() -> Self {
        Self {
            search: true,
            nodes: 20_000,
            iterations: 0,
            seconds: 60.0,
            best_known: None,
            branching: BranchingRule::default(),
            selection: Selection::default(),
            priority: Vec::new(),
            node_work: None,
            cuts: None,
            cut_every: 0,
            cut_rounds: 0,
            preset: Preset::Bare,
            heuristics: None,
            plan: None,
        }
    }
}

/// Which column a node is branched on.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum BranchingRule {
    /// The column whose value is nearest to a half.
    #[default]
    MostFractional,
    /// By the gains seen so far (Bénichou et al. 1971).
    Pseudocost,
    /// By solving both sides of each candidate.
    Strong,
    /// Strong until the pseudocosts are reliable (Achterberg, Koch, Martin 2005).
    Reliability,
    /// Chosen by a person at each node.
    ByHand,
}

/// Which open node comes next.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum Selection {
    /// The one with the best bound.
    #[default]
    BestBound,
    /// The one made last.
    DepthFirst,
    /// The one whose best solution is estimated best.
    BestEstimate,
}

/// A study that is asked for: its kind, and its fields as they are written.
#[derive(Debug, Clone, PartialEq)]
pub struct Study {
    /// The kind: "growth", "ladder" and so on.
    pub kind: String,
    /// Every other field.
    pub fields: BTreeMap<String, Field>,
}

/// A value as it is written in the file.
#[derive(Debug, Clone, PartialEq)]
pub enum Field {
    /// A string.
    Text(String),
    /// A whole number.
    Whole(i64),
    /// Another number; finite.
    Number(f64),
    /// True or false.
    Flag(bool),
    /// A list.
    List(Vec<Field>),
    /// A table.
    Table(BTreeMap<String, Field>),
}

#[cfg(test)]
mod tests {
    use super::{BranchingRule, Preset, Run, letter};

    #[test]
    fn settings_say_which_preset_they_are() {
        let bare = Run { branching: BranchingRule::Strong, nodes: 5, ..Run::default() };
        assert_eq!(bare.mode(), "bare");
        let full = bare.with(Preset::Production);
        assert_eq!((full.nodes, full.mode()), (5, "as a production solver would"));
        assert_eq!(Run { cut_every: 9, ..full }.mode(), "own settings");
        assert_eq!(Run { cuts: Some(vec!["mir".to_owned()]), ..bare }.mode(), "own settings");
    }

    #[test]
    fn letters_go_on_after_z() {
        let letters: Vec<String> = [0, 1, 25, 26, 27, 51, 52, 701, 702].map(letter).to_vec();
        assert_eq!(letters, ["A", "B", "Z", "AA", "AB", "AZ", "BA", "ZZ", "AAA"]);
    }
}
