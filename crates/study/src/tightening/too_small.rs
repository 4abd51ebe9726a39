//! Rows that are more than a switch: where the binary opens them they still cut off a plan that every
//! other row admits. Where such a row is meant as a switch alone its coefficient is too small, and the
//! plan proves it; where it is a capacity that is as it should be.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use model::{ColumnId, FamilyId, Model, Row, Sense, nearest_f64};
use record::study::TooSmall;
use tree::Settings;

use super::switch::Switched;
use crate::desk::Desk;
use crate::infeasibility::says;
use crate::lift::entry;
use crate::plan::Plan;

/// Rows of a family that are tried; one plan a family is enough.
const MOST_TRIED: usize = 6;
/// Nodes of each search at most.
const NODES: u32 = 400;
/// More than rounding, relative to what the row allows.
const BEYOND: f64 = 1e-6;
/// A value of less is 0.
const ZERO: f64 = 1e-9;

/// A plan for each family of switches that cuts one off.
pub(super) async fn plans(
    desk: &Desk,
    (model, plan): (&Rc<Model>, &Plan),
    all: &[Switched],
) -> Vec<TooSmall> {
    let mut out = Vec::new();
    let (mut tried, mut shown) = (BTreeMap::<FamilyId, usize>::new(), BTreeSet::new());
    for switched in all {
        let family = model.row_family(switched.row);
        let count = tried.entry(family).or_default();
        if *count >= MOST_TRIED || shown.contains(&family) {
            continue;
        }
        *count += 1;
        if let Some(found) = cut_off(desk, (model, plan), switched).await {
            shown.insert(family);
            out.push(found);
        }
    }
    out
}

/// A plan of all other rows, with the switch open, that the row does not allow.
async fn cut_off(
    desk: &Desk,
    (model, plan): (&Rc<Model>, &Plan),
    switched: &Switched,
) -> Option<TooSmall> {
    let (open, allows) = (switched.open(), nearest_f64(&switched.allows()));
    let none = Row { entries: Vec::new(), lower: None, upper: None };
    let free = model.rewritten(&BTreeMap::from([(switched.row, none)])).ok()?;
    let free = free.bounded(&[(switched.switch, Some(open.clone()), Some(open.clone()))]);
    let free = Rc::new(free.priced(Sense::Maximise, &switched.rest()));
    let more = |reach: f64| reach > allows + BEYOND * (1.0 + allows.abs());
    if desk.relax(&free).await.bound.is_some_and(|reach| !more(reach)) {
        return None;
    }
    let settings = Settings { node_limit: Some(plan.nodes.min(NODES)), ..plan.search() };
    let solved = desk.solve(&free, settings).await;
    let reaches = solved.incumbent.filter(|reach| more(*reach))?;
    let value = |column: ColumnId| solved.solution.get(column.index()).copied();
    let columns = (0..model.columns().len()).map(ColumnId::from_index);
    let used = columns.filter_map(|column| Some((column, value(column)?)));
    let used = used.filter(|(_, value)| value.abs() > ZERO);
    let coefficient = nearest_f64(&switched.coefficient).abs();
    Some(TooSmall {
        row: model.row_name(switched.row),
        family: model.families()[model.row_family(switched.row).index()].name.clone(),
        says: says(model, &model.row(switched.row)),
        switch: model.column_name(switched.switch),
        open: nearest_f64(&open),
        allows,
        reaches,
        coefficient,
        needs: coefficient + (reaches - allows),
        plan: used.map(|(column, value)| entry(model, column, value)).collect(),
    })
}
