//! One lane's worker and the tree that grows from its replies. A worker that fails, or does not
//! answer to Stop in time, is replaced, and the new one is led to the same node count.

use std::cell::RefCell;
use std::collections::VecDeque;

use gloo_timers::callback::Timeout;
use record::message::{Acted, Envelope, LaneJob, Reply, Request, RunNumber};
use record::opinion::Opinion;
use record::results::{AuditReport, Judgement, SearchReport, Status};
use record::scenario::Rival;
use report::audit::sentences;

use crate::browser::session::refusal;
use crate::browser::worker::WorkerHandle;
use crate::state::board::LaneAction;
use crate::state::lane::{Memory, Phase};
use crate::state::pointer::Shared;
use crate::state::tree::Tree;

/// Batches applied before one frame, at most; more only when so many wait that they would pile up.
const BATCHES: usize = 1;
const PILE: usize = 20;

/// A tree that the lane's run grows and its drawing reads.
pub(crate) type TreeCell = Shared<RefCell<Tree>>;

/// How far a search is led by itself when its lane is loaded anew.
#[derive(Debug, Clone, Copy, PartialEq, Eq)]
pub(crate) enum Led {
    /// To its end.
    End,
    /// To so many nodes.
    Nodes(u32),
}

impl Led {
    /// Where a job is led in a lane that ran `old`: to the last act by hand, and where only acts
    /// are others at least as far as the old one came.
    pub(crate) fn to(old: Option<&LaneRun>, job: &LaneJob) -> Self {
        let last = job.rival.acts.iter().map(|act| act.after).max().unwrap_or(0);
        match old.filter(|old| alike(&old.job, job)) {
            Some(old) if old.to_end => Self::End,
            Some(old) => Self::Nodes(last.max(old.tree.borrow().tally().solved)),
            None => Self::Nodes(last),
        }
    }
}

/// Whether a search has ended because as many nodes are solved as are allowed.
pub(crate) fn at_the_limit(report: &SearchReport) -> bool {
    report.status == Status::Limit && report.stopped.as_deref() == Some("node limit")
}

/// Whether two jobs are the same but for the run's number, the title and acts by hand.
fn alike(one: &LaneJob, other: &LaneJob) -> bool {
    let bare = |job: &LaneJob| LaneJob {
        run: RunNumber(0),
        rival: Rival { title: String::new(), acts: Vec::new(), ..job.rival.clone() },
        ..job.clone()
    };
    bare(one) == bare(other)
}

/// A lane's run.
#[derive(Debug)]
pub(crate) struct LaneRun {
    /// The worker; `None` when it could not be started.
    pub(crate) worker: Option<WorkerHandle>,
    /// What it works on.
    pub(crate) job: LaneJob,
    /// The tree so far.
    pub(crate) tree: TreeCell,
    /// The names of the columns, once they are known.
    columns: Vec<String>,
    /// Replies not yet taken in.
    pub(crate) inbox: VecDeque<Envelope>,
    /// Runs out when Stop is not answered.
    pub(crate) watchdog: Option<Timeout>,
    /// Runs out at the scenario's limit of seconds.
    pub(crate) limit: Option<Timeout>,
    /// Nodes to search again below the root after the worker was replaced.
    pub(crate) replay: Option<u32>,
    /// Runs out when a stop has waited long enough for the end of the node in hand.
    pub(crate) grace: Option<Timeout>,
    /// Whether a person's stop is on its way.
    pub(crate) stopping: bool,
    /// Whether a person let the search go to its end.
    pub(crate) to_end: bool,
    /// Whether the root is solved: after that a request may fail, but not the rival.
    rooted: bool,
    /// Whether the search shall begin as soon as the root is solved.
    pub(crate) run_at_root: bool,
    /// The name of the file that the log is saved as.
    pub(crate) log_file: String,
    /// Whether the search has ended at its limit of nodes, so that it may be raised.
    limited: bool,
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
            columns: Vec::new(),
            inbox: VecDeque::new(),
            watchdog: None,
            limit: None,
            replay: None,
            grace: None,
            stopping: false,
            to_end: false,
            rooted: false,
            run_at_root: false,
            log_file: String::new(),
            limited: false,
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
        self.rest();
        (self.rooted, self.limited) = (false, false);
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
            Reply::Understood(rival) => {
                self.columns.clone_from(&rival.column_names);
                Some(LaneAction::Understood(*rival))
            }
            Reply::Progress(progress) => Some(LaneAction::Progress(progress)),
            Reply::Memory { bytes, most, full } => {
                Some(LaneAction::Memory(Memory { bytes, most, full }))
            }
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
            Reply::Paused(report) => {
                self.to_end = false;
                Some(LaneAction::Paused(*report, self.settled()))
            }
            Reply::Done(report) => {
                self.limited = at_the_limit(&report);
                Some(LaneAction::Done(*report, self.settled()))
            }
            Reply::Conflict(conflict) => {
                self.watchdog = None;
                Some(LaneAction::Conflict(conflict))
            }
            Reply::Failed(error) if self.rooted => Some(LaneAction::Notice(error.message)),
            Reply::Failed(error) => {
                self.watchdog = None;
                Some(LaneAction::Failed(error))
            }
            Reply::Acted(acted) => self.acted(&acted),
            Reply::Log(Err(why)) => Some(LaneAction::Notice(format!("No log was saved: {why}."))),
            Reply::Audited(found) => Some(judged(&found)),
            Reply::Relaxation(Err(why)) => Some(LaneAction::Second(Opinion::Silent(why))),
            Reply::Checked(_)
            | Reply::Explained(_)
            | Reply::Relaxation(Ok(_))
            | Reply::Bound(..)
            | Reply::Node(_)
            | Reply::Evidence(_)
            | Reply::Log(Ok(_))
            | Reply::Written(_)
            | Reply::Studied(_)
            | Reply::Ready { .. }
            | Reply::InstanceRead(_)
            | Reply::Guide(_)
            | Reply::Stated(_)
            | Reply::Catalogue(_) => None,
        }
    }

    /// What became of an act. Of a search that has ended only what lets it go on takes effect.
    fn acted(&mut self, acted: &Acted) -> Option<LaneAction> {
        let goes_on = acted.refused.is_none() && std::mem::take(&mut self.limited);
        let refused = refusal(acted, &self.columns).map(LaneAction::Notice);
        refused.or_else(|| goes_on.then_some(LaneAction::Asked(Phase::Running)))
    }

    fn settled(&mut self) -> crate::state::tree::Tally {
        self.rest();
        let mut tree = self.tree.borrow_mut();
        tree.settle();
        tree.tally()
    }

    /// Nothing is waited for any more.
    fn rest(&mut self) {
        (self.watchdog, self.limit, self.grace) = (None, None, None);
        self.stopping = false;
    }

    /// Whether the root is solved.
    pub(crate) fn is_rooted(&self) -> bool {
        self.rooted
    }

    /// Whether this is what the lane works on, but for the run's number and the title.
    pub(crate) fn runs(&self, job: &LaneJob) -> bool {
        alike(&self.job, job) && self.job.rival.acts == job.rival.acts
    }

    /// Has the search led somewhere once the root is solved.
    pub(crate) fn lead(&mut self, led: Led) {
        match led {
            Led::End => (self.run_at_root, self.to_end) = (true, true),
            Led::Nodes(nodes) => self.replay = Some(nodes.saturating_sub(1)),
        }
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

/// What came of proving a search again.
fn judged(found: &AuditReport) -> LaneAction {
    let words = sentences(found).join(" ");
    if found.judgement == Judgement::Proved {
        LaneAction::Proved(words)
    } else {
        LaneAction::Unproved(words)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::state::tree::tests::{created, solved};
    use record::event::NodeState;
    use record::results::ErrorReport;
    use record::scenario::{Act, ActKind};

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

    fn acting(after: &[u32]) -> LaneJob {
        let act = |&after: &u32| Act { after, what: ActKind::Close, node: None, on: Vec::new() };
        let rival = Rival { acts: after.iter().map(act).collect(), ..Rival::default() };
        LaneJob { rival, ..LaneJob::default() }
    }

    #[test]
    fn a_lane_is_led_to_its_acts_and_as_far_as_it_was() {
        assert_eq!(Led::to(None, &acting(&[])), Led::Nodes(0));
        assert_eq!(Led::to(None, &acting(&[3, 9, 4])), Led::Nodes(9));
        let mut lane = LaneRun::new(acting(&[3]), None);
        lane.tree.borrow_mut().grow(&[created(1, 0), solved(1, NodeState::Branched, Some(1.0))]);
        assert_eq!(Led::to(Some(&lane), &acting(&[])), Led::Nodes(1));
        lane.to_end = true;
        assert_eq!(Led::to(Some(&lane), &acting(&[])), Led::End);
        let other = LaneJob { seed: 7, ..acting(&[2]) };
        assert_eq!(Led::to(Some(&lane), &other), Led::Nodes(2));
    }

    /// A lane that had done an act itself was loaded anew when the document noted it.
    #[test]
    fn a_lane_goes_on_with_an_act_of_its_own_and_with_another_title() {
        let mut lane = LaneRun::new(acting(&[3]), None);
        let mut job = acting(&[3, 5]);
        assert!(!lane.runs(&job));
        lane.job.rival.acts.clone_from(&job.rival.acts);
        job.rival.title = "Mine".to_owned();
        assert!(lane.runs(&job));
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
