//! The lanes and what is selected among their nodes.

use std::collections::BTreeMap;
use std::rc::Rc;

use record::event::NodeNumber;
use record::message::{LaneJob, NodeDetail, Progress, RivalReport};
use record::opinion::Opinion;
use record::results::{ConflictReport, ErrorReport, RootReport, SearchReport, Status};
use yew::Reducible;

use crate::state::lane::{Lane, LaneId, Memory, Phase};
use crate::state::outcomes::{Kept, Outcome};
use crate::state::pointer::Shared;
use crate::state::tree::Tally;

/// A node of a lane.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) struct Selection {
    /// The lane.
    pub(crate) lane: LaneId,
    /// The node.
    pub(crate) node: NodeNumber,
}

/// How far beyond the best value the axis goes at most, as a share of the way to it.
const BEYOND: f64 = 0.15;

/// All lanes.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Board {
    /// By id.
    pub(crate) lanes: BTreeMap<LaneId, Shared<Lane>>,
    /// The node the inspector shows.
    pub(crate) selection: Option<Selection>,
    /// Whether a person chose it.
    chosen: bool,
    /// The selected node in full, once its worker has answered.
    pub(crate) detail: Option<Shared<NodeDetail>>,
    /// Results on instances that are not chosen.
    pub(crate) kept: Shared<Vec<Kept>>,
    /// Whether instances that are not chosen are being run.
    pub(crate) elsewhere: bool,
}

/// What happens to lanes.
#[derive(Debug)]
pub(crate) enum BoardAction {
    /// Something happens in a lane.
    Lane(LaneId, LaneAction),
    /// A lane is gone.
    Removed(LaneId),
    /// A person selects a node.
    Select(Selection),
    /// A node in full.
    Detail(LaneId, NodeDetail),
    /// A lane leaves its instance: what it found there is kept.
    Leave(LaneId, Box<LaneJob>),
    /// A result on an instance that is not chosen.
    Keep(Box<Kept>),
    /// Running instances that are not chosen begins or ends.
    Elsewhere(bool),
}

/// What happens in a lane.
#[derive(Debug)]
pub(crate) enum LaneAction {
    /// A run begins.
    Load,
    /// The rival was understood.
    Understood(RivalReport),
    /// Long work goes on.
    Progress(Progress),
    /// The memory of the worker has grown.
    Memory(Memory),
    /// The root is solved.
    Root(RootReport),
    /// What a second LP code says of the root.
    Second(Opinion),
    /// The tree has grown.
    Grown(Tally),
    /// The phase is another, because it was asked for.
    Asked(Phase),
    /// The search stands still.
    Paused(SearchReport, Tally),
    /// The search has ended.
    Done(SearchReport, Tally),
    /// Families that cannot hold together.
    Conflict(ConflictReport),
    /// It could not be carried out.
    Failed(ErrorReport),
    /// Something happened to the worker.
    Notice(String),
    /// The ended search is being proved once more.
    Proving,
    /// The ended search was proved once more.
    Proved(String),
    /// That did not come to its end, or something is wrong.
    Unproved(String),
}

impl Reducible for Board {
    type Action = BoardAction;

    fn reduce(self: Rc<Self>, action: BoardAction) -> Rc<Self> {
        let mut board = (*self).clone();
        match action {
            BoardAction::Lane(id, action) => board.in_lane(id, action),
            BoardAction::Removed(id) => board.remove(id),
            BoardAction::Select(selection) => {
                if board.selection == Some(selection) {
                    return self;
                }
                board.select(selection);
                board.chosen = true;
            }
            BoardAction::Leave(id, job) => {
                let Some(outcome) = Outcome::of(&board.lane(id)) else { return self };
                board.keep(Kept::new(*job, outcome));
            }
            BoardAction::Keep(kept) => board.keep(*kept),
            BoardAction::Elsewhere(running) => board.elsewhere = running,
            BoardAction::Detail(id, detail) => {
                if board.selection != Some(Selection { lane: id, node: detail.node }) {
                    return self;
                }
                board.detail = Some(Shared::new(detail));
            }
        }
        board.into()
    }
}

impl Board {
    /// A lane; an idle one when it has not begun.
    pub(crate) fn lane(&self, id: LaneId) -> Shared<Lane> {
        self.lanes.get(&id).cloned().unwrap_or_else(|| Shared::new(Lane::default()))
    }

    /// The best solution's value over the lanes that are rivals for the optimum.
    pub(crate) fn best(&self, rival: impl Fn(LaneId) -> bool) -> Option<f64> {
        let rivals = self.lanes.iter().filter(|(id, _)| rival(**id));
        let values = rivals.filter_map(|(_, lane)| lane.incumbent());
        values.reduce(|one, other| if self.is_better(other, one) { other } else { one })
    }

    /// Whether one value is better than another in the direction of the objective.
    pub(crate) fn is_better(&self, one: f64, other: f64) -> bool {
        if self.maximise() { one > other } else { one < other }
    }

    fn maximise(&self) -> bool {
        self.lanes.values().any(|lane| lane.maximise())
    }

    /// What the shared axis must show: every root and node, and the best value known. Nodes far
    /// beyond that value are pruned; they stand at the end of the axis.
    pub(crate) fn domain(&self, best: Option<f64>) -> Option<(f64, f64)> {
        let mut domain: Option<(f64, f64)> = None;
        let mut widen = |value: f64| {
            let (low, high) = domain.unwrap_or((value, value));
            let low = if value < low { value } else { low };
            domain = Some((low, if value > high { value } else { high }));
        };
        for lane in self.lanes.values() {
            let (low, high) = lane.tally.extent.unzip();
            [lane.root_bound(), low, high].into_iter().flatten().for_each(&mut widen);
        }
        best.into_iter().for_each(&mut widen);
        let (low, high) = domain?;
        let Some(best) = best else { return Some((low, high)) };
        let (last, first) = (best + BEYOND * (best - low), best - BEYOND * (high - best));
        Some(if self.maximise() {
            (if first > low { first } else { low }, high)
        } else {
            (low, if last < high { last } else { high })
        })
    }

    fn in_lane(&mut self, id: LaneId, action: LaneAction) {
        let starts = matches!(action, LaneAction::Load);
        let rooted = matches!(action, LaneAction::Root(_));
        let mut lane = (*self.lane(id)).clone();
        lane.take(action);
        self.lanes.insert(id, Shared::new(lane));
        if starts && self.selection.is_some_and(|selection| selection.lane == id) {
            self.forget();
        }
        if rooted {
            self.show_a_root();
        }
    }

    fn remove(&mut self, id: LaneId) {
        self.lanes.remove(&id);
        if self.selection.is_some_and(|selection| selection.lane == id) {
            self.forget();
            self.show_a_root();
        }
    }

    fn forget(&mut self) {
        (self.selection, self.detail, self.chosen) = (None, None, false);
    }

    fn select(&mut self, selection: Selection) {
        (self.selection, self.detail) = (Some(selection), None);
    }

    /// Until a person selects a node, the inspector shows the root of the first lane that has one.
    fn show_a_root(&mut self) {
        let first = self.lanes.iter().find(|(_, lane)| lane.root.is_some()).map(|(&id, _)| id);
        let Some(lane) = first.filter(|_| !self.chosen) else { return };
        let root = Selection { lane, node: NodeNumber(1) };
        if self.selection != Some(root) {
            self.select(root);
        }
    }
}

impl Lane {
    fn take(&mut self, action: LaneAction) {
        match action {
            LaneAction::Load => {
                let notice = std::mem::take(&mut self.notice);
                *self = Self { phase: Phase::Loading, notice, ..Self::default() };
            }
            LaneAction::Understood(rival) => self.rival = Some(Shared::new(rival)),
            LaneAction::Progress(progress) => self.progress = Some(progress),
            LaneAction::Memory(memory) => self.memory = Some(memory),
            LaneAction::Root(root) => {
                self.root = Some(Shared::new(root));
                self.phase = Phase::Ready;
            }
            LaneAction::Second(opinion) => self.second = Some(Shared::new(opinion)),
            LaneAction::Grown(tally) => self.tally = tally,
            LaneAction::Asked(phase) => self.phase = phase,
            LaneAction::Paused(search, tally) => self.rest(Phase::Paused, search, tally),
            LaneAction::Done(search, tally) => {
                let phase = self.phase_after(search.status);
                self.rest(phase, search, tally);
            }
            LaneAction::Conflict(conflict) => {
                self.conflict = Some(Shared::new(conflict));
                self.phase = Phase::Done;
            }
            LaneAction::Failed(error) => {
                self.error = Some(Shared::new(error));
                self.phase = Phase::Failed;
            }
            LaneAction::Notice(notice) => self.notice = notice,
            LaneAction::Proving => {
                (self.proving, self.proved, self.notice) = (true, String::new(), String::new());
            }
            LaneAction::Proved(sentence) => (self.proving, self.proved) = (false, sentence),
            LaneAction::Unproved(sentence) => (self.proving, self.notice) = (false, sentence),
        }
    }

    /// What follows the end of a search: one that found no plan though its relaxation has a point
    /// is explained.
    fn phase_after(&self, ended: Status) -> Phase {
        let pointed = self.root.as_ref().is_some_and(|root| root.status == Status::Optimal);
        if ended == Status::Infeasible && pointed { Phase::Explaining } else { Phase::Done }
    }

    fn rest(&mut self, phase: Phase, search: SearchReport, tally: Tally) {
        self.phase = phase;
        self.search = Some(Shared::new(search));
        self.tally = tally;
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn reduce(board: Rc<Board>, action: BoardAction) -> Rc<Board> {
        board.reduce(action)
    }

    fn root(bound: f64) -> LaneAction {
        LaneAction::Root(RootReport {
            status: Status::Optimal,
            bound: Some(bound),
            checked: true,
            iterations: 1,
            ..RootReport::default()
        })
    }

    fn rooted(ids: &[u32]) -> Rc<Board> {
        ids.iter().fold(Rc::new(Board::default()), |board, &id| {
            let board = reduce(board, BoardAction::Lane(LaneId(id), LaneAction::Load));
            reduce(board, BoardAction::Lane(LaneId(id), root(10.0)))
        })
    }

    #[test]
    fn the_first_root_is_shown_until_a_person_chooses() {
        let board = rooted(&[2, 1]);
        assert_eq!(board.selection, Some(Selection { lane: LaneId(1), node: NodeNumber(1) }));
        let own = Selection { lane: LaneId(2), node: NodeNumber(5) };
        let board = reduce(board, BoardAction::Select(own));
        let board = reduce(board, BoardAction::Lane(LaneId(1), root(11.0)));
        assert_eq!(board.selection, Some(own));
    }

    #[test]
    fn selecting_the_same_node_changes_nothing() {
        let board = rooted(&[1]);
        let again = reduce(Rc::clone(&board), BoardAction::Select(board.selection.unwrap()));
        assert!(Rc::ptr_eq(&board, &again));
    }

    #[test]
    fn a_new_run_forgets_the_old_one() {
        let board = rooted(&[1]);
        let board = reduce(board, BoardAction::Lane(LaneId(1), LaneAction::Load));
        let lane = board.lane(LaneId(1));
        assert_eq!(lane.phase, Phase::Loading);
        assert!(lane.root.is_none() && board.selection.is_none());
    }

    #[test]
    fn a_second_opinion_stands_beside_the_root_and_goes_with_it() {
        let second =
            |value| BoardAction::Lane(LaneId(1), LaneAction::Second(Opinion::Optimal(value)));
        let board = reduce(rooted(&[1]), second(9.0));
        let lane = board.lane(LaneId(1));
        assert_eq!(
            (lane.root_bound(), lane.bound()),
            (Some(10.0), Some(10.0)),
            "the bound is ours"
        );
        assert!(lane.second.as_deref() == Some(&Opinion::Optimal(9.0)));
        let board = reduce(board, BoardAction::Lane(LaneId(1), LaneAction::Load));
        assert!(board.lane(LaneId(1)).second.is_none());
    }

    #[test]
    fn the_best_value_is_over_all_lanes() {
        let board = rooted(&[1, 2]);
        let grown = |value| LaneAction::Grown(Tally { incumbent: Some(value), ..Tally::default() });
        let board = reduce(board, BoardAction::Lane(LaneId(1), grown(160.0)));
        let board = reduce(board, BoardAction::Lane(LaneId(2), grown(153.0)));
        assert_eq!(board.best(|_| true), Some(153.0));
        assert_eq!(board.best(|id| id == LaneId(1)), Some(160.0));
    }

    #[test]
    fn the_axis_shows_roots_and_the_best_value_but_not_far_beyond() {
        let board = rooted(&[1]);
        assert_eq!(board.domain(None), Some((10.0, 10.0)));
        let extent = Some((10.0, 90.0));
        let grown = LaneAction::Grown(Tally { extent, ..Tally::default() });
        let board = reduce(board, BoardAction::Lane(LaneId(1), grown));
        assert_eq!(board.domain(None), Some((10.0, 90.0)));
        assert_eq!(board.domain(Some(20.0)), Some((10.0, 21.5)));
        assert_eq!(Board::default().domain(None), None);
    }

    #[test]
    fn a_removed_lane_leaves_no_selection() {
        let board = reduce(rooted(&[1]), BoardAction::Removed(LaneId(1)));
        assert!(board.selection.is_none() && board.lanes.is_empty());
    }
}
