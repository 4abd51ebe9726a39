//! What a rival is once it is expanded.

use std::collections::BTreeMap;

use model::{FamilyId, FamilyStatistics, LabelId, Model, Sense, VariableId};
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

/// The stops of the map by label, and the variable that is drawn there.
#[derive(Debug, Clone, Default)]
pub(crate) struct Stops {
    places: BTreeMap<LabelId, u32>,
    drawn: Option<VariableId>,
}

impl Stops {
    /// The stops of an instance as the model knows them. Drawn is the first variable over pairs
    /// of stops that must be whole, else the first over pairs of stops: of labels and flows
    /// beside arcs, a map shows the arcs.
    pub(crate) fn new(model: &Model, labels: &[String]) -> Self {
        let known = labels
            .iter()
            .zip(0..)
            .filter_map(|(label, place)| model.labels().find(label).map(|label| (label, place)));
        let mut stops = Self { places: known.collect(), drawn: None };
        let over_pairs = |whole: bool| {
            model.variables().iter().position(|variable| {
                let columns = variable.columns.clone().map(model::ColumnId);
                !variable.columns.is_empty()
                    && columns
                        .clone()
                        .all(|column| stops.pair(model.column_tuple(column)).is_some())
                    && columns
                        .clone()
                        .all(|column| !whole || model.columns()[column.index()].integer)
            })
        };
        stops.drawn = over_pairs(true).or_else(|| over_pairs(false)).map(VariableId::from_index);
        stops
    }

    /// The two stops of a column that is drawn on the map.
    pub(crate) fn arc(&self, model: &Model, column: model::ColumnId) -> Option<(u32, u32)> {
        let drawn = Some(model.columns()[column.index()].variable) == self.drawn;
        if drawn { self.pair(model.column_tuple(column)) } else { None }
    }

    fn pair(&self, tuple: &[LabelId]) -> Option<(u32, u32)> {
        let [from, to] = tuple else { return None };
        Some((*self.places.get(from)?, *self.places.get(to)?))
    }
}
