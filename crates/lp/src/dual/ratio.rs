//! The bound-flipping ratio test.
//!
//! The leaving variable violates a bound by δ; along the dual step t every reduced cost falls as
//! d_j − t α_j, and the dual objective rises with slope δ. Passing the breakpoint d_j / α_j of a
//! boxed variable costs |α_j|(u_j − l_j) of slope; breakpoints are passed while the slope stays
//! positive, and the variables passed flip to their other bound. Breakpoints are taken in groups
//! that Harris's tolerance makes equal; in the last profitable group with a good pivot, the largest
//! |α_j| enters.
//!
//! Source: Fourer 1994; Maros 2003; Harris 1973.

use crate::basis::Status;
use crate::sparse::largest;
use crate::state::Core;
use crate::tolerances::{HARRIS_DUAL, PRIMAL};
use std::ops::Range;

/// What the test says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Choice {
    /// Nothing stops the dual step: the row proves infeasibility.
    None,
    /// A variable enters after those in `scratch.flipped` flip.
    Enter { entering: u32 },
}

/// A variable that bounds the step.
#[derive(Clone, Copy, Debug)]
pub(crate) struct Breakpoint {
    variable: u32,
    alpha: f64,
    slack: f64,
    range: f64,
}

impl Breakpoint {
    fn ratio(&self) -> f64 {
        self.slack / self.alpha
    }

    /// The ratio with Harris's tolerance.
    fn relaxed(&self) -> f64 {
        (self.slack + HARRIS_DUAL) / self.alpha
    }
}

/// Chooses the entering variable for the row in `scratch.row`.
pub(crate) fn choose(core: &mut Core, position: u32, sign: f64) -> Choice {
    let mut points = std::mem::take(&mut core.scratch.points);
    list_breakpoints(core, sign, &mut points);
    core.scratch.flipped.clear();
    core.ticks += points.len() as u64;
    let slope = core.violation[position as usize].sqrt();
    let choice = match first_group(&points, slope) {
        Some(entering) => Choice::Enter { entering },
        None => long_step(core, &mut points, slope),
    };
    core.scratch.points = points;
    choice
}

/// The step past the first group: sorts the breakpoints up to where the slope ends.
fn long_step(core: &mut Core, points: &mut Vec<Breakpoint>, slope: f64) -> Choice {
    keep_near(points, slope);
    points
        .sort_unstable_by(|a, b| a.ratio().total_cmp(&b.ratio()).then(a.variable.cmp(&b.variable)));
    core.ticks += points.len() as u64;
    let Some(groups) = profitable_groups(points, slope) else { return Choice::None };
    let last = best_group(points, &groups);
    let Some(entering) = points[groups[last].clone()].iter().reduce(larger_pivot) else {
        return Choice::None;
    };
    core.scratch.flipped.extend(points[..groups[last].start].iter().map(|point| point.variable));
    Choice::Enter { entering: entering.variable }
}

/// Drops the breakpoints far beyond the one where the slope ends: a distance grown in tenfold steps
/// from the nearest one until the slope ends within it.
fn keep_near(points: &mut Vec<Breakpoint>, slope: f64) {
    let nearest = points.iter().map(Breakpoint::relaxed).reduce(|a, b| if b < a { b } else { a });
    let Some(mut reach) = nearest else { return };
    let mut near = 0;
    let mut left = slope;
    while near < points.len() && left > PRIMAL {
        reach *= 10.0;
        let mut k = near;
        while k < points.len() {
            if points[k].ratio() <= reach {
                left -= points[k].alpha * points[k].range;
                points.swap(k, near);
                near += 1;
            }
            k += 1;
        }
        if reach == f64::INFINITY {
            break;
        }
    }
    points.truncate(near);
}

/// The largest pivot of the first group, when the slope ends there: the common case, without
/// sorting.
fn first_group(points: &[Breakpoint], slope: f64) -> Option<u32> {
    let bound = points.iter().map(Breakpoint::relaxed).reduce(|a, b| if b < a { b } else { a })?;
    let group = || points.iter().filter(|point| point.ratio() <= bound);
    let loss: f64 = group().map(|point| point.alpha * point.range).sum();
    if slope - loss > PRIMAL {
        return None;
    }
    group().reduce(larger_pivot).map(|point| point.variable)
}

/// Lists the variables whose reduced cost falls to zero along the step.
fn list_breakpoints(core: &Core, sign: f64, points: &mut Vec<Breakpoint>) {
    points.clear();
    let mut largest = 0.0;
    for (variable, value) in core.scratch.row.iter() {
        let j = variable as usize;
        let alpha = sign * value;
        if alpha.abs() > largest {
            largest = alpha.abs();
        }
        let blocks = match core.status[j] {
            Status::Basic => false,
            Status::Lower => alpha > 0.0,
            Status::Upper => alpha < 0.0,
            Status::Free => true,
        };
        if blocks {
            let range = core.work_upper[j] - core.work_lower[j];
            let slack = core.reduced[j].abs();
            points.push(Breakpoint { variable, alpha: alpha.abs(), slack, range });
        }
    }
    let least = core.care.least_entry(largest);
    points.retain(|point| point.alpha > least);
}

/// The groups up to the one where the slope would end; none when it never does.
fn profitable_groups(points: &[Breakpoint], slope: f64) -> Option<Vec<Range<usize>>> {
    let mut bound = vec![f64::INFINITY; points.len()];
    let mut least = f64::INFINITY;
    for (k, point) in points.iter().enumerate().rev() {
        least = if point.relaxed() < least { point.relaxed() } else { least };
        bound[k] = least;
    }
    let mut groups = Vec::new();
    let (mut start, mut slope) = (0, slope);
    while start < points.len() {
        let within =
            points[start..].iter().take_while(|point| point.ratio() <= bound[start]).count();
        let end = start + if within == 0 { 1 } else { within };
        slope -= points[start..end].iter().map(|point| point.alpha * point.range).sum::<f64>();
        groups.push(start..end);
        if slope <= PRIMAL {
            return Some(groups);
        }
        start = end;
    }
    None
}

/// The last group whose largest pivot is not small beside the largest of all.
fn best_group(points: &[Breakpoint], groups: &[Range<usize>]) -> usize {
    let pivot =
        |range: &Range<usize>| largest(points[range.clone()].iter().map(|point| point.alpha));
    let overall = largest(groups.iter().map(pivot));
    let enough = if overall < 10.0 { 0.1 * overall } else { 1.0 };
    groups.iter().rposition(|range| pivot(range) >= enough).unwrap_or(0)
}

/// The one with the larger pivot, on ties the lower index.
fn larger_pivot<'a>(a: &'a Breakpoint, b: &'a Breakpoint) -> &'a Breakpoint {
    if b.alpha > a.alpha || (b.alpha == a.alpha && b.variable < a.variable) { b } else { a }
}
