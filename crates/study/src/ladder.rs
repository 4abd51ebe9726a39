//! The bound ladder: the relaxation, then what propagation, tighter coefficients, each class of
//! general cuts, all of them and the search add, all towards one reference value.

use std::rc::Rc;

use model::Model;
use record::study::{Ladder, RivalLadder, Rung};
use tree::{Class, Classes, Cuts, Settings, Status};

use crate::desk::{Desk, Solved};
use crate::plan::Plan;
use crate::propagate::{bounds_of, propagate, with_bounds};
use crate::subject::Subject;
use crate::tightening::tightened_by_data;
use crate::variability::root;
use crate::words::{direction, of, same};

/// Climbs the ladder of each rival.
pub async fn ladder(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Ladder {
    let mut rivals = Vec::new();
    let mut best: Option<(f64, bool, String)> = None;
    for subject in &subjects {
        let (climbed, found) = climb(&desk, subject, &plan).await;
        rivals.push(climbed);
        if let Some((value, proved)) = found {
            let sign = direction(&subject.model);
            let better = best.as_ref().is_none_or(|(known, known_proved, _)| {
                let equal = same(value, *known);
                (!equal && sign * value < sign * known) || (equal && proved && !known_proved)
            });
            if better {
                best = Some((value, proved, subject.letter.clone()));
            }
        }
    }
    let best = best.map(|(value, proved, letter)| {
        let how = if proved { "proved optimal" } else { "not proved optimal" };
        (value, format!("best solution of {letter}, {how}"))
    });
    let given = plan.best_known.map(|value| (value, "given by the scenario".to_owned()));
    let (reference, reference_from) = best.or(given).unzip();
    for rival in &mut rivals {
        close(rival, reference);
    }
    let (root, root_used) = subjects.iter().find_map(root).unwrap_or_default();
    let reference_from = reference_from.unwrap_or_default();
    Ladder { reference, reference_from, rivals, root, root_used }
}

/// Sets the share of the gap that each rung closes.
fn close(rival: &mut RivalLadder, reference: Option<f64>) {
    let Some(bottom) = rival.rungs.first().and_then(|rung| rung.bound) else { return };
    let Some(whole) = reference.map(|reference| reference - bottom) else { return };
    if whole.abs() < 1e-9 {
        return;
    }
    for rung in &mut rival.rungs {
        rung.closed = rung.bound.map(|bound| (bound - bottom) / whole + 0.0);
    }
}

/// The rungs of a rival, and its best solution with whether it is proved optimal.
async fn climb(desk: &Desk, subject: &Subject, plan: &Plan) -> (RivalLadder, Option<(f64, bool)>) {
    let model = &subject.model;
    let say = |what: &str| desk.say(format!("{}: {what}", subject.letter));
    say("its relaxation");
    let mut rungs = vec![rung("relaxation", &desk.relax(model).await)];
    say("its bounds propagated");
    let (propagated, note) = propagated(desk, model).await;
    rungs.push(step("bounds propagated", desk, propagated.as_ref(), note).await);
    say("its coefficients tightened");
    let (tightened, note) = tightened(desk, propagated.as_deref().unwrap_or(model)).await;
    rungs.push(step("coefficients tightened", desk, tightened.as_ref(), note).await);
    for (name, classes) in classes() {
        say(name);
        let cuts = Cuts::at_root(classes);
        let settings = Settings { cuts, node_limit: Some(1), ..Settings::default() };
        let solved = desk.solve(model, settings).await;
        let some = solved.cuts.is_some_and(|(_, added)| added > 0);
        if some || USUAL.contains(&name) {
            rungs.push(cut_rung(name, &solved));
        }
    }
    if subject.relaxation {
        return (finished(subject, rungs), None);
    }
    say("its search");
    let solved = desk.solve(model, plan.search()).await;
    rungs.push(search_rung(&solved));
    let found = solved.incumbent.map(|value| (value, solved.status == Status::Optimal));
    (finished(subject, rungs), found)
}

fn finished(subject: &Subject, rungs: Vec<Rung>) -> RivalLadder {
    RivalLadder { rival: subject.letter.clone(), title: subject.title.clone(), rungs }
}

/// The classes that are always told of; the others where they added something.
const USUAL: [&str; 4] = ["Gomory cuts", "mixed-integer rounding", "lifted covers", "all cuts"];

/// Each class of general cuts alone, then all of them.
fn classes() -> Vec<(&'static str, Classes)> {
    let name = |class| match class {
        Class::Gomory => "Gomory cuts",
        Class::Mir => "mixed-integer rounding",
        Class::Cover => "lifted covers",
        Class::Clique => "cliques",
        Class::OddHole => "odd holes",
        Class::ZeroHalf => "zero-half cuts",
        Class::FlowCover => "flow covers",
        Class::LotSizing => "(l,S) of lot sizing",
        Class::Blossom => "blossoms",
        Class::OddSet => "odd sets",
        Class::RoundTrip => "cuts of round trips",
    };
    let alone = Class::ALL.map(|(class, _)| (name(class), [class].into_iter().collect()));
    alone.into_iter().chain([("all cuts", Classes::all())]).collect()
}

fn rung(step: &str, solved: &Solved) -> Rung {
    Rung {
        step: step.to_owned(),
        bound: solved.bound,
        checked: solved.checked_bound.is_some(),
        closed: None,
        iterations: solved.iterations,
        work: solved.work,
        nodes: 0,
        note: match solved.root {
            Status::Infeasible => "there is no point".to_owned(),
            Status::Unbounded => "the objective has no bound".to_owned(),
            Status::Limit => "stopped by a limit".to_owned(),
            Status::Running | Status::Optimal => String::new(),
        },
    }
}

/// A rung whose model may be the one before it.
async fn step(name: &str, desk: &Desk, model: Option<&Rc<Model>>, note: String) -> Rung {
    match model {
        Some(model) => Rung { note, ..rung(name, &desk.relax(model).await) },
        None => Rung { step: name.to_owned(), note, ..Rung::default() },
    }
}

fn cut_rung(name: &str, solved: &Solved) -> Rung {
    let mut rung = rung(name, solved);
    rung.checked = false;
    if let Some((bound, added)) = solved.cuts {
        rung.bound = Some(bound);
        rung.note = format!("{} added", of(added, "cut"));
    } else if rung.note.is_empty() {
        rung.note = "none was looked for: the relaxation is already whole".to_owned();
    }
    rung
}

fn search_rung(solved: &Solved) -> Rung {
    let mut rung = rung("search", solved);
    rung.bound = solved.tree_bound.or(rung.bound);
    rung.checked = solved.checked;
    rung.nodes = solved.nodes;
    if solved.status == Status::Limit {
        rung.note = format!("stopped after {}", of(solved.nodes, "node"));
    }
    rung
}

/// The model with the bounds that follow from its rows; none where they leave nothing.
async fn propagated(desk: &Desk, model: &Rc<Model>) -> (Option<Rc<Model>>, String) {
    match propagate(desk, model).await {
        None => (None, "no point meets the bounds that follow from the rows".to_owned()),
        Some((_, 0)) => (Some(Rc::clone(model)), "no bound is tighter".to_owned()),
        Some((bounds, count)) => (
            Some(Rc::new(with_bounds(model, &bounds))),
            format!("{} tightened", of(count, "bound")),
        ),
    }
}

/// The model with the coefficients that follow from its bounds.
async fn tightened(desk: &Desk, model: &Model) -> (Option<Rc<Model>>, String) {
    desk.spend(model.row_count() as u64).await;
    let rows = tightened_by_data(model, &bounds_of(model));
    let count = u32::try_from(rows.len()).unwrap_or(u32::MAX);
    let note = if count == 0 {
        "no coefficient is smaller".to_owned()
    } else {
        format!("{} with a smaller coefficient", of(count, "row"))
    };
    (model.rewritten(&rows).ok().map(Rc::new), note)
}
