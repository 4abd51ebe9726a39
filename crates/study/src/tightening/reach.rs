//! What the rest of a row can reach: by the bounds, over the relaxation, and with a cut-off.

use std::collections::BTreeSet;
use std::rc::Rc;

use model::{ColumnId, Model, Number, Row, Sense};

use super::switch::{Switched, switched};
use crate::desk::Desk;
use crate::maximise::Maximiser;
use crate::plan::Plan;
use crate::propagate::{Bounds, most};
use crate::subject::Subject;

/// By so much, relative to it, a plan may be worse than the cut-off: a value that was printed is
/// rounded.
const PRINTED: f64 = 1e-6;
/// Columns whose bounds are looked for over the relaxation at most.
const MOST_COLUMNS: usize = 200;
/// A bound of a continuous column with a larger denominator is not taken.
const MOST_DENOMINATOR: u32 = 1_000_000;

/// What the rest can reach at most by the bounds.
pub(super) fn by_data(switched: &Switched, bounds: &[Bounds]) -> Option<Number> {
    most(&switched.half.entries, switched.switch, bounds)
}

/// What the rest can reach at most over the relaxation with the switch on its open side, as far
/// as that is proved. Of a side that no point is on, nothing.
pub(super) async fn by_relaxation(
    desk: &Desk,
    model: &Model,
    switched: &Switched,
) -> Option<Number> {
    let open = switched.open();
    let model = model.priced(Sense::Maximise, &switched.rest());
    let model = model.bounded(&[(switched.switch, Some(open.clone()), Some(open))]);
    desk.relax(&Rc::new(model)).await.checked_bound
}

pub(super) fn least(a: Option<Number>, b: Option<Number>) -> Option<Number> {
    match (a, b) {
        (Some(a), Some(b)) => Some(if a < b { a } else { b }),
        (a, b) => a.or(b),
    }
}

/// A value that is known to be reachable: that of the scenario, else of the best plan that a search
/// within the limit of nodes finds.
pub(super) async fn cutoff(desk: &Desk, subject: &Subject, plan: &Plan) -> Option<f64> {
    if plan.best_known.is_some() || subject.relaxation {
        return plan.best_known;
    }
    desk.solve(&subject.model, plan.search()).await.incumbent
}

/// The model with a row that keeps its objective at a value or better.
pub(super) fn below(model: &Model, value: f64) -> Option<Model> {
    let slack = Number::try_from(PRINTED * (1.0 + value.abs())).ok()?;
    let side = Number::try_from(value).ok()? - model.offset();
    let cost = |column: usize| model.numbers().exact(model.columns()[column].cost).clone();
    let entries = (0..model.columns().len()).map(|c| (ColumnId::from_index(c), cost(c)));
    let entries = entries.filter(|(_, cost)| !cost.is_zero()).collect();
    let (lower, upper) = match model.sense() {
        Sense::Minimise => (None, Some(side + slack)),
        Sense::Maximise => (Some(side - slack), None),
    };
    model.with_rows("cut-off", vec![Row { entries, lower, upper }]).ok()
}

/// Makes the bounds of the columns that switches hold tighter by the relaxation, in exact
/// arithmetic; how many.
pub(super) async fn tighter_bounds(desk: &Desk, model: &Rc<Model>, bounds: &mut [Bounds]) -> u32 {
    let held = switched(model).into_iter().flat_map(|switched| switched.rest());
    let held: BTreeSet<ColumnId> = held.map(|(column, _)| column).collect();
    let held = held.into_iter().filter(|&column| !model.is_binary(column)).take(MOST_COLUMNS);
    let mut maximiser = Maximiser::new(desk, model);
    let mut tighter = 0;
    for column in held {
        let integer = model.columns()[column.index()].integer;
        for up in [true, false] {
            let (lower, upper) = &bounds[column.index()];
            let known = if up { upper.clone() } else { lower.as_ref().map(|lower| -lower) };
            let sign = if up { Number::ONE } else { -Number::ONE };
            let side = known.clone().unwrap_or(Number::ZERO);
            let found = maximiser.most(&[(column, sign)], &side).await.proof;
            let Some(limit) = found.and_then(|(_, bound)| simple(bound, integer)) else { continue };
            if known.is_none_or(|known| limit < known) {
                let own = &mut bounds[column.index()];
                if up {
                    own.1 = Some(limit);
                } else {
                    own.0 = Some(-limit);
                }
                tighter += 1;
            }
        }
    }
    tighter
}

/// A bound as it is taken: rounded where the column is whole, else of a short fraction.
fn simple(bound: Number, integer: bool) -> Option<Number> {
    if integer {
        return Some(Number::from(bound.floor()));
    }
    (*bound.denominator() <= MOST_DENOMINATOR.into()).then_some(bound)
}
