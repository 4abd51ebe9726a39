//! What a link or a file says of the results that were there when it was made, so that another
//! machine can say "same" or "differs".
//!
//! One word a result, in the order of the results, with blanks between: the digest of the
//! relaxation and, once its search has ended where a replay ends too, a slash, the nodes solved, a
//! colon and the digest of the search; `-` where there was no relaxation yet.
//!
//! ```text
//! 85944171f73967e8/57:af63dc4c8601ec8c cbf29ce484222325 -
//! ```

use super::{RivalResult, RootReport, SearchReport, Status, WAITS};
use crate::hash::hex;

/// What was found when results were compared with those of a digest.
#[derive(Debug, Clone, PartialEq, Eq)]
pub enum Comparison {
    /// The digest says nothing of this result.
    Unknown,
    /// The result has not come as far.
    Waiting,
    /// They are the same.
    Same,
    /// They differ, in what the clause says.
    Differs(String),
}

/// The digest of results; `None` where not one relaxation is solved. Times, titles, letters and
/// words do not count.
#[must_use]
pub fn digest(results: &[RivalResult]) -> Option<String> {
    let words: Vec<String> = results.iter().map(word).collect();
    words.iter().any(|word| word != "-").then(|| words.join(" "))
}

fn word(result: &RivalResult) -> String {
    let Some(root) = &result.root else { return "-".to_owned() };
    let root = of_root(result, root);
    match result.search.as_ref().filter(|search| is_replayed(search)) {
        Some(search) => format!("{root}/{}:{}", search.nodes, of_search(search)),
        None => root,
    }
}

/// Compares the result at a place with what a digest says of it.
#[must_use]
pub fn compare(digest: &str, place: usize, result: &RivalResult) -> Comparison {
    let Some(word) = digest.split_whitespace().nth(place).filter(|word| *word != "-") else {
        return Comparison::Unknown;
    };
    let (root, search) = word.split_once('/').map_or((word, None), |(a, b)| (a, Some(b)));
    let Some(found) = &result.root else { return Comparison::Waiting };
    if of_root(result, found) != root {
        return Comparison::Differs("the relaxation".to_owned());
    }
    let Some(search) = search else { return Comparison::Same };
    let Some(found) = result.search.as_ref().filter(|search| is_replayed(search)) else {
        return Comparison::Waiting;
    };
    if search == format!("{}:{}", found.nodes, of_search(found)) {
        return Comparison::Same;
    }
    let nodes = search.split_once(':').map_or("", |(nodes, _)| nodes);
    Comparison::Differs(if nodes == found.nodes.to_string() {
        format!("the search, of {nodes} nodes as before")
    } else {
        format!("the search: {nodes} nodes before, {} now", found.nodes)
    })
}

/// Whether a search ended where a replay of the scenario ends: not in a pause, by a clock, or
/// inside a node.
fn is_replayed(search: &SearchReport) -> bool {
    let stopped = search.stopped.as_deref().unwrap_or_default();
    let steered = matches!(stopped, "paused" | "stopped" | WAITS);
    let by_clock = stopped.starts_with("the time limit");
    let ended = search.status != Status::Error && search.nodes > 0;
    ended && !steered && !by_clock
}

fn of_root(result: &RivalResult, root: &RootReport) -> String {
    let families: Vec<_> = result
        .families
        .iter()
        .map(|family| (&family.name, family.state, family.rows, &family.decades))
        .collect();
    let size = (result.rows, result.columns, result.integer_columns, result.nonzeros);
    hashed(&(result.maximise, size, families, fields(root)))
}

/// The fields that count, in the order in which links have them: links made before a field was
/// added still say "same".
fn fields(root: &RootReport) -> impl serde::Serialize + '_ {
    let bound = (root.status, root.bound, root.checked, &root.checked_bound, None::<f64>);
    let work = (root.iterations, root.fractional, root.rounds, root.added, &root.added_by_family);
    (bound, work, &root.ray, None::<&str>)
}

fn of_search(search: &SearchReport) -> String {
    let outcome = (search.status, search.bound, search.incumbent, search.gap);
    let counts = (search.nodes, search.open, search.iterations, search.work);
    hashed(&(outcome, counts, &search.solution, search.checked, None::<&str>))
}

fn hashed(value: &impl serde::Serialize) -> String {
    hex(&postcard::to_allocvec(value).unwrap_or_default())
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::results::Proof;

    fn root(bound: f64) -> RootReport {
        RootReport {
            status: Status::Optimal,
            bound: Some(bound),
            checked: true,
            iterations: 7,
            fractional: 2,
            ..RootReport::default()
        }
    }

    fn search(nodes: u32, stopped: Option<&str>) -> SearchReport {
        SearchReport {
            status: if stopped.is_some() { Status::Limit } else { Status::Optimal },
            bound: Some(9.0),
            incumbent: Some(9.0),
            gap: Some(0.0),
            nodes,
            open: 0,
            iterations: 70,
            work: 1000,
            solution: Vec::new(),
            checked: true,
            stopped: stopped.map(str::to_owned),
            ..SearchReport::default()
        }
    }

    fn result(root_bound: f64, found: Option<SearchReport>) -> RivalResult {
        RivalResult { root: Some(root(root_bound)), search: found, ..RivalResult::default() }
    }

    #[test]
    fn the_same_results_are_the_same_whatever_they_are_called() {
        let results = [result(5.0, Some(search(57, None))), RivalResult::default()];
        let digest = digest(&results).unwrap();
        assert!(digest.contains("/57:") && digest.ends_with(" -"), "{digest}");
        let mut other = results[0].clone();
        other.title = "Mine".to_owned();
        if let Some(root) = &mut other.root {
            root.second_opinion = Some(5.0);
        }
        assert_eq!(compare(&digest, 0, &other), Comparison::Same);
        assert_eq!(compare(&digest, 1, &other), Comparison::Unknown);
        assert_eq!(compare(&digest, 2, &other), Comparison::Unknown);
        assert_eq!(super::digest(&[RivalResult::default()]), None);
    }

    /// A link of the first version, which knew no field for how a bound was proved.
    #[test]
    fn links_made_before_say_the_same() {
        assert_eq!(digest(&[result(5.0, None)]).unwrap(), "4facb69c8e6761bc");
        let mut proved = result(5.0, None);
        if let Some(root) = &mut proved.root {
            (root.proof, root.checked_within) = (Proof::Exact, Some(0.5));
        }
        assert_eq!(digest(&[proved]), digest(&[result(5.0, None)]));
    }

    #[test]
    fn what_differs_is_named() {
        let made = digest(&[result(5.0, Some(search(57, None)))]).unwrap();
        let found = |result: &RivalResult| compare(&made, 0, result);
        let Comparison::Differs(what) = found(&result(5.5, Some(search(57, None)))) else {
            panic!("the bound is another")
        };
        assert_eq!(what, "the relaxation");
        let Comparison::Differs(what) = found(&result(5.0, Some(search(60, None)))) else {
            panic!("the search is another")
        };
        assert_eq!(what, "the search: 57 nodes before, 60 now");
        let worse = SearchReport { work: 1001, ..search(57, None) };
        assert!(matches!(found(&result(5.0, Some(worse))), Comparison::Differs(_)));
    }

    #[test]
    fn a_search_that_rests_is_waited_for() {
        let made = digest(&[result(5.0, Some(search(57, Some("node limit"))))]).unwrap();
        for stopped in ["paused", "stopped", WAITS, "the time limit of 3 s"] {
            let resting = result(5.0, Some(search(57, Some(stopped))));
            assert_eq!(compare(&made, 0, &resting), Comparison::Waiting);
            assert!(!digest(&[resting]).unwrap().contains('/'));
        }
        assert_eq!(compare(&made, 0, &RivalResult::default()), Comparison::Waiting);
        let ended = result(5.0, Some(search(57, Some("stopped by hand"))));
        assert_eq!(compare(&made, 0, &ended), Comparison::Same);
        let roots = digest(&[result(5.0, None)]).unwrap();
        assert_eq!(compare(&roots, 0, &ended), Comparison::Same);
    }
}
