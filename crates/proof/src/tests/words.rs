//! Bounds in machine words are no less proved than others, and lose next to nothing.

use dashu_int::IBig;
use model::{ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use proptest::prelude::*;

use crate::words::bound_in_words;
use crate::{ExactRows, bound, bounds_of};

const COLUMNS: usize = 4;

/// A row of four coefficients over one denominator, with the number that it is to reach at least.
fn rows() -> impl Strategy<Value = Vec<([i64; COLUMNS], u32, i64)>> {
    let entries = prop::array::uniform4(-30_i64..60);
    prop::collection::vec(
        (entries, prop_oneof![Just(1_u32), 2_u32..9, Just(100)], -40_i64..90),
        1..5,
    )
}

fn number(top: i64, bottom: u32) -> Number {
    Number::from_parts(top.into(), bottom.into())
}

fn model(costs: [i64; COLUMNS], rows: &[([i64; COLUMNS], u32, i64)]) -> Model {
    let mut b = ModelBuilder::new("drawn", Sense::Minimise);
    for cost in costs {
        let (lower, upper) = (Some(Number::ZERO), Some(Number::from(2)));
        b.column(&[], &ColumnSpec { lower, upper, cost: number(cost, 10), integer: true }).unwrap();
    }
    b.family("rows", FamilyState::In, false);
    for (entries, scale, least) in rows {
        let entries = entries.iter().enumerate().filter(|(_, a)| **a != 0);
        let entries = entries.map(|(j, &a)| (ColumnId::from_index(j), number(a, *scale))).collect();
        b.row(&[], Row { entries, lower: Some(number(*least, *scale)), upper: None }).unwrap();
    }
    b.build()
}

/// The least cost of a whole point of the box that meets all rows.
fn least(costs: [i64; COLUMNS], rows: &[([i64; COLUMNS], u32, i64)]) -> Option<Number> {
    let points = (0..81_usize).map(|k| [k % 3, k / 3 % 3, k / 9 % 3, k / 27].map(|v| v as i64));
    let dot = |a: &[i64; COLUMNS], x: &[i64; COLUMNS]| -> i64 {
        a.iter().zip(x).map(|(a, x)| a * x).sum()
    };
    let meets = |x: &[i64; COLUMNS]| rows.iter().all(|(a, _, least)| dot(a, x) >= *least);
    points.filter(meets).map(|x| number(dot(&costs, &x), 10)).min()
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(2_000))]

    #[test]
    fn no_point_is_under_a_bound_in_words(
        costs in prop::array::uniform4(-50_i64..90),
        rows in rows(),
        y in prop::collection::vec(prop_oneof![Just(0.0), -0.5_f64..4.0, 0.0_f64..1e-7], 5),
    ) {
        let drawn = model(costs, &rows);
        let exact = ExactRows::new(&drawn);
        let bounds = bounds_of(&drawn);
        let y = &y[..rows.len().min(y.len())];
        let Some(found) = bound_in_words(&exact, &bounds, y) else {
            return Err(TestCaseError::fail("small numbers fit"));
        };
        let careful = bound(&exact, &bounds, y).unwrap();
        prop_assert!(model::nearest_f64(&(&found - &careful)).abs() < 1e-4);
        if let Some(least) = least(costs, &rows) {
            prop_assert!(found <= least, "{found} is over {least}");
        }
    }
}

/// What does not fit into words has no bound by this way, and none that is wrong.
#[test]
fn what_does_not_fit_is_left_to_others() {
    let drawn = model([1, 2, 3, 4], &[([1, 1, 1, 1], 1, 2)]);
    let exact = ExactRows::new(&drawn);
    let bounds = bounds_of(&drawn);
    assert_eq!(bound_in_words(&exact, &bounds, &[0.1]), Some(number(2, 10)));
    for y in [f64::NAN, f64::INFINITY, 1e300] {
        assert_eq!(bound_in_words(&exact, &bounds, &[y]), None, "{y}");
    }
    let mut open = bounds.clone();
    open[3].0 = None;
    assert_eq!(bound_in_words(&exact, &open, &[0.1]), None, "a column without the bound it needs");
    let mut third = bounds;
    third[3].0 = Some(number(1, 3));
    assert_eq!(bound_in_words(&exact, &third, &[0.1]), None, "a bound that is not whole");
    let wide = Number::from(IBig::from(10).pow(30));
    let mut b = ModelBuilder::new("wide", Sense::Minimise);
    let (lower, upper) = (Some(Number::ZERO), Some(Number::ONE));
    b.column(&[], &ColumnSpec { lower, upper, cost: wide, integer: true }).unwrap();
    let drawn = b.build();
    assert_eq!(bound_in_words(&ExactRows::new(&drawn), &bounds_of(&drawn), &[]), None);
}
