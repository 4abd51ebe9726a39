//! Events kept as bytes while a search runs: some twenty bytes each, so that the log of a million
//! nodes can be saved at any time.

use crate::event::Event;

/// Events in order, as postcard writes them one after the other.
#[derive(Debug, Clone, Default, PartialEq, Eq)]
pub struct KeptEvents {
    bytes: Vec<u8>,
}

impl KeptEvents {
    /// Keeps these after those that are kept. `O(bytes)`.
    pub fn extend(&mut self, events: &[Event]) {
        for event in events {
            // Only a writer that is full can fail, and this one grows.
            let written = postcard::to_allocvec(event).unwrap_or_default();
            self.bytes.extend(written);
        }
    }

    /// All of them. `O(bytes)`.
    #[must_use]
    pub fn events(&self) -> Vec<Event> {
        let mut events = Vec::new();
        let mut rest = self.bytes.as_slice();
        while let Ok((event, left)) = postcard::take_from_bytes(rest) {
            events.push(event);
            rest = left;
        }
        events
    }

    /// How many bytes they take.
    #[must_use]
    pub fn size(&self) -> usize {
        self.bytes.len()
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::event::{NodeNumber, NodeState, Origin};

    #[test]
    fn what_is_kept_comes_back_in_order() {
        let mut kept = KeptEvents::default();
        let events = [
            Event::Created { node: NodeNumber(1), parent: None, branching: None },
            Event::Bound { bound: 12.5, nodes: 1 },
            Event::Incumbent {
                node: NodeNumber(1),
                value: -0.0,
                origin: Origin::Heuristic("2-opt".to_owned()),
            },
            Event::Dropped { node: NodeNumber(1_000_000), state: NodeState::Pruned },
        ];
        kept.extend(&events[..1]);
        kept.extend(&events[1..]);
        assert_eq!(kept.events(), events);
        assert!(kept.size() < 40, "{}", kept.size());
        assert!(KeptEvents::default().events().is_empty());
    }
}
