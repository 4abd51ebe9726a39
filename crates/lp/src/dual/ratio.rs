//! The bound-flipping ratio test.
//!
//! The leaving variable violates a bound by δ; along the dual step t every reduced cost falls as
//! d_j − t α_j, and the dual objective rises with slope δ. Passing the breakpoint d_j / α_j of a
//! boxed variable costs |α_j|(u_j − l_j) of slope; breakpoints are passed while the slope stays
//! positive, and the variables passed flip to their other bound. Breakpoints are taken in groups
//! that Harris's tolerance makes equal; in the last profitable group with a good pivot, the largest
//! |α_j| enters.
//!
//! The row may be as long as there are columns, so the passes over all of it are kept lean: signs
//! without branches, products in place of quotients, ranges looked up and breakpoints sorted only
//! as far as the slope can reach.
//!
//! Source: Fourer 1994; Maros 2003; Harris 1973.

use crate::basis::Status;
use crate::state::Core;
use crate::tolerances::{HARRIS_DUAL, PRIMAL};

/// What the test says.
#[derive(Clone, Copy, Debug, PartialEq, Eq)]
pub(crate) enum Choice {
    /// Nothing stops the dual step: the row proves infeasibility.
    None,
    /// A variable enters after those in `scratch.flipped` flip.
    Enter { entering: u32 },
}

/// A variable that bounds the step.
#[derive(Clone, Copy, Debug, Default)]
pub(crate) struct Breakpoint {
    variable: u32,
    /// |α_j|.
    alpha: f64,
    /// |d_j|.
    slack: f64,
    /// slack / alpha, once the breakpoint is near.
    ratio: f64,
    /// Slope lost beyond it, once it is near.
    loss: f64,
    /// Harris's bound of the group that begins here, once the near ones are sorted.
    bound: f64,
}

impl Breakpoint {
    /// Whether the breakpoint is at most at `bound`.
    fn is_within(&self, bound: f64) -> bool {
        self.slack <= bound * self.alpha
    }
}

/// Chooses the entering variable for the row in `scratch.row`.
pub(crate) fn choose(core: &mut Core, position: u32, sign: f64) -> Choice {
    let mut store = std::mem::take(&mut core.scratch.points);
    let (count, largest) = list(core, sign, &mut store);
    let count = drop_small(&mut store[..count], core.care.least_entry(largest));
    let points = &mut store[..count];
    core.scratch.flipped.clear();
    core.ticks += count as u64;
    let slope = core.violation[position as usize].sqrt();
    let nearest = nearest(points);
    let entering = match first_group(core, points, nearest, slope) {
        Some(entering) => Some(entering),
        None => long_step(core, points, nearest, slope),
    };
    core.scratch.points = store;
    entering.map_or(Choice::None, |entering| Choice::Enter { entering })
}

/// Lists the variables whose reduced cost falls to zero along the step: how many, and the largest
/// |α| of the row.
fn list(core: &Core, sign: f64, store: &mut Vec<Breakpoint>) -> (usize, f64) {
    let row = &core.scratch.row;
    if store.len() < row.count() + 1 {
        store.resize(row.count() + 1, Breakpoint::default());
    }
    let (mut count, mut largest) = (0, 0.0);
    for (variable, value) in row.iter() {
        let j = variable as usize;
        let size = value.abs();
        largest = if size > largest { size } else { largest };
        let falls = match core.status[j] {
            Status::Basic => 0.0,
            Status::Lower => sign * value,
            Status::Upper => -(sign * value),
            Status::Free => size,
        };
        let slack = core.reduced[j].abs();
        store[count] = Breakpoint { variable, alpha: size, slack, ..Breakpoint::default() };
        count += usize::from(falls > 0.0);
    }
    (count, largest)
}

/// Keeps the breakpoints with |α| above `least`, in order; returns how many.
fn drop_small(points: &mut [Breakpoint], least: f64) -> usize {
    let mut kept = 0;
    for k in 0..points.len() {
        points[kept] = points[k];
        kept += usize::from(points[k].alpha > least);
    }
    kept
}

/// The least ratio with Harris's tolerance; infinite without breakpoints.
fn nearest(points: &[Breakpoint]) -> f64 {
    let mut bound = f64::INFINITY;
    for point in points {
        let relaxed = point.slack + HARRIS_DUAL;
        if relaxed < bound * point.alpha {
            bound = relaxed / point.alpha;
        }
    }
    // The product with α must not round below the slack that the bound was made of.
    bound * (1.0 + 4.0 * f64::EPSILON)
}

/// The slope lost when a variable is passed.
fn loss(core: &Core, point: &Breakpoint) -> f64 {
    let j = point.variable as usize;
    point.alpha * (core.work_upper[j] - core.work_lower[j])
}

/// The largest pivot of the first group, when the slope ends there: the common case, without
/// sorting.
fn first_group(core: &Core, points: &[Breakpoint], nearest: f64, slope: f64) -> Option<u32> {
    let mut left = slope;
    let mut best: Option<&Breakpoint> = None;
    for point in points.iter().filter(|point| point.is_within(nearest)) {
        left -= loss(core, point);
        best = Some(best.map_or(point, |held| larger_pivot(held, point)));
    }
    best.filter(|_| left <= PRIMAL).map(|point| point.variable)
}

/// The step past the first group: sorts the breakpoints up to where the slope ends and takes the
/// largest pivot of the last group whose pivot is not small beside the largest of all.
fn long_step(core: &mut Core, points: &mut [Breakpoint], nearest: f64, slope: f64) -> Option<u32> {
    let near = gather_near(core, points, nearest, slope);
    let points = &mut points[..near];
    points.sort_unstable_by(|a, b| a.ratio.total_cmp(&b.ratio).then(a.variable.cmp(&b.variable)));
    core.ticks += near as u64;
    let mut least = f64::INFINITY;
    for point in points.iter_mut().rev() {
        let relaxed = (point.slack + HARRIS_DUAL) / point.alpha;
        least = if relaxed < least { relaxed } else { least };
        point.bound = least;
    }
    let end = profitable(points, slope)?;
    let start = last_good_group(&points[..end]);
    let group = start..group_end(points, start);
    let entering = points[group].iter().reduce(larger_pivot)?;
    core.scratch.flipped.extend(points[..start].iter().map(|point| point.variable));
    Some(entering.variable)
}

/// Moves the near breakpoints to the front and returns how many they are: those within a distance
/// that grows tenfold from the nearest one until the slope ends within it.
fn gather_near(core: &Core, points: &mut [Breakpoint], nearest: f64, slope: f64) -> usize {
    let (mut reach, mut near, mut left) = (nearest, 0, slope);
    while near < points.len() && left > PRIMAL {
        reach *= 10.0;
        let first = near;
        for k in first..points.len() {
            if points[k].is_within(reach) {
                points.swap(k, near);
                let point = &mut points[near];
                point.ratio = point.slack / point.alpha;
                point.loss = loss(core, point);
                left -= point.loss;
                near += 1;
            }
        }
        if reach == f64::INFINITY {
            break;
        }
    }
    near
}

/// The end of the group that begins at a breakpoint.
fn group_end(points: &[Breakpoint], start: usize) -> usize {
    let bound = points[start].bound;
    let count = points[start..].iter().take_while(|point| point.ratio <= bound).count();
    if count == 0 { start + 1 } else { start + count }
}

/// The end of the group in which the slope ends; none when it never does.
fn profitable(points: &[Breakpoint], slope: f64) -> Option<usize> {
    let (mut start, mut left) = (0, slope);
    while start < points.len() {
        let end = group_end(points, start);
        left -= points[start..end].iter().map(|point| point.loss).sum::<f64>();
        if left <= PRIMAL {
            return Some(end);
        }
        start = end;
    }
    None
}

/// Where the last group begins whose largest pivot is not small beside the largest of all.
fn last_good_group(points: &[Breakpoint]) -> usize {
    let pivot = |group: &[Breakpoint]| crate::sparse::largest(group.iter().map(|p| p.alpha));
    let overall = pivot(points);
    let enough = if overall < 10.0 { 0.1 * overall } else { 1.0 };
    let (mut start, mut good) = (0, 0);
    while start < points.len() {
        let end = group_end(points, start);
        if pivot(&points[start..end]) >= enough {
            good = start;
        }
        start = end;
    }
    good
}

/// The one with the larger pivot, on ties the lower index.
fn larger_pivot<'a>(a: &'a Breakpoint, b: &'a Breakpoint) -> &'a Breakpoint {
    if b.alpha > a.alpha || (b.alpha == a.alpha && b.variable < a.variable) { b } else { a }
}
