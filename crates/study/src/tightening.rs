//! How small the coefficient of a switch can be.
//!
//! A row `Σ a x + m·b ≤ u` whose largest coefficient `m` belongs to a binary `b` is switched by it. On
//! the side on which `b` opens the row, what the rest can reach at most, R, is all that is needed
//! (coefficient tightening: Savelsbergh 1994, ORSA Journal on Computing 6): with m < 0, m = u − R where R > u;
//! with m > 0, u = R and m smaller by what u lost, where R < u. R follows from the bounds alone, or
//! from the relaxation with `b` on that side, as a bound that is proved in exact arithmetic; either
//! way no plan is lost. With a row that keeps the objective at a value that is known to be reachable
//! R is smaller still (optimality-based: Quesada, Grossmann 1995; Gleixner, Berthold, Müller, Weltge
//! 2017), but then only plans at least as good stay: an optimum is kept, others may be lost.

mod note;
mod reach;
mod switch;
mod too_small;

use std::collections::BTreeMap;
use std::rc::Rc;

use model::{FamilyState, Model, Row, RowId};
use record::study::{RivalTightening, Tightening};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::propagate::{Bounds, bounds_of, propagate, with_bounds};
use crate::subject::Subject;
use reach::{below, by_data, by_relaxation, cutoff, least, tighter_bounds};
use switch::{Switched, switched, take};

/// Rows in place of others.
pub(crate) type Rewritten = BTreeMap<RowId, Row>;

/// Studies the switches of each rival.
pub async fn tightening(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Tightening {
    let mut rivals = Vec::new();
    for subject in &subjects {
        rivals.push(of_rival(&desk, subject, &plan).await);
    }
    Tightening { rivals }
}

async fn of_rival(desk: &Desk, subject: &Subject, plan: &Plan) -> RivalTightening {
    let model = &subject.model;
    let say = |what: &str| desk.say(format!("{}: {what}", subject.letter));
    say("its relaxation");
    let all = switched(model);
    let looked_at = all.len().min(plan.rows as usize);
    let mut out = RivalTightening {
        rival: subject.letter.clone(),
        title: subject.title.clone(),
        bound: desk.relax(model).await.bound,
        rows: note::count(looked_at),
        left_out: note::count(all.len() - looked_at),
        range: note::range(model, &Rewritten::new()),
        ..RivalTightening::default()
    };
    let bounds = propagate(desk, model).await.map(|(bounds, _)| bounds);
    if !all.is_empty() {
        say("a plan for the cut-off");
        out.cutoff = cutoff(desk, subject, plan).await;
    }
    let rows = switches(desk, subject, (&all[..looked_at], bounds.as_deref()), &mut out).await;
    say("its relaxation with smaller coefficients");
    let [by_data, by_relaxation, by_cutoff] = &rows;
    out.bound_by_data = bound_with(desk, model, by_data, out.bound).await;
    out.bound_by_relaxation = bound_with(desk, model, by_relaxation, out.bound).await;
    if out.cutoff.is_some() {
        out.bound_by_cutoff = bound_with(desk, model, by_cutoff, out.bound).await;
    }
    out.range_after = note::range(model, by_relaxation);
    if let Some(mut bounds) = bounds {
        say("bounds of its columns over the relaxation");
        out.bounds_by_relaxation = tighter_bounds(desk, model, &mut bounds).await;
        (out.bounds, out.model) = tighter(model, by_relaxation, &bounds);
        if by_cutoff != by_relaxation {
            out.model_by_cutoff = tighter(model, by_cutoff, &bounds).1;
        }
    }
    say("plans that its switches cut off");
    out.too_small = too_small::plans(desk, (model, plan), &all[..looked_at]).await;
    out
}

/// What each switch needs by the data, by the relaxation and with the cut-off: noted, and as rows.
async fn switches(
    desk: &Desk,
    subject: &Subject,
    (all, bounds): (&[Switched], Option<&[Bounds]>),
    out: &mut RivalTightening,
) -> [Rewritten; 3] {
    let model = &subject.model;
    let mut rows = [Rewritten::new(), Rewritten::new(), Rewritten::new()];
    let good = out.cutoff.and_then(|value| below(model, value));
    for (place, switched) in all.iter().enumerate() {
        let (letter, of) = (&subject.letter, all.len());
        desk.say(format!("{letter}: row {} of {of} that a binary switches", place + 1));
        let data = bounds.and_then(|bounds| by_data(switched, bounds));
        let relaxed = least(by_relaxation(desk, model, switched).await, data.clone());
        let cut = match &good {
            Some(good) => least(by_relaxation(desk, good, switched).await, relaxed.clone()),
            None => relaxed.clone(),
        };
        let reaches = [data, relaxed, cut];
        note::note(out, model, switched, &reaches);
        for (rows, reach) in rows.iter_mut().zip(reaches) {
            take(rows, switched, reach);
        }
    }
    rows
}

/// How many bounds are tighter, and the model with these rows and bounds in MPS.
fn tighter(model: &Model, rows: &Rewritten, bounds: &[Bounds]) -> (u32, String) {
    let own = bounds_of(model);
    let sides =
        |new: &Bounds, old: &Bounds| usize::from(new.0 != old.0) + usize::from(new.1 != old.1);
    let count = note::count(bounds.iter().zip(&own).map(|(new, old)| sides(new, old)).sum());
    let on_demand = model.families().iter().any(|family| family.state == FamilyState::OnDemand);
    if on_demand || (count == 0 && rows.is_empty()) {
        return (count, String::new());
    }
    let tighter = model.rewritten(rows).ok().map(|model| with_bounds(&model, bounds));
    let written = tighter.and_then(|model| model::mps::write(&model).ok());
    (count, written.map_or_else(String::new, |written| written.text))
}

/// The bound with these rows.
async fn bound_with(
    desk: &Desk,
    model: &Model,
    rows: &Rewritten,
    unchanged: Option<f64>,
) -> Option<f64> {
    if rows.is_empty() {
        return unchanged;
    }
    desk.relax(&Rc::new(model.rewritten(rows).ok()?)).await.bound
}

/// The rows whose coefficients the bounds make smaller.
pub(crate) fn tightened_by_data(model: &Model, bounds: &[Bounds]) -> Rewritten {
    let mut rows = Rewritten::new();
    for switched in switched(model) {
        let reach = by_data(&switched, bounds);
        take(&mut rows, &switched, reach);
    }
    rows
}
