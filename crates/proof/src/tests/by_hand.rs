//! Small programs whose optima are worked out by hand.

use crate::{ExactRows, Place, Point, bound, bounds_of, infeasible, quick_bound, violations};
use model::{ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};

fn ratio(top: i64, bottom: u64) -> Number {
    Number::from_parts(top.into(), bottom.into())
}

fn column(lower: Option<i64>, upper: Option<i64>, cost: Number, integer: bool) -> ColumnSpec {
    ColumnSpec { lower: lower.map(Number::from), upper: upper.map(Number::from), cost, integer }
}

fn row(entries: &[(u32, Number)], lower: Option<Number>, upper: Option<Number>) -> Row {
    let entries = entries.iter().map(|(column, a)| (ColumnId(*column), a.clone())).collect();
    Row { entries, lower, upper }
}

/// min x + y, 3x + y ≥ 2, x + 3y ≥ 2, x, y ≥ 0: optimum 1 at (½, ½), duals (¼, ¼).
fn two_rows(sense: Sense) -> Model {
    let sign = if sense == Sense::Minimise { 1 } else { -1 };
    let mut b = ModelBuilder::new("two rows", sense);
    b.offset(Number::from(10));
    for _ in 0..2 {
        b.column(&[], &column(Some(0), None, Number::from(sign), false)).unwrap();
    }
    b.family("cover", FamilyState::In, false);
    let (one, three) = (Number::from(1), Number::from(3));
    let two = Some(Number::from(2));
    b.row(&[], row(&[(0, three.clone()), (1, one.clone())], two.clone(), None)).unwrap();
    b.row(&[], row(&[(0, one), (1, three)], two, None)).unwrap();
    b.build()
}

#[test]
fn true_duals_give_the_optimum_exactly() {
    let model = two_rows(Sense::Minimise);
    let rows = ExactRows::new(&model);
    assert_eq!(bound(&rows, &bounds_of(&model), &[0.25, 0.25]), Some(Number::from(11)));
    let noisy = [0.25 + 3e-12, 0.25 - 1e-12];
    assert_eq!(bound(&rows, &bounds_of(&model), &noisy), Some(Number::from(11)));
}

#[test]
fn maximising_turns_the_bound_round() {
    let model = two_rows(Sense::Maximise);
    let rows = ExactRows::new(&model);
    assert_eq!(bound(&rows, &bounds_of(&model), &[0.25, 0.25]), Some(Number::from(9)));
    let weak = bound(&rows, &bounds_of(&model), &[0.125, 0.125]).unwrap();
    assert!(weak > Number::from(9));
}

#[test]
fn wrong_duals_give_weaker_bounds() {
    let model = two_rows(Sense::Minimise);
    let rows = ExactRows::new(&model);
    for y in [[0.1, 0.1], [0.0, 0.0], [-5.0, 0.2], [1e6, 1e6], [0.3, 0.3]] {
        if let Some(value) = bound(&rows, &bounds_of(&model), &y) {
            assert!(value <= Number::from(11), "{y:?} gave {value}");
        }
    }
    assert_eq!(bound(&rows, &bounds_of(&model), &[f64::NAN, 0.0]), None);
    assert_eq!(bound(&rows, &[], &[0.25, 0.25]), None);
}

/// Whatever the value is said to be, the quick bound is proved; near the true one it is the exact one.
#[test]
fn a_quick_bound_is_no_less_proved() {
    for (sense, optimum) in [(Sense::Minimise, 11_i32), (Sense::Maximise, 9)] {
        let model = two_rows(sense);
        let (rows, bounds) = (ExactRows::new(&model), bounds_of(&model));
        let noisy = [0.25 + 3e-12, 0.25 - 1e-12];
        let quick = quick_bound(&rows, &bounds, &noisy, f64::from(optimum));
        assert_eq!(quick, Some(Number::from(optimum)));
        for y in [[0.1, 0.1], [0.3, 0.3], [1.0 / 7.0, 0.2]] {
            for value in [0.0, f64::from(optimum), 1e9, f64::NAN] {
                let quick = quick_bound(&rows, &bounds, &y, value);
                let is_proved = |quick: Number| match sense {
                    Sense::Minimise => quick <= Number::from(11),
                    Sense::Maximise => quick >= Number::from(9),
                };
                assert!(quick.is_none_or(is_proved), "{y:?} and {value}");
            }
        }
        assert_eq!(quick_bound(&rows, &bounds, &[f64::NAN, 0.0], 0.0), None);
        assert_eq!(quick_bound(&rows, &[], &noisy, 0.0), None);
    }
}

/// Duals that are no dyadic numbers come out as the fractions they are: min x with 7x ≥ 756/5.
#[test]
fn simple_fractions_are_found() {
    let mut b = ModelBuilder::new("sevenths", Sense::Minimise);
    b.column(&[], &column(Some(0), None, Number::from(7), false)).unwrap();
    b.row(&[], row(&[(0, Number::from(7))], Some(ratio(756, 5)), None)).unwrap();
    b.row(&[], row(&[(0, Number::from(3))], Some(Number::from(1)), None)).unwrap();
    let model = b.build();
    let rows = ExactRows::new(&model);
    assert_eq!(bound(&rows, &bounds_of(&model), &[1.0, 0.0]), Some(ratio(756, 5)));
    assert_eq!(bound(&rows, &bounds_of(&model), &[0.0, 7.0 / 3.0]), Some(ratio(7, 3)));
}

/// The rows 0.3x ≥ 1 and coefficients with many decimals are scaled, not rounded.
#[test]
fn decimals_are_exact() {
    let mut b = ModelBuilder::new("decimals", Sense::Minimise);
    b.column(&[], &column(Some(0), Some(100), ratio(1, 10), false)).unwrap();
    b.row(&[], row(&[(0, ratio(3, 10))], Some(Number::from(1)), None)).unwrap();
    let model = b.build();
    let rows = ExactRows::new(&model);
    assert_eq!(bound(&rows, &bounds_of(&model), &[0.1 / 0.3]), Some(ratio(1, 3)));
}

/// A free column needs its reduced cost to be 0 exactly: min x + y, x free, x + 3y ≥ 1,
/// 0 ≤ y ≤ 1, 3x − y ≥ −4. Both rows are tight at
/// (−11/10, 7/10), value −2/5, duals (2/5, 1/5).
#[test]
fn free_columns_are_mended() {
    let mut b = ModelBuilder::new("free", Sense::Minimise);
    b.column(&[], &column(None, None, Number::from(1), false)).unwrap();
    b.column(&[], &column(Some(0), Some(1), Number::from(1), false)).unwrap();
    let (one, three) = (Number::from(1), Number::from(3));
    b.row(&[], row(&[(0, one.clone()), (1, three.clone())], Some(one.clone()), None)).unwrap();
    b.row(&[], row(&[(0, three), (1, -one)], Some(Number::from(-4)), None)).unwrap();
    let model = b.build();
    let rows = ExactRows::new(&model);
    let exact = bound(&rows, &bounds_of(&model), &[0.4, 0.2]).unwrap();
    assert_eq!(exact, ratio(-2, 5));
    let off = bound(&rows, &bounds_of(&model), &[0.4 + 1e-7, 0.2 - 1e-7]).unwrap();
    assert!(off <= exact && off > &exact - ratio(1, 1_000_000), "{off}");
}

/// A multiplier without a side for its sign counts as 0: (−5, 1/5) is worth 2/5.
#[test]
fn wrong_signs_are_clipped() {
    let model = two_rows(Sense::Minimise);
    let rows = ExactRows::new(&model);
    assert_eq!(bound(&rows, &bounds_of(&model), &[-5.0, 0.2]), Some(ratio(52, 5)));
}

/// A free column with coefficients 3 and 7 in multiples of the grid step that neither divides:
/// min 4x + 2y with 3x + y ≥ −10, 7x ≥ −28, y ≥ 0. The optimum is −40/3 at (−10/3, 0), with
/// multipliers (4/3, 0); multipliers near them are mended.
#[test]
fn coefficients_that_do_not_divide() {
    let mut b = ModelBuilder::new("sevens", Sense::Minimise);
    b.column(&[], &column(None, None, Number::from(4), false)).unwrap();
    b.column(&[], &column(Some(0), None, Number::from(2), false)).unwrap();
    let n = Number::from;
    b.row(&[], row(&[(0, n(3)), (1, n(1))], Some(n(-10)), None)).unwrap();
    b.row(&[], row(&[(0, n(7))], Some(n(-28)), None)).unwrap();
    let model = b.build();
    let rows = ExactRows::new(&model);
    let optimum = ratio(-40, 3);
    assert_eq!(bound(&rows, &bounds_of(&model), &[4.0 / 3.0, 0.0]), Some(optimum.clone()));
    for off in [1e-8, 3e-8, 7e-8] {
        let near = bound(&rows, &bounds_of(&model), &[4.0 / 3.0 - off, off]).unwrap();
        assert!(near <= optimum && near > &optimum - ratio(1, 100_000), "{near}");
    }
}

/// Bounds that only a chain of rows implies: x1 ≤ x2 + 1, …, x8 ≤ x9 + 1, x9 ≤ 0, all x ≥ 0.
/// Even multipliers of 0 then prove that −x1 ≥ −8.
#[test]
fn chains_of_rows_bound_columns() {
    let mut b = ModelBuilder::new("chain", Sense::Minimise);
    for k in 0..9 {
        let upper = (k == 8).then_some(0);
        b.column(&[], &column(Some(0), upper, Number::from(-i64::from(k == 0)), false)).unwrap();
    }
    for k in 0..8 {
        let entries = [(k, Number::from(1)), (k + 1, Number::from(-1))];
        b.row(&[], row(&entries, None, Some(Number::from(1)))).unwrap();
    }
    let model = b.build();
    let rows = ExactRows::new(&model);
    assert_eq!(bound(&rows, &bounds_of(&model), &[]), Some(Number::from(-8)));
    let mut wider = bounds_of(&model);
    wider[8].1 = None;
    assert_eq!(bound(&rows, &wider, &[]), None);
}

/// x + y ≥ 3 and x + y ≤ `most`, with 0 ≤ x, y and, if given, a common upper bound.
fn pressed(most: i64, upper: Option<i64>) -> Model {
    let mut b = ModelBuilder::new("pressed", Sense::Minimise);
    b.column(&[], &column(Some(0), upper, Number::from(1), true)).unwrap();
    b.column(&[], &column(Some(0), upper, Number::from(1), true)).unwrap();
    let both = [(0, Number::from(1)), (1, Number::from(1))];
    b.row(&[], row(&both, Some(Number::from(3)), None)).unwrap();
    b.row(&[], row(&both, None, Some(Number::from(most)))).unwrap();
    b.build()
}

#[test]
fn rays_prove_or_do_not() {
    let model = pressed(2, Some(9));
    let (rows, all) = (ExactRows::new(&model), bounds_of(&model));
    assert!(infeasible(&rows, &all, &[1.0, -1.0]));
    assert!(infeasible(&rows, &all, &[-1.0, 1.0]));
    assert!(infeasible(&rows, &all, &[1e-9, -1e-9]));
    for tampered in [[1.0, -0.25], [1.0, 1.0], [0.0, 0.0], [-1.0, -1.0]] {
        assert!(!infeasible(&rows, &all, &tampered), "{tampered:?}");
    }
}

#[test]
fn no_ray_proves_a_falsehood() {
    for upper in [None, Some(9)] {
        let model = pressed(3, upper);
        let (rows, all) = (ExactRows::new(&model), bounds_of(&model));
        for ray in [[1.0, -1.0], [-1.0, 1.0], [1.0, -0.999_999], [1e12, -1.0], [3.0, -1.0]] {
            assert!(!infeasible(&rows, &all, &ray), "{ray:?}");
        }
    }
}

#[test]
fn bounds_are_overridden() {
    let model = two_rows(Sense::Minimise);
    let mut rows = ExactRows::new(&model);
    let zero = Some(Number::ZERO);
    let fixed = vec![(zero.clone(), zero.clone()), (zero.clone(), zero)];
    assert!(infeasible(&rows, &fixed, &[1.0, 0.0]));
    let tight = vec![(Some(Number::from(1)), None), (Some(Number::from(0)), None)];
    assert_eq!(bound(&rows, &tight, &[0.0, 1.0 / 3.0]), Some(ratio(34, 3)));
    let both = [(0, Number::from(1)), (1, Number::from(1))];
    assert_eq!(rows.add(&row(&both, Some(Number::from(4)), None)), 2);
    assert_eq!(bound(&rows, &tight, &[0.0, 0.0, 1.0]), Some(Number::from(14)));
}

#[test]
fn points_are_checked_exactly() {
    let mut b = ModelBuilder::new("points", Sense::Maximise);
    b.variable("x", false);
    let label = b.label("Ash");
    b.column(&[label], &column(Some(0), Some(3), Number::from(2), true)).unwrap();
    b.variable("y", false);
    b.column(&[], &column(Some(0), None, ratio(1, 3), false)).unwrap();
    b.family("limit", FamilyState::In, false);
    let entries = [(0, Number::from(1)), (1, Number::from(3))];
    b.row(&[label], row(&entries, None, Some(Number::from(3)))).unwrap();
    b.family("later", FamilyState::OnDemand, false);
    b.row(&[], row(&[(0, Number::from(1))], None, Some(Number::from(1)))).unwrap();
    b.family("gone", FamilyState::Out, false);
    b.row(&[], row(&[(0, Number::from(1))], None, Some(Number::from(0)))).unwrap();
    let model = b.build();
    let good = Point::new(&model, &[0.999_999_9, 2.0 / 3.0]);
    assert_eq!((good.violations.len(), good.objective), (0, ratio(20, 9)));
    let bad = violations(&model, &[4.0, 0.0]);
    let names: Vec<(&str, Number)> =
        bad.iter().map(|v| (v.name.as_str(), v.amount.clone())).collect();
    let expected = [("limit[Ash]", 1), ("later", 3), ("x[Ash]", 1)];
    assert_eq!(names, expected.map(|(name, amount)| (name, Number::from(amount))));
    assert_eq!(violations(&model, &[f64::NAN, 0.0])[0].place, Place::Value(ColumnId(0)));
}

/// min u + v with free a, b, c in a ring of equations a + b = u, b + c = v, a + c = 4 and
/// u + v ≥ 1, u, v ≥ 0: optimum 1. Noise in the multipliers opens all three free columns, and a row
/// mended for one of them opens the next: only all of them together can be closed.
#[test]
fn free_columns_that_share_rows_are_closed_together() {
    let mut b = ModelBuilder::new("ring", Sense::Minimise);
    for _ in 0..3 {
        b.column(&[], &column(None, None, Number::ZERO, false)).unwrap();
    }
    for _ in 0..2 {
        b.column(&[], &column(Some(0), None, Number::ONE, false)).unwrap();
    }
    b.family("ring", FamilyState::In, false);
    let one = |column| (column, Number::ONE);
    let minus = |column| (column, -Number::ONE);
    let zero = Some(Number::ZERO);
    b.row(&[], row(&[one(0), one(1), minus(3)], zero.clone(), zero.clone())).unwrap();
    b.row(&[], row(&[one(1), one(2), minus(4)], zero.clone(), zero)).unwrap();
    let four = Some(Number::from(4));
    b.row(&[], row(&[one(0), one(2)], four.clone(), four)).unwrap();
    b.row(&[], row(&[one(3), one(4)], Some(Number::ONE), None)).unwrap();
    let model = b.build();
    let (rows, all) = (ExactRows::new(&model), bounds_of(&model));
    for y in [[0.0, 0.0, 0.0, 1.0], [1e-4, -2e-4, 3e-4, 0.999], [1e-3, 7e-4, -2e-4, 0.9]] {
        let proved = bound(&rows, &all, &y).unwrap();
        assert!(proved <= Number::ONE && proved > ratio(8, 10), "{y:?} gave {proved}");
    }
    let mut tight = all;
    (tight[3], tight[4]) = ((None, Some(ratio(1, 4))), (None, Some(ratio(1, 4))));
    assert!(infeasible(&rows, &tight, &[1e-4, -2e-4, 3e-4, 0.999]));
}
