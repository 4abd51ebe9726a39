//! The regression pack: a scenario with what its rivals gave, as one JSON object, so that whoever
//! builds the production model can see the same again, or hold a new instance against it.

use serde::{Deserialize, Serialize};

use crate::file;
use crate::results::{RivalResult, Status, digest};
use crate::scenario::Scenario;

/// How far a bound or an optimum may be away, relative to its size, and still count as the same.
pub const TOLERANCE: f64 = 1e-6;

/// What was recorded.
#[derive(Debug, Clone, PartialEq, Serialize, Deserialize)]
pub struct Pack {
    /// The version of this object: 1.
    pub hullward_pack: u32,
    /// The engine that the results are of.
    pub engine: String,
    /// How far a bound or an optimum may be away, relative to its size.
    pub tolerance: f64,
    /// The digest of the results.
    pub digest: Option<String>,
    /// The scenario file.
    pub scenario: String,
    /// What each rival gave on each instance.
    pub expected: Vec<Expected>,
}

/// What a rival gave on an instance.
#[derive(Debug, Clone, PartialEq, Default, Serialize, Deserialize)]
#[serde(default)]
pub struct Expected {
    /// The instance; empty where there is one.
    pub instance: String,
    /// The rival's letter.
    pub rival: String,
    /// Its title.
    pub title: String,
    /// How its search ended, or its relaxation where nothing was searched; none in packs that do not
    /// say it.
    pub status: Option<Status>,
    /// Rows as written.
    pub rows: u32,
    /// Columns.
    pub columns: u32,
    /// Non-zeros.
    pub nonzeros: u64,
    /// The root bound.
    pub root_bound: Option<f64>,
    /// The fraction that was proved of it.
    pub checked_bound: Option<String>,
    /// The optimum, where the search came to its end.
    pub optimum: Option<f64>,
    /// The smallest power of ten among coefficients.
    pub smallest_decade: Option<i32>,
    /// The largest.
    pub largest_decade: Option<i32>,
}

impl Expected {
    /// What is recorded of a result.
    #[must_use]
    pub fn of(one: &RivalResult) -> Self {
        let decades = one.families.iter().flat_map(|family| family.decades.keys());
        let decades: Vec<i32> = decades.filter_map(|decade| decade.parse().ok()).collect();
        let root = one.root.as_ref();
        let solved = one.search.as_ref().filter(|_| one.status == Status::Optimal);
        Self {
            instance: one.instance.clone(),
            rival: one.rival.clone(),
            title: one.title.clone(),
            status: Some(one.status),
            rows: one.rows,
            columns: one.columns,
            nonzeros: one.nonzeros,
            root_bound: root.and_then(|root| root.bound),
            checked_bound: root.and_then(|root| root.checked_bound.clone()),
            optimum: solved.and_then(|search| search.incumbent),
            smallest_decade: decades.iter().min().copied(),
            largest_decade: decades.iter().max().copied(),
        }
    }
}

impl Pack {
    /// The pack of a scenario whose rivals were run.
    #[must_use]
    pub fn new(engine: &str, scenario: &Scenario, results: &[RivalResult]) -> Self {
        Self {
            hullward_pack: VERSION,
            engine: engine.to_owned(),
            tolerance: TOLERANCE,
            digest: digest(results),
            scenario: file::print(scenario),
            expected: results.iter().map(Expected::of).collect(),
        }
    }
}

/// The version of packs that is written and read.
pub const VERSION: u32 = 1;

/// Whether a text is meant as a pack, by its begin.
#[must_use]
pub fn looks_like_a_pack(text: &str) -> bool {
    text.trim_start_matches('\u{feff}').trim_start().starts_with('{')
        && text.contains("\"hullward_pack\"")
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_recorded_comes_from_the_result() {
        let one = RivalResult { rival: "A".to_owned(), rows: 3, ..RivalResult::default() };
        let pack = Pack::new("0.1.0", &Scenario::default(), &[one]);
        assert_eq!((pack.hullward_pack, pack.expected[0].rows), (1, 3));
        assert_eq!(pack.expected[0].optimum, None);
    }

    #[test]
    fn a_pack_is_known_by_its_begin() {
        assert!(looks_like_a_pack(" {\n  \"hullward_pack\": 1"));
        assert!(!looks_like_a_pack("hullward = 1"));
        assert!(!looks_like_a_pack("{}"));
    }
}
