//! What a log rests on, from a search and back for an audit.

use model::{LabelId, Model, RowId, SubsetFamilyId};
use record::event::{Event, NodeNumber};
use record::ground::{Evidence, FoundRow, Tightening};
use record::results::{AuditReport, Judgement};
use record::scenario::Run;
use tree::{Branch, LoggedRow, NodeId, Testimony};

use super::derivation::{cuts, cuts_of};
use super::event::{branch, branch_of, logged, number};
use super::{settings, tidy};

/// What a search found on the way.
pub(crate) fn evidence(search: &tree::Search) -> Evidence {
    let told = search.evidence();
    let plan = (0..).zip(&told.plan).filter(|(_, value)| **value != 0.0);
    let branches = |all: &[Branch]| all.iter().map(branch).collect();
    Evidence {
        plan: plan.map(|(column, &value)| (column, tidy(value))).collect(),
        rows: told.rows.iter().map(found_row).collect(),
        tightened: search
            .tightened()
            .map(|(node, before, after)| Tightening {
                node: number(node),
                before: branches(before),
                after: branches(after),
            })
            .collect(),
        cuts: cuts(&told.sources, &told.cuts),
    }
}

pub(super) fn found_row(row: &LoggedRow) -> FoundRow {
    match row {
        LoggedRow::Written(row) => FoundRow::Written(row.0),
        LoggedRow::Member(family, subset) => FoundRow::Member {
            family: family.0,
            subset: subset.iter().map(|label| label.0).collect(),
        },
    }
}

/// What a log says of a search over `model`.
///
/// # Errors
/// What it names and the model does not have, as a sentence.
pub(crate) fn testimony(
    model: &Model,
    events: &[Event],
    evidence: &Evidence,
    run: &Run,
) -> Result<Testimony, String> {
    let columns = model.columns().len();
    let mut told = Testimony {
        plan: vec![0.0; columns],
        cutoff: run.best_known,
        own_bounds: settings(run, 0).cuts.is_empty() || !evidence.cuts.cuts.is_empty(),
        ..Testimony::default()
    };
    for &(column, value) in &evidence.plan {
        let place = told.plan.get_mut(column as usize);
        *place.ok_or("the plan has a column that the model does not have")? = value;
    }
    for row in &evidence.rows {
        told.rows.push(row_of(row));
    }
    (told.sources, told.cuts) = cuts_of(&evidence.cuts, columns)?;
    for event in events {
        if let Event::Created { branching: Some(branching), .. } = event
            && branching.column as usize >= columns
        {
            return Err("a branching is on a column that the model does not have".to_owned());
        }
        told.note(&logged(event));
    }
    for Tightening { node: NodeNumber(node), before, after } in &evidence.tightened {
        if before.iter().chain(after).any(|bound| bound.column as usize >= columns) {
            return Err("a bound is tightened that the model does not have".to_owned());
        }
        let before = before.iter().map(branch_of).collect();
        let after = after.iter().map(branch_of).collect();
        told.tighten(NodeId(*node), before, after);
    }
    Ok(told)
}

pub(super) fn row_of(row: &FoundRow) -> LoggedRow {
    match row {
        FoundRow::Written(row) => LoggedRow::Written(RowId(*row)),
        FoundRow::Member { family, subset } => LoggedRow::Member(
            SubsetFamilyId(*family),
            subset.iter().map(|&label| LabelId(label)).collect(),
        ),
    }
}

/// What an audit found.
pub(crate) fn audit_report(audit: &tree::Audit) -> AuditReport {
    let found = audit.result();
    let (_, nodes) = audit.progress();
    AuditReport {
        title: String::new(),
        judgement: match found.judgement {
            tree::Judgement::Proved => Judgement::Proved,
            tree::Judgement::Refused => Judgement::Refused,
            tree::Judgement::Open | tree::Judgement::Running => Judgement::Open,
        },
        value: found.value.map(|value| value.to_string()),
        given: found.given,
        nodes: u32::try_from(nodes).unwrap_or(u32::MAX),
        leaves: found.leaves,
        empty: found.empty,
        tightened: found.tightened,
        cuts: found.cuts,
        parts: found.parts,
        open: found.open.into_iter().map(|node| node.0).collect(),
        faults: found.faults.into_iter().map(|fault| (fault.node.0, fault.why)).collect(),
    }
}
