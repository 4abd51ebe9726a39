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
        let cited: Vec<usize> = marks.study(place).into_iter().collect();
        out.extend(own.into_iter().map(|condition| (condition, cited.clone())));
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
    let has = |kind: &str| evidence.studies.iter().any(|(_, report)| report.kind() == kind);
    if !has("equivalence") {
        beside("doubt that the rivals are the same problem: that was not studied");
    }
    if !has("growth") {
        beside("an instance of another size: growth was not studied");
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

fn of_study(report: &Report, out: &mut Vec<String>) {
    match report {
        Report::Equivalence(verdict) => {
            let pair = verdict.rivals.join(" and ");
            match (verdict.equivalent, verdict.kind) {
                (Some(true), EquivalenceKind::NonNegativeCosts) => {
                    out.push(format!("a negative cost: {pair} agree for costs of 0 or more alone"));
                }
                (Some(true), EquivalenceKind::ThisObjective) => {
                    out.push(format!("another objective: {pair} agree for this one alone"));
                }
                (Some(true), EquivalenceKind::Sets)
                    if verdict.level != EquivalenceLevel::Proved =>
                {
                    out.push(format!(
                        "a plan on which {pair} differ: none was found, not all were tried"
                    ));
                }
                (Some(true), EquivalenceKind::Sets) => {}
                (Some(false) | None, _) => {
                    out.push(format!("{pair} are not shown to be the same problem"));
                }
            }
        }
        Report::Order(order) if order.level == OrderLevel::Observed => {
            let pair = order.rivals.join(" and ");
            out.push(format!(
                "another instance: the order of {pair} was observed on this one alone"
            ));
        }
        Report::Growth(growth) => {
            let largest = growth.means.iter().map(|mean| mean.size).max().unwrap_or(0);
            out.push(format!(
                "an instance larger than {}: nothing larger was run, what stands beyond is drawn out",
                count(u64::from(largest))
            ));
            for pair in growth.pairs.iter().filter(|pair| !pair.distinguishable) {
                out.push(format!(
                    "more instances: {} could not be told apart",
                    pair.rivals.join(" and ")
                ));
            }
        }
        Report::Numerics(numerics) => {
            for rival in &numerics.rivals {
                out.push(format!(
                    "coefficients of {} over {}, the largest that was seen",
                    rival.rival,
                    short(rival.matrix.1)
                ));
            }
        }
        _ => {}
    }
}
