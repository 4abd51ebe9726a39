//! Models without a plan: rows that cannot hold together, and the cheapest way to relax them.
//!
//! The rows of a Farkas ray are where a search for an infeasible relaxation begins; for a model
//! with points but no whole ones, a smallest set of families. From these rows are dropped as long
//! as the rest has no point, family by family, then in ever smaller pieces (the deletion filter:
//! Chinneck, Dravnieks 1991, ORSA Journal on Computing 3): what is left cannot hold together, and
//! without any one row of it the rest can. To relax, each row may be violated at a cost (elastic
//! rows: Brown, Graves 1975, as told by Chinneck 2008, Feasibility and Infeasibility in
//! Optimization): the least sum of violations is one more model to solve.

mod filter;
mod repair;

use std::rc::Rc;

use model::{Model, Row, Sense, nearest_f64};
use record::study::{ConflictRow, Infeasibility, RivalInfeasibility, Standing};
use tree::Status;

use crate::desk::{Desk, Solved};
use crate::plan::Plan;
use crate::subject::Subject;
use crate::words::short;
pub(crate) use filter::{Filter, Part};

/// Entries of a row that are written out at most.
const MOST_TERMS: usize = 12;

/// Looks for the conflict of each rival.
pub async fn infeasibility(desk: Rc<Desk>, subjects: Vec<Subject>, plan: Plan) -> Infeasibility {
    let mut rivals = Vec::new();
    for subject in &subjects {
        let mut out = RivalInfeasibility {
            rival: subject.letter.clone(),
            title: subject.title.clone(),
            ..RivalInfeasibility::default()
        };
        of_rival(&desk, subject, &plan, &mut out).await;
        rivals.push(out);
    }
    Infeasibility { rivals }
}

async fn of_rival(desk: &Desk, subject: &Subject, plan: &Plan, out: &mut RivalInfeasibility) {
    let model = Rc::new(subject.model.priced(Sense::Minimise, &[]));
    desk.say(format!("{}: whether it has a plan", out.rival));
    let solved = desk.solve(&model, plan.search()).await;
    out.solved = 1;
    out.standing = standing(&solved);
    if !matches!(out.standing, Standing::NoPoint | Standing::NoWholePoint) {
        return;
    }
    let mut filter = Filter::new(desk, &model, plan, out.standing == Standing::NoWholePoint);
    let (kept, irreducible) = filter.filtered(&solved, &out.rival).await;
    out.irreducible = irreducible;
    out.checked = filter.is_proved(&kept).await;
    out.solved += filter.solved;
    tell(&model, &kept, out);
    repair::repairs(desk, (&model, &kept), plan, out).await;
}

fn standing(solved: &Solved) -> Standing {
    match (solved.root, solved.status) {
        (Status::Infeasible, _) => Standing::NoPoint,
        (_, Status::Infeasible) => Standing::NoWholePoint,
        _ if solved.incumbent.is_some() => Standing::Feasible,
        _ => Standing::Open,
    }
}

/// Names the rows, their families and their variables.
fn tell(model: &Model, kept: &[Part], out: &mut RivalInfeasibility) {
    for part in kept {
        let family = match part {
            Part::Row(row) => model.row_family(*row),
            Part::Family(family) => *family,
        };
        let family = model.families()[family.index()].name.clone();
        out.rows.push(conflict_row(model, *part));
        if !out.families.contains(&family) {
            out.families.push(family);
        }
        let Part::Row(row) = part else { continue };
        for (column, _) in model.row_entries(*row) {
            let variable = model.columns()[column.index()].variable;
            let name = &model.variables()[variable.index()].name;
            if !out.variables.contains(name) {
                out.variables.push(name.clone());
            }
        }
    }
}

/// A part of a conflict by name, with what it says.
pub(crate) fn conflict_row(model: &Model, part: Part) -> ConflictRow {
    let name = |family: model::FamilyId| model.families()[family.index()].name.clone();
    match part {
        Part::Row(row) => ConflictRow {
            row: model.row_name(row),
            family: name(model.row_family(row)),
            says: says(model, &model.row(row)),
        },
        Part::Family(family) => ConflictRow {
            row: format!("{} on demand", name(family)),
            family: name(family),
            says: "all its rows".to_owned(),
        },
    }
}

/// A row as it is written: `2 x[a] − y ≤ 3`.
pub(crate) fn says(model: &Model, row: &Row) -> String {
    let mut left = String::new();
    for (place, (column, a)) in row.entries.iter().take(MOST_TERMS).enumerate() {
        let a = nearest_f64(a);
        let sign = match (place, a < 0.0) {
            (0, false) => "",
            (0, true) => "−",
            (_, false) => " + ",
            (_, true) => " − ",
        };
        let size = if (a.abs() - 1.0).abs() < f64::EPSILON {
            String::new()
        } else {
            format!("{} ", short(a.abs()))
        };
        left += &format!("{sign}{size}{}", model.column_name(*column));
    }
    let more = row.entries.len().saturating_sub(MOST_TERMS);
    if more > 0 {
        left += &format!(" + … ({more} more)");
    }
    if left.is_empty() {
        left.push('0');
    }
    let number = |side: &Option<model::Number>| side.as_ref().map(|side| short(nearest_f64(side)));
    match (number(&row.lower), number(&row.upper)) {
        (Some(lower), Some(upper)) if lower == upper => format!("{left} = {upper}"),
        (Some(lower), Some(upper)) => format!("{lower} ≤ {left} ≤ {upper}"),
        (Some(lower), None) => format!("{left} ≥ {lower}"),
        (None, Some(upper)) => format!("{left} ≤ {upper}"),
        (None, None) => left,
    }
}
