//! From what was found to the verdict.

use record::study::{EquivalenceKind as Kind, EquivalenceLevel as Level};

use super::Findings;

/// Whether they are the same problem, how far that goes, and in which sense.
pub(super) fn verdict(findings: &Findings) -> (Option<bool>, Level, Kind) {
    let tried = if findings.all_compared || findings.rows_hold {
        Level::Proved
    } else if findings.compared.is_some() {
        Level::Enumerated
    } else {
        Level::Unrefuted
    };
    if findings.same_optimum == Some(false) {
        return (Some(false), Level::Proved, Kind::ThisObjective);
    }
    if findings.no_names {
        return (findings.same_optimum, Level::Unrefuted, Kind::ThisObjective);
    }
    if !findings.plans_differ {
        let anything = findings.evidence.iter().any(|evidence| evidence.agrees == Some(true));
        return (anything.then_some(true), tried, Kind::Sets);
    }
    match (findings.costs_differ, findings.same_optimum) {
        (Some(false), _) => (Some(true), Level::Unrefuted, Kind::NonNegativeCosts),
        (_, Some(true)) => (Some(true), Level::Unrefuted, Kind::ThisObjective),
        _ => (None, Level::Unrefuted, Kind::Sets),
    }
}

#[cfg(test)]
mod tests {
    use super::*;

    fn findings() -> Findings {
        let mut findings = Findings { same_optimum: Some(true), ..Findings::default() };
        findings.note("optimum", String::new(), Some(true), 2);
        findings
    }

    #[test]
    fn each_equivalence_has_its_verdict() {
        let mut same = findings();
        assert_eq!(verdict(&same), (Some(true), Level::Unrefuted, Kind::Sets));
        same.compared = Some(5);
        assert_eq!(verdict(&same), (Some(true), Level::Enumerated, Kind::Sets));
        same.all_compared = true;
        assert_eq!(verdict(&same), (Some(true), Level::Proved, Kind::Sets));

        let costs = Findings { plans_differ: true, costs_differ: Some(false), ..findings() };
        assert_eq!(verdict(&costs), (Some(true), Level::Unrefuted, Kind::NonNegativeCosts));
        let own = Findings { plans_differ: true, costs_differ: Some(true), ..findings() };
        assert_eq!(verdict(&own), (Some(true), Level::Unrefuted, Kind::ThisObjective));
        let other = Findings { same_optimum: Some(false), ..findings() };
        assert_eq!(verdict(&other), (Some(false), Level::Proved, Kind::ThisObjective));
        // Without a variable in common nothing is known of their plans.
        let strangers = Findings { no_names: true, ..findings() };
        assert_eq!(verdict(&strangers), (Some(true), Level::Unrefuted, Kind::ThisObjective));
        assert_eq!(verdict(&Findings::default()).0, None);
    }
}
