//! Checks on results that hold whatever the model is: what fails here is our fault.

use record::results::RivalResult;

/// Relative to the values compared: far above what the search's tolerances allow.
const TOLERANCE: f64 = 1e-5;

/// What is wrong with a result, in words; `None` when nothing is.
pub(crate) fn verify(result: &RivalResult) -> Option<String> {
    let sign = if result.maximise { -1.0 } else { 1.0 };
    let root = result.root.as_ref().and_then(|root| root.bound);
    let search = result.search.as_ref();
    let bound = search.and_then(|search| search.bound);
    let incumbent = search.and_then(|search| search.incumbent);
    let exceeds = |low: Option<f64>, high: Option<f64>| match (low, high) {
        (Some(low), Some(high)) => sign * (low - high) > TOLERANCE * (1.0 + high.abs()),
        _ => false,
    };
    if exceeds(bound, incumbent) {
        return Some(format!("rival {}: the bound of the tree passes a solution", result.rival));
    }
    if exceeds(root, incumbent) {
        return Some(format!("rival {}: the bound of the root passes a solution", result.rival));
    }
    None
}

#[cfg(test)]
mod tests {
    use super::*;
    use record::results::{SearchReport, Status};

    fn result(bound: f64, incumbent: f64, maximise: bool) -> RivalResult {
        let search = SearchReport {
            status: Status::Limit,
            bound: Some(bound),
            incumbent: Some(incumbent),
            gap: None,
            nodes: 1,
            open: 0,
            iterations: 0,
            work: 0,
            solution: Vec::new(),
            checked: false,
            stopped: None,
            ..SearchReport::default()
        };
        RivalResult { search: Some(search), maximise, ..RivalResult::default() }
    }

    #[test]
    fn a_bound_past_a_solution_is_found_in_both_directions() {
        assert_eq!(verify(&result(10.0, 10.0, false)), None);
        assert_eq!(verify(&result(9.0, 10.0, false)), None);
        assert!(verify(&result(10.1, 10.0, false)).is_some());
        assert_eq!(verify(&result(10.1, 10.0, true)), None);
        assert!(verify(&result(9.0, 10.0, true)).is_some());
    }
}
