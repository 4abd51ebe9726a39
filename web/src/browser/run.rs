//! One lane's worker and the tree that grows from its replies. A worker that fails, or does not
//! answer to Stop in time, is replaced, and the new one is led to the same node count.

use std::cell::RefCell;
use std::collections::VecDeque;

use gloo_timers::callback::Timeout;
use record::message::{Envelope, LaneJob, Reply, Request, RunNumber};
use record::opinion::Opinion;
use record::results::Status;

use crate::browser::worker::WorkerHandle;
use crate::state::board::LaneAction;
use crate::state::lane::Phase;
use crate::state::pointer::Shared;
use crate::state::tree::Tree;

/// Batches applied before one frame, at most; more only when so many wait that they would pile up.
const BATCHES: usize = 1;
const PILE: usize = 20;

/// A tree that the lane's run grows and its drawing reads.
pub(crate) type TreeCell = Shared<RefCell<Tree>>;

/// A lane's run.
#[derive(Debug)]
pub(crate) struct LaneRun {
    /// The worker; `None` when it could not be started.
    pub(crate) worker: Option<WorkerHandle>,
    /// What it works on.
    pub(crate) job: LaneJob,
    /// The tree so far.
    pub(crate) tree: TreeCell,
    /// Replies not yet taken in.
    pub(crate) inbox: VecDeque<Envelope>,
    /// Runs out when Stop is not answered.
    pub(crate) watchdog: Option<Timeout>,
    /// Runs out at the scenario's limit of seconds.
    pub(crate) limit: Option<Timeout>,
    /// Nodes to search again below the root after the worker was replaced.
    pub(crate) replay: Option<u32>,
    /// Whether the root is solved: after that a request may fail, but not the rival.
    rooted: bool,
    /// Whether the search shall begin as soon as the root is solved.
    pub(crate) run_at_root: bool,
    /// Workers lost since a person last asked for something.
    pub(crate) losses: u32,
}

impl LaneRun {
    /// A run of a job that has not begun.
    pub(crate) fn new(job: LaneJob, worker: Option<WorkerHandle>) -> Self {
        Self {
            worker,
            job,
            tree: Shared::new(RefCell::default()),
            inbox: VecDeque::new(),
            watchdog: None,
            limit: None,
            replay: None,
            rooted: false,
            run_at_root: false,
            losses: 0,
        }
    }

    /// Sends a request; without a worker there is nobody to send it to.
    pub(crate) fn post(&self, request: &Request) {
        if let Some(worker) = &self.worker {
            // A worker that takes no message tells so by its error event.
            let _ = worker.post(request);
        }
    }

    /// Loads the job as a new run.
    pub(crate) fn load(&mut self) -> LaneAction {
        self.job.run = RunNumber(self.job.run.0 + 1);
        self.tree = Shared::new(RefCell::default());
        self.inbox.clear();
        (self.watchdog, self.limit) = (None, None);
        self.rooted = false;
        self.post(&Request::Load(Box::new(self.job.clone())));
        LaneAction::Load
    }

    /// Keeps a reply of this run for the next frame; those of an older run are dropped.
    pub(crate) fn keep(&mut self, envelope: Envelope) {
        if envelope.run == self.job.run {
            self.inbox.push_back(envelope);
        }
    }

    /// Takes in what may be taken in before one frame.
    pub(crate) fn take(&mut self) -> Vec<Reply> {
        let most = if self.inbox.len() > PILE { PILE } else { BATCHES };
        let mut batches = 0;
        let mut replies = Vec::new();
        while batches < most {
            let Some(envelope) = self.inbox.pop_front() else { break };
            batches += usize::from(matches!(envelope.reply, Reply::Batch(_)));
            replies.push(envelope.reply);
        }
        replies
    }

    /// What a reply does to the lane. Node details and relaxations are the session's.
    pub(crate) fn hear(&mut self, reply: Reply) -> Option<LaneAction> {
        match reply {
            Reply::Understood(rival) => Some(LaneAction::Understood(*rival)),
            Reply::Progress(progress) => Some(LaneAction::Progress(progress)),
            Reply::Root(root) => {
                self.rooted = true;
                if !matches!(root.status, Status::Limit | Status::Error) {
                    self.post(&Request::Relaxation);
                }
                Some(LaneAction::Root(*root))
            }
            Reply::Batch(events) => {
                let mut tree = self.tree.borrow_mut();
                tree.grow(&events);
                Some(LaneAction::Grown(tree.tally()))
            }
            Reply::Paused(report) => Some(LaneAction::Paused(*report, self.settled())),
            Reply::Done(report) => Some(LaneAction::Done(*report, self.settled())),
            Reply::Failed(error) if self.rooted => Some(LaneAction::Notice(error.message)),
            Reply::Failed(error) => {
                self.watchdog = None;
                Some(LaneAction::Failed(error))
            }
            Reply::Acted(acted) => acted.refused.map(LaneAction::Notice),
            Reply::Relaxation(Err(why)) => Some(LaneAction::Second(Opinion::Silent(why))),
            Reply::Checked(_)
            | Reply::Relaxation(Ok(_))
            | Reply::Node(_)
            | Reply::Written(_)
            | Reply::Ready { .. }
            | Reply::InstanceRead(_)
            | Reply::Catalogue(_) => None,
        }
    }

    fn settled(&mut self) -> crate::state::tree::Tally {
        (self.watchdog, self.limit) = (None, None);
        let mut tree = self.tree.borrow_mut();
        tree.settle();
        tree.tally()
    }

    /// What follows once the root is solved: the search, where it was asked for already.
    pub(crate) fn after_root(&mut self) -> Option<LaneAction> {
        let nodes = self.replay.take();
        if let Some(nodes) = nodes.filter(|&nodes| nodes > 0) {
            self.post(&Request::Run { nodes: Some(nodes) });
        } else if self.run_at_root {
            self.post(&Request::Run { nodes: None });
        } else {
            return None;
        }
        self.run_at_root = false;
        Some(LaneAction::Asked(Phase::Running))
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::created;
    use record::results::ErrorReport;

    fn envelope(run: u32, reply: Reply) -> Envelope {
        Envelope { run: RunNumber(run), sequence: 0, reply }
    }

    fn batch() -> Reply {
        Reply::Batch(vec![created(1, 0)])
    }

    fn loaded() -> LaneRun {
        let mut lane = LaneRun::new(LaneJob::default(), None);
        assert!(matches!(lane.load(), LaneAction::Load));
        lane
    }

    #[test]
    fn late_replies_of_an_older_run_are_dropped() {
        let mut lane = loaded();
        lane.load();
        lane.keep(envelope(1, batch()));
        lane.keep(envelope(2, batch()));
        assert_eq!(lane.inbox.len(), 1);
    }

    #[test]
    fn one_batch_a_frame_until_they_pile_up() {
        let mut lane = loaded();
        for _ in 0..3 {
            lane.keep(envelope(1, batch()));
        }
        assert_eq!(lane.take().len(), 1);
        for _ in 0..2 * PILE {
            lane.keep(envelope(1, batch()));
        }
        assert_eq!(lane.take().len(), PILE);
    }

    #[test]
    fn a_request_that_fails_after_the_root_does_not_fail_the_rival() {
        let error = || ErrorReport {
            message: "no such node".to_owned(),
            complaints: Vec::new(),
            place: String::new(),
        };
        let mut lane = loaded();
        assert!(matches!(lane.hear(Reply::Failed(error())), Some(LaneAction::Failed(_))));
        lane.rooted = true;
        assert!(matches!(lane.hear(Reply::Failed(error())), Some(LaneAction::Notice(_))));
    }

    #[test]
    fn a_replaced_worker_searches_again_up_to_where_the_old_one_was() {
        let mut lane = loaded();
        assert!(lane.after_root().is_none());
        lane.replay = Some(7);
        assert!(matches!(lane.after_root(), Some(LaneAction::Asked(Phase::Running))));
        lane.replay = Some(0);
        assert!(lane.after_root().is_none());
        lane.run_at_root = true;
        assert!(lane.after_root().is_some() && lane.after_root().is_none());
    }
}
