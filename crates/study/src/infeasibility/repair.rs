//! The cheapest way to relax: elastic rows.

use std::collections::{BTreeMap, BTreeSet};
use std::rc::Rc;

use model::{
    ColumnId, ColumnSpec, FamilyId, FamilyState, Model, ModelBuilder, Number, RowId, Sense,
    nearest_f64,
};
use record::study::{Repair, RivalInfeasibility};

use super::filter::Part;
use crate::desk::Desk;
use crate::plan::Plan;

/// A violation of less is rounding.
const ROUNDING: f64 = 1e-7;

/// Relaxes each family of the conflict alone, then all written families together.
pub(super) async fn repairs(
    desk: &Desk,
    (model, kept): (&Rc<Model>, &[Part]),
    plan: &Plan,
    out: &mut RivalInfeasibility,
) {
    let in_conflict: BTreeSet<FamilyId> = kept
        .iter()
        .filter_map(|part| match part {
            Part::Row(row) => Some(model.row_family(*row)),
            Part::Family(_) => None,
        })
        .collect();
    let all: Vec<FamilyId> = model
        .families_that_hold()
        .into_iter()
        .filter(|id| model.families()[id.index()].state == FamilyState::In)
        .filter(|id| !model.families()[id.index()].rows.is_empty())
        .collect();
    let mut ways: Vec<Vec<FamilyId>> = in_conflict.into_iter().map(|id| vec![id]).collect();
    if !ways.contains(&all) {
        ways.push(all);
    }
    for way in ways {
        let names = way.iter().map(|id| model.families()[id.index()].name.clone());
        let names: Vec<String> = names.collect();
        desk.say(format!("{}: the cheapest way to relax {}", out.rival, names.join(", ")));
        if let Some(elastic) = Elastic::of(model, &way) {
            out.repairs.push(elastic.solved(desk, plan, names).await);
            out.solved += 1;
        }
    }
}

/// A model whose rows may be violated at a cost.
struct Elastic {
    model: Rc<Model>,
    /// Each column of violation with its row and what a unit of it costs.
    slacks: Vec<(ColumnId, RowId)>,
    costs: BTreeMap<ColumnId, f64>,
}

impl Elastic {
    /// `None` where the model has grown too large.
    fn of(model: &Model, families: &[FamilyId]) -> Option<Self> {
        let mut builder = ModelBuilder::from_model(model.clone());
        builder.variable("violation", false);
        let (mut rows, mut slacks, mut prices) = (BTreeMap::new(), Vec::new(), Vec::new());
        for id in families {
            let price = price(model, *id, families.len() > 1);
            for row in model.families()[id.index()].rows.clone().map(RowId) {
                let mut written = model.row(row);
                let sides = [
                    (written.lower.is_some(), Number::ONE),
                    (written.upper.is_some(), -Number::ONE),
                ];
                for (_, sign) in sides.into_iter().filter(|(has, _)| *has) {
                    let spec = ColumnSpec {
                        lower: Some(Number::ZERO),
                        upper: None,
                        cost: Number::ZERO,
                        integer: false,
                    };
                    let column = builder.column(&[], &spec).ok()?;
                    written.entries.push((column, sign));
                    slacks.push((column, row));
                    prices.push((column, price.clone()));
                }
                rows.insert(row, written);
            }
        }
        let elastic = builder.build().priced(Sense::Minimise, &prices).rewritten(&rows).ok()?;
        let costs = prices.iter().map(|(column, price)| (*column, nearest_f64(price))).collect();
        Some(Self { model: Rc::new(elastic), slacks, costs })
    }

    async fn solved(&self, desk: &Desk, plan: &Plan, families: Vec<String>) -> Repair {
        let solved = desk.solve(&self.model, plan.search()).await;
        let mut changes: BTreeMap<RowId, f64> = BTreeMap::new();
        let mut violation = 0.0;
        for (column, row) in &self.slacks {
            let value = solved.solution.get(column.index()).copied().unwrap_or(0.0);
            if value > ROUNDING {
                *changes.entry(*row).or_default() += value;
                violation += value * self.costs[column];
            }
        }
        let changes = changes.into_iter().map(|(row, by)| (self.model.row_name(row), by)).collect();
        Repair {
            families,
            violation: solved.incumbent.map(|_| violation),
            proved: solved.status == tree::Status::Optimal,
            hopeless: solved.is_infeasible(),
            changes,
        }
    }
}

/// What a unit of violation costs: 1, or where families are weighed against each other, 1 over
/// the largest side of the family.
fn price(model: &Model, family: FamilyId, weighed: bool) -> Number {
    if !weighed {
        return Number::ONE;
    }
    let rows = model.families()[family.index()].rows.clone().map(RowId);
    let sides = rows.flat_map(|row| {
        let (lower, upper) = model.row_sides(row);
        [lower, upper].into_iter().flatten()
    });
    let size = |id| {
        let side: &Number = model.numbers().exact(id);
        if *side < Number::ZERO { -side.clone() } else { side.clone() }
    };
    let largest = sides.map(size).max().filter(|largest| *largest > Number::ZERO);
    largest.map_or(Number::ONE, |largest| Number::ONE / largest)
}
