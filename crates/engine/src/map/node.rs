//! A node in full.

use model::{ColumnId, Model};
use record::message::{ColumnValue, Cycle, FamilyAtNode, NodeDetail, ViolatedSubset};

use super::event::{branch, node_state, number};
use super::root::proved;
use super::{Drawings, column_words, finite, tidy};

/// Values of less are not listed.
const ZERO: f64 = 1e-9;

/// Values nearer to a whole number are whole: the search's own tolerance.
const INTEGRALITY: f64 = 1e-6;

/// The node as it is shown: values that are not 0, drawings, violated sets.
pub(crate) fn node_detail(model: &Model, drawings: &Drawings, view: &tree::NodeView) -> NodeDetail {
    let (proof, checked_within) = proved(view.bound, view.checked_bound.as_ref(), view.exact);
    NodeDetail {
        node: number(view.node),
        state: node_state(view.state),
        depth: view.depth,
        bound: view.bound.and_then(finite),
        checked_bound: view.checked_bound.as_ref().map(ToString::to_string),
        proof,
        checked_within,
        path: view.path.iter().map(branch).collect(),
        values: values(model, view),
        drawings: drawings.of(model, &view.x),
        cycle: view.cycle.as_ref().map(|found| cycle(model, found)),
        families: view.families.iter().map(family).collect(),
        violated: view.violated.iter().map(|found| violated(model, found)).collect(),
        ray: view.ray.iter().map(|(row, y)| (row.clone(), tidy(*y))).collect(),
        ahead: view.ahead,
        branching: view.branching.as_ref().map(ToString::to_string),
        closing: view.closing.as_ref().map(ToString::to_string),
    }
}

fn values(model: &Model, view: &tree::NodeView) -> Vec<ColumnValue> {
    let columns = (0..).map(ColumnId).zip(view.x.iter().zip(&view.reduced_costs));
    let shown = columns.filter(|(_, (value, _))| value.abs() > ZERO);
    let values = shown.map(|(id, (&value, &reduced_cost))| {
        let column = &model.columns()[id.index()];
        ColumnValue {
            column: id.0,
            value: tidy(value),
            reduced_cost: tidy(reduced_cost),
            cost: model.numbers().float(column.cost),
            fractional: column.integer && (value - value.round()).abs() > INTEGRALITY,
            gains: gains(view, id),
            on: if view.branchable.binary_search(&id).is_ok() {
                column_words(model, id)
            } else {
                Vec::new()
            },
        }
    });
    values.collect()
}

fn gains(view: &tree::NodeView, column: ColumnId) -> Option<(f64, f64)> {
    let at = view.expected.binary_search_by_key(&column, |(column, _)| *column).ok()?;
    let [down, up] = view.expected[at].1;
    Some((tidy(down), tidy(up)))
}

fn family(found: &tree::FamilyView) -> FamilyAtNode {
    let tree::FamilyView { family, rows, held, priced, greatest } = found;
    let (rows, held, priced) = (*rows, *held, *priced);
    FamilyAtNode { family: family.clone(), rows, held, priced, greatest: tidy(*greatest) }
}

fn cycle(model: &Model, found: &tree::Cycle) -> Cycle {
    let name = |&label: &model::LabelId| model.labels().name(label).to_owned();
    Cycle { stops: found.stops.iter().map(name).collect(), total: model::nearest_f64(&found.total) }
}

fn violated(model: &Model, found: &tree::ViolatedSubset) -> ViolatedSubset {
    let name = |&label: &model::LabelId| model.labels().name(label).to_owned();
    ViolatedSubset {
        family: found.family.clone(),
        tuple: found.tuple.iter().map(name).collect(),
        subset: found.subset.iter().map(name).collect(),
        violation: tidy(found.violation),
    }
}
