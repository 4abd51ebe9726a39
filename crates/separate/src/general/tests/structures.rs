//! Cuts of structures over whole columns: none takes a point of a small random model away.

use std::collections::BTreeSet;

use model::{
    ColumnId, ColumnSpec, FamilyState, LabelId, Model, ModelBuilder, Number, Relation, Row, Scope,
    Sense, SubsetCondition, SubsetFamily, SubsetTerm,
};
use rand_core::Rng;
use rand_pcg::Pcg64Mcg;

use super::super::{Class, Conflicts, Frame, GeneralCut, OddCuts, Trips, ZeroHalf};
use super::{Drawn, below, check, drawn};

fn sixteenths(random: &mut Pcg64Mcg, columns: usize, most: u32) -> Vec<f64> {
    (0..columns).map(|_| f64::from(random.next_u32() % (16 * most + 1)) / 16.0).collect()
}

/// Small rows, so that parities decide: coefficients −1 … 2.
fn small(random: &mut Pcg64Mcg, columns: usize, rows: usize) -> Drawn {
    let mut drawn = drawn(random, columns > 5);
    drawn.frame.bounds.truncate(columns);
    drawn.frame.integer.truncate(columns);
    let row = |_| {
        let entries: Vec<_> = (0..drawn.frame.integer.len())
            .map(|j| (ColumnId::from_index(j), Number::from(below(random, 4) - 1)))
            .filter(|(_, a)| !a.is_zero())
            .collect();
        let upper = Number::from(below(random, 4));
        Row { entries, lower: (below(random, 4) == 0).then(|| upper.clone()), upper: Some(upper) }
    };
    drawn.rows = (0..rows).map(row).collect();
    drawn
}

/// All zero-half cuts at a point.
fn zero_half(rows: &[Row], frame: &Frame, x: &[f64]) -> Vec<GeneralCut> {
    let (mut search, mut found) = (ZeroHalf::new(frame, x), Vec::new());
    while search.step(rows, (frame, x), &mut found).is_some() {}
    found
}

/// The whole conflict graph at a point.
fn conflicts(rows: &[Row], frame: &Frame, x: &[f64]) -> Conflicts {
    let mut graph = Conflicts::new(frame, x.len());
    while graph.step(rows, frame, x).is_some() {}
    graph
}

#[test]
fn zero_half_cuts_hold_at_every_whole_point() {
    let mut random = Pcg64Mcg::new(1996);
    let mut cuts = 0;
    for round in 0..200 {
        let columns = if round % 2 == 0 { 7 } else { 4 };
        let drawn = small(&mut random, columns, 6);
        let points = drawn.points();
        for _ in 0..20 {
            let x = sixteenths(&mut random, columns, 1);
            for cut in zero_half(&drawn.rows, &drawn.frame, &x) {
                drawn.check(&cut, &points);
                cuts += 1;
            }
        }
    }
    assert!(cuts > 200, "{cuts}");
}

#[test]
fn cliques_and_holes_hold_at_every_whole_point() {
    let mut random = Pcg64Mcg::new(1988);
    let mut cuts = [0; 2];
    for _ in 0..200 {
        let mut drawn = small(&mut random, 7, 2);
        let pairs = 6 + random.next_u32() % 8;
        for _ in 0..pairs {
            let (a, b) = (below(&mut random, 7), below(&mut random, 7));
            let one = |c: i64| (ColumnId::from_index(usize::try_from(c).unwrap()), Number::ONE);
            let entries = if a < b { vec![one(a), one(b)] } else { vec![one(b), one(a)] };
            if a != b {
                drawn.rows.push(Row { entries, lower: None, upper: Some(Number::ONE) });
            }
        }
        let points = drawn.points();
        for _ in 0..12 {
            let x: Vec<f64> = sixteenths(&mut random, 7, 1).iter().map(|x| 0.3 + x * 0.4).collect();
            let graph = conflicts(&drawn.rows, &drawn.frame, &x);
            for start in 0..graph.len() {
                let found = graph.cliques(start, &x);
                cuts[0] += found.len();
                found.iter().for_each(|cut| drawn.check(cut, &points));
                let hole = graph.hole(start, &x);
                cuts[1] += usize::from(hole.is_some());
                hole.iter().for_each(|cut| drawn.check(cut, &points));
            }
        }
    }
    assert!(cuts[0] > 200 && cuts[1] > 100, "{cuts:?}");
}

/// Edges of a graph with degree rows: over five nodes once at most, over four twice.
fn degrees(random: &mut Pcg64Mcg) -> Drawn {
    let most = 1 + i64::from(random.next_u32().is_multiple_of(3));
    let nodes = if most == 1 { 5 } else { 4 };
    let edges: Vec<(usize, usize)> = (0..nodes).flat_map(|j| (0..j).map(move |i| (i, j))).collect();
    let bounds = (Some(Number::ZERO), Some(Number::from(most)));
    let rows = (0..nodes).filter_map(|node| {
        let at = edges.iter().enumerate().filter(|(_, e)| e.0 == node || e.1 == node);
        let b = Number::from(1 + below(random, 2));
        (below(random, 8) > 0).then(|| Row {
            entries: at.map(|(k, _)| (ColumnId::from_index(k), Number::ONE)).collect(),
            lower: (below(random, 2) == 0).then(|| b.clone()),
            upper: Some(b),
        })
    });
    let rows = rows.collect();
    let frame = Frame { bounds: vec![bounds; edges.len()], integer: vec![true; edges.len()] };
    Drawn { rows, frame, most }
}

#[test]
fn blossoms_and_odd_sets_hold_at_every_whole_point() {
    let mut random = Pcg64Mcg::new(1982);
    let mut cuts = [0; 2];
    for _ in 0..200 {
        let drawn = degrees(&mut random);
        let points = drawn.points();
        for _ in 0..20 {
            let halves = |_| f64::from(random.next_u32() % 3) / 2.0;
            let x: Vec<f64> = drawn.frame.integer.iter().map(halves).collect();
            let Some(mut odd) = OddCuts::new(&drawn.rows, &drawn.frame, &x) else { continue };
            while odd.step().is_some() {}
            for cut in odd.cuts(&drawn.rows, &drawn.frame, &x) {
                drawn.check(&cut, &points);
                cuts[usize::from(cut.class == Class::OddSet)] += 1;
            }
        }
    }
    assert!(cuts.iter().all(|&count| count > 50), "{cuts:?}");
}

/// The three points of two triangles joined by three edges: the classical blossom, and the odd set
/// of a triangle (Edmonds 1965).
#[test]
fn the_triangle_of_halves_is_cut_off() {
    let edges = [(0, 1), (0, 2), (1, 2)];
    let row = |node| {
        let at = edges.iter().enumerate().filter(|(_, e)| e.0 == node || e.1 == node);
        let entries = at.map(|(k, _)| (ColumnId::from_index(k), Number::ONE)).collect();
        Row { entries, lower: None, upper: Some(Number::ONE) }
    };
    let rows: Vec<Row> = (0..3).map(row).collect();
    let bounds = vec![(Some(Number::ZERO), Some(Number::ONE)); 3];
    let frame = Frame { bounds, integer: vec![true; 3] };
    let x = [0.5; 3];
    let mut odd = OddCuts::new(&rows, &frame, &x).unwrap();
    while odd.step().is_some() {}
    let cuts = odd.cuts(&rows, &frame, &x);
    assert_eq!((cuts.len(), cuts[0].class), (1, Class::OddSet));
    let ones: Vec<_> = (0..3).map(|k| (ColumnId::from_index(k), Number::ONE)).collect();
    assert_eq!((&cuts[0].row.entries, cuts[0].row.upper.clone()), (&ones, Some(Number::ONE)));
}

/// Round trips over n stops: arcs, sums, and either subtours on demand or labels.
struct Round {
    model: Model,
    rows: Vec<Row>,
    stops: Vec<LabelId>,
    arcs: Vec<(usize, usize, ColumnId)>,
}

fn round(n: usize, labels: bool) -> Round {
    let mut builder = ModelBuilder::new("trip", Sense::Minimise);
    let stops: Vec<LabelId> = (0..n).map(|k| builder.label(&format!("s{k}"))).collect();
    let whole = |most: i64, integer| ColumnSpec {
        lower: Some(Number::ZERO),
        upper: Some(Number::from(most)),
        cost: Number::ZERO,
        integer,
    };
    let (mut arcs, mut rows) = (Vec::new(), Vec::new());
    for (i, j) in (0..n).flat_map(|i| (0..n).map(move |j| (i, j))).filter(|(i, j)| i != j) {
        arcs.push((i, j, builder.column(&[stops[i], stops[j]], &whole(1, true)).unwrap()));
    }
    let most = i64::try_from(n).unwrap();
    let place: Vec<ColumnId> =
        (0..n).map(|k| builder.column(&[stops[k]], &whole(most - 1, false)).unwrap()).collect();
    for k in 0..n {
        for side in [true, false] {
            let own = arcs.iter().filter(|a| if side { a.0 == k } else { a.1 == k });
            let entries = own.map(|a| (a.2, Number::ONE)).collect();
            rows.push(Row { entries, lower: Some(Number::ONE), upper: Some(Number::ONE) });
        }
    }
    for &(i, j, column) in arcs.iter().filter(|a| labels && a.0 > 0 && a.1 > 0) {
        let mut entries = vec![
            (column, Number::from(most - 1)),
            (place[i], Number::ONE),
            (place[j], -Number::ONE),
        ];
        entries.sort_by_key(|(column, _)| *column);
        rows.push(Row { entries, lower: None, upper: Some(Number::from(most - 2)) });
    }
    if !labels {
        let family = builder.family("subtour", FamilyState::OnDemand, false);
        let term = |&(i, j, column): &(usize, usize, ColumnId)| SubsetTerm {
            column,
            coefficient: Number::ONE,
            scope: Scope::Leaving(stops[i], stops[j]),
        };
        builder
            .subset_family(SubsetFamily {
                family,
                tuple: Vec::new(),
                conditions: vec![
                    SubsetCondition::Size { at_least: 1, at_most: u32::try_from(n - 1).unwrap() },
                    SubsetCondition::Avoids(stops[0]),
                ],
                terms: arcs.iter().map(term).collect(),
                weights: vec![Number::ZERO; n],
                ground: stops.clone(),
                constant: -Number::ONE,
                rounded: None,
                relation: Relation::AtLeast,
            })
            .unwrap();
    }
    Round { model: builder.build(), rows, stops, arcs }
}

/// Every round trip as a point: arcs, then the places of the stops.
fn trips(round: &Round) -> Vec<Vec<i64>> {
    let n = round.stops.len();
    let mut orders = vec![vec![0]];
    for _ in 1..n {
        let longer = |order: Vec<usize>| {
            let free: Vec<usize> = (0..n).filter(|k| !order.contains(k)).collect();
            free.into_iter().map(move |k| order.iter().copied().chain([k]).collect())
        };
        orders = orders.into_iter().flat_map(longer).collect();
    }
    let point = |order: &Vec<usize>| {
        let used: BTreeSet<(usize, usize)> =
            (0..n).map(|k| (order[k], order[(k + 1) % n])).collect();
        let arcs = round.arcs.iter().map(|a| i64::from(used.contains(&(a.0, a.1))));
        let place = |k: usize| order.iter().position(|stop| *stop == k).unwrap();
        arcs.chain((0..n).map(|k| i64::try_from(place(k)).unwrap())).collect()
    };
    orders.iter().map(point).collect()
}

/// D₃ and D₄ hold at every round trip over five stops and some over six, with subtours and with labels.
#[test]
fn cuts_of_round_trips_hold_at_every_trip() {
    let mut random = Pcg64Mcg::new(1985);
    let mut cuts = [0; 4];
    for seed in 0..200 {
        let (n, labels) = (5 + usize::from(seed % 8 == 0), seed % 4 < 2);
        let mut round = round(n, labels);
        let frame = Frame::new(&round.model);
        let points = trips(&round);
        let all = points[0].len();
        for _ in 0..3 {
            let mut trips = Trips::new(&round.stops, &round.arcs, &round.rows, &frame).unwrap();
            let mut x = vec![0.0; all];
            for _ in 0..5 {
                let tour = &points[random.next_u32() as usize % points.len()];
                let other = random.next_u32() as usize % round.arcs.len();
                (0..all).for_each(|c| x[c] += if tour[c] > 0 { 0.2 } else { 0.0 });
                x[other] += 0.3;
            }
            for first in 0..n {
                for cut in trips.cuts(first, (&round.model, &frame), &mut round.rows, &x) {
                    check(&cut, (&round.rows, &frame), &points);
                    let most = cut.row.upper.clone().unwrap();
                    cuts[usize::from(labels) + 2 * usize::from(most == Number::from(3))] += 1;
                }
            }
        }
    }
    assert!(cuts.iter().all(|&count| count > 20), "{cuts:?}");
}
