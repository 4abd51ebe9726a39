//! The workers of the page and what passes between them and its state.
//!
//! One worker reads instances and lists the catalogue; every lane has one of its own. Replies
//! are kept until the next frame and taken in then, at most one batch of events a lane.

mod steer;

pub(crate) use steer::refusal;

use std::cell::RefCell;
use std::collections::BTreeMap;
use std::rc::{Rc, Weak};

use gloo_timers::callback::Timeout;
use record::event::NodeNumber;
use record::message::{
    BindJob, CheckJob, CheckReport, Complaint, Envelope, Explanation, GuideSection, InstanceReport,
    LaneJob, LogJob, Reply, Request,
};
use record::opinion::Opinion;
use record::results::ErrorReport;
use record::scenario::{Act, InstanceText};
use yew::{Callback, UseReducerDispatcher};

use crate::browser::checks::{Checks, unchecked};
use crate::browser::clock;
use crate::browser::frame::Frame;
use crate::browser::meanings::Meanings;
use crate::browser::opinions::{Opinions, Told};
use crate::browser::run::{LaneRun, Led, TreeCell};
use crate::browser::share::download;
use crate::browser::worker::{FromWorker, WorkerHandle};
use crate::state::board::{Board, BoardAction, LaneAction};
use crate::state::document::{Document, DocumentAction};
use crate::state::lane::{LaneId, Phase};
use crate::state::pointer::Shared;
use crate::state::steer::Steer;

/// How long a worker may take to answer to Stop, in milliseconds.
const PATIENCE: u32 = 1000;

/// The workers. Clones are the same session.
#[derive(Debug, Clone)]
pub(crate) struct Session(Rc<RefCell<Inner>>);

impl PartialEq for Session {
    fn eq(&self, other: &Self) -> bool {
        Rc::ptr_eq(&self.0, &other.0)
    }
}

#[derive(Debug)]
struct Inner {
    board: UseReducerDispatcher<Board>,
    document: UseReducerDispatcher<Document>,
    lanes: BTreeMap<LaneId, LaneRun>,
    author: Option<WorkerHandle>,
    /// The text that is to be read last, and how many readings are still to be answered.
    reading: Option<Shared<InstanceText>>,
    unanswered: u32,
    checks: Checks,
    guide: Option<Shared<Vec<GuideSection>>>,
    readers: Vec<Callback<Shared<Vec<GuideSection>>>>,
    meanings: Meanings,
    opinions: Opinions,
    frame: Option<Frame>,
}

impl Session {
    /// A session that tells what happens to these two.
    pub(crate) fn new(
        board: UseReducerDispatcher<Board>,
        document: UseReducerDispatcher<Document>,
    ) -> Self {
        let session = Self(Rc::new_cyclic(|session| {
            RefCell::new(Inner {
                board,
                document,
                lanes: BTreeMap::new(),
                author: None,
                reading: None,
                unanswered: 0,
                checks: Checks::default(),
                guide: None,
                readers: Vec::new(),
                meanings: Meanings::default(),
                opinions: Opinions::new(hearing_opinions(session.clone())),
                frame: None,
            })
        }));
        session.start_author();
        session
    }

    /// Reads a text; of several asked for in a row, the last one counts: the others give way to it.
    pub(crate) fn read(&self, text: Shared<InstanceText>) {
        let mut inner = self.0.borrow_mut();
        if let Some(author) = &inner.author {
            // A worker that takes no message tells so by its error event.
            let _ = author.post(&Request::Read((*text).clone()));
        }
        inner.unanswered += 1;
        inner.reading = Some(text);
    }

    /// Checks a formulation as it is typed; of several asked for in a row in one lane, only the
    /// last is answered.
    pub(crate) fn check(&self, id: LaneId, job: CheckJob, hear: Callback<CheckReport>) {
        let mut inner = self.0.borrow_mut();
        let job = inner.checks.begin(id, job, hear);
        if let Some(author) = &inner.author {
            // A worker that takes no message tells so by its error event.
            let _ = author.post(&Request::Check(Box::new(job)));
        }
    }

    /// Gives the help on the notation, which is fetched when it is first wanted.
    pub(crate) fn guide(&self, hear: Callback<Shared<Vec<GuideSection>>>) {
        let guide = self.0.borrow().guide.clone();
        if let Some(guide) = guide {
            hear.emit(guide);
            return;
        }
        let mut inner = self.0.borrow_mut();
        inner.readers.push(hear);
        if let Some(author) = &inner.author {
            // A worker that takes no message tells so by its error event.
            let _ = author.post(&Request::Guide);
        }
    }

    /// Asks what the code of a remark means.
    pub(crate) fn explain(&self, code: &str, hear: Callback<Explanation>) {
        let mut inner = self.0.borrow_mut();
        inner.meanings.begin(code, hear);
        if let Some(author) = &inner.author {
            // A worker that takes no message tells so by its error event.
            let _ = author.post(&Request::Explain(code.to_owned()));
        }
    }

    /// Asks which data the rivals take from an instance; the document hears of it.
    pub(crate) fn bind(&self, job: BindJob) {
        if let Some(author) = &self.0.borrow().author {
            // A worker that takes no message tells so by its error event.
            let _ = author.post(&Request::Bind(Box::new(job)));
        }
    }

    /// Loads a rival into a lane and solves its root; what ran there is given up, unless it is
    /// just this. A lane in which only acts by hand are others is led to where it was.
    pub(crate) fn load(&self, id: LaneId, job: LaneJob) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id)
            && lane.runs(&job)
        {
            return;
        }
        self.tell(id, LaneAction::Notice(String::new()));
        let left = self.0.borrow().lanes.get(&id).map(|lane| Box::new(lane.job.clone()));
        if let Some(left) = left {
            let board = self.0.borrow().board.clone();
            board.dispatch(BoardAction::Leave(id, left));
        }
        let action = {
            let mut inner = self.0.borrow_mut();
            inner.opinions.give_up(id);
            let old = inner.lanes.remove(&id);
            let run = old.as_ref().map(|lane| lane.job.run).unwrap_or_default();
            let led = Led::to(old.as_ref(), &job);
            let worker = old.and_then(|lane| lane.worker).or_else(|| self.lane_worker(id));
            let mut lane = LaneRun::new(LaneJob { run, ..job }, worker);
            lane.lead(led);
            let action = lane.load();
            let missing = lane.worker.is_none();
            inner.lanes.insert(id, lane);
            if missing { no_worker() } else { action }
        };
        self.tell(id, action);
    }

    /// Ends a lane and its worker.
    pub(crate) fn remove(&self, id: LaneId) {
        let board = {
            let mut inner = self.0.borrow_mut();
            inner.lanes.remove(&id);
            inner.opinions.give_up(id);
            inner.board.clone()
        };
        board.dispatch(BoardAction::Removed(id));
    }

    /// The tree of a lane.
    pub(crate) fn tree(&self, id: LaneId) -> Option<TreeCell> {
        self.0.borrow().lanes.get(&id).map(|lane| lane.tree.clone())
    }

    /// Searches on, to the end or for some nodes.
    pub(crate) fn search(&self, id: LaneId, nodes: Option<u32>) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            lane.to_end = nodes.is_none();
        }
        self.ask(id, &Request::Run { nodes }, Phase::Running);
        self.set_limit(id);
    }

    /// Searches on to the next plan that is better than all before.
    pub(crate) fn search_to_plan(&self, id: LaneId) {
        self.ask(id, &Request::RunToPlan, Phase::Running);
        self.set_limit(id);
    }

    /// Saves the log of a search that stands still as a file.
    pub(crate) fn save_log(&self, id: LaneId, file: String, job: LogJob) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            lane.log_file = file;
            lane.post(&Request::Log(Box::new(job)));
        }
    }

    /// Lets the search stand still after the scenario's seconds, and says so. Time never steers
    /// the search: it goes on from there as if nothing had been.
    fn set_limit(&self, id: LaneId) {
        let mut inner = self.0.borrow_mut();
        let Some(lane) = inner.lanes.get_mut(&id) else { return };
        let seconds = lane.job.settings.seconds;
        let session = self.downgrade();
        lane.limit = clock::after(seconds, move || {
            if let Some(session) = upgrade(&session) {
                session.pause(id);
                session.tell(id, LaneAction::Notice(out_of_time(seconds)));
            }
        });
    }

    /// Asks for the search as soon as the root is solved, from the beginning if the run is over.
    pub(crate) fn search_anew(&self, id: LaneId) {
        let action = {
            let mut inner = self.0.borrow_mut();
            inner.opinions.give_up(id);
            let Some(lane) = inner.lanes.get_mut(&id) else { return };
            if lane.worker.is_none() {
                lane.worker = self.lane_worker(id);
            }
            lane.losses = 0;
            (lane.run_at_root, lane.to_end) = (true, true);
            lane.load()
        };
        self.tell(id, LaneAction::Notice(String::new()));
        self.tell(id, action);
    }

    /// Begins the search once a root that is being solved is there.
    pub(crate) fn search_when_ready(&self, id: LaneId) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            (lane.run_at_root, lane.to_end) = (true, true);
        }
    }

    /// Has a search that has ended proved again.
    pub(crate) fn prove(&self, id: LaneId) {
        if let Some(lane) = self.0.borrow().lanes.get(&id) {
            lane.post(&Request::Audit);
        }
        self.tell(id, LaneAction::Proving);
    }

    /// Ends that; what was proved until then is said.
    pub(crate) fn stop_proving(&self, id: LaneId) {
        if let Some(lane) = self.0.borrow().lanes.get(&id) {
            lane.post(&Request::Stop);
        }
    }

    /// Lets the search stand still.
    pub(crate) fn pause(&self, id: LaneId) {
        self.ask(id, &Request::Pause, Phase::Pausing);
    }

    /// Gives the run up; a worker that does not answer in time is replaced.
    pub(crate) fn stop(&self, id: LaneId) {
        let session = self.downgrade();
        let watchdog = Timeout::new(PATIENCE, move || {
            if let Some(session) = upgrade(&session) {
                session.replace(id, "the worker did not answer to Stop within a second");
            }
        });
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            lane.watchdog = Some(watchdog);
        }
        self.ask_to_stop(id);
        self.tell(id, LaneAction::Asked(Phase::Stopping));
        self.stop_opinion(id);
    }

    /// Asks for a node in full.
    pub(crate) fn inspect(&self, id: LaneId, node: NodeNumber) {
        if let Some(lane) = self.0.borrow().lanes.get(&id) {
            lane.post(&Request::Inspect(node));
        }
    }

    fn ask(&self, id: LaneId, request: &Request, phase: Phase) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            (lane.losses, lane.limit) = (0, None);
            lane.post(request);
        }
        self.tell(id, LaneAction::Notice(String::new()));
        self.tell(id, LaneAction::Asked(phase));
    }

    fn tell(&self, id: LaneId, action: LaneAction) {
        let board = self.0.borrow().board.clone();
        board.dispatch(BoardAction::Lane(id, action));
    }

    fn downgrade(&self) -> Weak<RefCell<Inner>> {
        Rc::downgrade(&self.0)
    }

    fn lane_worker(&self, id: LaneId) -> Option<WorkerHandle> {
        let session = self.downgrade();
        let hear = Callback::from(move |from| {
            if let Some(session) = upgrade(&session) {
                session.hear(id, from);
            }
        });
        WorkerHandle::start(&hear).ok()
    }

    fn hear(&self, id: LaneId, from: FromWorker) {
        match from {
            FromWorker::Reply(envelope) => {
                if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
                    lane.keep(envelope);
                }
                self.request_frame();
            }
            FromWorker::Failure(why) => {
                let why = if why.is_empty() { "the worker failed".to_owned() } else { why };
                self.replace(id, &why);
            }
        }
    }

    fn request_frame(&self) {
        let session = self.downgrade();
        let mut inner = self.0.borrow_mut();
        if inner.frame.is_none() {
            inner.frame = Some(Frame::request(move || {
                if let Some(session) = upgrade(&session) {
                    session.take_in();
                }
            }));
        }
    }

    /// Takes in what waits for this frame.
    fn take_in(&self) {
        let (board, document, taken, more) = {
            let inner = &mut *self.0.borrow_mut();
            inner.frame = None;
            let mut taken = Taken::default();
            for (&id, lane) in &mut inner.lanes {
                take_in_lane(id, lane, &mut inner.opinions, &mut taken);
            }
            let more = inner.lanes.values().any(|lane| !lane.inbox.is_empty());
            (inner.board.clone(), inner.document.clone(), taken, more)
        };
        for action in taken.actions {
            board.dispatch(action);
        }
        for (id, act) in taken.acts {
            document.dispatch(DocumentAction::Steer(Steer::Did(id, act)));
        }
        for id in taken.begun {
            self.set_limit(id);
        }
        if more {
            self.request_frame();
        }
    }

    /// Replaces a lane's worker and leads the new one to the node count of the old; the second
    /// loss in a row ends the run.
    fn replace(&self, id: LaneId, why: &str) {
        let actions = {
            let mut inner = self.0.borrow_mut();
            let Some(lane) = inner.lanes.get_mut(&id) else { return };
            lane.losses += 1;
            lane.worker = None;
            if lane.losses > 1 {
                lane.watchdog = None;
                lane.inbox.clear();
                vec![LaneAction::Failed(error(why))]
            } else {
                lane.worker = self.lane_worker(id);
                let nodes = lane.tree.borrow().tally().solved;
                lane.replay = Some(nodes.saturating_sub(1));
                vec![LaneAction::Notice(replaced(why, nodes)), lane.load()]
            }
        };
        for action in actions {
            self.tell(id, action);
        }
    }

    fn stop_opinion(&self, id: LaneId) {
        if self.0.borrow_mut().opinions.give_up(id) {
            self.tell(id, LaneAction::Second(Opinion::Silent("stopped".to_owned())));
        }
    }

    fn hear_opinion(&self, told: Told) {
        let current = {
            let mut inner = self.0.borrow_mut();
            let Some(((id, run), opinion)) = inner.opinions.end(told) else { return };
            let lane = inner.lanes.get(&id).filter(|lane| lane.job.run == run);
            lane.map(|_| (id, opinion))
        };
        if let Some((id, opinion)) = current {
            self.tell(id, LaneAction::Second(opinion));
        }
    }

    fn start_author(&self) {
        let session = self.downgrade();
        let hear = Callback::from(move |from| {
            if let Some(session) = upgrade(&session) {
                session.hear_author(from);
            }
        });
        let author = WorkerHandle::start(&hear).ok();
        if let Some(author) = &author {
            // A worker that takes no message tells so by its error event.
            let _ = author.post(&Request::List);
            if !self.0.borrow().readers.is_empty() {
                let _ = author.post(&Request::Guide);
            }
        }
        self.0.borrow_mut().author = author;
    }

    fn hear_author(&self, from: FromWorker) {
        match from {
            FromWorker::Reply(Envelope { reply: Reply::InstanceRead(report), .. }) => {
                self.finish_reading(*report);
            }
            FromWorker::Reply(Envelope { reply: Reply::Catalogue(entries), .. }) => {
                let document = self.0.borrow().document.clone();
                document.dispatch(DocumentAction::Catalogue(entries));
            }
            FromWorker::Reply(Envelope { reply: Reply::Guide(sections), .. }) => {
                let guide = Shared::new(sections);
                let readers = {
                    let mut inner = self.0.borrow_mut();
                    inner.guide = Some(guide.clone());
                    std::mem::take(&mut inner.readers)
                };
                for reader in readers {
                    reader.emit(guide.clone());
                }
            }
            FromWorker::Reply(Envelope { reply: Reply::Bound(bindings, suits), .. }) => {
                let document = self.0.borrow().document.clone();
                document.dispatch(DocumentAction::Bound(bindings, suits));
            }
            FromWorker::Reply(Envelope { reply: Reply::Checked(report), .. }) => {
                let heard = self.0.borrow_mut().checks.end(report.number);
                if let Some(hear) = heard {
                    hear.emit(*report);
                }
            }
            FromWorker::Reply(Envelope { reply: Reply::Explained(found), .. }) => {
                let heard = self.0.borrow_mut().meanings.end(&found.code);
                heard.into_iter().for_each(|hear| hear.emit(found.clone()));
            }
            FromWorker::Reply(Envelope { reply: Reply::Failed(error), .. }) => {
                self.finish_reading(unreadable(error.message));
            }
            FromWorker::Reply(_) => {}
            FromWorker::Failure(why) => {
                self.start_author();
                let waiting = self.0.borrow_mut().checks.end_all();
                for hear in waiting {
                    hear.emit(unchecked(&why));
                }
                // what is still asked of it is not answered
                let mut inner = self.0.borrow_mut();
                inner.unanswered = inner.unanswered.min(1);
                drop(inner);
                self.finish_reading(unreadable(format!("the reader failed: {why}")));
            }
        }
    }

    fn finish_reading(&self, report: InstanceReport) {
        let (document, text) = {
            let mut inner = self.0.borrow_mut();
            inner.unanswered = inner.unanswered.saturating_sub(1);
            if inner.unanswered > 0 {
                return;
            }
            let Some(text) = inner.reading.take() else { return };
            (inner.document.clone(), text)
        };
        document.dispatch(DocumentAction::Read(text, report));
    }
}

fn hearing_opinions(session: Weak<RefCell<Inner>>) -> Callback<Told> {
    Callback::from(move |told| {
        if let Some(session) = upgrade(&session) {
            session.hear_opinion(told);
        }
    })
}

fn upgrade(session: &Weak<RefCell<Inner>>) -> Option<Session> {
    session.upgrade().map(Session)
}

/// What is taken in before a frame.
#[derive(Default)]
struct Taken {
    actions: Vec<BoardAction>,
    /// Acts by hand that took effect.
    acts: Vec<(LaneId, Act)>,
    /// Lanes whose search began.
    begun: Vec<LaneId>,
}

/// Takes in what waits for a lane.
fn take_in_lane(id: LaneId, lane: &mut LaneRun, opinions: &mut Opinions, taken: &mut Taken) {
    for reply in lane.take() {
        let reply = match reply {
            Reply::Relaxation(Ok(relaxation)) => {
                opinions.ask((id, lane.job.run), relaxation);
                continue;
            }
            Reply::Log(Ok(bytes)) => {
                download(&lane.log_file, bytes.as_slice());
                continue;
            }
            reply => reply,
        };
        taken.acts.extend(steer::done_by_hand(lane, &reply).map(|act| (id, act)));
        if let Reply::Node(detail) = reply {
            taken.actions.push(BoardAction::Detail(id, *detail));
            continue;
        }
        let rooted = matches!(reply, Reply::Root(_));
        taken.actions.extend(lane.hear(reply).map(|action| BoardAction::Lane(id, action)));
        if let Some(action) = rooted.then(|| lane.after_root()).flatten() {
            taken.actions.push(BoardAction::Lane(id, action));
            taken.begun.push(id);
        }
    }
}

fn out_of_time(seconds: f64) -> String {
    let seconds = report::number::short(seconds);
    format!("Paused after {seconds} s, the scenario's limit of time; Run goes on from here.")
}

fn replaced(why: &str, nodes: u32) -> String {
    let nodes = report::number::of(u64::from(nodes), "node");
    format!("The worker was replaced ({why}); the run is led to the same {nodes}.")
}

fn error(message: &str) -> ErrorReport {
    ErrorReport { message: message.to_owned(), complaints: Vec::new(), place: String::new() }
}

fn no_worker() -> LaneAction {
    LaneAction::Failed(error("the browser did not start a worker for this rival"))
}

fn unreadable(message: String) -> InstanceReport {
    let complaint = Complaint {
        error: true,
        code: "unreadable".to_owned(),
        line: 1,
        column: 1,
        start: 0,
        end: 0,
        message,
        mend: String::new(),
    };
    InstanceReport { complaints: vec![complaint], ..InstanceReport::default() }
}
