//! The course of a search: its bound and its incumbents over work and over nodes, kept as it goes
//! in constant memory but for the incumbents.
//!
//! Integrals are of the relative distance to the best value in the end, over work (Berthold 2013,
//! Operations Research Letters 41): small where good values came early. While there is no
//! incumbent the distance of the incumbent counts 1.

use crate::event::Origin;

/// An incumbent.
#[derive(Debug, Clone, PartialEq)]
pub struct Found {
    /// Nodes solved before it.
    pub nodes: u32,
    /// Work until then.
    pub work: u64,
    /// Its value in the direction of the objective.
    pub value: f64,
    /// Where it came from.
    pub origin: Origin,
}

/// What is kept. Values are internal but for those of [`Found`].
#[derive(Debug, Default)]
pub(crate) struct Course {
    pub(crate) found: Vec<Found>,
    /// Work at the first bound.
    start: Option<u64>,
    /// Σ bound · work, up to the last rise.
    area: f64,
    last: Option<Rise>,
    /// The longest stretch of nodes without a rise that has ended.
    longest: u32,
}

#[derive(Debug, Clone, Copy)]
struct Rise {
    work: u64,
    nodes: u32,
    bound: f64,
}

impl Course {
    /// Notes that the bound of the whole tree is now `bound`.
    pub(crate) fn rise(&mut self, work: u64, nodes: u32, bound: f64) {
        self.start.get_or_insert(work);
        if let Some(last) = self.last {
            self.area += last.bound * span(last.work, work);
            let stretch = nodes - last.nodes;
            self.longest = if stretch > self.longest { stretch } else { self.longest };
        }
        self.last = Some(Rise { work, nodes, bound });
    }

    /// The longest stretch of nodes without a rise, now that `nodes` are solved.
    pub(crate) fn plateau(&self, nodes: u32) -> u32 {
        let running = self.last.map_or(0, |last| nodes.saturating_sub(last.nodes));
        if running > self.longest { running } else { self.longest }
    }

    /// The integral of the bound's distance to `best`, until `work`.
    pub(crate) fn dual_integral(&self, best: f64, work: u64) -> Option<f64> {
        let (start, last) = (self.start?, self.last?);
        let area = self.area + last.bound * span(last.work, work);
        let size = best.abs();
        (size > 0.0).then(|| at_least_zero((best * span(start, work) - area) / size))
    }

    /// The integral of the incumbent's distance to `best`, as the user reads it, until `work`.
    pub(crate) fn primal_integral(&self, best: f64, work: u64) -> Option<f64> {
        let size = best.abs();
        if size == 0.0 {
            return None;
        }
        let (mut at, mut distance, mut sum) = (self.start?, 1.0, 0.0);
        for found in &self.found {
            sum += distance * span(at, found.work);
            at = if found.work > at { found.work } else { at };
            let away = (found.value - best).abs() / size;
            distance = if away < 1.0 { away } else { 1.0 };
        }
        Some(sum + distance * span(at, work))
    }
}

#[expect(clippy::cast_precision_loss, reason = "work is far under 2⁵³")]
fn span(from: u64, to: u64) -> f64 {
    to.saturating_sub(from) as f64
}

fn at_least_zero(value: f64) -> f64 {
    if value > 0.0 { value } else { 0.0 }
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn integrals_are_areas_over_work() {
        let mut course = Course::default();
        course.rise(10, 1, 50.0);
        course.rise(20, 4, 80.0);
        let found = |nodes, work, value| Found { nodes, work, value, origin: Origin::Rounding };
        course.found = vec![found(2, 15, 150.0), found(5, 30, 100.0)];
        // Bound: half away for 10, a fifth away for 20; incumbent: 1 for 5, a half for 15, then 0.
        assert_eq!(course.dual_integral(100.0, 40), Some(0.5 * 10.0 + 0.2 * 20.0));
        assert_eq!(course.primal_integral(100.0, 40), Some(5.0 + 0.5 * 15.0));
        assert_eq!(course.dual_integral(0.0, 40), None);
        assert_eq!((course.plateau(5), course.plateau(30)), (3, 26));
    }
}
