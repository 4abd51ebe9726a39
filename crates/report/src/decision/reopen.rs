//! What would reopen a decision: each condition is read off the evidence it limits.

use record::results::Status;
use record::study::{EquivalenceKind, EquivalenceLevel, OrderLevel, Report};

use super::Evidence;
use super::cited::{Cited, Marks};
use crate::number::{count, short};

/// The conditions, in the order of the evidence.
pub(super) fn conditions(evidence: &Evidence<'_>, marks: &Marks) -> Vec<Cited> {
    let mut out: Vec<Cited> = Vec::new();
    for (place, (_, report)) in evidence.studies.iter().enumerate() {
        let mut own = Vec::new();
        of_study(report, &mut own);
        let cited = |section: usize| marks.studies[place].get(section).copied();
        let own = own.into_iter();
        out.extend(own.map(|(condition, at)| (condition, cited(at).into_iter().collect())));
    }
    let stopped = evidence.results.iter().filter(|result| result.status == Status::Limit);
    let stopped: Vec<&str> = stopped.map(|result| result.rival.as_str()).collect();
    if !stopped.is_empty() {
        let condition = format!(
            "a longer run: {} stopped by a limit, so their node counts are lower bounds",
            stopped.join(", ")
        );
        out.push((condition, marks.results.clone()));
    }
    let mut beside = |condition: &str| out.push((condition.to_owned(), Vec::new()));
    let asked = |kind: &str| evidence.studies.iter().any(|(_, report)| report.kind() == kind);
    let has = |kind: &str| {
        let mut made = evidence.studies.iter().map(|(_, report)| report);
        made.any(|report| report.kind() == kind && !matches!(report, Report::Left { .. }))
    };
    match (has("equivalence"), asked("equivalence")) {
        (true, _) => {}
        (_, true) => beside("doubt that the rivals are the same problem: that was not settled"),
        _ => beside("doubt that the rivals are the same problem: that was not studied"),
    }
    match (has("growth"), asked("growth")) {
        (true, _) => {}
        (_, true) => beside("an instance of another size: the study of growth came to no end"),
        _ => beside("an instance of another size: growth was not studied"),
    }
    let data = if evidence.scenario.instance.is_some() {
        "another objective, other data or another choice of depot or root"
    } else {
        "another objective, or other data"
    };
    beside(data);
    out.dedup();
    out
}

/// The conditions of a study, each with the place of the section that it is read off.
fn of_study(report: &Report, out: &mut Vec<(String, usize)>) {
    let mut first = |condition: String| out.push((condition, 0));
    match report {
        Report::Equivalence(verdict) => {
            let pair = verdict.rivals.join(" and ");
            match (verdict.equivalent, verdict.kind) {
                (Some(true), EquivalenceKind::NonNegativeCosts) => {
                    first(format!("a negative cost: {pair} agree for costs of 0 or more alone"));
                }
                (Some(true), EquivalenceKind::ThisObjective) => {
                    first(format!("another objective: {pair} agree for this one alone"));
                }
                (Some(true), EquivalenceKind::Sets)
                    if verdict.level != EquivalenceLevel::Proved =>
                {
                    first(format!(
                        "a plan on which {pair} differ: none was found, not all were tried"
                    ));
                }
                (Some(true), EquivalenceKind::Sets) => {}
                (Some(false) | None, _) => {
                    first(format!("{pair} are not shown to be the same problem"));
                }
            }
        }
        Report::Order(order) if order.level == OrderLevel::Observed => {
            let pair = order.rivals.join(" and ");
            first(format!("another instance: the order of {pair} was observed on this one alone"));
        }
        Report::Growth(growth) => {
            let largest = growth.means.iter().map(|mean| mean.size).max().unwrap_or(0);
            first(format!(
                "an instance larger than {}: nothing larger was run, what stands beyond is drawn out",
                count(u64::from(largest))
            ));
            for pair in growth.pairs.iter().filter(|pair| !pair.distinguishable) {
                first(format!(
                    "more instances: {} could not be told apart",
                    pair.rivals.join(" and ")
                ));
            }
        }
        Report::Numerics(numerics) => {
            for (place, rival) in numerics.rivals.iter().enumerate() {
                let condition = format!(
                    "coefficients of {} over {}, the largest that was seen",
                    rival.rival,
                    short(rival.matrix.1)
                );
                out.push((condition, place));
            }
        }
        _ => {}
    }
}
