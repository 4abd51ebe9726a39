//! Plans in the shared variables: taken from one rival, put into another.

use std::rc::Rc;

use model::{ColumnId, Model};
use record::results::SolutionEntry;
use tree::{Conflict, ConflictLimits, Status};

use super::Case;
use crate::lift::{entry, held};
use crate::shared::Shared;

/// Values within so much of a whole number are that number.
const WHOLE: f64 = 1e-6;
/// Slices in which families in conflict are looked for, in non-zeros touched.
const SLICE: u64 = 200_000;

/// Values of shared columns.
#[derive(Debug, Clone, PartialEq)]
pub(crate) struct Placed {
    /// The pair of columns and the value.
    pub(crate) values: Vec<((ColumnId, ColumnId), f64)>,
    /// Columns that only the one who made the plan has, and that the plan uses.
    pub(crate) beyond: Vec<ColumnId>,
}

/// What a rival says of a plan.
#[derive(Debug, Clone, PartialEq)]
pub(crate) enum Outcome {
    /// Admitted, at this value of its own objective.
    Value(f64),
    /// Not admitted; the families that cannot hold with it.
    Refused(Vec<String>),
    /// A limit left it open.
    Open,
}

/// The shared part of a solution of the rival at `side`.
pub(crate) fn plan_of(solution: &[f64], shared: &Shared, side: usize) -> Placed {
    let at = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
    let values = shared.pairs.iter().map(|pair| (*pair, solution[at(pair).index()])).collect();
    let uses = |column: &ColumnId| solution[column.index()].abs() > WHOLE;
    let beyond = shared.only[side].iter().copied().filter(uses).collect();
    Placed { values, beyond }
}

impl Placed {
    /// The plan as results print it, every value other than 0, in the names of the rival at `side`.
    pub(crate) fn entries(&self, model: &Model, side: usize) -> Vec<SolutionEntry> {
        let own = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
        let shared = self.values.iter().filter(|(_, value)| value.abs() > WHOLE);
        let shared = shared.map(|(pair, value)| entry(model, own(pair), *value));
        shared.chain(self.beyond.iter().map(|&column| entry(model, column, 1.0))).collect()
    }
}

/// The rival at `side` with the deciding part of a plan fixed.
pub(crate) fn fixed(case: &Case<'_>, plan: &Placed, side: usize) -> Model {
    let [a, b] = case.rivals;
    let deciding = case.shared.deciding(&a.model, &b.model);
    let own = |pair: &(ColumnId, ColumnId)| if side == 0 { pair.0 } else { pair.1 };
    let is_deciding = |pair: &(ColumnId, ColumnId)| deciding.binary_search(pair).is_ok();
    let decided = plan.values.iter().filter(|(pair, _)| is_deciding(pair));
    let decided = decided.map(|(pair, value)| (own(pair), *value));
    let others = case.shared.only[side].iter().map(|&column| (column, 0.0));
    held(&case.rivals[side].model, &decided.chain(others).collect::<Vec<_>>())
}

/// Puts a plan into the rival at `side`.
pub(crate) async fn place(case: &Case<'_>, plan: &Placed, side: usize) -> Outcome {
    if !plan.beyond.is_empty() {
        return Outcome::Refused(Vec::new());
    }
    let model = Rc::new(fixed(case, plan, side));
    let solved = case.desk.solve(&model, case.plan.search()).await;
    if solved.is_infeasible() {
        return Outcome::Refused(conflict(case, &model).await);
    }
    match solved.incumbent {
        Some(value) if solved.status == Status::Optimal => Outcome::Value(value),
        _ => Outcome::Open,
    }
}

/// The families of a model without a plan that cannot hold together.
async fn conflict(case: &Case<'_>, model: &Rc<Model>) -> Vec<String> {
    let mut conflict = Conflict::new(Rc::clone(model), ConflictLimits::default());
    while !conflict.advance(SLICE) {
        case.desk.spend(SLICE).await;
    }
    let families = conflict.result().families;
    families.iter().map(|id| model.families()[id.index()].name.clone()).collect()
}
