//! What a node's bound must reach for the node to be closed.
//!
//! Let `c` be the best value known: of the incumbent, or the cut-off that was given. Where every
//! column with a cost is whole, values are the offset plus multiples of a step `q`, and the best
//! value that still improves is the last of them under `c`, called `t`; a node is closed when
//! its bound is over `t`. Elsewhere it is closed when its bound is at least `c`. All values here
//! are internal: for a minimisation, offset included.

use model::{Model, Number, Sense, nearest_f64};

/// How much under `c` a floating-point bound may stay when there is no lattice, relative to
/// max(1, |c|).
const SLACK: f64 = 1e-9;

/// How much over `t` a floating-point bound must be when there is a lattice, relative to
/// max(1, |t|); at most half a step.
const MARGIN: f64 = 1e-6;

/// The best value known and the bound that closes a node.
#[derive(Debug)]
pub(crate) struct Target {
    offset: Number,
    step: Option<Number>,
    best: Option<Number>,
    improving: Option<Number>,
    threshold: f64,
}

impl Target {
    /// No value known yet. `lattice`: whether the step of the objective counts.
    pub(crate) fn new(model: &Model, lattice: bool) -> Self {
        let offset = signed(model, model.offset().clone());
        let step = model.objective_lattice().filter(|q| lattice && *q > Number::ZERO);
        Self { offset, step, best: None, improving: None, threshold: f64::INFINITY }
    }

    /// Takes `value` as the best known, if it is better.
    pub(crate) fn improve(&mut self, value: Number) {
        if !self.improves(&value) {
            return;
        }
        if let Some(step) = &self.step {
            let place = ((value.clone() - &self.offset) / step).ceil();
            let last = self.offset.clone() + step * (Number::from(place) - Number::ONE);
            let margin = smaller(MARGIN * one_or_size(nearest_f64(&last)), nearest_f64(step) * 0.5);
            self.threshold = nearest_f64(&last) + margin;
            self.improving = Some(last);
        } else {
            let float = nearest_f64(&value);
            self.threshold = float - SLACK * one_or_size(float);
        }
        self.best = Some(value);
    }

    /// Whether `value` is better than the best known.
    pub(crate) fn improves(&self, value: &Number) -> bool {
        self.best.as_ref().is_none_or(|best| value < best)
    }

    /// The best value known.
    pub(crate) fn best(&self) -> Option<f64> {
        self.best.as_ref().map(nearest_f64)
    }

    /// Whether a node of this floating-point bound is closed.
    pub(crate) fn closes(&self, bound: f64) -> bool {
        self.best.is_some() && bound >= self.threshold
    }

    /// Whether a bound closes a node by the step of the objective alone.
    pub(crate) fn closes_by_step(&self, bound: f64) -> bool {
        let best = self.best().filter(|_| self.step.is_some());
        self.closes(bound) && best.is_some_and(|best| bound < best - SLACK * one_or_size(best))
    }

    /// Whether a bound that was proved leaves no better value: exact.
    pub(crate) fn proves(&self, proved: &Number) -> bool {
        match (&self.improving, &self.best) {
            (Some(improving), _) => proved > improving,
            (None, Some(best)) => proved >= best,
            (None, None) => false,
        }
    }

    /// The value that a proved bound must reach, where reaching it is enough; internal.
    pub(crate) fn goal(&self) -> Option<&Number> {
        self.best.as_ref().filter(|_| self.improving.is_none())
    }

    /// The same for a bound that is kept as a float on the safe side.
    pub(crate) fn proves_float(&self, proved: f64) -> bool {
        Number::try_from(proved).is_ok_and(|proved| self.proves(&proved))
    }
}

/// An exact value of the user's direction as an internal one, or back.
pub(crate) fn signed(model: &Model, value: Number) -> Number {
    match model.sense() {
        Sense::Minimise => value,
        Sense::Maximise => -value,
    }
}

/// The decimal that a float is printed as, exactly: 28.6 is 143/5. `None` unless finite.
pub(crate) fn decimal(value: f64) -> Option<Number> {
    if !value.is_finite() {
        return None;
    }
    let text = format!("{value}");
    let (whole, fraction) = text.split_once('.').unwrap_or((&text, ""));
    let digits = Number::from_str_radix(&format!("{whole}{fraction}"), 10).ok()?;
    let tens = Number::from_str_radix(&format!("1{}", "0".repeat(fraction.len())), 10).ok()?;
    Some(digits / tens)
}

/// The largest float that is not over an exact value.
pub(crate) fn float_below(value: &Number) -> f64 {
    let near = nearest_f64(value);
    match Number::try_from(near) {
        Ok(exact) if exact > *value => near.next_down(),
        Ok(_) => near,
        Err(_) => f64::NEG_INFINITY,
    }
}

fn smaller(a: f64, b: f64) -> f64 {
    if a < b { a } else { b }
}

fn one_or_size(value: f64) -> f64 {
    if value.abs() > 1.0 { value.abs() } else { 1.0 }
}

#[cfg(test)]
mod tests {
    use super::*;
    use model::{ColumnSpec, ModelBuilder};
    use proptest::prelude::*;

    fn target(costs: &[Number], integer: bool, offset: Number) -> Target {
        let mut builder = ModelBuilder::new("t", Sense::Minimise);
        builder.offset(offset);
        for cost in costs {
            let spec = ColumnSpec {
                lower: Some(Number::ZERO),
                upper: Some(Number::ONE),
                cost: cost.clone(),
                integer,
            };
            builder.column(&[], &spec).unwrap();
        }
        Target::new(&builder.build(), true)
    }

    #[test]
    fn a_lattice_closes_just_over_the_last_improving_value() {
        let mut target = target(&[Number::from(2), Number::from(4)], true, Number::from(1));
        assert!(!target.closes(1e300) && !target.proves_float(1e300));
        target.improve(Number::from(9));
        assert!(!target.closes(7.0) && target.closes(7.1) && target.closes(9.0));
        assert!(!target.proves_float(7.0) && target.proves_float(7.0f64.next_up()));
        target.improve(Number::from(11));
        assert_eq!(target.best(), Some(9.0));
        target.improve(Number::from(6));
        assert!(
            !target.closes(5.0) && target.closes(5.5),
            "a cut-off off the lattice: 5 still improves on 6"
        );
    }

    #[test]
    fn without_a_lattice_the_bound_must_reach_the_value() {
        let mut target = target(&[Number::from(2)], false, Number::ZERO);
        target.improve(Number::from(9));
        assert!(!target.closes(8.999) && target.closes(9.0) && target.closes(9.0 - 1e-9));
        assert!(!target.proves_float(9.0f64.next_down()) && target.proves_float(9.0));
    }

    #[test]
    fn floats_become_the_decimals_they_are_printed_as() {
        let fifth = |n: i32| Number::from(n) / Number::from(5);
        assert_eq!(decimal(28.6), Some(fifth(143)));
        assert_eq!(decimal(-0.2), Some(fifth(-1)));
        assert_eq!(decimal(214.0), Some(Number::from(214)));
        assert_eq!(decimal(f64::NAN), None);
    }

    proptest! {
        #[test]
        fn rounding_goes_to_the_safe_side(top in any::<i64>(), bottom in 1..i64::MAX) {
            let value = Number::from(top) / Number::from(bottom);
            let float = float_below(&value);
            prop_assert!(Number::try_from(float).unwrap() <= value);
            prop_assert!(Number::try_from(float.next_up()).unwrap() > value);
        }

        #[test]
        fn a_decimal_is_the_nearest_to_its_float(value in -1e12..1e12) {
            prop_assert_eq!(nearest_f64(&decimal(value).unwrap()), value);
        }
    }
}
