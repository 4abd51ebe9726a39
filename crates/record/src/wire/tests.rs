//! Messages come back from their bytes; other bytes are refused.

use super::*;
use crate::event::{Event, NodeNumber};
use crate::handover::{Form, Stated, Statement, Written};
use crate::message::{Acted, CheckReport, LaneJob, Reply, RunNumber};
use crate::results::{ErrorReport, Proof, RootReport, SearchReport, SolutionEntry, Status};
use crate::scenario::{Act, ActKind, InstanceText, Rival, Run};
use crate::typeset::{Element, Tag, Typeset, TypesetRow};

fn root() -> RootReport {
    RootReport {
        status: Status::Optimal,
        bound: Some(151.2),
        checked: true,
        checked_bound: Some("756/5".to_owned()),
        proof: Proof::Exact,
        checked_within: None,
        second_opinion: None,
        iterations: 120,
        fractional: 22,
        rounds: 0,
        added: 0,
        added_by_family: vec![0, 3],
        ray: Vec::new(),
        stopped: None,
    }
}

fn search() -> SearchReport {
    SearchReport {
        status: Status::Limit,
        bound: Some(200.0),
        incumbent: Some(214.0),
        gap: Some(14.0 / 214.0),
        nodes: 3,
        open: 2,
        iterations: 90,
        work: 1_000,
        solution: vec![SolutionEntry {
            variable: "x".to_owned(),
            indices: vec!["Ash".to_owned()],
            value: 1.0,
        }],
        checked: false,
        stopped: Some("the node limit".to_owned()),
        node_work: crate::results::NodeWorkReport {
            closed: 1,
            tightened: 22,
            fixed: 3,
            stepped: 2,
            cut_off: 1,
        },
        ..SearchReport::default()
    }
}

fn typeset() -> Typeset {
    let leaf = |tag, text: &str| Element { tag, text: text.to_owned(), children: Vec::new() };
    let children = vec![leaf(Tag::Identifier, "x"), leaf(Tag::Number, "1")];
    let left = vec![Element { tag: Tag::Sub, text: String::new(), children }];
    Typeset { rows: vec![TypesetRow { left, ..TypesetRow::default() }], further: 1 }
}

fn act() -> Act {
    let on = ["x", "Ash", "Birch"].map(str::to_owned).to_vec();
    Act { after: 12, what: ActKind::Branch, node: Some(9), on }
}

#[test]
fn requests_come_back() {
    let job = LaneJob {
        run: RunNumber(7),
        instance: Some(InstanceText { text: "0 1\n1 0\n".to_owned(), ..InstanceText::default() }),
        rival: Rival { from: Some("atsp/labels".to_owned()), ..Rival::default() },
        settings: Run { best_known: Some(39.0), ..Run::default() },
        seed: 7,
    };
    for request in [
        Request::Warm,
        Request::List,
        Request::Load(Box::new(job.clone())),
        Request::Write(Form::Latex, Box::new(job)),
        Request::State("hullward = 1\n".to_owned()),
        Request::Strip { scenario: "hullward = 1\n".to_owned(), factor: "2.5".to_owned() },
        Request::Run { nodes: Some(1) },
        Request::Inspect(NodeNumber(9)),
        Request::Act(act()),
    ] {
        let bytes = write_request(&request).expect("short");
        assert_eq!(read_request(&bytes), Ok(request));
    }
}

#[test]
fn replies_come_back_with_their_empty_fields() {
    let failed = ErrorReport {
        message: "m".to_owned(),
        complaints: Vec::new(),
        place: "instance".to_owned(),
    };
    for reply in [
        Reply::Root(Box::new(root())),
        Reply::Done(Box::new(search())),
        Reply::Conflict(crate::results::ConflictReport {
            families: vec!["enter".to_owned(), "order".to_owned()],
            level: crate::results::ConflictLevel::Smallest,
            nodes: 431,
            trials: 4,
        }),
        Reply::Batch(vec![Event::Bound { bound: 1.0, nodes: 2 }]),
        Reply::Failed(failed),
        Reply::Written(Box::new(Written { text: "ENDATA\n".to_owned(), notes: Vec::new() })),
        Reply::Stated(Box::new(Stated {
            rivals: vec![Statement { text: "min 1\n".to_owned(), typeset: typeset() }],
            facts: vec!["3 stops".to_owned()],
            unit: "minutes".to_owned(),
        })),
        Reply::Explained(crate::message::Explanation::default()),
        Reply::Checked(Box::new(CheckReport { typeset: typeset(), ..CheckReport::default() })),
        Reply::Acted(Box::new(Acted {
            act: act(),
            replayed: true,
            refused: Some("there is no node 9".to_owned()),
        })),
    ] {
        let envelope = Envelope { run: RunNumber(1), sequence: 5, reply };
        let bytes = write_envelope(&envelope).expect("short");
        assert_eq!(read_envelope(&bytes), Ok(envelope));
    }
}

#[test]
fn other_bytes_are_refused() {
    assert_eq!(read_request(&[]), Err(WireError::Malformed));
    assert_eq!(read_request(&[200]), Err(WireError::Malformed));
    let mut bytes = write_request(&Request::Warm).expect("short");
    bytes.push(0);
    assert_eq!(read_request(&bytes), Err(WireError::Malformed));
    assert_eq!(read_request(&vec![0; LONGEST_MESSAGE + 1]), Err(WireError::TooLong));
}
