//! One rival's lane: how far its run is.

use record::message::{Progress, RivalReport};
use record::opinion::Opinion;
use record::results::{ConflictReport, ErrorReport, RootReport, SearchReport};

use crate::state::pointer::Shared;
use crate::state::tree::Tally;

/// The name of a lane, unchanged while rivals come and go.
#[derive(Debug, Clone, Copy, PartialEq, Eq, PartialOrd, Ord)]
pub(crate) struct LaneId(pub(crate) u32);

/// How far a run is.
#[derive(Debug, Clone, Copy, Default, PartialEq, Eq)]
pub(crate) enum Phase {
    /// No instance yet.
    #[default]
    Idle,
    /// The rival is read and its relaxation solved.
    Loading,
    /// The root is solved; the search has not begun.
    Ready,
    /// The search runs.
    Running,
    /// A pause was asked for.
    Pausing,
    /// The search stands still.
    Paused,
    /// The search found no plan; its worker looks for the families that cannot hold together.
    Explaining,
    /// A stop was asked for.
    Stopping,
    /// The run has ended.
    Done,
    /// The run could not be carried out.
    Failed,
}

impl Phase {
    /// Whether a worker is at it.
    pub(crate) fn is_busy(self) -> bool {
        matches!(
            self,
            Self::Loading | Self::Running | Self::Pausing | Self::Explaining | Self::Stopping
        )
    }

    /// Whether the search can go on from here.
    pub(crate) fn can_go_on(self) -> bool {
        matches!(self, Self::Ready | Self::Paused)
    }

    /// Whether there is something to stop.
    pub(crate) fn can_stop(self) -> bool {
        matches!(
            self,
            Self::Loading | Self::Running | Self::Pausing | Self::Explaining | Self::Paused
        )
    }
}

/// A lane.
#[derive(Debug, Clone, Default)]
pub(crate) struct Lane {
    /// How far it is.
    pub(crate) phase: Phase,
    /// What was understood of the rival.
    pub(crate) rival: Option<Shared<RivalReport>>,
    /// The root.
    pub(crate) root: Option<Shared<RootReport>>,
    /// What a second LP code says of the root.
    pub(crate) second: Option<Shared<Opinion>>,
    /// The search, once it paused or ended.
    pub(crate) search: Option<Shared<SearchReport>>,
    /// Families that cannot hold together, where there is no plan.
    pub(crate) conflict: Option<Shared<ConflictReport>>,
    /// Counts of the tree.
    pub(crate) tally: Tally,
    /// What the worker is doing.
    pub(crate) progress: Option<Progress>,
    /// Why there is no result.
    pub(crate) error: Option<Shared<ErrorReport>>,
    /// What happened to the worker, as a sentence; empty when nothing did.
    pub(crate) notice: String,
    /// Whether the ended search is being proved once more.
    pub(crate) proving: bool,
    /// That the ended search was proved once more, as a sentence; empty when it was not.
    pub(crate) proved: String,
}

impl Lane {
    /// The bound of the relaxation.
    pub(crate) fn root_bound(&self) -> Option<f64> {
        self.root.as_ref().and_then(|root| root.bound)
    }

    /// The bound of the whole tree so far.
    pub(crate) fn bound(&self) -> Option<f64> {
        let reported = self.search.as_ref().and_then(|search| search.bound);
        let told = if self.phase.is_busy() { None } else { reported };
        told.or(self.tally.bound).or(self.root_bound())
    }

    /// The value of the best solution so far.
    pub(crate) fn incumbent(&self) -> Option<f64> {
        self.tally.incumbent.or(self.search.as_ref().and_then(|search| search.incumbent))
    }

    /// Nodes solved so far.
    pub(crate) fn nodes(&self) -> u32 {
        let reported = self.search.as_ref().map_or(0, |search| search.nodes);
        reported.max(self.tally.solved)
    }

    /// Whether larger is better; `false` until the rival is understood.
    pub(crate) fn maximise(&self) -> bool {
        self.rival.as_ref().is_some_and(|rival| rival.maximise)
    }
}
