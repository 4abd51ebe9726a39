//! A log that was saved once opens for ever.
//!
//! `fixtures/log-v1.bin` is the log of a real run, saved by
//! `hullward run crates/engine/tests/scenarios/labels.toml --rival A --log …` with engine 0.1.0.
//! It is never recorded anew: a later engine may search in another way, and must still read it.

use std::collections::BTreeMap;

use hullward_record::event::{Event, NodeNumber, NodeState};
use hullward_record::{log, wire};
use proptest::collection::vec;
use proptest::prelude::*;

const SAVED: &[u8] = include_bytes!("fixtures/log-v1.bin");

/// What the run said when the log was saved.
const EVENTS: usize = 712;
const DIGEST: &str = "58a262c87a19ca5e";
const OPTIMUM: f64 = 251.0;

#[test]
fn the_saved_log_opens_and_is_written_with_the_same_bytes() {
    let log = log::decode(SAVED).expect("version 1 opens for ever");
    assert_eq!((log.version, log.engine.as_str()), (1, "0.1.0"));
    assert_eq!(log.events.len(), EVENTS);
    assert_eq!(log::digest(&log.events), DIGEST);
    assert_eq!(log::encode(&log).expect("version 1").as_slice(), SAVED);
}

#[test]
fn the_saved_log_tells_a_whole_search() {
    let log = log::decode(SAVED).expect("version 1 opens for ever");
    let mut nodes: BTreeMap<NodeNumber, NodeState> = BTreeMap::new();
    let (mut best, mut bound) = (f64::INFINITY, f64::NEG_INFINITY);
    for event in &log.events {
        match event {
            Event::Created { node, parent, branching } => {
                assert_eq!(parent.is_some(), branching.is_some());
                assert!(parent.is_none_or(|parent| nodes[&parent] == NodeState::Branched));
                assert_eq!(nodes.insert(*node, NodeState::Open), None);
            }
            Event::Solved { node, state, .. } | Event::Dropped { node, state } => {
                assert_eq!(nodes.insert(*node, *state), Some(NodeState::Open));
            }
            Event::Incumbent { value, .. } => {
                assert!(*value < best);
                best = *value;
            }
            Event::Bound { bound: risen, .. } => {
                assert!(*risen > bound);
                bound = *risen;
            }
        }
    }
    assert!(nodes.values().all(|state| *state != NodeState::Open));
    assert_eq!((best, bound), (OPTIMUM, OPTIMUM));
}

proptest! {
    #![proptest_config(ProptestConfig { failure_persistence: None, ..ProptestConfig::default() })]

    #[test]
    fn a_damaged_log_is_refused_or_read_but_never_a_panic(
        place in 0..SAVED.len(), byte in any::<u8>(), length in 0..SAVED.len(),
    ) {
        let mut bytes = SAVED.to_vec();
        bytes[place] = byte;
        let _ = log::decode(&bytes);
        bytes.truncate(length);
        prop_assert!(log::decode(&bytes).is_err());
    }

    #[test]
    fn random_messages_are_refused_or_read_but_never_a_panic(bytes in vec(any::<u8>(), 0..80)) {
        let _ = wire::read_request(&bytes);
        let _ = wire::read_envelope(&bytes);
    }
}
