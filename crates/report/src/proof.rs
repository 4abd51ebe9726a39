//! What exact arithmetic proved of a bound, in words: the optimum itself, a bound near it, or nothing.

use record::results::Proof;

use crate::number::short;

/// A mark beside a figure.
///
/// ```
/// use record::results::Proof;
/// assert_eq!(hullward_report::proof::mark(Proof::Exact, None), "checked");
/// assert_eq!(hullward_report::proof::mark(Proof::Within, Some(0.25)), "checked to within 0.25");
/// ```
#[must_use]
pub fn mark(proof: Proof, within: Option<f64>) -> String {
    match (proof, within) {
        (Proof::Exact, _) => "checked".to_owned(),
        (Proof::Within, Some(away)) => format!("checked to within {}", short(away)),
        (Proof::Within, None) => "a bound checked".to_owned(),
        (Proof::None, _) => "not checked".to_owned(),
    }
}

/// What the mark means, with the proved bound as a fraction.
#[must_use]
pub fn meaning(proof: Proof, bound: Option<&str>) -> String {
    match (proof, bound) {
        (Proof::Exact, Some(bound)) => format!("proved to be the exact optimum: {bound}"),
        (Proof::Exact, None) => "proved in exact arithmetic".to_owned(),
        (Proof::Within, Some(bound)) => format!("proved as a bound, not as the optimum: {bound}"),
        (Proof::Within, None) | (Proof::None, _) => {
            "found in floating-point arithmetic, not proved".to_owned()
        }
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn the_optimum_a_bound_and_nothing_are_told_apart() {
        let marks =
            [mark(Proof::Exact, None), mark(Proof::Within, Some(2.5e-10)), mark(Proof::None, None)];
        assert_eq!(marks, ["checked", "checked to within 2.5 × 10⁻¹⁰", "not checked"]);
        assert_eq!(meaning(Proof::Exact, Some("20/3")), "proved to be the exact optimum: 20/3");
        assert!(meaning(Proof::Within, Some("20/3")).contains("not as the optimum"));
        assert!(meaning(Proof::None, None).contains("not proved"));
    }
}
