//! Messages between the page and its workers, sent as postcard. Not promised between versions:
//! page and worker are one file.

use serde::{Deserialize, Serialize};

use crate::event::{Branching, Event, NodeNumber, NodeState};
use crate::ground::Evidence;
use crate::handover::{Form, Stated, Written};
use crate::results::{
    AuditReport, ConflictReport, ErrorReport, FamilyReport, Proof, RootReport, SearchReport,
};
use crate::scenario::{Act, FamilyState, InstanceText, Rival, Run};
use crate::study::Report;
use crate::typeset::Typeset;

mod drawing;
mod jobs;
mod listing;

pub use drawing::{Arc, Cycle, Drawing, Part, Picture, Strip, Vertex};
pub use jobs::{LogJob, StudyJob};
pub use listing::CatalogueEntry;

/// The number of a run of a lane: replies of an older run are dropped by the page.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, PartialOrd, Ord, Serialize, Deserialize)]
pub struct RunNumber(pub u32);

/// Page to worker.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Request {
    /// Solve a small model, so that the module is compiled before the first real one.
    Warm,
    /// Read an instance and say what was understood. Answered by [`Reply::InstanceRead`].
    Read(InstanceText),
    /// List the catalogue. Answered by [`Reply::Catalogue`].
    List,
    /// Give the help on the notation. Answered by [`Reply::Guide`].
    Guide,
    /// Check a formulation while it is typed. Answered by [`Reply::Checked`].
    Check(Box<CheckJob>),
    /// Tell what the code of a complaint means. Answered by [`Reply::Explained`].
    Explain(String),
    /// Hand a rival over to others, all at once. Answered by [`Reply::Written`].
    Write(Form, Box<LaneJob>),
    /// Say what a decision record repeats of a scenario, given as text. Answered by
    /// [`Reply::Stated`].
    State(String),
    /// Strip a scenario, given as text, of its names and multiply its costs by a factor. Answered by
    /// [`Reply::Written`].
    Strip {
        /// The scenario.
        scenario: String,
        /// A decimal number over 0.
        factor: String,
    },
    /// Say which data each rival takes from an instance. Answered by [`Reply::Bound`].
    Bind(Box<BindJob>),
    /// Make a study of all rivals. Answered by [`Reply::Progress`] and [`Reply::Studied`].
    Study(Box<StudyJob>),
    /// Load a rival and solve its root. Answered by [`Reply::Understood`] and [`Reply::Root`].
    Load(Box<LaneJob>),
    /// Search on: to the end, or for a number of nodes. Answered by [`Reply::Batch`]es.
    Run {
        /// Pause after this many further nodes.
        nodes: Option<u32>,
    },
    /// Search on until a plan is found that is better than all before, or to the end.
    RunToPlan,
    /// Stand still after the slice in hand. Answered by [`Reply::Paused`].
    Pause,
    /// Give up the run. Answered by [`Reply::Done`].
    Stop,
    /// Show a node. Answered by [`Reply::Node`].
    Inspect(NodeNumber),
    /// Hand over the relaxation that the root's bound comes from. Answered by
    /// [`Reply::Relaxation`].
    Relaxation,
    /// Steer the search by hand, as soon as no node is in hand; what the act says of nodes
    /// solved before it is not looked at. Answered by [`Reply::Acted`], and by
    /// [`Reply::Paused`] or [`Reply::Done`] where the search stood still.
    Act(Act),
    /// Hand over what the search found on the way. Answered by [`Reply::Evidence`].
    Evidence,
    /// Hand over the log of a search that stands still or has ended, with what it rests on. Answered
    /// by [`Reply::Log`].
    Log(Box<LogJob>),
    /// Prove a search that has ended again, from its branchings. Answered by [`Reply::Progress`]
    /// and [`Reply::Audited`].
    Audit,
    /// Prove a saved log, given as the bytes of its file, in place of what the worker holds. Answered
    /// by [`Reply::Progress`] and [`Reply::Audited`]; [`Request::Stop`] ends it with what it found.
    Prove(Vec<u8>),
}

/// A rival to load.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct LaneJob {
    /// The run that replies carry.
    pub run: RunNumber,
    /// The instance.
    pub instance: Option<InstanceText>,
    /// The rival.
    pub rival: Rival,
    /// Limits and rules.
    pub settings: Run,
    /// The scenario's seed.
    pub seed: u64,
}

/// Rivals whose data are to be found in an instance.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct BindJob {
    /// The instance, with the names that a person gave.
    pub instance: InstanceText,
    /// The rivals in order.
    pub rivals: Vec<Rival>,
}

/// What the rivals take from the instance under one name of theirs.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Binding {
    /// The rivals' name.
    pub name: String,
    /// What the first of them says of it; may be empty.
    pub meaning: String,
    /// The instance's name; none where nothing was found.
    pub taken: Option<String>,
    /// How it was found.
    pub found: FoundBy,
    /// Why it was taken, where it was assumed: "the only table that fits".
    pub reason: String,
    /// What is wrong, with its place: "line 4 of A: …"; empty where it is well.
    pub problem: String,
    /// What the instance holds, what fits first.
    pub offers: Vec<BindingOffer>,
}

/// A family of the catalogue whose data an instance holds.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Suit {
    /// The family in words.
    pub family: String,
    /// The one datum that is missing, by its name and what it is; empty where none is.
    pub lacks: String,
}

/// How a datum was found.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq, Serialize, Deserialize)]
pub enum FoundBy {
    /// By its own name.
    #[default]
    Name,
    /// Under the name that a person gave.
    Person,
    /// By its shape, labels and wording.
    Shape,
    /// Not at all.
    Nothing,
}

/// A datum of the instance.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct BindingOffer {
    /// Its name.
    pub name: String,
    /// What it is: "a table".
    pub what: String,
    /// Whether it fits every rival that takes it.
    pub fits: bool,
}

/// A formulation to check.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct CheckJob {
    /// The number that the reply carries, by which the page knows late ones.
    pub number: u32,
    /// Journal notation.
    pub text: String,
    /// The instance it is meant for, if there is one.
    pub instance: Option<InstanceText>,
}

/// Worker to page: the run it belongs to and its place in the stream.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Envelope {
    /// The run.
    pub run: RunNumber,
    /// Counts up from 0 in each worker.
    pub sequence: u64,
    /// The reply.
    pub reply: Reply,
}

/// What a worker says.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub enum Reply {
    /// Warm: ready for work.
    Ready {
        /// The engine's version.
        engine: String,
    },
    /// What was understood of an instance.
    InstanceRead(Box<InstanceReport>),
    /// The shipped formulations.
    Catalogue(Vec<CatalogueEntry>),
    /// The help on the notation, in the order in which it is read.
    Guide(Vec<GuideSection>),
    /// What is to be said of a formulation as it is typed.
    Checked(Box<CheckReport>),
    /// What a code means.
    Explained(Explanation),
    /// A rival handed over.
    Written(Box<Written>),
    /// What a decision record repeats of its scenario.
    Stated(Box<Stated>),
    /// Which data the rivals take from the instance, by their names; and where none of them finds all of
    /// its own, the families of the catalogue that do.
    Bound(Vec<Binding>, Vec<Suit>),
    /// What a study found.
    Studied(Vec<Report>),
    /// A rival was parsed, checked and expanded.
    Understood(Box<RivalReport>),
    /// Long work on one thing goes on.
    Progress(Progress),
    /// The worker's memory has grown.
    Memory {
        /// Bytes that it has taken.
        bytes: u64,
        /// Bytes that it can have.
        most: u64,
        /// Whether little is left, so that a search stands still.
        full: bool,
    },
    /// The root is solved.
    Root(Box<RootReport>),
    /// Events of the search since the last batch.
    Batch(Vec<Event>),
    /// The search stands still and can go on.
    Paused(Box<SearchReport>),
    /// The search has ended. Where it found no plan though the relaxation has a point,
    /// [`Reply::Conflict`] follows.
    Done(Box<SearchReport>),
    /// Families that cannot hold together.
    Conflict(ConflictReport),
    /// A node in full.
    Node(Box<NodeDetail>),
    /// The root's relaxation as the bytes of [`crate::wire`], or why it is not handed over, as a
    /// clause.
    Relaxation(Result<Vec<u8>, String>),
    /// What became of an act by hand.
    Acted(Box<Acted>),
    /// What the search found on the way.
    Evidence(Box<Evidence>),
    /// The log as the bytes of its file, or why there is none, as a clause.
    Log(Result<Vec<u8>, String>),
    /// What came of proving the search again.
    Audited(Box<AuditReport>),
    /// The request could not be carried out.
    Failed(ErrorReport),
}

/// What became of an act by hand: one that was asked for, or one that the scenario holds.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Acted {
    /// The act, with the nodes solved before it took effect: what a scenario needs to replay it.
    pub act: Act,
    /// Whether the scenario holds it already.
    pub replayed: bool,
    /// Why it was refused and changed nothing, as a clause.
    pub refused: Option<String>,
}

/// How far long work is.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Progress {
    /// What is being done, as a clause: "solving the relaxation".
    pub doing: String,
    /// Work done so far, in non-zeros touched.
    pub ticks: u64,
    /// Simplex iterations so far.
    pub iterations: u64,
}

/// What was understood of an instance, and what was not.
#[derive(Debug, Clone, Default, PartialEq, Serialize, Deserialize)]
pub struct InstanceReport {
    /// The reader that read it.
    pub reader: String,
    /// The title found in the text, if any.
    pub title: String,
    /// Whether an instance came out of it.
    pub usable: bool,
    /// What was understood, one sentence each.
    pub facts: Vec<String>,
    /// What was not, by line.
    pub complaints: Vec<Complaint>,
    /// The stops, for the map.
    pub stops: Vec<Stop>,
    /// Whether the places are computed from the distances instead of given.
    pub places_computed: bool,
    /// The distance matrix by rows, for the value grid; `None` where there is no drive.
    pub matrix: Vec<Option<f64>>,
    /// The unit of the values, where it is known ("minutes").
    pub unit: String,
    /// A word for each instance of a file that holds several.
    pub parts: Vec<String>,
    /// Sums and ranges, or of a model sizes and coefficients, one sentence each.
    pub statistics: Vec<String>,
}

/// A stop on the map.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Stop {
    /// Its label.
    pub label: String,
    /// Place across, growing to the right.
    pub x: f64,
    /// Place along, growing upwards.
    pub y: f64,
    /// What the instance marks it as, such as "start"; mostly empty.
    pub mark: String,
}

/// The code of a complaint that only tells what was assumed begins with this.
pub const NOTE: &str = "note.";

impl Complaint {
    /// Whether it only tells what was assumed.
    #[must_use]
    pub fn is_note(&self) -> bool {
        self.code.starts_with(NOTE)
    }
}

/// A complaint about a text: what is wrong, where, and how to mend it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Complaint {
    /// Whether it is an error (`true`) or a warning.
    pub error: bool,
    /// A stable code.
    pub code: String,
    /// The line, from 1.
    pub line: u32,
    /// The column in characters, from 1.
    pub column: u32,
    /// First UTF-16 unit of the place in the text.
    pub start: u32,
    /// One past its last UTF-16 unit.
    pub end: u32,
    /// What is wrong.
    pub message: String,
    /// How to mend it; may be empty.
    pub mend: String,
}

/// What the code of a complaint about a formulation means.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct Explanation {
    /// The code, as a complaint carries it.
    pub code: String,
    /// What it means and what to do; empty where there is no such code.
    pub meaning: String,
    /// An example: lines of a text, those marked `-` only as it fails, those marked `+` only as it
    /// is mended. May be empty.
    pub example: String,
}

/// What is to be said of a formulation as it is typed.
#[derive(Debug, Clone, Default, PartialEq, Eq, Serialize, Deserialize)]
pub struct CheckReport {
    /// The number of the job.
    pub number: u32,
    /// What is wrong, warned of and assumed, by place.
    pub remarks: Vec<Remark>,
    /// The title that the text gives itself; may be empty.
    pub title: String,
    /// The names of its data and definitions, in order.
    pub data: Vec<String>,
    /// The names of its variables, in order.
    pub variables: Vec<String>,
    /// The names of its constraint families, in order.
    pub families: Vec<String>,
    /// How large it is on the instance, where that is quickly known.
    pub size: Option<CheckedSize>,
    /// The formulation set as mathematics, as far as it can be read.
    pub typeset: Typeset,
}

impl CheckReport {
    /// The names in scope: data, definitions and variables.
    #[must_use]
    pub fn names(&self) -> Vec<String> {
        [&self.data[..], &self.variables].concat()
    }

    /// Whether nothing known stands in the way of a model.
    #[must_use]
    pub fn is_sound(&self) -> bool {
        !self.remarks.iter().any(|remark| remark.complaint.error)
    }
}

/// A section of the help on the notation.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct GuideSection {
    /// What it is about.
    pub title: String,
    /// What is to be known; code stands between grave accents.
    pub words: String,
    /// A whole formulation that shows it.
    pub example: String,
}

/// A complaint with the changes that would mend it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct Remark {
    /// The complaint; its mend tells what none of the changes makes.
    pub complaint: Complaint,
    /// Changes of the text, the likeliest first.
    pub mends: Vec<TextEdit>,
}

/// A change of a text.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct TextEdit {
    /// What it does, as on a button.
    pub label: String,
    /// First UTF-16 unit to replace.
    pub start: u32,
    /// One past the last.
    pub end: u32,
    /// What to put there.
    pub text: String,
}

/// The size of a formulation on an instance, with families over subsets left to separation.
#[derive(Debug, Clone, Copy, PartialEq, Eq, Serialize, Deserialize)]
pub struct CheckedSize {
    /// Rows.
    pub rows: u32,
    /// Columns.
    pub columns: u32,
    /// Entries.
    pub nonzeros: u64,
}

/// What a rival is once it is expanded.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct RivalReport {
    /// Its title.
    pub title: String,
    /// Whether larger is better.
    pub maximise: bool,
    /// Rows in the relaxation.
    pub rows: u32,
    /// Columns.
    pub columns: u32,
    /// Columns that must be whole.
    pub integer_columns: u32,
    /// Entries.
    pub nonzeros: u64,
    /// Its families.
    pub families: Vec<FamilyReport>,
    /// Names of the columns in order, shown as `x[Ash → Birch]`.
    pub column_names: Vec<String>,
    /// Sizes, ranges of coefficients, what is repeated or empty: one sentence each.
    pub statistics: Vec<String>,
    /// Warnings of notation.
    pub complaints: Vec<Complaint>,
}

/// A node in full.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct NodeDetail {
    /// Its number.
    pub node: NodeNumber,
    /// How it stands.
    pub state: NodeState,
    /// Its depth; the root's is 0.
    pub depth: u32,
    /// Its own bound.
    pub bound: Option<f64>,
    /// The bound as an exact fraction, when it was checked in exact arithmetic.
    pub checked_bound: Option<String>,
    /// Whether what was proved is the optimum of its relaxation itself.
    pub proof: Proof,
    /// By how much the proved bound differs from `bound`, where it is not known to be the optimum.
    pub checked_within: Option<f64>,
    /// The branchings from the root to it.
    pub path: Vec<Branching>,
    /// Every column with a value other than 0, or that is fractional.
    pub values: Vec<ColumnValue>,
    /// Ways to draw the solution, the one that suits best first.
    pub drawings: Vec<Drawing>,
    /// The cycle that proves it infeasible or unbounded, where the proof walks one.
    pub cycle: Option<Cycle>,
    /// What each family does in the relaxation, in the order of the model.
    pub families: Vec<FamilyAtNode>,
    /// Members of families over subsets that the solution violates, with their sets.
    pub violated: Vec<ViolatedSubset>,
    /// Rows of the ray of an infeasible node, named, with multipliers.
    pub ray: Vec<(String, f64)>,
    /// Whether the search has not solved it yet: values, bound and sets are of its relaxation with
    /// the rows known now.
    pub ahead: bool,
    /// Why it is not branched on by hand, as a clause.
    pub branching: Option<String>,
    /// Why its subtree is not closed by hand, as a clause.
    pub closing: Option<String>,
}

/// A constraint family at a node.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct FamilyAtNode {
    /// Its name; "general cuts" for rows of no family.
    pub family: String,
    /// Its rows in the relaxation.
    pub rows: u32,
    /// Rows that hold the vertex.
    pub held: u32,
    /// Rows whose dual is not 0.
    pub priced: u32,
    /// The greatest dual in size, in units of the objective for a unit of the right-hand side.
    pub greatest: f64,
}

/// The value of a column at a node.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct ColumnValue {
    /// The column.
    pub column: u32,
    /// Its value.
    pub value: f64,
    /// Its reduced cost.
    pub reduced_cost: f64,
    /// Its cost in the objective.
    pub cost: f64,
    /// Whether it must be whole and is not.
    pub fractional: bool,
    /// How far the bound is expected to move below and above it, where branchings were seen.
    pub gains: Option<(f64, f64)>,
    /// The variable and its indices, as an act by hand names them; empty where this column is not
    /// branched on by hand at this node.
    pub on: Vec<String>,
}

/// A violated member of a family over subsets.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct ViolatedSubset {
    /// The family.
    pub family: String,
    /// The labels of the family's outer index tuple; mostly empty.
    pub tuple: Vec<String>,
    /// The labels of the set.
    pub subset: Vec<String>,
    /// By how much the row is violated.
    pub violation: f64,
}

/// A change of a family's state, as the page's toggles make it.
#[derive(Debug, Clone, PartialEq, Eq, Serialize, Deserialize)]
pub struct FamilyChoice {
    /// The family.
    pub family: String,
    /// Its new state.
    pub state: FamilyState,
}
