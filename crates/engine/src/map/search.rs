//! What a search gave, so far or at its end.

use std::collections::BTreeMap;

use model::{ColumnId, Model};
use record::results::{
    ConflictLevel, ConflictReport, CutsReport, NodeWorkReport, SearchReport, SolutionEntry, Status,
    WAITS,
};

use super::{finite, measures, status, tidy};

/// Values of less are not listed.
const ZERO: f64 = 1e-9;

/// The report of a search. One that stands still is reported as stopped by a limit: paused.
pub(crate) fn search_report(model: &Model, search: &tree::Search) -> SearchReport {
    let summary = search.summary();
    let measures = search.measures();
    let paused = summary.status == tree::Status::Running;
    let incumbent = summary.incumbent.and_then(finite);
    SearchReport {
        status: status(summary.status),
        bound: summary.bound.and_then(finite),
        incumbent,
        gap: summary.gap.and_then(finite).filter(|_| incumbent != Some(0.0)),
        nodes: summary.nodes,
        open: summary.open,
        iterations: summary.iterations,
        work: summary.work,
        solution: solution(model, &summary.solution),
        checked: summary.checked,
        stopped: if paused { Some(rest(search).to_owned()) } else { summary.stopped },
        node_work: NodeWorkReport {
            closed: summary.node_work.closed,
            tightened: summary.node_work.tightened,
            fixed: summary.node_work.fixed,
            stepped: summary.node_work.stepped,
            cut_off: summary.node_work.cut_off,
        },
        cuts: search.cuts().map(cuts_report),
        diagnosis: measures::diagnosis(model, &search.diagnosis(&measures)),
        estimate: search.estimate().map(measures::estimate),
        measures: Box::new(measures::measures(&measures)),
        plan: None,
    }
}

fn cuts_report(cuts: tree::CutsResult) -> CutsReport {
    CutsReport {
        bound: cuts.bound.and_then(finite),
        rounds: cuts.rounds,
        added: by_class(cuts.added),
        kept: by_class(cuts.kept),
        moved: by_class(cuts.moved.map(tidy)),
        below: cuts.below,
        purged: cuts.purged,
        returned: cuts.returned,
    }
}

fn by_class<T>(values: tree::ByClass<T>) -> BTreeMap<String, T> {
    let words = tree::Class::ALL.iter().map(|(_, word)| (*word).to_owned());
    words.zip(values).collect()
}

/// Why a search stands still that has not ended.
fn rest(search: &tree::Search) -> &'static str {
    if search.waits_for_a_branching() { WAITS } else { "paused" }
}

/// The report of a search that never began.
pub(crate) fn nothing_searched(why: &str) -> SearchReport {
    SearchReport { status: Status::Limit, stopped: Some(why.to_owned()), ..SearchReport::default() }
}

/// The report of families in conflict.
pub(crate) fn conflict_report(model: &Model, found: &tree::ConflictResult) -> ConflictReport {
    let families = found.families.iter();
    ConflictReport {
        families: families.map(|id| model.families()[id.index()].name.clone()).collect(),
        level: match found.certainty {
            tree::Certainty::Smallest => ConflictLevel::Smallest,
            tree::Certainty::Irreducible => ConflictLevel::Irreducible,
            tree::Certainty::Undecided => ConflictLevel::Undecided,
        },
        nodes: found.nodes,
        trials: found.trials,
    }
}

fn solution(model: &Model, values: &[f64]) -> Vec<SolutionEntry> {
    let columns = (0..).map(ColumnId).zip(values).filter(|(_, value)| value.abs() > ZERO);
    let entries = columns.map(|(column, &value)| SolutionEntry {
        variable: model.variables()[model.columns()[column.index()].variable.index()].name.clone(),
        indices: labels(model, model.column_tuple(column)),
        value: tidy(value),
    });
    entries.collect()
}

fn labels(model: &Model, tuple: &[model::LabelId]) -> Vec<String> {
    tuple.iter().map(|&label| model.labels().name(label).to_owned()).collect()
}
