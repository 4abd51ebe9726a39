//! Relaxations of known formulations on seeded instances: round trips, location, packing, lot
//! sizing, one machine.

use crate::random::Random;
use crate::shadow::Shadow;

const INFINITY: f64 = f64::INFINITY;

/// No column.
const NONE: usize = usize::MAX;

fn distance(a: (f64, f64), b: (f64, f64)) -> f64 {
    ((a.0 - b.0) * (a.0 - b.0) + (a.1 - b.1) * (a.1 - b.1)).sqrt().round()
}

fn places(random: &mut Random, count: usize, side: f64) -> Vec<(f64, f64)> {
    (0..count).map(|_| (random.unit() * side, random.unit() * side)).collect()
}

/// One arc variable a pair, each stop left once and entered once.
fn assignment(stops: usize, seed: u64) -> (Shadow, Vec<Vec<usize>>) {
    let places = places(&mut Random::new(seed), stops, 1000.0);
    let mut shadow = Shadow::default();
    let mut arc = vec![vec![NONE; stops]; stops];
    for (i, row) in arc.iter_mut().enumerate() {
        for j in (0..stops).filter(|&j| j != i) {
            row[j] = shadow.column(distance(places[i], places[j]), 0.0, 1.0);
        }
    }
    for (i, row) in arc.iter().enumerate() {
        let others = (0..stops).filter(|&j| j != i);
        shadow.row(others.clone().map(|j| (row[j], 1.0)).collect(), 1.0, 1.0);
        shadow.row(others.map(|j| (arc[j][i], 1.0)).collect(), 1.0, 1.0);
    }
    (shadow, arc)
}

/// Round trip with position labels. Source: Miller, Tucker, Zemlin 1960.
pub(crate) fn position_labels(stops: usize, seed: u64) -> Shadow {
    let (mut shadow, arc) = assignment(stops, seed);
    let most = stops as f64 - 1.0;
    let label: Vec<usize> =
        (0..stops).map(|i| if i == 0 { NONE } else { shadow.column(0.0, 1.0, most) }).collect();
    for i in 1..stops {
        for j in (1..stops).filter(|&j| j != i) {
            shadow.row(
                vec![(label[i], 1.0), (label[j], -1.0), (arc[i][j], most)],
                -INFINITY,
                most - 1.0,
            );
        }
    }
    shadow
}

/// Round trip with one commodity. Source: Gavish, Graves 1978.
pub(crate) fn single_commodity(stops: usize, seed: u64) -> Shadow {
    let (mut shadow, arc) = assignment(stops, seed);
    let most = stops as f64 - 1.0;
    let mut flow = vec![vec![NONE; stops]; stops];
    for (i, row) in flow.iter_mut().enumerate() {
        for j in (1..stops).filter(|&j| j != i) {
            row[j] = shadow.column(0.0, 0.0, most);
            shadow.row(vec![(row[j], 1.0), (arc[i][j], -most)], -INFINITY, 0.0);
        }
    }
    for (i, row) in flow.iter().enumerate().skip(1) {
        let mut balance = Vec::new();
        for j in (0..stops).filter(|&j| j != i) {
            balance.push((flow[j][i], 1.0));
            if j != 0 {
                balance.push((row[j], -1.0));
            }
        }
        shadow.row(balance, 1.0, 1.0);
    }
    shadow
}

/// Round trip with a commodity a stop. Source: Wong 1980; Claus 1984.
pub(crate) fn multi_commodity(stops: usize, seed: u64) -> Shadow {
    let (mut shadow, arc) = assignment(stops, seed);
    for k in 1..stops {
        commodity(&mut shadow, &arc, k);
    }
    shadow
}

/// The flow of one unit from the first stop to stop k.
fn commodity(shadow: &mut Shadow, arc: &[Vec<usize>], k: usize) {
    let stops = arc.len();
    let mut flow = vec![vec![NONE; stops]; stops];
    for (i, row) in flow.iter_mut().enumerate().filter(|&(i, _)| i != k) {
        for j in (1..stops).filter(|&j| j != i) {
            row[j] = shadow.column(0.0, 0.0, 1.0);
            shadow.row(vec![(row[j], 1.0), (arc[i][j], -1.0)], -INFINITY, 0.0);
        }
    }
    let out = |v: usize| {
        (0..stops).filter(|&j| flow[v][j] != NONE).map(|j| (flow[v][j], 1.0)).collect::<Vec<_>>()
    };
    let into = |v: usize| {
        (0..stops).filter(|&i| flow[i][v] != NONE).map(|i| (flow[i][v], 1.0)).collect::<Vec<_>>()
    };
    shadow.row(out(0), 1.0, 1.0);
    shadow.row(into(k), 1.0, 1.0);
    for v in (1..stops).filter(|&v| v != k) {
        let mut balance = out(v);
        balance.extend(into(v).into_iter().map(|(column, value)| (column, -value)));
        shadow.row(balance, 0.0, 0.0);
    }
}

/// Facility location; linking rows one a pair (strong) or one a facility (weak).
pub(crate) fn facilities(facilities: usize, customers: usize, strong: bool, seed: u64) -> Shadow {
    let mut random = Random::new(seed);
    let mut shadow = Shadow::default();
    let (from, to) =
        (places(&mut random, facilities, 100.0), places(&mut random, customers, 100.0));
    let open: Vec<usize> =
        (0..facilities).map(|_| shadow.column(random.whole(100, 300), 0.0, 1.0)).collect();
    let serve: Vec<Vec<usize>> = from
        .iter()
        .map(|&a| to.iter().map(|&b| shadow.column(distance(a, b), 0.0, 1.0)).collect())
        .collect();
    for j in 0..customers {
        shadow.row(serve.iter().map(|row| (row[j], 1.0)).collect(), 1.0, 1.0);
    }
    for (open, serve) in open.iter().zip(&serve) {
        if strong {
            serve
                .iter()
                .for_each(|&column| shadow.row(vec![(column, 1.0), (*open, -1.0)], -INFINITY, 0.0));
        } else {
            let mut row: Vec<(usize, f64)> = serve.iter().map(|&column| (column, 1.0)).collect();
            row.push((*open, -(customers as f64)));
            shadow.row(row, -INFINITY, 0.0);
        }
    }
    shadow
}

/// Bin packing by assignment: item to bin, bin open.
pub(crate) fn packing(items: usize, bins: usize, seed: u64) -> Shadow {
    let mut random = Random::new(seed);
    let mut shadow = Shadow::default();
    let weight: Vec<f64> = (0..items).map(|_| random.whole(20, 70)).collect();
    let open: Vec<usize> = (0..bins).map(|_| shadow.column(1.0, 0.0, 1.0)).collect();
    let put: Vec<Vec<usize>> =
        (0..items).map(|_| (0..bins).map(|_| shadow.column(0.0, 0.0, 1.0)).collect()).collect();
    put.iter()
        .for_each(|row| shadow.row(row.iter().map(|&column| (column, 1.0)).collect(), 1.0, 1.0));
    for (b, &open) in open.iter().enumerate() {
        let mut row: Vec<(usize, f64)> =
            put.iter().zip(&weight).map(|(row, &weight)| (row[b], weight)).collect();
        row.push((open, -150.0));
        shadow.row(row, -INFINITY, 0.0);
    }
    shadow
}

/// Lot sizing with stocks and a big-M a period: demand, set-up, production and holding costs drawn
/// in this order.
pub(crate) fn lot_sizing(periods: usize, seed: u64) -> Shadow {
    let mut random = Random::new(seed);
    let mut shadow = Shadow::default();
    let mut draw = |low, high| (0..periods).map(|_| random.whole(low, high)).collect::<Vec<f64>>();
    let (demand, setup, unit, hold) = (draw(5, 40), draw(80, 300), draw(1, 5), draw(1, 3));
    let open: Vec<usize> = setup.iter().map(|&cost| shadow.column(cost, 0.0, 1.0)).collect();
    let make: Vec<usize> = unit.iter().map(|&cost| shadow.column(cost, 0.0, INFINITY)).collect();
    let stock: Vec<usize> = (0..periods)
        .map(|t| shadow.column(hold[t], 0.0, if t + 1 == periods { 0.0 } else { INFINITY }))
        .collect();
    for t in 0..periods {
        let mut balance = vec![(make[t], 1.0), (stock[t], -1.0)];
        if t > 0 {
            balance.push((stock[t - 1], 1.0));
        }
        shadow.row(balance, demand[t], demand[t]);
        shadow.row(
            vec![(make[t], 1.0), (open[t], -demand[t..].iter().sum::<f64>())],
            -INFINITY,
            0.0,
        );
    }
    shadow
}

/// Lot sizing with what is made in one period for another, on the same draw as [`lot_sizing`].
/// Source: Krarup, Bilde 1977.
pub(crate) fn lot_sizing_by_use(periods: usize, seed: u64) -> Shadow {
    let mut random = Random::new(seed);
    let mut shadow = Shadow::default();
    let mut draw = |low, high| (0..periods).map(|_| random.whole(low, high)).collect::<Vec<f64>>();
    let (demand, setup, unit, hold) = (draw(5, 40), draw(80, 300), draw(1, 5), draw(1, 3));
    let open: Vec<usize> = setup.iter().map(|&cost| shadow.column(cost, 0.0, 1.0)).collect();
    let mut make = vec![Vec::new(); periods];
    for i in 0..periods {
        for k in i..periods {
            let held: f64 = hold[i..k].iter().sum();
            let column = shadow.column(unit[i] + held, 0.0, INFINITY);
            shadow.row(vec![(column, 1.0), (open[i], -demand[k])], -INFINITY, 0.0);
            make[k].push((column, 1.0));
        }
    }
    make.into_iter().zip(&demand).for_each(|(row, &need)| shadow.row(row, need, need));
    shadow
}

/// Weighted completion times on one machine with release dates, time-indexed. Source: Sousa, Wolsey
/// 1992.
pub(crate) fn one_machine(jobs: usize, seed: u64) -> Shadow {
    let mut random = Random::new(seed);
    let mut shadow = Shadow::default();
    let length: Vec<usize> = (0..jobs).map(|_| random.integer(1, 10) as usize).collect();
    let weight: Vec<f64> = (0..jobs).map(|_| random.whole(1, 10)).collect();
    let total: usize = length.iter().sum();
    let release: Vec<usize> =
        (0..jobs).map(|_| random.integer(0, (total / 2) as i64) as usize).collect();
    let horizon = total + release.iter().max().unwrap();
    let mut busy = vec![Vec::new(); horizon];
    for j in 0..jobs {
        let mut starts = Vec::new();
        for t in release[j]..=horizon - length[j] {
            let column = shadow.column(weight[j] * (t + length[j]) as f64, 0.0, 1.0);
            starts.push((column, 1.0));
            busy[t..t + length[j]]
                .iter_mut()
                .for_each(|slot: &mut Vec<(usize, f64)>| slot.push((column, 1.0)));
        }
        shadow.row(starts, 1.0, 1.0);
    }
    busy.into_iter()
        .filter(|slot| slot.len() > 1)
        .for_each(|slot| shadow.row(slot, -INFINITY, 1.0));
    shadow
}
