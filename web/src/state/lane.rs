//! One rival's lane: how far its run is.

use record::message::{Progress, RivalReport};
use record::opinion::Opinion;
use record::results::{ConflictReport, ErrorReport, RootReport, SearchReport};
use report::number::count;

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

/// The memory of a worker, in bytes.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Memory {
    /// What it has taken.
    pub(crate) bytes: u64,
    /// What it can have.
    pub(crate) most: u64,
    /// Whether little is left, so that the search was made to stand still.
    pub(crate) full: bool,
}

/// Memory is told from here on.
const TOLD: u64 = 256 << 20;

impl Memory {
    /// "640 of 4,295 MB"; nothing where it is little.
    pub(crate) fn figure(self) -> Option<String> {
        let megabytes = |bytes: u64| count(bytes / 1_000_000);
        let told = self.bytes >= TOLD;
        told.then(|| format!("{} of {} MB", megabytes(self.bytes), megabytes(self.most)))
    }

    /// What a search that was made to stand still says.
    pub(crate) fn warning(self) -> Option<&'static str> {
        self.full.then_some(
            "Nearly all the memory that a browser gives one search is taken, so it was paused. Save \
             its log, or the scenario; Run goes on until memory ends, and then the tree is lost.",
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
    /// The memory of the worker, once it told.
    pub(crate) memory: Option<Memory>,
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

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn memory_is_told_once_it_is_much_and_warned_of_once_it_is_full() {
        let memory = |bytes, full| Memory { bytes, most: 1 << 32, full };
        assert_eq!(memory(1 << 20, false).figure(), None);
        let figure = memory(640_000_000, false).figure();
        assert_eq!(figure.as_deref(), Some("640 of 4,294 MB"));
        assert!(memory(640_000_000, false).warning().is_none());
        assert!(memory(3_758_096_384, true).warning().is_some());
    }
}
