//! Every cut holds at every whole point of random models, whatever point and multipliers
//! suggested it.

use model::{ColumnId, Number, Row};
use rand_core::Rng;
use rand_pcg::Pcg64Mcg;

use super::{
    Aggregate, Class, Derivation, Frame, GeneralCut, Used, choose, complemented, cover, follows,
    fraction,
};

mod mixed;
mod structures;

fn below(random: &mut Pcg64Mcg, limit: u32) -> i64 {
    i64::from(random.next_u32() % limit)
}

/// Rows over whole columns in 0 … 3 (or 0 … 1).
struct Drawn {
    frame: Frame,
    rows: Vec<Row>,
    most: i64,
}

fn drawn(random: &mut Pcg64Mcg, binary: bool) -> Drawn {
    let most = if binary { 1 } else { 3 };
    let columns = if binary { 7 } else { 4 };
    let bounds = (Some(Number::ZERO), Some(Number::from(most)));
    let rows = (0..3).map(|_| {
        let entry = |j: usize, a: i64| (ColumnId::from_index(j), Number::from(a));
        let entries: Vec<_> = (0..columns)
            .map(|j| entry(j, below(random, 25) - 6))
            .filter(|(_, a)| !a.is_zero())
            .collect();
        let side = |n: i64| Number::from_parts(n.into(), 2_u32.into());
        let upper = side(below(random, 80));
        let lower = (below(random, 3) == 0).then(|| upper.clone() - side(below(random, 50)));
        Row { entries, lower, upper: Some(upper) }
    });
    Drawn {
        rows: rows.collect(),
        frame: Frame { bounds: vec![bounds; columns], integer: vec![true; columns] },
        most,
    }
}

impl Drawn {
    /// The whole points that meet all rows.
    fn points(&self) -> Vec<Vec<i64>> {
        let columns = self.frame.integer.len();
        let mut all = vec![Vec::new()];
        for _ in 0..columns {
            let longer = |point: Vec<i64>| {
                (0..=self.most).map(move |v| point.iter().copied().chain([v]).collect())
            };
            all = all.into_iter().flat_map(longer).collect();
        }
        all.retain(|point| self.rows.iter().all(|row| holds(row, point)));
        all
    }

    fn check(&self, cut: &GeneralCut, points: &[Vec<i64>]) {
        check(cut, (&self.rows, &self.frame), points);
    }
}

/// A cut holds at every point and follows from its derivation; made stronger by 1, it does not
/// follow where a point then breaks it.
fn check(cut: &GeneralCut, (rows, frame): (&[Row], &Frame), points: &[Vec<i64>]) {
    for point in points {
        assert!(holds(&cut.row, point), "{cut:?} at {point:?} of {rows:?}");
    }
    assert!(follows(cut, rows, frame), "{cut:?} of {rows:?}");
    let mut wrong = cut.clone();
    wrong.row.upper = wrong.row.upper.map(|side| side - Number::ONE);
    if points.iter().any(|point| !holds(&wrong.row, point)) {
        assert!(!follows(&wrong, rows, frame), "{wrong:?} of {rows:?}");
    }
}

fn holds(row: &Row, point: &[i64]) -> bool {
    let activity = row
        .entries
        .iter()
        .fold(Number::ZERO, |sum, (c, a)| sum + a * Number::from(point[c.index()]));
    row.lower.as_ref().is_none_or(|l| activity >= *l)
        && row.upper.as_ref().is_none_or(|u| activity <= *u)
}

#[test]
fn roundings_hold_at_every_whole_point() {
    let mut random = Pcg64Mcg::new(2001);
    let mut cuts = 0;
    for round in 0..200 {
        let drawn = drawn(&mut random, round % 2 == 0);
        let points = drawn.points();
        for _ in 0..12 {
            let x: Vec<f64> = (0..drawn.frame.integer.len())
                .map(|_| {
                    below(&mut random, 16 * u32::try_from(drawn.most).unwrap() + 1) as f64 / 16.0
                })
                .collect();
            let mut sum = Aggregate::default();
            for (number, row) in drawn.rows.iter().enumerate() {
                let multiplier =
                    Number::from_parts((below(&mut random, 13) - 6).into(), 4_u32.into());
                sum.add(&drawn.frame, (number, row), &multiplier, &x);
            }
            for sum in [sum.turned(), sum] {
                if let Some(cut) = complemented(Class::Mir, &sum, &drawn.frame, &x) {
                    drawn.check(&cut, &points);
                    cuts += 1;
                }
            }
        }
    }
    assert!(cuts > 500, "{cuts}");
}

#[test]
fn lifted_covers_hold_at_every_whole_point() {
    let mut random = Pcg64Mcg::new(1975);
    let (mut cuts, mut lifted) = (0, 0);
    for _ in 0..200 {
        let drawn = drawn(&mut random, true);
        for row in &drawn.rows {
            let alone = Drawn { rows: vec![row.clone()], frame: drawn.frame.clone(), most: 1 };
            let points = alone.points();
            for _ in 0..12 {
                let x: Vec<f64> =
                    (0..7).map(|_| 1.0 - below(&mut random, 6) as f64 / 16.0).collect();
                if let Some(cut) = cover((0, row), &drawn.frame, &x) {
                    alone.check(&cut, &points);
                    cuts += 1;
                    lifted += u32::from(cut.row.entries.iter().any(|(_, a)| {
                        a.denominator().is_one() && *a != Number::ONE && *a != -Number::ONE
                    }));
                }
            }
        }
    }
    assert!(cuts > 200 && lifted > 0, "{cuts} {lifted}");
}

/// Wolsey 1998, section 8.8: 2 is rounded off x ≤ 5/2 … here 8x ≤ 20 over 0 … 3: x ≤ 2.
#[test]
fn one_column_is_rounded_down() {
    let frame =
        Frame { bounds: vec![(Some(Number::ZERO), Some(Number::from(3)))], integer: vec![true] };
    let row = Row {
        entries: vec![(ColumnId(0), Number::from(8))],
        lower: None,
        upper: Some(Number::from(20)),
    };
    let mut sum = Aggregate::default();
    assert!(sum.add(&frame, (0, &row), &Number::ONE, &[2.5]));
    let cut = complemented(Class::Mir, &sum, &frame, &[2.5]).unwrap();
    assert!(holds(&cut.row, &[2]) && !holds(&cut.row, &[3]));
    assert!(cut.row.activity(&[2.5]) > model::nearest_f64(cut.row.upper.as_ref().unwrap()));
}

#[test]
fn multipliers_become_simple_fractions() {
    for (value, top, bottom) in
        [(0.333_333_333_333, 1, 3_u32), (-1.25, -5, 4), (7.0, 7, 1), (0.0, 0, 1)]
    {
        assert_eq!(fraction(value), Some(Number::from_parts(i64::from(top).into(), bottom.into())));
    }
    assert!(
        (model::nearest_f64(&fraction(std::f64::consts::PI).unwrap()) - std::f64::consts::PI).abs()
            < 1e-6
    );
    assert_eq!(fraction(f64::NAN), None);
}

/// Of two parallel cuts the better one is taken.
#[test]
fn parallel_cuts_are_left_out() {
    let cut = |a: i64, b: i64, efficacy: f64| GeneralCut {
        class: Class::Mir,
        row: Row {
            entries: vec![(ColumnId(0), Number::from(a)), (ColumnId(1), Number::from(b))],
            lower: None,
            upper: Some(Number::ONE),
        },
        efficacy,
        derivation: Derivation::Knapsack(Used { row: 0, upper: true }),
    };
    let taken = choose(vec![cut(1, 1, 0.1), cut(10, 11, 0.3), cut(1, -1, 0.2)], 5);
    assert_eq!(taken.iter().map(|cut| cut.efficacy).collect::<Vec<_>>(), [0.3, 0.2]);
}
