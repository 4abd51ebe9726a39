//! What came of proving a search again, in sentences.

use record::results::{AuditReport, Judgement};

use crate::number::{count, of};

/// So many nodes are named; of the others the number is told.
const NAMED: usize = 10;

/// The whole in a sentence, then what is wrong or open, a sentence each.
///
/// ```
/// use record::results::{AuditReport, Judgement};
/// let found = AuditReport {
///     judgement: Judgement::Proved,
///     value: Some("214".to_owned()),
///     leaves: 216,
///     ..AuditReport::default()
/// };
/// assert_eq!(
///     hullward_report::audit::sentences(&found),
///     ["Proved again: no plan is better than 214. All 216 leaves, and the plan, in exact arithmetic."]
/// );
/// ```
#[must_use]
pub fn sentences(found: &AuditReport) -> Vec<String> {
    let mut all = vec![whole(found)];
    if found.judgement == Judgement::Proved {
        let more = further(found);
        if !more.is_empty() {
            all.push(more);
        }
    }
    let faults = found.faults.iter().take(NAMED);
    all.extend(faults.map(|(node, why)| format!("Node {node} {why}.")));
    if found.judgement != Judgement::Refused && !found.open.is_empty() {
        all.push(format!("Not proved: {}.", nodes(&found.open)));
    }
    all
}

fn whole(found: &AuditReport) -> String {
    let leaves = of(u64::from(found.leaves), "leaf").replace("leafs", "leaves");
    match (found.judgement, &found.value) {
        (Judgement::Proved, Some(value)) => format!(
            "Proved again: no plan is better than {value}. All {leaves}, and the plan, in exact \
             arithmetic."
        ),
        (Judgement::Proved, None) if found.given => format!(
            "Proved again: no plan is better than the value that was given, for which the log has \
             no plan. All {leaves} in exact arithmetic."
        ),
        (Judgement::Proved, None) => {
            format!("Proved again: there is no plan. All {leaves} in exact arithmetic.")
        }
        (Judgement::Refused, _) => {
            let places = of(found.faults.len() as u64, "place");
            format!("Refused: the log is wrong in {places}.")
        }
        (Judgement::Open, _) if found.open.is_empty() => {
            format!("Stopped, so this is no proof: {leaves} proved until then.")
        }
        (Judgement::Open, _) => {
            let open = count(found.open.len() as u64);
            format!("Not a proof: {leaves} proved, {open} open.")
        }
    }
}

/// What else was proved, and how far beyond the log's own branchings that went.
fn further(found: &AuditReport) -> String {
    let mut parts = Vec::new();
    if found.cuts > 0 {
        parts.push(format!("{} proved as well", of(u64::from(found.cuts), "general cut")));
    }
    if found.tightened > 0 {
        let bounds = of(u64::from(found.tightened), "tightened bound");
        parts.push(format!("{bounds} proved as well"));
    }
    if found.parts > 0 {
        let more = of(u64::from(found.parts), "further part");
        parts.push(format!("leaves that its rows alone do not close took {more}"));
    }
    let text = parts.join("; ");
    if text.is_empty() { text } else { format!("{text}.") }
}

fn nodes(all: &[u32]) -> String {
    let named: Vec<String> = all.iter().take(NAMED).map(u32::to_string).collect();
    let word = if all.len() == 1 { "node" } else { "nodes" };
    let more = all.len().saturating_sub(NAMED);
    let more = if more > 0 { format!(" and {} more", count(more as u64)) } else { String::new() };
    format!("{word} {}{more}", named.join(", "))
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn what_is_wrong_or_open_is_named() {
        let refused = AuditReport {
            judgement: Judgement::Refused,
            faults: vec![(7, "is not in the log".to_owned())],
            ..AuditReport::default()
        };
        let text = sentences(&refused);
        assert_eq!(text, ["Refused: the log is wrong in 1 place.", "Node 7 is not in the log."]);
        let open = AuditReport {
            leaves: 1,
            open: (1..=12).collect(),
            judgement: Judgement::Open,
            ..AuditReport::default()
        };
        let text = sentences(&open);
        assert_eq!(text[0], "Not a proof: 1 leaf proved, 12 open.");
        assert!(text[1].ends_with("9, 10 and 2 more."), "{text:?}");
    }

    #[test]
    fn a_value_that_was_given_is_not_called_a_plan() {
        let stopped = AuditReport { leaves: 1, ..AuditReport::default() };
        assert_eq!(
            sentences(&stopped),
            ["Stopped, so this is no proof: 1 leaf proved until then."]
        );
        let proved = AuditReport {
            judgement: Judgement::Proved,
            given: true,
            leaves: 3,
            tightened: 4,
            parts: 2,
            ..AuditReport::default()
        };
        let text = sentences(&proved);
        assert!(text[0].contains("the value that was given"), "{text:?}");
        assert!(text[1].starts_with("4 tightened bounds proved as well; leaves"), "{text:?}");
        let none = AuditReport { given: false, ..proved };
        assert!(sentences(&none)[0].contains("there is no plan"));
    }
}
