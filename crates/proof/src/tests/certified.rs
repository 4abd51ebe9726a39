//! Larger programs made together with their optima: x*, y* and reduced costs are drawn first,
//! costs and sides follow from complementary slackness.

use model::{
    ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense, nearest_f64,
};
use proptest::prelude::*;

use crate::{ExactRows, bound, bounds_of};

fn ratio(top: i64, bottom: u64) -> Number {
    Number::from_parts(top.into(), bottom.into())
}

/// What is drawn for a column: its value, its reduced cost where it is at 0, and how it is
/// bounded above (0: not at all).
type Column = (i64, i64, i64);

struct Made {
    model: Model,
    multipliers: Vec<Number>,
    optimum: Number,
}

/// Rows `Ax ≥ b` that are tight where the multiplier is not 0; multipliers are k/`bottom`,
/// coefficients are hundredths.
fn made(columns: &[Column], rows: &[(Vec<i64>, i64)], bottom: u64, huge: &Number) -> Made {
    let multipliers: Vec<Number> = rows.iter().map(|(_, y)| ratio(*y, bottom)).collect();
    let coefficient = |row: usize, j: usize| ratio(rows[row].0[j % rows[row].0.len()], 100) * huge;
    let mut b = ModelBuilder::new("certified", Sense::Minimise);
    let mut optimum = Number::ZERO;
    for (j, &(value, reduced, width)) in columns.iter().enumerate() {
        let mut cost = if value == 0 { Number::from(reduced) } else { Number::ZERO };
        for (i, y) in multipliers.iter().enumerate() {
            cost += coefficient(i, j) * y;
        }
        optimum += &cost * Number::from(value);
        let upper = (width > 0).then(|| Number::from(value + width));
        b.column(&[], &ColumnSpec { lower: Some(Number::ZERO), upper, cost, integer: false })
            .unwrap();
    }
    b.family("rows", FamilyState::In, false);
    for (i, y) in multipliers.iter().enumerate() {
        let entries: Vec<(ColumnId, Number)> =
            (0..columns.len()).map(|j| (ColumnId::from_index(j), coefficient(i, j))).collect();
        let values = entries.iter().zip(columns);
        let activity = values.fold(Number::ZERO, |sum, ((_, a), x)| sum + a * Number::from(x.0));
        let slack = if y.is_zero() { Number::from(1) } else { Number::ZERO };
        b.row(&[], Row { entries, lower: Some(activity - slack), upper: None }).unwrap();
    }
    Made { model: b.build(), multipliers, optimum }
}

fn draws(
    width: std::ops::Range<i64>,
) -> impl Strategy<Value = (Vec<Column>, Vec<(Vec<i64>, i64)>)> {
    let column = (0_i64..4, 0_i64..9, width);
    let row = (prop::collection::vec(0_i64..400, 5..9), 0_i64..90_000);
    (prop::collection::vec(column, 4..40), prop::collection::vec(row, 1..12))
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(60))]

    /// Multipliers with a prime denominator over the limit of simple fractions: the grid
    /// loses no more than 10⁻⁹, relatively, with and without upper bounds.
    #[test]
    fn the_loss_is_small((columns, rows) in draws(0..3)) {
        let made = made(&columns, &rows, 9_973, &Number::ONE);
        let y: Vec<f64> = made.multipliers.iter().map(nearest_f64).collect();
        let exact = ExactRows::new(&made.model);
        let proved = bound(&exact, &bounds_of(&made.model), &y);
        let proved = proved.expect("rows and signs allow a proof");
        prop_assert!(proved <= made.optimum);
        let loss = nearest_f64(&(&made.optimum - &proved));
        prop_assert!(loss <= 1e-9 * (1.0 + nearest_f64(&made.optimum).abs()), "loss {loss:e}");
    }

    /// Simple fractions: no loss at all.
    #[test]
    fn simple_fractions_lose_nothing((columns, rows) in draws(0..3)) {
        let made = made(&columns, &rows, 630, &Number::ONE);
        let y: Vec<f64> = made.multipliers.iter().map(nearest_f64).collect();
        let exact = ExactRows::new(&made.model);
        prop_assert_eq!(bound(&exact, &bounds_of(&made.model), &y), Some(made.optimum));
    }

    /// Coefficients of thirty digits do not fit 128 bits, and change nothing.
    #[test]
    fn large_numbers_are_exact_too((columns, rows) in draws(1..3)) {
        let huge = Number::from(10_i128.pow(30) + 7);
        let made = made(&columns, &rows, 630, &huge);
        let y: Vec<f64> = made.multipliers.iter().map(nearest_f64).collect();
        let exact = ExactRows::new(&made.model);
        prop_assert_eq!(bound(&exact, &bounds_of(&made.model), &y), Some(made.optimum));
    }
}
