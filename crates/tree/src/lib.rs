//! Branch and cut, one slice at a time.
//!
//! A [`Search`] takes an exact model and finds its best solution by branch and bound (Land, Doig
//! 1960) over its LP relaxation, with the families on demand separated at every node. It holds no
//! clock and calls nothing back: [`Search::advance`] does about so much work and says how far it
//! came, down to inside one LP; what happened is read with [`Search::take_events`]. The events are
//! the same for every slicing.
//!
//! ```
//! use std::rc::Rc;
//! use model::{ColumnSpec, ModelBuilder, Number, Row, Sense};
//! use hullward_tree::{Progress, Search, Settings, Status};
//!
//! // max 3x + 2y, 2x + 2y ≤ 3, both 0 or 1
//! let mut builder = ModelBuilder::new("two things", Sense::Maximise);
//! let spec = |cost: i32| ColumnSpec {
//!     lower: Some(Number::ZERO), upper: Some(Number::ONE), cost: Number::from(cost), integer: true,
//! };
//! let x = builder.column(&[], &spec(3))?;
//! let y = builder.column(&[], &spec(2))?;
//! let two = Number::from(2);
//! builder.row(&[], Row { entries: vec![(x, two.clone()), (y, two)], lower: None, upper: Some(Number::from(3)) })?;
//!
//! let mut search = Search::new(Rc::new(builder.build()), Settings::default());
//! while search.advance(1_000) != Progress::RootSolved {}
//! assert_eq!(search.root().and_then(|root| root.bound), Some(4.0));
//! search.run(None);
//! while search.advance(1_000) != Progress::Finished {}
//! let summary = search.summary();
//! assert_eq!((summary.status, summary.incumbent, summary.checked), (Status::Optimal, Some(3.0), true));
//! # Ok::<(), model::ModelError>(())
//! ```
//!
//! | item | use it for |
//! |---|---|
//! | [`Settings`] | rules and limits |
//! | [`Search`] | running: `advance`, `run`, `run_to_a_plan`, `pause`, `stop`; steering: `act`, `replay` |
//! | [`Making`] | a search of a large model made in slices |
//! | [`Act`], [`Acted`], [`Refusal`] | branching, closing, cutting and stopping by hand |
//! | [`Rule`] | rules and limits changed during a run |
//! | [`Heuristics`], [`Suggestion`] | how plans are looked for; values from which one may be made |
//! | [`RootResult`], [`Summary`] | what came out |
//! | [`Measures`], [`Estimate`], [`Diagnosis`] | how the tree grew, how large it will be, what it suffers from |
//! | [`Event`] | what happened, in order |
//! | [`Search::inspect`] | one node in full |
//! | [`Audit`] | a finished search proved again from what its log says |
//! | [`Conflict`] | which families of an infeasible model cannot hold together |
//!
//! **Bounds are true.** Every node's LP is solved to its end, also where its bound passes the
//! incumbent on the way: each node of the log stands at the bound of its relaxation. A node starts from its
//! parent's final basis with all rows found so far, and from nothing else.
//!
//! **Node work** is off unless [`NodeWork`] asks for it: bounds tightened by rows or by reduced
//! costs are each checked in exact arithmetic before they are used, so that no proof rests on them
//! unchecked.
//!
//! **General cuts** are added where [`Cuts`] asks for them: at the root, in rounds, after its relaxation
//! is reported as it is meant, and at nodes below it, from the bounds of the root alone, so that every
//! cut holds in the whole tree. Each is derived in exact arithmetic from the exact rows, and its
//! derivation is checked before it is used; a solution that breaks one ends the search with an error.
//!
//! **What is trusted.** A node is closed by floating-point arithmetic with the tolerances that
//! each file names; each leaf is then checked in exact arithmetic and counted as checked or not.
//! An LP point is a solution only after an exact check of every row and family. A node that
//! cannot be solved, and one that a person closed, keeps its bound, and the search then does not
//! claim an optimum unless that bound is no better than the incumbent.

mod acts;
mod allowed;
mod audit;
mod branching;
mod conflict;
mod course;
mod cut_round;
mod cutting;
mod cycle;
mod decide;
mod diagnosis;
mod direction;
mod dive;
mod event;
mod family_view;
mod fix;
mod heuristics;
mod hold;
mod inspect;
mod ledger;
mod making;
mod measures;
mod node;
mod open;
mod pool;
mod probe;
mod proofs;
mod propagate;
mod propose;
mod proving;
mod relaxation;
mod root;
mod round_trip;
mod rounds;
mod rules;
mod search;
mod settings;
mod solution;
mod summary;
mod symmetry;
mod target;
mod tightened;
mod tour;
mod work;

pub use acts::{Act, Acted, Refusal};
pub use audit::{Audit, AuditResult, Claim, Fault, Judgement, LoggedRow, Source, Testimony};
pub use conflict::{Certainty, Conflict, ConflictLimits, ConflictResult};
pub use course::Found;
pub use cutting::{ByClass, CutsResult};
pub use cycle::Cycle;
pub use diagnosis::Diagnosis;
pub use event::{Branch, Event, NodeId, NodeState, Origin, Side};
pub use family_view::FamilyView;
pub use heuristics::{GivenPlan, Heuristics, SuggestedBy, Suggestion};
pub use inspect::{NodeView, ViolatedSubset};
pub use making::Making;
pub use measures::{Estimate, Gains, Leaves, Measures};
pub use proving::standings;
pub use root::{RootResult, Status};
pub use rules::Rule;
pub use search::{Progress, Search, Work};
pub use separate::general::{Class, Classes, Derivation, GeneralCut};
pub use settings::{Branching, Cuts, NodeWork, Selection, Settings};
pub use summary::{NodeWorkCounts, Summary};
pub use symmetry::{exchanged, index_sets, is_symmetry};

#[cfg(test)]
mod tests;
