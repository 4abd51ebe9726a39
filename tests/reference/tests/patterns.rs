//! Optima of families whose plans are a pattern of switches and amounts that follow: every pattern of
//! set-ups, of hours on and of lines is tried in this file, with no limit by big factors. What a pattern
//! leaves is dispatched by merit, which is exact hour by hour, or a linear program in rows of this file,
//! solved by HiGHS.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;
use std::ops::Range;

use hullward_tests_reference::seeded::extent;
use hullward_tests_reference::theory::{labels, least, table};
use instance::Instance;

use crate::plain::{allocations, held_on, number};

/// A linear program in the making: no less than nothing of anything.
#[derive(Default)]
struct Amounts {
    problem: highs::RowProblem,
    columns: Vec<highs::Col>,
}

impl Amounts {
    /// So many more amounts, each with its cost and the most there may be.
    fn add(&mut self, each: impl Iterator<Item = (f64, f64)>) -> Range<usize> {
        let first = self.columns.len();
        self.columns.extend(each.map(|(cost, most)| self.problem.add_column(cost, 0.0..=most)));
        first..self.columns.len()
    }

    /// A sum of amounts that is to be within two numbers.
    fn sum(&mut self, within: (f64, f64), terms: impl Iterator<Item = (usize, f64)>) {
        let terms: Vec<_> = terms.map(|(at, factor)| (self.columns[at], factor)).collect();
        self.problem.add_row(within.0..=within.1, terms);
    }

    /// The least cost; none where no amounts will do.
    fn least(self) -> Option<f64> {
        let mut solver = self.problem.optimise(highs::Sense::Minimise);
        solver.make_quiet();
        let solved = solver.solve();
        let held = solved.status() == highs::HighsModelStatus::Optimal;
        held.then(|| solved.objective_value())
    }
}

/// The least sum of what a pattern costs and what it leaves: patterns are taken by their own cost until
/// no later one can be the best, as what is left costs no less than `floor`.
fn cheapest<P>(mut patterns: Vec<(f64, P)>, floor: f64, rest: impl Fn(&P) -> Option<f64>) -> f64 {
    patterns.sort_by(|a, b| a.0.total_cmp(&b.0));
    let mut best = f64::INFINITY;
    for (cost, pattern) in &patterns {
        if cost + floor >= best {
            break;
        }
        best = least([best, rest(pattern).map_or(f64::INFINITY, |rest| cost + rest)].into_iter());
    }
    best
}

/// What several items cost to keep where they are made by a pattern of set-ups; stock is what was made
/// and not yet sold, and a period has hours for set-ups and work.
struct Shop {
    items: Vec<String>,
    periods: Vec<String>,
    cells: BTreeMap<&'static str, BTreeMap<Vec<String>, f64>>,
}

impl Shop {
    fn of(on: &Instance) -> Self {
        let cells = ["d", "f", "h", "a", "b", "Q"].map(|name| (name, table(on, name)));
        Self { items: labels(on, "I"), periods: labels(on, "T"), cells: cells.into() }
    }

    fn of_item(&self, name: &str, i: usize) -> f64 {
        self.cells[name][&vec![self.items[i].clone()]]
    }

    fn demand(&self, i: usize, t: usize) -> f64 {
        self.cells["d"][&vec![self.items[i].clone(), self.periods[t].clone()]]
    }

    fn set_ups(&self, pattern: &[usize]) -> f64 {
        let periods = self.periods.len();
        pattern.iter().enumerate().map(|(at, &y)| y as f64 * self.of_item("f", at / periods)).sum()
    }

    fn keeping(&self, pattern: &[usize]) -> Option<f64> {
        let (items, periods) = (self.items.len(), self.periods.len());
        let mut amounts = Amounts::default();
        let most = |y: usize| if y == 1 { f64::INFINITY } else { 0.0 };
        let made = amounts.add(pattern.iter().map(|&y| (0.0, most(y)))).start;
        let at = |i: usize, t: usize| i * periods + t;
        let last = |t: usize| if t + 1 == periods { 0.0 } else { f64::INFINITY };
        let of = |k: usize| (self.of_item("h", k / periods), last(k % periods));
        let kept = amounts.add((0..items * periods).map(of)).start;
        for (i, t) in (0..items).flat_map(|i| (0..periods).map(move |t| (i, t))) {
            let before = (t > 0).then(|| (kept + at(i, t) - 1, 1.0));
            let flow = [(made + at(i, t), 1.0), (kept + at(i, t), -1.0)];
            let demand = self.demand(i, t);
            amounts.sum((demand, demand), flow.into_iter().chain(before));
        }
        for t in 0..periods {
            let hours = self.cells["Q"][&vec![self.periods[t].clone()]];
            let taken: f64 =
                (0..items).map(|i| self.of_item("b", i) * pattern[at(i, t)] as f64).sum();
            let work = (0..items).map(|i| (made + at(i, t), self.of_item("a", i)));
            amounts.sum((f64::NEG_INFINITY, hours - taken), work);
        }
        amounts.least()
    }
}

#[test]
fn lots_that_share_hours_by_every_pattern_of_set_ups() {
    let extent = extent("clsp");
    held_on("clsp", extent.optima, extent.searched, |on| {
        let shop = Shop::of(on);
        let all = allocations(shop.items.len() * shop.periods.len(), &[0, 1]).into_iter();
        let patterns = all.map(|pattern| (shop.set_ups(&pattern), pattern)).collect();
        cheapest(patterns, 0.0, |pattern| shop.keeping(pattern))
    });
}

/// A network whose lines are laid by a list of counts, arc by arc.
struct Network {
    nodes: Vec<String>,
    arcs: Vec<(Vec<String>, f64)>,
    unit: BTreeMap<Vec<String>, f64>,
    traffic: Vec<(Vec<String>, f64)>,
    holds: f64,
}

impl Network {
    fn of(on: &Instance) -> Self {
        let listed = |name: &str| table(on, name).into_iter().collect();
        let holds = number(on, "Q");
        let nodes = labels(on, "V");
        Self { nodes, arcs: listed("f"), unit: table(on, "c"), traffic: listed("d"), holds }
    }

    /// How many lines an arc may have: no more than carry all traffic.
    fn counts(&self) -> Vec<usize> {
        let all: f64 = self.traffic.iter().map(|pair| pair.1).sum();
        (0..=(all / self.holds).ceil() as usize).collect()
    }

    /// The cost of carrying all traffic where arcs hold so much; none where they do not hold it.
    fn carrying(&self, holds: &[f64]) -> Option<f64> {
        let mut amounts = Amounts::default();
        let mut on_arc = vec![Vec::new(); self.arcs.len()];
        for (pair, units) in &self.traffic {
            let costs = self.arcs.iter().map(|(arc, _)| (self.unit[arc], f64::INFINITY));
            let first = amounts.add(costs).start;
            (0..self.arcs.len()).for_each(|a| on_arc[a].push(first + a));
            for node in &self.nodes {
                let ways = self.arcs.iter().enumerate().map(|(a, (arc, _))| {
                    let sign = f64::from(arc[0] == *node) - f64::from(arc[1] == *node);
                    (first + a, sign)
                });
                let sent = f64::from(pair[0] == *node) - f64::from(pair[1] == *node);
                let terms: Vec<_> = ways.filter(|&(_, sign)| sign != 0.0).collect();
                amounts.sum((sent * units, sent * units), terms.into_iter());
            }
        }
        for (units, &most) in on_arc.into_iter().zip(holds) {
            amounts.sum((f64::NEG_INFINITY, most), units.into_iter().map(|at| (at, 1.0)));
        }
        amounts.least()
    }
}

#[test]
fn lines_by_every_list_of_counts() {
    held_on("lines", &[2], 6, |on| {
        let network = Network::of(on);
        let free = vec![f64::INFINITY; network.arcs.len()];
        let floor = network.carrying(&free).unwrap();
        let cost = |counts: &Vec<usize>| -> f64 {
            counts.iter().zip(&network.arcs).map(|(&y, (_, cost))| y as f64 * cost).sum()
        };
        let all = allocations(network.arcs.len(), &network.counts()).into_iter();
        let patterns = all.map(|counts| (cost(&counts), counts)).collect();
        cheapest(patterns, floor, |counts: &Vec<usize>| {
            let holds: Vec<f64> = counts.iter().map(|&y| y as f64 * network.holds).collect();
            network.carrying(&holds)
        })
    });
}

/// A unit with what its hours cost and hold.
struct Unit {
    energy: f64,
    hour: f64,
    start: f64,
    output: (f64, f64),
    ends: (f64, f64),
    stays: (usize, usize),
}

impl Unit {
    fn all(on: &Instance) -> Vec<Self> {
        let names = labels(on, "G");
        let of = |name: &str, unit: &String| table(on, name)[&vec![unit.clone()]];
        let unit = |unit: &String| Self {
            energy: of("c", unit),
            hour: of("e", unit),
            start: of("f", unit),
            output: (of("m", unit), of("q", unit)),
            ends: (of("a", unit), of("b", unit)),
            stays: (of("L", unit) as usize, of("K", unit) as usize),
        };
        names.iter().map(unit).collect()
    }

    /// Whether hours on and off last as long as they must, or to the end; before the first hour it has
    /// been off for long.
    fn may(&self, on: &[usize]) -> bool {
        let mut runs: Vec<(usize, usize)> = Vec::new();
        for &now in on {
            match runs.last_mut() {
                Some((kind, length)) if *kind == now => *length += 1,
                _ => runs.push((now, 1)),
            }
        }
        let inner = runs.iter().enumerate().take(runs.len().saturating_sub(1));
        let mut inner = inner.map(|(at, &(kind, length))| {
            let first_off = at == 0 && kind == 0;
            first_off || length >= if kind == 1 { self.stays.0 } else { self.stays.1 }
        });
        inner.all(|long| long)
    }

    /// Starts and hours of a pattern.
    fn switching(&self, on: &[usize]) -> f64 {
        let starts = (0..on.len()).filter(|&t| on[t] == 1 && (t == 0 || on[t - 1] == 0)).count();
        starts as f64 * self.start + on.iter().sum::<usize>() as f64 * self.hour
    }

    /// The most output in an hour on.
    fn most(&self, on: &[usize], t: usize) -> f64 {
        let first = if t == 0 || on[t - 1] == 0 { self.ends.0 } else { f64::INFINITY };
        let last = if t + 1 < on.len() && on[t + 1] == 0 { self.ends.1 } else { f64::INFINITY };
        least([self.output.1, first, last].into_iter())
    }
}

/// The cost of a load by merit: all give their least, the cheapest give more until the load is met.
fn dispatched(load: f64, mut units: Vec<(f64, f64, f64)>) -> Option<f64> {
    units.sort_by(|a, b| a.0.total_cmp(&b.0));
    let mut cost: f64 = units.iter().map(|&(energy, from, _)| energy * from).sum();
    let mut short = load - units.iter().map(|unit| unit.1).sum::<f64>();
    for (energy, from, to) in units {
        if from > to {
            return None;
        }
        let more = least([short, to - from].into_iter());
        if more > 0.0 {
            cost += energy * more;
            short -= more;
        }
    }
    (short <= 1e-9).then_some(cost)
}

#[test]
fn limits_at_starts_and_stops_by_every_pattern_of_hours_on() {
    held_on("start-limits", &[4], 6, |on| {
        let (units, hours) = (Unit::all(on), labels(on, "T"));
        let loads = table(on, "d");
        let loads: Vec<f64> = hours.iter().map(|hour| loads[&vec![hour.clone()]]).collect();
        let own = |unit: &Unit| -> Vec<(f64, Vec<usize>)> {
            let all = allocations(hours.len(), &[0, 1]).into_iter().filter(|on| unit.may(on));
            all.map(|on| (unit.switching(&on), on)).collect()
        };
        let joined = units.iter().map(own).fold(vec![(0.0, Vec::new())], |all, own| {
            let with = |(cost, list): (f64, Vec<Vec<usize>>)| {
                own.iter()
                    .map(move |(more, on)| (cost + more, [list.clone(), vec![on.clone()]].concat()))
            };
            all.into_iter().flat_map(with).collect()
        });
        cheapest(joined, 0.0, |patterns: &Vec<Vec<usize>>| {
            let hour = |(t, &load): (usize, &f64)| {
                let on = units.iter().zip(patterns).filter(|(_, on)| on[t] == 1);
                dispatched(load, on.map(|(u, on)| (u.energy, u.output.0, u.most(on, t))).collect())
            };
            loads.iter().enumerate().map(hour).sum()
        })
    });
}
