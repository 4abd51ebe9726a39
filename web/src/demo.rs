//! The scenario the page opens with.

use record::scenario::Scenario;

/// An invented round of 18 stops.
const DEMO: &str = include_str!("../../scenarios/mobile-library-round.toml");

/// The demo; an empty scenario if its file could not be read, which a test holds to be untrue.
pub(crate) fn demo() -> Scenario {
    record::file::parse(DEMO).scenario.unwrap_or_default()
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_demo_is_read_in_full() {
        let parsed = record::file::parse(DEMO);
        assert!(parsed.complaints.is_empty(), "{:?}", parsed.complaints);
        let demo = demo();
        assert!(!demo.title.is_empty() && demo.instance.is_some());
        assert!(demo.rivals.len() >= 3);
    }
}
