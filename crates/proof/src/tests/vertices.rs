//! Tiny programs whose optima are found by trying every basis in rationals.

use model::{ColumnId, ColumnSpec, FamilyState, Model, ModelBuilder, Number, Row, Sense};
use proptest::prelude::*;

use crate::{
    Bounds, Budget, Certifier, ExactRows, Progress, Standing, Standings, Wish, bound, bounds_of,
    infeasible,
};

/// min c'x, L ≤ Ax ≤ U, l ≤ x ≤ u in small whole numbers; sides may be missing.
#[derive(Debug, Clone)]
struct Program {
    costs: Vec<i64>,
    bounds: Vec<(i64, Option<i64>)>,
    rows: Vec<(Vec<i64>, Option<i64>, Option<i64>)>,
}

fn program() -> impl Strategy<Value = Program> {
    let columns = 3_usize;
    let side = prop_oneof![Just(None), (-6_i64..12).prop_map(Some)];
    let row = (prop::collection::vec(-4_i64..5, columns), side.clone(), 0_i64..8).prop_map(
        |(entries, lower, width)| match (lower, width) {
            (None, width) => (entries, None, Some(width)),
            (Some(lower), 7) => (entries, Some(lower), None),
            (Some(lower), width) => (entries, Some(lower), Some(lower + width)),
        },
    );
    let bound = (-3_i64..2, prop_oneof![Just(None), (2_i64..9).prop_map(Some)]);
    (
        prop::collection::vec(-5_i64..9, columns),
        prop::collection::vec(bound, columns),
        prop::collection::vec(row, 1..4),
    )
        .prop_map(|(costs, bounds, rows)| Program { costs, bounds, rows })
}

impl Program {
    fn model(&self, sense: Sense) -> Model {
        let mut b = ModelBuilder::new("random", sense);
        let sign = if sense == Sense::Minimise { 1 } else { -1 };
        for (cost, (lower, upper)) in self.costs.iter().zip(&self.bounds) {
            let spec = ColumnSpec {
                lower: Some(Number::from(*lower)),
                upper: upper.map(Number::from),
                cost: Number::from(sign * cost),
                integer: false,
            };
            b.column(&[], &spec).unwrap();
        }
        b.family("rows", FamilyState::In, false);
        for (entries, lower, upper) in &self.rows {
            let entries = entries.iter().enumerate();
            let entries = entries.map(|(j, a)| (ColumnId::from_index(j), Number::from(*a)));
            let (lower, upper) = (lower.map(Number::from), upper.map(Number::from));
            b.row(&[], Row { entries: entries.collect(), lower, upper }).unwrap();
        }
        b.build()
    }

    /// Every hyperplane `a'x = b`: sides of rows (with their row) and bounds.
    fn planes(&self) -> Vec<(Vec<i64>, i64, Option<usize>)> {
        let mut planes = Vec::new();
        for (index, (entries, lower, upper)) in self.rows.iter().enumerate() {
            for side in lower.iter().chain(upper) {
                planes.push((entries.clone(), *side, Some(index)));
            }
        }
        for (column, (lower, upper)) in self.bounds.iter().enumerate() {
            let unit: Vec<i64> = (0..self.costs.len()).map(|j| i64::from(j == column)).collect();
            planes
                .extend([Some(*lower), *upper].iter().flatten().map(|b| (unit.clone(), *b, None)));
        }
        planes
    }

    fn holds(&self, x: &[Number]) -> bool {
        let inside = |value: &Number, lower: Option<i64>, upper: Option<i64>| {
            lower.is_none_or(|l| *value >= Number::from(l))
                && upper.is_none_or(|u| *value <= Number::from(u))
        };
        let columns = self.bounds.iter().zip(x).all(|((l, u), x)| inside(x, Some(*l), *u));
        columns && self.rows.iter().all(|(a, l, u)| inside(&product(a, x), *l, *u))
    }

    /// All feasible vertices, each with the multipliers of its basis.
    fn vertices(&self) -> Vec<(Vec<Number>, Vec<Number>)> {
        let planes = self.planes();
        let mut out = Vec::new();
        for i in 0..planes.len() {
            for j in 0..i {
                for k in 0..j {
                    let basis = [&planes[i], &planes[j], &planes[k]];
                    let matrix: Vec<Vec<i64>> = basis.iter().map(|plane| plane.0.clone()).collect();
                    let right: Vec<i64> = basis.iter().map(|plane| plane.1).collect();
                    let Some(x) = solved(&matrix, &right) else { continue };
                    if !self.holds(&x) {
                        continue;
                    }
                    let transposed: Vec<Vec<i64>> =
                        (0..3).map(|c| matrix.iter().map(|row| row[c]).collect()).collect();
                    let weights = solved(&transposed, &self.costs).unwrap();
                    let mut y = vec![Number::ZERO; self.rows.len()];
                    for (plane, weight) in basis.iter().zip(weights) {
                        if let Some(row) = plane.2 {
                            y[row] += weight;
                        }
                    }
                    out.push((x, y));
                }
            }
        }
        out
    }
}

fn product(a: &[i64], x: &[Number]) -> Number {
    a.iter().zip(x).fold(Number::ZERO, |sum, (a, x)| sum + Number::from(*a) * x)
}

/// The solution of a 3 by 3 system by Cramer's rule; `None` when it is singular.
fn solved(matrix: &[Vec<i64>], right: &[i64]) -> Option<Vec<Number>> {
    let determinant = |m: &[Vec<i64>]| {
        let minor = |a: usize, b: usize| m[1][a] * m[2][b] - m[1][b] * m[2][a];
        m[0][0] * minor(1, 2) - m[0][1] * minor(0, 2) + m[0][2] * minor(0, 1)
    };
    let whole = determinant(matrix);
    if whole == 0 {
        return None;
    }
    let replaced = (0..3).map(|column| {
        let mut m = matrix.to_vec();
        (0..3).for_each(|row| m[row][column] = right[row]);
        Number::from(determinant(&m)) / Number::from(whole)
    });
    Some(replaced.collect())
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(400))]

    /// Whatever the multipliers: no bound is over the value of any point, no ray proves that
    /// a program with a point has none.
    #[test]
    fn nothing_false_is_proved(
        program in program(),
        y in prop::collection::vec(prop_oneof![-4.0..4.0_f64, Just(1.0), Just(-1.0), Just(0.0)], 3),
    ) {
        let vertices = program.vertices();
        let y = &y[..program.rows.len()];
        let least = vertices.iter().map(|(x, _)| product(&program.costs, x)).min();
        if let Some(least) = least {
            let model = program.model(Sense::Minimise);
            let rows = ExactRows::new(&model);
            let proved = bound(&rows, &bounds_of(&model), y);
            prop_assert!(proved.is_none_or(|proved| proved <= least));
            prop_assert!(!infeasible(&rows, &bounds_of(&model), y));
            let turned = program.model(Sense::Maximise);
            let proved = bound(&ExactRows::new(&turned), &bounds_of(&turned), y);
            prop_assert!(proved.is_none_or(|proved| proved >= -least));
        }
    }

    /// The multipliers of an optimal basis, as floats and slightly off, prove the
    /// optimum exactly: its fractions are simple.
    #[test]
    fn optimal_multipliers_prove_the_optimum(program in program(), noise in -1e-11..1e-11_f64) {
        let model = program.model(Sense::Minimise);
        let rows = ExactRows::new(&model);
        let all = bounds_of(&model);
        let mut optimal = 0;
        for (x, y) in program.vertices() {
            let value = product(&program.costs, &x);
            let y: Vec<f64> = y.iter().map(|y| model::nearest_f64(y) + noise).collect();
            let proved = bound(&rows, &all, &y);
            optimal += u32::from(proved.as_ref() == Some(&value));
            prop_assert!(proved.is_none_or(|proved| proved <= value));
        }
        let bounded = program.bounds.iter().all(|(_, upper)| upper.is_some());
        prop_assert!(!bounded || optimal > 0 || program.vertices().is_empty());
    }
}

/// Programs without a point exist among those drawn, and small changes of a side give
/// rays that prove it: x + y + z ≥ 7 within 0 ≤ x, y, z ≤ 2.
#[test]
fn a_box_that_is_too_small() {
    let mut program = Program {
        costs: vec![1, 1, 1],
        bounds: vec![(0, Some(2)); 3],
        rows: vec![(vec![1, 1, 1], Some(7), None)],
    };
    let model = program.model(Sense::Minimise);
    assert!(program.vertices().is_empty());
    assert!(infeasible(&ExactRows::new(&model), &bounds_of(&model), &[1.0]));
    program.rows[0].1 = Some(6);
    let model = program.model(Sense::Minimise);
    assert!(!infeasible(&ExactRows::new(&model), &bounds_of(&model), &[1.0]));
}

/// Every choice of as many basic variables as there are rows, with every choice of sides for the
/// others.
fn bases(program: &Program) -> Vec<Standings> {
    let (columns, rows) = (program.costs.len(), program.rows.len());
    let all = columns + rows;
    let mut out = Vec::new();
    for set in (0_u32..1 << all).filter(|set| set.count_ones() as usize == rows) {
        for sides in (0_u32..1 << all).filter(|sides| sides & set == 0) {
            let standing = |at: usize| match (set >> at & 1, sides >> at & 1) {
                (1, _) => Standing::Basic,
                (_, 1) => Standing::Upper,
                _ => Standing::Lower,
            };
            out.push(Standings {
                columns: (0..columns).map(standing).collect(),
                rows: (columns..all).map(standing).collect(),
            });
        }
    }
    out
}

/// A certifier to its end, in the smallest slices, without a kernel for residual problems.
fn certified(rows: &ExactRows, bounds: &[Bounds], basis: Standings, wish: Wish) -> Certifier {
    let mut certifier = Certifier::new(bounds.to_vec(), basis, wish, Budget::default());
    loop {
        match certifier.advance(rows, 1) {
            Progress::Working => {}
            Progress::Asks => certifier.answer(None),
            Progress::Done => return certifier,
        }
    }
}

/// A row and its triple, both held at their sides: a kernel sees a basis where rounding makes them
/// differ in the last digit, exactly they are one row. The proof goes on without one of them.
#[test]
fn a_basis_that_is_singular_in_exact_arithmetic_is_repaired() {
    let program = Program {
        costs: vec![1, 1, 3],
        bounds: vec![(0, Some(5)); 3],
        rows: vec![(vec![1, 1, 1], Some(2), None), (vec![3, 3, 3], Some(6), None)],
    };
    let model = program.model(Sense::Minimise);
    let (rows, all) = (ExactRows::new(&model), bounds_of(&model));
    let basis = Standings {
        columns: vec![Standing::Basic, Standing::Basic, Standing::Lower],
        rows: vec![Standing::Lower, Standing::Lower],
    };
    let found = certified(&rows, &all, basis, Wish::Optimum(None));
    assert!(found.is_exact());
    assert_eq!(found.bound(&rows), Some(Number::from(2)));
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(60))]

    /// Whatever the basis, right or wrong: no bound is over the optimum, what is called exact is
    /// the optimum at a feasible point, nothing that has a point is refuted. Within bounds some
    /// basis gives the exact optimum, or proves that there is no point.
    #[test]
    fn every_basis_proves_the_truth_or_less(program in program(), maximise in any::<bool>()) {
        let least = program.vertices().iter().map(|(x, _)| product(&program.costs, x)).min();
        let sense = if maximise { Sense::Maximise } else { Sense::Minimise };
        let model = program.model(sense);
        let (rows, all) = (ExactRows::new(&model), bounds_of(&model));
        let sign = Number::from(if maximise { -1 } else { 1 });
        let (mut exact, mut refuted) = (0, 0);
        for basis in bases(&program) {
            let found = certified(&rows, &all, basis.clone(), Wish::Optimum(None));
            let bound = found.bound(&rows).map(|bound| bound * &sign);
            if let Some(least) = &least {
                prop_assert!(bound.as_ref().is_none_or(|bound| bound <= least));
            }
            if found.is_exact() {
                exact += 1;
                let x = found.point().unwrap();
                prop_assert!(program.holds(&x));
                prop_assert_eq!(bound.clone(), Some(product(&program.costs, &x)));
                prop_assert_eq!(bound, least.clone());
            }
            refuted += u32::from(certified(&rows, &all, basis, Wish::Refutation).is_refuted());
        }
        prop_assert!(refuted == 0 || least.is_none());
        if program.bounds.iter().all(|(_, upper)| upper.is_some()) {
            prop_assert!(exact > 0 || least.is_none(), "no basis proves the optimum");
            prop_assert!(refuted > 0 || least.is_some(), "no basis refutes");
        }
    }
}
