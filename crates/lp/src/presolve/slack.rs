//! A column of one row that is a slack: without a cost, or in an equation.
//!
//! L ≤ r + a x ≤ U with l ≤ x ≤ u says L − max a x ≤ r ≤ U − min a x for the rest r, and in an
//! equation x = (b − r) / a carries its cost over to the others. On the way back y = y' + c / a and
//! d = −a y'. When the wider row is held at a side, x is at the bound that made the side; when it is
//! not, x takes a value that fits and one of x and the logical is basic.

use crate::basis::Status;

use super::implied_free::PIVOT;
use super::postsolve::{Postsolve, Restored, Step};
use super::work::{Halt, Work, term};

/// Bounds beyond this are left alone: what they do to a side loses digits.
const LARGEST: f64 = 1e7;

/// A column that became part of its row's range.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Slack {
    row: u32,
    column: u32,
    entry: f64,
    cost: f64,
    bounds: (f64, f64),
    sides: (f64, f64),
}

/// Takes slacks out.
pub(crate) fn reduce(work: &mut Work) -> Result<(), Halt> {
    for j in work.columns_in() {
        if let Some((i, a)) = work.only_in_column(j)
            && is_slack(work, (i, j, a))
        {
            widen(work, (i, j, a));
        }
    }
    Ok(())
}

fn is_slack(work: &Work, (i, j, a): (u32, u32, f64)) -> bool {
    let (least, most) = term(a, work.bounds(j));
    let (lower, upper) = work.sides(i);
    let cost = work.cost[j as usize];
    let moderate = |value: f64| value.is_infinite() || value.abs() <= LARGEST;
    let stable = a.abs() >= PIVOT * work.largest_entry(i);
    moderate(least) && moderate(most) && stable && (cost == 0.0 || lower == upper)
}

fn widen(work: &mut Work, (i, j, a): (u32, u32, f64)) {
    let (sides, bounds) = (work.sides(i), work.bounds(j));
    let (least, most) = term(a, bounds);
    let cost = work.cost[j as usize];
    work.move_cost(i, j, cost / a);
    work.row_lower[i as usize] = sides.0 - most;
    work.row_upper[i as usize] = sides.1 - least;
    work.steps.push(Step::Slack(Slack { row: i, column: j, entry: a, cost, bounds, sides }));
    work.remove_column(j);
}

/// Puts the column back.
pub(crate) fn undo(post: &Postsolve, restored: &mut Restored, slack: Slack) {
    let (row, j) = (slack.row as usize, slack.column as usize);
    let wide = restored.duals[row];
    let rest = post.activity(restored, slack.row);
    let held = restored.status[post.logical(slack.row)];
    restored.reduced_costs[j] = -slack.entry * wide + 0.0;
    restored.duals[row] = wide + slack.cost / slack.entry;
    let (value, status, logical) = if held == Status::Basic {
        let placed = place(slack, rest);
        restored.reduced_costs[j] = 0.0;
        placed
    } else {
        // Held from below by max a x, from above by min a x.
        let at_upper = (held == Status::Lower) == (slack.entry > 0.0);
        let (lower, upper) = slack.bounds;
        if at_upper { (upper, Status::Upper, held) } else { (lower, Status::Lower, held) }
    };
    restored.x[j] = value;
    restored.status[j] = status;
    restored.status[post.logical(slack.row)] = logical;
}

/// A value of the column that fits the rest, and the statuses of column and logical.
fn place(slack: Slack, rest: f64) -> (f64, Status, Status) {
    let ((lower, upper), (least, most)) = (slack.bounds, slack.sides);
    let fits = |x: f64| {
        let value = rest + slack.entry * x;
        x.is_finite() && value >= least && value <= most
    };
    let equation = least == most;
    if !equation && fits(lower) {
        return (lower, Status::Lower, Status::Basic);
    }
    if !equation && fits(upper) {
        return (upper, Status::Upper, Status::Basic);
    }
    let candidates = [(least, Status::Lower), (most, Status::Upper)];
    let inside = |x: f64| x.is_finite() && x >= lower && x <= upper;
    let solved = candidates.map(|(side, status)| ((side - rest) / slack.entry, status));
    let found = solved.iter().find(|(x, _)| inside(*x)).or_else(|| {
        // Out by rounding.
        solved.iter().find(|(x, _)| x.is_finite())
    });
    match found {
        Some(&(x, logical)) => (clipped(x, lower, upper), Status::Basic, logical),
        None => (0.0, Status::Free, Status::Basic),
    }
}

fn clipped(x: f64, lower: f64, upper: f64) -> f64 {
    if x < lower {
        lower
    } else if x > upper {
        upper
    } else {
        x
    }
}
