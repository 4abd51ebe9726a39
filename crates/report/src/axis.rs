//! The shared axis: a domain rounded outwards to round ticks, and the places of values on it.

use crate::number;

/// Most ticks an axis has, whatever is asked.
const MOST_TICKS: u32 = 40;

/// A domain with round ticks (steps of 1, 2 or 5 times a power of ten).
#[derive(Debug, Clone, Copy, PartialEq)]
pub struct Axis {
    /// Left end.
    pub low: f64,
    /// Right end, above `low`.
    pub high: f64,
    /// Distance between labelled ticks.
    pub step: f64,
    /// The domain of which `low..=high` is the part in view: what lies beyond it stands at its ends.
    pub whole: (f64, f64),
}

impl Axis {
    /// The axis that shows `low..=high` with about `ticks` labelled ticks. Ends are rounded
    /// outwards to half a step, so that a domain that grows a little moves nothing.
    #[must_use]
    pub fn fit(low: f64, high: f64, ticks: u32) -> Self {
        let (low, high) = widened(low, high);
        let ticks = ticks.clamp(2, MOST_TICKS);
        let step = round_step((high - low) / f64::from(ticks));
        let half = step / 2.0;
        let (low, high) = ((low / half).floor() * half, (high / half).ceil() * half);
        Self { low, high, step, whole: (low, high) }
    }

    /// A part of this axis, as it stands, with about `ticks` labelled ticks of its own. A part
    /// without length is the axis itself.
    #[must_use]
    pub fn part(&self, (low, high): (f64, f64), ticks: u32) -> Self {
        if high - low > 0.0 {
            let step = round_step((high - low) / f64::from(ticks.clamp(2, MOST_TICKS)));
            Self { low, high, step, whole: self.whole }
        } else {
            *self
        }
    }

    /// The labelled ticks from left to right.
    #[must_use]
    pub fn ticks(&self) -> Vec<f64> {
        let mut at = (self.low / self.step).ceil();
        let mut ticks = Vec::new();
        while at * self.step <= self.high + self.step * 1e-9
            && ticks.len() < 2 * MOST_TICKS as usize
        {
            ticks.push(at * self.step + 0.0);
            at += 1.0;
        }
        ticks
    }

    /// The text of a tick, with as many decimals as the step needs.
    #[must_use]
    pub fn label(&self, tick: f64) -> String {
        let mut decimals = 0;
        let mut step = self.step;
        while decimals < 9 && step < 0.999_999 {
            step *= 10.0;
            decimals += 1;
        }
        if self.step >= 1e9 { number::short(tick) } else { number::fixed(tick, decimals) }
    }

    /// Where a value stands on a stretch of `width`; values outside the whole domain stand at its
    /// ends, those outside the part in view stand outside the stretch.
    #[must_use]
    pub fn place(&self, value: f64, width: f64) -> f64 {
        let (least, most) = self.whole;
        let value = if value > least { value } else { least };
        let value = if value < most { value } else { most };
        (value - self.low) / (self.high - self.low) * width
    }

    /// The value that stands at a place on a stretch of `width`.
    #[must_use]
    pub fn value(&self, place: f64, width: f64) -> f64 {
        self.low + place / width * (self.high - self.low)
    }
}

/// A domain that is not empty: a single value gets room on both sides.
fn widened(low: f64, high: f64) -> (f64, f64) {
    let (low, high) = if low <= high { (low, high) } else { (high, low) };
    let size = if low.abs() > high.abs() { low.abs() } else { high.abs() };
    if high - low > size * 1e-9 {
        return (low, high);
    }
    let room = if size > 0.0 { size * 0.05 } else { 1.0 };
    (low - room, high + room)
}

/// The least of 1, 2, 5 times a power of ten that is at least `raw`.
fn round_step(raw: f64) -> f64 {
    let mut power = 1.0_f64;
    while power * 10.0 <= raw && power < 1e300 {
        power *= 10.0;
    }
    while power > raw && power > 1e-300 {
        power /= 10.0;
    }
    for factor in [1.0, 2.0, 5.0] {
        if factor * power >= raw * (1.0 - 1e-9) {
            return factor * power;
        }
    }
    10.0 * power
}

#[cfg(test)]
mod tests {
    use super::*;
    use proptest::prelude::*;

    #[test]
    fn ticks_are_round() {
        let axis = Axis::fit(122.5, 153.0, 5);
        assert_eq!((axis.low, axis.high, axis.step), (120.0, 155.0, 10.0));
        assert_eq!(axis.ticks(), vec![120.0, 130.0, 140.0, 150.0]);
        assert_eq!(axis.label(130.0), "130");
        assert_eq!(Axis::fit(0.0, 0.4, 4).label(0.1), "0.1");
    }

    #[test]
    fn a_single_value_has_room() {
        let axis = Axis::fit(39.0, 39.0, 5);
        assert!(axis.low < 39.0 && axis.high > 39.0);
        let zero = Axis::fit(0.0, 0.0, 5);
        assert!(zero.low < 0.0 && zero.high > 0.0);
    }

    #[test]
    fn what_is_beyond_stands_at_the_end() {
        let axis = Axis { low: 0.0, high: 10.0, step: 5.0, whole: (0.0, 10.0) };
        assert_eq!(axis.place(-3.0, 200.0), 0.0);
        assert_eq!(axis.place(5.0, 200.0), 100.0);
        assert_eq!(axis.place(30.0, 200.0), 200.0);
    }

    #[test]
    fn a_part_is_shown_as_it_stands() {
        let part = Axis::fit(0.0, 100.0, 5).part((20.0, 30.0), 5);
        assert_eq!(part.ticks(), vec![20.0, 22.0, 24.0, 26.0, 28.0, 30.0]);
        assert_eq!((part.place(25.0, 200.0), part.value(100.0, 200.0)), (100.0, 25.0));
        assert_eq!(part.place(15.0, 200.0), -100.0, "to the left of what is in view");
        assert_eq!(part.place(900.0, 200.0), 1600.0, "at the end of the whole, out of view");
        assert_eq!(part.part((5.0, 5.0), 5), part);
    }

    proptest! {
        #[test]
        fn the_domain_is_covered(low in -1e7f64..1e7, span in 1e-3f64..1e7, ticks in 2u32..12) {
            let axis = Axis::fit(low, low + span, ticks);
            prop_assert!(axis.low <= low + 1e-6 && axis.high >= low + span - 1e-6);
            prop_assert!(axis.ticks().len() <= ticks as usize + 2);
            prop_assert!(!axis.ticks().is_empty());
        }
    }
}
