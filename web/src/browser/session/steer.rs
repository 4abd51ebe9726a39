//! Steering by hand: acts on their way to a lane's worker, and what it says became of them.
//!
//! An act that took effect is noted in the document and in the lane's own job, so that the lane
//! goes on as it is; a document whose acts are others is replayed from the beginning.

use gloo_timers::callback::Timeout;
use record::message::{Acted, Reply, Request};
use record::scenario::{Act, ActKind};

use crate::browser::run::LaneRun;
use crate::browser::session::{Session, upgrade};
use crate::state::lane::LaneId;

/// How long a stop waits for the end of the node in hand, in milliseconds, before the search ends
/// inside it.
const GRACE: u32 = 80;

impl Session {
    /// Does an act by hand.
    pub(crate) fn act(&self, id: LaneId, act: Act) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            lane.losses = 0;
            lane.post(&Request::Act(act));
        }
    }

    /// Lets the next run of a lane go to its end.
    pub(crate) fn want_end(&self, id: LaneId) {
        if let Some(lane) = self.0.borrow_mut().lanes.get_mut(&id) {
            lane.to_end = true;
        }
    }

    /// Asks a lane to stop. Once the root is solved a stop is an act: it comes between two nodes,
    /// where it can be replayed. A node that takes longer than a person waits is left, and the
    /// stop is noted as if it had come before that node.
    pub(super) fn ask_to_stop(&self, id: LaneId) {
        let session = self.downgrade();
        let grace = Timeout::new(GRACE, move || {
            if let Some(session) = upgrade(&session)
                && let Some(lane) = session.0.borrow().lanes.get(&id)
            {
                lane.post(&Request::Stop);
            }
        });
        let mut inner = self.0.borrow_mut();
        let Some(lane) = inner.lanes.get_mut(&id) else { return };
        (lane.run_at_root, lane.to_end) = (false, false);
        if lane.is_rooted() {
            let stop = Act { after: 0, what: ActKind::Stop, node: None, on: Vec::new() };
            lane.post(&Request::Act(stop));
            (lane.grace, lane.stopping) = (Some(grace), true);
        } else {
            lane.post(&Request::Stop);
        }
    }
}

/// The act that a reply tells of and that the document does not hold yet.
pub(super) fn done_by_hand(lane: &mut LaneRun, reply: &Reply) -> Option<Act> {
    let act = match reply {
        Reply::Acted(acted) if acted.refused.is_none() && !acted.replayed => acted.act.clone(),
        Reply::Done(report) if lane.stopping => {
            let stopped = report.stopped.as_deref() == Some("stopped") && report.nodes > 0;
            stopped.then(|| Act {
                after: report.nodes,
                what: ActKind::Stop,
                node: None,
                on: Vec::new(),
            })?
        }
        _ => return None,
    };
    lane.job.rival.acts.push(act.clone());
    Some(act)
}

/// What is said of an act that was refused; nothing of a stop that came after the end.
pub(crate) fn refusal(acted: &Acted, columns: &[String]) -> Option<String> {
    let why = acted.refused.as_ref()?;
    if acted.act.what == ActKind::Stop && !acted.replayed {
        return None;
    }
    let done = if acted.replayed { "Left out of the replay" } else { "Not done" };
    Some(format!("{done}, {}: {why}.", crate::state::steer::act_words(&acted.act, columns)))
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::message::LaneJob;
    use record::results::{SearchReport, Status};

    fn acted(what: ActKind, refused: Option<&str>, replayed: bool) -> Acted {
        let act = Act { after: 3, what, node: Some(2), on: Vec::new() };
        Acted { act, replayed, refused: refused.map(str::to_owned) }
    }

    fn lane() -> LaneRun {
        LaneRun::new(LaneJob::default(), None)
    }

    #[test]
    fn an_act_is_noted_once_and_only_where_it_took_effect() {
        let mut lane = lane();
        let mut told = |acted| done_by_hand(&mut lane, &Reply::Acted(Box::new(acted)));
        assert!(told(acted(ActKind::Close, None, false)).is_some());
        assert!(told(acted(ActKind::Close, None, true)).is_none());
        assert!(told(acted(ActKind::Close, Some("no"), false)).is_none());
        assert_eq!(lane.job.rival.acts.len(), 1);
    }

    /// A stop inside a long node was lost: the link ran on past it.
    #[test]
    fn a_stop_inside_a_node_is_an_act_before_it() {
        let report = |stopped: &str| {
            Reply::Done(Box::new(SearchReport {
                status: Status::Limit,
                bound: None,
                incumbent: None,
                gap: None,
                nodes: 12,
                open: 3,
                iterations: 0,
                work: 0,
                solution: Vec::new(),
                checked: false,
                stopped: Some(stopped.to_owned()),
                ..SearchReport::default()
            }))
        };
        let mut lane = lane();
        assert!(done_by_hand(&mut lane, &report("stopped")).is_none(), "nobody stopped it");
        lane.stopping = true;
        assert!(done_by_hand(&mut lane, &report("stopped by hand")).is_none());
        let act = done_by_hand(&mut lane, &report("stopped")).unwrap();
        assert_eq!((act.after, act.what), (12, ActKind::Stop));
    }

    #[test]
    fn a_refusal_says_what_and_why() {
        let words = |what, replayed| refusal(&acted(what, Some("it is pruned"), replayed), &[]);
        let said = words(ActKind::Close, false).unwrap();
        assert_eq!(said, "Not done, after 3 nodes: closed the subtree of node 2: it is pruned.");
        assert!(words(ActKind::Stop, true).unwrap().starts_with("Left out of the replay"));
        assert_eq!(words(ActKind::Stop, false), None);
        assert_eq!(refusal(&acted(ActKind::Stop, None, false), &[]), None);
    }
}
