//! What a rival is once it is expanded.

use model::{FamilyId, FamilyStatistics, Model, Sense};
use record::message::{Complaint, RivalReport};
use record::results::FamilyReport;
use record::scenario::FamilyState;
use separate::Separator;

/// The report of an expanded rival, before its relaxation is solved.
pub(crate) fn rival_report(
    model: &Model,
    separators: &[Separator],
    title: &str,
    complaints: Vec<Complaint>,
) -> RivalReport {
    let statistics = model.statistics();
    let columns = (0..statistics.columns).map(model::ColumnId);
    RivalReport {
        title: title.to_owned(),
        maximise: model.sense() == Sense::Maximise,
        rows: statistics.rows,
        columns: statistics.columns,
        integer_columns: statistics.integer_columns,
        nonzeros: statistics.nonzeros,
        families: family_reports(model, separators, statistics.families),
        column_names: columns.map(|column| model.column_name(column)).collect(),
        statistics: model.describe(),
        complaints,
    }
}

/// The families with their sizes; nothing is added yet.
fn family_reports(
    model: &Model,
    separators: &[Separator],
    statistics: Vec<FamilyStatistics>,
) -> Vec<FamilyReport> {
    let families = model.families().iter().zip(statistics).enumerate();
    let reports = families.map(|(index, (family, counted))| FamilyReport {
        name: family.name.clone(),
        state: state(family.state),
        rows: if family.state == model::FamilyState::In { counted.rows } else { 0 },
        added: 0,
        decades: counted.decades.iter().map(|(power, count)| (power.to_string(), *count)).collect(),
        separation: separation(model, separators, FamilyId::from_index(index)),
    });
    reports.collect()
}

/// How a family is separated, in words; empty when it is not.
fn separation(model: &Model, separators: &[Separator], id: FamilyId) -> String {
    let family = &model.families()[id.index()];
    if family.state != model::FamilyState::OnDemand {
        return String::new();
    }
    if !family.over_subsets {
        return "each violated row".to_owned();
    }
    let member = model.subset_families().iter().position(|subsets| subsets.family == id);
    let separator = member.and_then(|member| separators.get(member));
    separator.map_or_else(String::new, |separator| separator.description().to_owned())
}

fn state(state: model::FamilyState) -> FamilyState {
    match state {
        model::FamilyState::In => FamilyState::In,
        model::FamilyState::OnDemand => FamilyState::OnDemand,
        model::FamilyState::Out => FamilyState::Out,
    }
}
