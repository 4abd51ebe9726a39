//! How small the coefficient of a switch can be.
//!
//! A row `Σ a x + m·b ≤ u` whose largest coefficient `m` belongs to a binary `b` is switched by it. On
//! the side on which `b` opens the row, what the rest can reach at most, R, is all that is needed
//! (coefficient tightening: Savelsbergh 1994, ORSA Journal on Computing 6): with m < 0, m = u − R where R > u;
//! with m > 0, u = R and m smaller by what u lost, where R < u. R follows from the bounds alone, or
//! from the relaxation with `b` on that side, as a bound that is proved in exact arithmetic; either
//! way no plan is lost.

use std::collections::BTreeMap;
use std::rc::Rc;

use model::{ColumnId, FamilyState, Model, Number, Row, RowId, Sense, nearest_f64};
use record::study::{FamilyTightening, RivalTightening, Tightening};

use crate::desk::Desk;
use crate::plan::Plan;
use crate::propagate::{AtMost, Bounds, bounds_of, most, propagate, sides, with_bounds};
use crate::subject::Subject;
use crate::words::{exact, row as named};

/// Rows in place of others.
pub(crate) type Rewritten = BTreeMap<RowId, Row>;

/// A row that a binary switches.
struct Switched {
    row: RowId,
    half: AtMost,
    turned: bool,
    switch: ColumnId,
    coefficient: Number,
}

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
    let say = |what: String| desk.say(format!("{}: {what}", subject.letter));
    say("its relaxation".to_owned());
    let all = switched(model);
    let looked_at = all.len().min(plan.rows as usize);
    let mut out = RivalTightening {
        rival: subject.letter.clone(),
        title: subject.title.clone(),
        bound: desk.relax(model).await.bound,
        rows: count(looked_at),
        left_out: count(all.len() - looked_at),
        ..RivalTightening::default()
    };
    let bounds = propagate(desk, model).await.map(|(bounds, _)| bounds);
    let (mut by_data, mut by_relaxation) = (Rewritten::new(), Rewritten::new());
    for (place, switched) in all.iter().take(looked_at).enumerate() {
        say(format!("row {} of {looked_at} that a binary switches", place + 1));
        let data = bounds.as_ref().and_then(|bounds| reach_of_data(switched, bounds));
        let relaxed = reach_of_relaxation(desk, model, switched).await;
        let relaxed = least(relaxed, data.clone());
        note(&mut out, model, switched, [&data, &relaxed]);
        take(&mut by_data, switched, data);
        take(&mut by_relaxation, switched, relaxed);
    }
    say("its relaxation with smaller coefficients".to_owned());
    out.bound_by_data = bound_with(desk, model, &by_data, out.bound).await;
    out.bound_by_relaxation = bound_with(desk, model, &by_relaxation, out.bound).await;
    if let Some(bounds) = bounds {
        (out.bounds, out.model) = tighter(model, &by_relaxation, &bounds);
    }
    out
}

/// How many bounds are tighter, and the model with these rows and bounds in MPS.
fn tighter(model: &Model, rows: &Rewritten, bounds: &[Bounds]) -> (u32, String) {
    let own = bounds_of(model);
    let sides =
        |new: &Bounds, old: &Bounds| usize::from(new.0 != old.0) + usize::from(new.1 != old.1);
    let count = count(bounds.iter().zip(&own).map(|(new, old)| sides(new, old)).sum());
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
        let reach = reach_of_data(&switched, bounds);
        take(&mut rows, &switched, reach);
    }
    rows
}

/// The rows that are in and one-sided, and whose largest coefficient is that of a binary.
fn switched(model: &Model) -> Vec<Switched> {
    let rows = (0..model.row_count()).map(RowId::from_index).filter(|&row| model.row_is_in(row));
    rows.filter_map(|row| switch_of(model, row)).collect()
}

fn switch_of(model: &Model, row: RowId) -> Option<Switched> {
    let mut sides = sides(model, row);
    let (half, turned) = sides.pop().filter(|_| sides.is_empty())?;
    if half.entries.len() < 2 {
        return None;
    }
    let size = |a: &Number| if *a < Number::ZERO { -a.clone() } else { a.clone() };
    let largest = half.entries.iter().map(|(_, a)| size(a)).max()?;
    let mut largest = half.entries.iter().filter(|(_, a)| size(a) == largest);
    let (switch, coefficient) = largest.next().filter(|_| largest.next().is_none())?.clone();
    model.is_binary(switch).then_some(Switched { row, half, turned, switch, coefficient })
}

/// What the rest can reach at most by the bounds.
fn reach_of_data(switched: &Switched, bounds: &[Bounds]) -> Option<Number> {
    most(&switched.half.entries, switched.switch, bounds)
}

/// What the rest can reach at most over the relaxation with the switch on its open side, as far
/// as that is proved. Of a side that no point is on, nothing.
async fn reach_of_relaxation(desk: &Desk, model: &Model, switched: &Switched) -> Option<Number> {
    let open = if switched.coefficient < Number::ZERO { Number::ONE } else { Number::ZERO };
    let rest: Vec<(ColumnId, Number)> = switched
        .half
        .entries
        .iter()
        .filter(|(column, _)| *column != switched.switch)
        .cloned()
        .collect();
    let model = model.priced(Sense::Maximise, &rest);
    let model = model.bounded(&[(switched.switch, Some(open.clone()), Some(open))]);
    desk.relax(&Rc::new(model)).await.checked_bound
}

fn least(a: Option<Number>, b: Option<Number>) -> Option<Number> {
    match (a, b) {
        (Some(a), Some(b)) => Some(if a < b { a } else { b }),
        (a, b) => a.or(b),
    }
}

/// The coefficient and the side that a reach leaves; none where the row is no smaller by it.
fn smaller(switched: &Switched, reach: &Number) -> Option<(Number, Number)> {
    let (m, side) = (&switched.coefficient, &switched.half.side);
    if *m < Number::ZERO {
        let needed = side - reach;
        (needed > *m && needed < Number::ZERO).then(|| (needed, side.clone()))
    } else {
        let needed = m - (side - reach);
        (reach < side && needed > Number::ZERO).then(|| (needed, reach.clone()))
    }
}

/// Puts the tighter row in place.
fn take(rows: &mut Rewritten, switched: &Switched, reach: Option<Number>) {
    let Some((coefficient, side)) = reach.and_then(|reach| smaller(switched, &reach)) else {
        return;
    };
    let back = |number: Number| if switched.turned { -number } else { number };
    let entries = switched.half.entries.iter().map(|(column, a)| {
        let a = if *column == switched.switch { &coefficient } else { a };
        (*column, back(a.clone()))
    });
    let entries = entries.collect();
    let side = Some(back(side));
    let row = if switched.turned {
        Row { entries, lower: side, upper: None }
    } else {
        Row { entries, lower: None, upper: side }
    };
    rows.insert(switched.row, row);
}

/// Notes what was found of a row in the figures of its family.
fn note(
    out: &mut RivalTightening,
    model: &Model,
    switched: &Switched,
    [data, relaxed]: [&Option<Number>; 2],
) {
    let name = &model.families()[model.row_family(switched.row).index()].name;
    if out.families.last().is_none_or(|family| family.name != *name) {
        out.families.push(FamilyTightening { name: name.clone(), ..FamilyTightening::default() });
    }
    let Some(family) = out.families.last_mut() else { return };
    let size = |number: &Number| nearest_f64(number).abs();
    let new = |reach: &Option<Number>| reach.as_ref().and_then(|reach| smaller(switched, reach));
    let (by_data, by_relaxation) = (new(data), new(relaxed));
    let before = size(&switched.coefficient);
    let needs = |new: &Option<(Number, Number)>| new.as_ref().map_or(before, |(m, _)| size(m));
    family.rows += 1;
    family.tightened_by_data += u32::from(by_data.is_some());
    family.tightened_by_relaxation += u32::from(by_relaxation.is_some());
    raise(&mut family.largest, before);
    raise(&mut family.largest_by_data, needs(&by_data));
    raise(&mut family.largest_by_relaxation, needs(&by_relaxation));
    if family.example.is_empty()
        && let (Some((m, _)), Some(reach)) = (&by_relaxation, relaxed)
    {
        let from = if by_data == by_relaxation { "the bounds" } else { "the relaxation" };
        family.example = format!(
            "{}: {} in place of {}, since by {from} the rest is at most {} where {} opens it",
            named(model, switched.row),
            exact(m),
            exact(&switched.coefficient),
            exact(reach),
            model.column_name(switched.switch),
        );
    }
}

fn raise(most: &mut f64, value: f64) {
    if value > *most {
        *most = value;
    }
}

fn count(length: usize) -> u32 {
    u32::try_from(length).unwrap_or(u32::MAX)
}
