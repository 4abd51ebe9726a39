//! The direction along which an unbounded relaxation has no end, in names and readable steps.

use lp::Outcome;
use model::ColumnId;

use crate::search::Search;

/// Steps of less than this share of the largest are rounding.
const NO_STEP: f64 = 1e-9;
/// How near to a whole number a step is taken for one, in the unit of the least step; relative.
const WHOLE_STEP: f64 = 1e-7;
/// Whole steps are at most so large; a direction that needs larger ones is given by shares.
const LARGEST: f64 = 10_000.0;

impl Search {
    /// The columns that grow or fall along the ray of an unbounded relaxation, by name with their
    /// steps: whole numbers where the least of them is a unit, else at most 1 in size.
    pub(crate) fn named_direction(&self) -> Vec<(String, f64)> {
        let outcome = self.relaxation.as_ref().and_then(|r| r.simplex.outcome());
        let Some(Outcome::Unbounded { ray, .. }) = outcome else { return Vec::new() };
        let moving = (0..).map(ColumnId).zip(readable(ray)).filter(|&(_, step)| step != 0.0);
        moving.map(|(column, step)| (self.model.column_name(column), step)).collect()
    }
}

/// A direction in the unit of its least step where that makes all of them whole, else in that of
/// its largest.
fn readable(ray: &[f64]) -> Vec<f64> {
    let largest = ray.iter().fold(0.0, |most: f64, r| if r.abs() > most { r.abs() } else { most });
    let moves = |step: f64| step.abs() > NO_STEP * largest;
    let steps = || ray.iter().copied().filter(|&step| moves(step));
    let least = steps().fold(largest, |least, r| if r.abs() < least { r.abs() } else { least });
    let near = |units: f64| (units.round() - units).abs() <= WHOLE_STEP * units.abs();
    let whole = largest <= LARGEST * least && steps().all(|step| near(step / least));
    let shown = |step: f64| if whole { (step / least).round() } else { step / largest };
    ray.iter().map(|&step| if moves(step) { shown(step) } else { 0.0 }).collect()
}

#[cfg(test)]
mod tests {
    use super::readable;

    #[test]
    fn steps_are_whole_where_one_unit_makes_them_so() {
        assert_eq!(readable(&[0.25, -0.5, 0.0, 1e-13]), [1.0, -2.0, 0.0, 0.0]);
        assert_eq!(readable(&[0.3, 0.2]), [1.0, 0.2 / 0.3]);
        assert_eq!(readable(&[1.0, 3e7]), [1.0 / 3e7, 1.0]);
        assert_eq!(readable(&[0.0]), [0.0]);
    }
}
