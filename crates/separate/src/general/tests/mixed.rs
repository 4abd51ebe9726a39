//! Cuts over binaries and amounts: with whole data the corners of what is left once the binaries are
//! set are whole (the amounts are a flow), so whole amounts are all that must be looked at.

use model::{ColumnId, Number, Row};
use rand_core::Rng;
use rand_pcg::Pcg64Mcg;

use super::super::{Frame, Lots, VariableBounds, flow_cover};
use super::{below, check, holds};

fn row(entries: &[(usize, i64)], lower: Option<i64>, upper: Option<i64>) -> Row {
    let mut entries: Vec<_> =
        entries.iter().map(|&(c, a)| (ColumnId::from_index(c), Number::from(a))).collect();
    entries.sort_by_key(|(column, _)| *column);
    Row { entries, lower: lower.map(Number::from), upper: upper.map(Number::from) }
}

/// All points with these bounds, each from 0 on, that meet the rows.
fn points(most: &[i64], rows: &[Row]) -> Vec<Vec<i64>> {
    let mut all: Vec<Vec<i64>> = vec![Vec::new()];
    for &most in most {
        let longer =
            |point: Vec<i64>| (0..=most).map(move |v| point.iter().copied().chain([v]).collect());
        all = all.into_iter().flat_map(longer).collect();
    }
    all.retain(|point| rows.iter().all(|row| holds(row, point)));
    all
}

fn frame(most: &[i64], binaries: std::ops::Range<usize>) -> Frame {
    let bound = |most: &i64| (Some(Number::ZERO), Some(Number::from(*most)));
    Frame {
        bounds: most.iter().map(bound).collect(),
        integer: (0..most.len()).map(|c| binaries.contains(&c)).collect(),
    }
}

/// Three or four flows with bounds u y into a node that takes b, one of them out of it.
#[test]
fn flow_covers_hold_at_every_point() {
    let mut random = Pcg64Mcg::new(1985);
    let mut cuts = 0;
    for _ in 0..200 {
        let n = 3;
        let u: Vec<i64> = (0..n).map(|_| 1 + below(&mut random, 5)).collect();
        let most: Vec<i64> = u.iter().copied().chain(vec![1; n]).collect();
        let signs: Vec<(usize, i64)> =
            (0..n).map(|j| (j, if below(&mut random, 5) == 0 { -1 } else { 1 })).collect();
        let upper = 1 + below(&mut random, 8);
        let lower = (below(&mut random, 3) == 0).then_some(upper);
        let mut rows = vec![row(&signs, lower, Some(upper))];
        rows.extend((0..n).map(|j| row(&[(j, 1), (n + j, -u[j])], None, Some(0))));
        let frame = frame(&most, n..2 * n);
        let points = points(&most, &rows);
        let bounds = VariableBounds::new(&rows, &frame);
        for _ in 0..20 {
            let y: Vec<f64> =
                (0..n).map(|_| f64::from(1 + random.next_u32() % 16) / 16.0).collect();
            let x: Vec<f64> = (0..n).map(|j| u[j] as f64 * y[j]).chain(y.clone()).collect();
            if let Some(cut) = flow_cover(&rows, 0, &bounds, &frame, &x) {
                check(&cut, (&rows, &frame), &points);
                cuts += 1;
            }
        }
    }
    assert!(cuts > 100, "{cuts}");
}

/// Nemhauser, Wolsey 1988, section II.2.4, in small: x₁ + x₂ ≤ 3 with x_j ≤ 2 y_j; the cover {1, 2} has
/// the excess 1, and the cut is x₁ + x₂ ≤ 3 − (1 − y₁) − (1 − y₂).
#[test]
fn the_flow_cover_of_two() {
    let rows = [
        row(&[(0, 1), (1, 1)], None, Some(3)),
        row(&[(0, 1), (2, -2)], None, Some(0)),
        row(&[(1, 1), (3, -2)], None, Some(0)),
    ];
    let frame = frame(&[2, 2, 1, 1], 2..4);
    let bounds = VariableBounds::new(&rows, &frame);
    let x = [2.0, 1.0, 1.0, 0.5];
    let cut = flow_cover(&rows, 0, &bounds, &frame, &x).unwrap();
    let scale = cut.row.entries[0].1.clone();
    let entries: Vec<Number> = cut.row.entries.iter().map(|(_, a)| a / &scale).collect();
    let number = |n: i64| Number::from(n);
    assert_eq!(entries, [number(1), number(1), number(-1), number(-1)]);
    assert_eq!(cut.row.upper.unwrap() / scale, number(1));
}

/// Three periods, with and without stock at the start: every point is an order plan.
#[test]
fn lot_sizing_cuts_hold_at_every_plan() {
    let mut random = Pcg64Mcg::new(1984);
    let mut cuts = 0;
    for seed in 0..200 {
        let demand: Vec<i64> = (0..3).map(|_| below(&mut random, 4)).collect();
        let all: i64 = demand.iter().sum();
        // x, y, s of three periods, the stock at the start last
        let start = if seed % 2 == 0 { 2 } else { 0 };
        let most = [all, all, all, 1, 1, 1, all + start, all + start, all + start, start];
        let (lower, turn) = (9, if seed % 3 == 0 { -1 } else { 1 });
        let mut rows: Vec<Row> = Vec::new();
        for (t, &d) in demand.iter().enumerate() {
            let before = if t == 0 { lower } else { 5 + t };
            let entries = [(t, turn), (before, turn), (6 + t, -turn)];
            rows.push(row(&entries, Some(turn * d), Some(turn * d)));
            rows.push(row(&[(t, 1), (3 + t, -all)], None, Some(0)));
        }
        let frame = frame(&most, 3..6);
        // the stocks follow from the rest
        let plans: Vec<Vec<i64>> = points(&[all, all, all, 1, 1, 1, start], &[])
            .into_iter()
            .filter_map(|p| {
                let mut stock = p[6];
                let mut point = p[..6].to_vec();
                for t in 0..3 {
                    stock += p[t] - demand[t];
                    point.push(stock);
                }
                point.push(p[6]);
                let fits = point.iter().zip(&most).all(|(v, most)| (0..=*most).contains(v));
                (fits && rows.iter().all(|row| holds(row, &point))).then_some(point)
            })
            .collect();
        let lots = Lots::new(&rows, &frame);
        assert_eq!(lots.places(), 3, "{rows:?}");
        for _ in 0..6 {
            let plan = &plans[random.next_u32() as usize % plans.len()];
            let mut x: Vec<f64> = plan.iter().map(|&v| v as f64).collect();
            (0..3).for_each(|t| x[3 + t] = if all > 0 { x[t] / all as f64 } else { 0.0 });
            for place in 0..3 {
                if let Some(cut) = lots.cut(place, &rows, &frame, &x) {
                    check(&cut, (&rows, &frame), &plans);
                    cuts += 1;
                }
            }
        }
    }
    assert!(cuts > 200, "{cuts}");
}
