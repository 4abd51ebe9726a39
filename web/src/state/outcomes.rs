//! Results on instances that are not chosen: they hold until the instance's text or the rival is
//! another.

use record::message::LaneJob;
use record::results::{RootReport, SearchReport, Status};
use record::scenario::{InstanceText, Rival};

use crate::state::board::Board;
use crate::state::lane::{Lane, Phase};
use crate::state::pointer::Shared;
use crate::state::same::{FoundInLane, found_in};

/// Results kept at most; the oldest go first.
pub(crate) const MOST: usize = 200;

/// What a rival gave on an instance.
#[derive(Debug, Clone, Default, PartialEq)]
pub(crate) struct Outcome {
    /// The root bound.
    pub(crate) root: Option<f64>,
    /// The value of the best plan.
    pub(crate) best: Option<f64>,
    /// Nodes solved.
    pub(crate) nodes: u32,
    /// How it stands, in a word or two.
    pub(crate) words: &'static str,
    /// Whether there is nothing left to do.
    pub(crate) over: bool,
    /// All that is known of it.
    pub(crate) found: FoundInLane,
}

impl Outcome {
    /// What a lane gave so far; `None` before its root is solved.
    pub(crate) fn of(lane: &Lane) -> Option<Self> {
        if lane.phase == Phase::Failed {
            return Some(Self::failed());
        }
        let mut outcome = Self::of_root(lane.root.as_ref()?);
        match &lane.search {
            Some(search) if !lane.phase.is_busy() => outcome = outcome.searched(search),
            _ if lane.phase.is_busy() => (outcome.words, outcome.over) = ("searching", false),
            _ => {}
        }
        (outcome.best, outcome.nodes) = (lane.incumbent(), lane.nodes());
        outcome.found = found_in(lane);
        Some(outcome)
    }

    /// What a root gave.
    pub(crate) fn of_root(root: &RootReport) -> Self {
        let (words, over) = match root.status {
            Status::Optimal => ("root solved", false),
            Status::Infeasible => ("infeasible", true),
            Status::Unbounded => ("unbounded", true),
            Status::Limit | Status::Error => ("root not solved", true),
        };
        let found = (None, Some(Shared::new(root.clone())), None);
        Self { root: root.bound, words, over, found, ..Self::default() }
    }

    /// With what the search gave.
    pub(crate) fn searched(self, search: &SearchReport) -> Self {
        let (words, over) = match search.status {
            Status::Optimal => ("optimal", true),
            Status::Infeasible => ("infeasible", true),
            Status::Unbounded => ("unbounded", true),
            Status::Limit | Status::Error => ("stopped", false),
        };
        let mut searched =
            Self { best: search.incumbent, nodes: search.nodes, words, over, ..self };
        searched.found.2 = Some(Shared::new(search.clone()));
        searched
    }

    /// Of a rival that could not be run.
    pub(crate) fn failed() -> Self {
        Self { words: "could not be run", over: true, ..Self::default() }
    }
}

/// A result with what it is a result of.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Kept {
    rival: Rival,
    text: InstanceText,
    outcome: Outcome,
}

impl Kept {
    /// What a job gave.
    pub(crate) fn new(job: LaneJob, outcome: Outcome) -> Self {
        Self { rival: job.rival, text: job.instance.unwrap_or_default(), outcome }
    }

    /// Whether it is of this rival and this instance, whatever the instance is called.
    fn is_of(&self, rival: &Rival, text: &InstanceText) -> bool {
        let mine = &self.text;
        self.rival == *rival
            && (&mine.text, &mine.reader, &mine.bind) == (&text.text, &text.reader, &text.bind)
    }
}

impl Board {
    /// Keeps a result in place of an older one of the same rival and instance.
    pub(crate) fn keep(&mut self, kept: Kept) {
        let mut all = (*self.kept).clone();
        all.retain(|older| !older.is_of(&kept.rival, &kept.text));
        if all.len() >= MOST {
            all.remove(0);
        }
        all.push(kept);
        self.kept = Shared::new(all);
    }

    /// What is kept of a rival on an instance.
    pub(crate) fn kept_of(&self, rival: &Rival, text: &InstanceText) -> Option<Outcome> {
        let found = self.kept.iter().find(|kept| kept.is_of(rival, text));
        found.map(|kept| kept.outcome.clone())
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn job(rival: &str, text: &str) -> LaneJob {
        LaneJob {
            rival: Rival { from: Some(rival.to_owned()), ..Rival::default() },
            instance: Some(InstanceText { text: text.to_owned(), ..InstanceText::default() }),
            ..LaneJob::default()
        }
    }

    #[test]
    fn a_result_holds_for_its_rival_and_text_only() {
        let mut board = Board::default();
        let outcome = |nodes| Outcome { nodes, ..Outcome::default() };
        board.keep(Kept::new(job("a", "1"), outcome(3)));
        board.keep(Kept::new(job("a", "1"), outcome(5)));
        board.keep(Kept::new(job("b", "1"), outcome(7)));
        let found = |rival: &str, text: &str| {
            let job = job(rival, text);
            board.kept_of(&job.rival, &job.instance.unwrap()).map(|outcome| outcome.nodes)
        };
        assert_eq!([found("a", "1"), found("b", "1")], [Some(5), Some(7)]);
        assert_eq!([found("a", "2"), found("c", "1")], [None, None]);
    }
}
