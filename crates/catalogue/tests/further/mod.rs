//! The sizes that the files of the later rivals state: paths without circles, several resources,
//! products, cases, tardiness, lines, limits of first and last hours, and forms that were added to
//! families of before.

use instance::{Datum, Instance};

use super::holdings::{Data, Size};

impl Data<'_> {
    /// 1 where an arc has the element of that name at that end, else 0.
    fn meets(&self, name: &str, end: usize) -> usize {
        let (Some(Datum::Element(node)), Some(Datum::Table { cells, .. })) =
            (self.0.get(name), self.0.get("c"))
        else {
            return 0;
        };
        usize::from(cells.keys().any(|arc| arc[end] == *node))
    }
}

/// The size of a rival, where it is one of these.
pub(crate) fn stated(id: &str, instance: &Instance) -> Option<Size> {
    let data = Data(instance);
    let (family, rival) = id.split_once('/')?;
    match family {
        "elementary-path" => path(rival, &data),
        "quadratic" => quadratic(rival, data.count("V")),
        "cases" => cases(rival, &data),
        "tardiness" => tardiness(rival, &data),
        "lines" => lines(rival, &data),
        "capacitated-design" => capacitated(rival, &data),
        "unit" | "start-limits" => units(id, &data),
        "qap" => products(rival, data.count("V")),
        "rcpsp" => project(rival, &data),
        _ => added(id, &data),
    }
}

fn path(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (n, m) = (data.count("V"), data.count("c"));
    // There is no row against arcs that are not there: back to the start, on from the end.
    let rows = 2 * n - 2 + data.meets("s", 1) + data.meets("t", 0);
    match rival {
        "labels" => Some((m + n, rows + m, 0)),
        "one-commodity" => Some((2 * m, rows + n - 1 + m, 0)),
        "multi-commodity" => Some((n * m, rows + (n + m) * (n - 1), 0)),
        "subtours" => Some((m + n - 1, rows + n - 1, n - 1)),
        _ => None,
    }
}

fn quadratic(rival: &str, n: usize) -> Option<Size> {
    let (pairs, triples) = (n * (n - 1) / 2, n * (n - 1) * (n - 2) / 6);
    match rival {
        "products" => Some((n + pairs, 3 * pairs, 0)),
        "row-sums" => Some((2 * n, 2 * n, 0)),
        "triangles" => Some((n + pairs, 3 * pairs + 4 * triples, 0)),
        "rlt-2" => Some((n + pairs + triples, 7 * triples, 0)),
        _ => None,
    }
}

fn cases(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (d, k) = (data.count("D"), data.count("K"));
    match rival {
        "loose" | "big-m" | "multi-m" => Some((d + k, 2 + 2 * d * k, 0)),
        "hull" => Some((d * (k + 1) + k, 2 + d + 2 * d * k, 0)),
        _ => None,
    }
}

fn tardiness(rival: &str, data: &Data<'_>) -> Option<Size> {
    let (n, horizon) = (data.count("J"), data.total("p"));
    let pairs = n * (n - 1) / 2;
    match rival {
        "big-m" => Some((pairs + 2 * n, n + 2 * pairs, 0)),
        "linear-ordering" => Some((n * (n + 1), 2 * n + pairs + n * (n - 1) * (n - 2) / 3, 0)),
        "time-indexed" => {
            let starts: usize = data.cells("p").iter().map(|p| horizon + 1 - p).sum();
            Some((2 * n + starts, 3 * n + horizon, 0))
        }
        _ => None,
    }
}

fn lines(rival: &str, data: &Data<'_>) -> Option<Size> {
    let [n, m, k] = ["V", "A", "K"].map(|name| data.count(name));
    let most = data.total("d").div_ceil(data.number("Q"));
    match rival {
        "joined" => Some((m * (k + 1), n * k + m, 0)),
        "split" => Some((m * (k + 1), n * k + m + m * k, 0)),
        "multiple-choice" => {
            Some((m * (k + 1) * (most + 1), n * k + m * k + 2 * m + m * most * (k + 2), 0))
        }
        _ => None,
    }
}

fn capacitated(rival: &str, data: &Data<'_>) -> Option<Size> {
    let [n, m, k] = ["V", "A", "K"].map(|name| data.count(name));
    let sent = data.sums("d", 0);
    match rival {
        "joined" => Some((m * (k + 1), n * k + m, 0)),
        "by-origin" => Some((m * (sent.len() + 1), sent.len() * (n + m) + m, 0)),
        "split" => Some((m * (k + 1), n * k + m + m * k, 0)),
        "paths" => Some((m + data.count("P"), k + m + m * k, 0)),
        "node-cuts" => {
            let ends = [0, 1].map(|end| {
                let (sent, most) = (data.sums("d", end), data.most("u", end));
                let large = sent.iter().filter(|&(node, sum)| *sum > most[node]).count();
                sent.len() + large
            });
            Some((m * (k + 1), n * k + m + m * k + ends[0] + ends[1], 0))
        }
        _ => None,
    }
}

fn units(id: &str, data: &Data<'_>) -> Option<Size> {
    let (g, t) = (data.count("G"), data.count("T"));
    // Pairs of hours less than a minimum time apart.
    let within = |least: usize| (1..least).map(|apart| t.saturating_sub(apart)).sum::<usize>();
    let all = |name: &str| data.cells(name).into_iter();
    let pairs: usize = all("L").chain(all("K")).map(within).sum();
    // Times on or off: as long as they must be, or up to the end, or off from the beginning.
    let long = |least: usize, first: bool| {
        let fits = |s: usize, e: usize| e + 1 >= s + least || e == t || first && s == 1;
        (1..=t).map(|s| (s..=t).filter(|&e| fits(s, e)).count()).sum::<usize>()
    };
    let times: usize =
        all("L").map(|l| long(l, false)).chain(all("K").map(|k| long(k, true))).sum();
    match id {
        "unit/intervals" => Some((3 * g * t + times, t + 4 * g * t + g + 2 * g * (t - 1), 0)),
        "start-limits/one-binary" => Some((3 * g * t + g, t + 5 * g * t - g + pairs, 0)),
        "start-limits/three-binary" => Some((4 * g * t + g, t + 7 * g * t - g, 0)),
        "start-limits/tight" => Some((4 * g * t + g, t + 6 * g * t, 0)),
        _ => None,
    }
}

fn products(rival: &str, n: usize) -> Option<Size> {
    let (pairs, triples) = (n * (n - 1) / 2, n * (n - 1) * (n - 2) / 6);
    let two = pairs * n * (n - 1);
    match rival {
        "least-ways" => Some((2 * n * n, 2 * n + 2 * n * n, 0)),
        "rlt-2" => Some((
            n * n + two + triples * n * (n - 1) * (n - 2),
            2 * n + 2 * n * n * (n - 1) + 3 * triples * n * (n - 1) + two * (n - 2),
            0,
        )),
        _ => None,
    }
}

fn project(rival: &str, data: &Data<'_>) -> Option<Size> {
    let [n, order, resources] = ["J", "N", "R"].map(|name| data.count(name));
    match rival {
        "forbidden-sets" => Some((n * n + 1, n + 3 * n * (n - 1) / 2 + order, resources)),
        "events" => {
            let long = n * n * (n - 1) / 2 + 2 * n * (n - 1);
            let rows = n * n + n - 1 + long + n + order * n + resources * n;
            Some((n * n + 2 * n + 1, rows, 0))
        }
        _ => None,
    }
}

fn added(id: &str, data: &Data<'_>) -> Option<Size> {
    let (n, i) = (data.count("V"), data.count("I"));
    let (drives, pairs) = (n * n.saturating_sub(1), n * n.saturating_sub(1) / 2);
    match id {
        "multi-knapsack/plain" => Some((data.count("J"), i, 0)),
        "multi-knapsack/covers" => Some((data.count("J"), i, i)),
        "cvrp/two-commodity" => Some((3 * drives, 4 * (n - 1) + drives, 0)),
        "cvrp/multi-commodity" => {
            Some((drives * (2 * n - 1), 2 * (n - 1) + 2 * drives + drives * n, 0))
        }
        "design/paths" => {
            let (m, k) = (data.count("A"), data.count("K"));
            Some((m + data.count("P"), k + m * k, 0))
        }
        "grouping/groups" => Some((pairs + data.count("Q"), n + pairs, 0)),
        "tsp/blossoms" => Some((3 * drives, 3 * n + 3 * pairs, 2)),
        _ => None,
    }
}
