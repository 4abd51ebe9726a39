//! Sites with capacities, and medians of a graph.

use std::cmp::Reverse;
use std::collections::{BTreeMap, BinaryHeap};

use dashu_int::ops::{BitTest, Gcd};

use crate::complaint::plural;
use crate::instance::{Datum, Instance, Reader};
use crate::number::{Number, total_text};

use super::stream::Stream;
use super::{counted, instance, matrix, vector};
use crate::MAX_STOPS;

/// `m n`, capacity and cost of opening of each site, then the demand of each client and what it
/// costs to serve all of it from each site.
pub(super) async fn sites(stream: &mut Stream<'_, '_>) -> Option<(Instance, Vec<String>)> {
    let m = stream.count("sites")?;
    let n = stream.count("clients")?;
    let (mut capacities, mut opening) = (Vec::new(), Vec::new());
    for _ in 0..m {
        capacities.extend(capacity(stream));
        opening.push(stream.number("the cost of opening a site")?);
    }
    let mut demands = Vec::new();
    let wanted = super::packing::cells(m.saturating_add(1), n);
    let served = stream.numbers(wanted, "demands and the costs of serving them").await?;
    let mut costs = vec![Number::ZERO; wanted - n];
    for (client, row) in served.chunks_exact(m + 1).enumerate() {
        stream.spend(row.len()).await;
        demands.push(row[0].clone());
        for (site, cost) in row[1..].iter().enumerate() {
            costs[site * n + client] = cost.clone();
        }
    }
    stream.finish()?;
    let mut facts = vec![format!(
        "{}, {}; c is the cost of serving all of a client's demand from a site.",
        plural(m, "site", "sites"),
        plural(n, "client", "clients")
    )];
    let mut data = vec![("I", counted(m)), ("J", counted(n))];
    if capacities.len() == m {
        facts.push(format!(
            "Capacity {} for a demand of {}.",
            total_text(&capacities),
            total_text(&demands)
        ));
        data.push(("q", vector(capacities)));
    } else {
        facts.push("The file leaves the capacities open, so there is no q.".to_owned());
    }
    data.extend([("f", vector(opening)), ("d", vector(demands)), ("c", matrix(costs, n))]);
    Some((instance(Reader::Sites, data), facts))
}

/// The capacity of a site; the largest files of the library have the word `capacity` there.
fn capacity(stream: &mut Stream) -> Option<Number> {
    let at = stream.at();
    if stream.cells.get(at).is_some_and(|cell| cell.text.eq_ignore_ascii_case("capacity")) {
        stream.go(at + 1);
        return None;
    }
    stream.number("the capacity of a site")
}

/// `n m p` and the edges of a graph with their lengths; of an edge that is listed again the last
/// length counts, as the library says.
pub(super) async fn medians(stream: &mut Stream<'_, '_>) -> Option<(Instance, Vec<String>)> {
    let n = stream.whole("the number of vertices", 1, MAX_STOPS)?;
    let m = stream.count("edges")?;
    let p = stream.whole("the number of medians", 1, n)?;
    let (mut edges, mut again) = (BTreeMap::new(), 0);
    for _ in 0..m {
        let (i, j) = (stream.whole("a vertex", 1, n)?, stream.whole("a vertex", 1, n)?);
        let length = stream.number("the length of an edge")?;
        stream.spend(3).await;
        if length < Number::ZERO {
            let span = stream.last();
            let mend = "Give a length of 0 or more.".to_owned();
            stream.error(span, "out-of-range", ["a length is negative".to_owned(), mend]);
            return None;
        }
        let old = edges.insert(if i < j { (i, j) } else { (j, i) }, length);
        again += usize::from(old.is_some());
    }
    stream.finish()?;
    let found =
        if n.saturating_mul(m) > MOST_STEPS { None } else { distances(n, &edges, stream).await };
    let Some((table, apart)) = found else {
        let message = "the graph is too large for its shortest paths, or its lengths are too long";
        let mend = "Keep to 1,000 vertices, 60,000 edges and lengths of 12 digits.".to_owned();
        stream.error(0..0, "too-large", [message.to_owned(), mend]);
        return None;
    };
    let size = plural(n, "vertex", "vertices");
    let mut facts = vec![
        format!("{size}, {}, {p} to choose.", plural(m, "edge", "edges")),
        "Every vertex is a site of I and a client of J; d is the length of the shortest path between them.".to_owned(),
    ];
    if again > 0 {
        facts.push(format!(
            "{} again: the last length counts.",
            plural(again, "edge is listed", "edges are listed")
        ));
    }
    if apart > 0 {
        facts.push(format!(
            "{} no path between them: no d there.",
            plural(apart, "pair has", "pairs have")
        ));
    }
    let data =
        vec![("I", counted(n)), ("J", counted(n)), ("d", table), ("p", Datum::Number(p.into()))];
    let mut found = instance(Reader::Medians, data);
    found.assume("w", vector(vec![Number::ONE; n]));
    facts.push("The weight w of each client is 1, as the file gives none.".to_owned());
    Some((found, facts))
}

/// The ends of an edge and its length in parts.
type Edge = (usize, usize, i64);

/// The most steps of all searches for shortest paths.
const MOST_STEPS: usize = 60_000_000;

/// Lengths as whole numbers of a common part, and how many of these make one.
fn scaled(edges: &BTreeMap<(usize, usize), Number>) -> Option<(Vec<Edge>, Number)> {
    let mut parts = dashu_int::UBig::ONE;
    for length in edges.values() {
        let common = (&parts).gcd(length.denominator());
        parts = &parts / common * length.denominator();
        if parts.bit_len() > 40 {
            return None;
        }
    }
    let parts = Number::from(parts);
    let whole = |length: &Number| i64::try_from((length * &parts).numerator().clone()).ok();
    let most = i64::MAX >> 12;
    let scaled =
        edges.iter().map(|(&(i, j), length)| Some((i, j, whole(length).filter(|&l| l < most)?)));
    Some((scaled.collect::<Option<_>>()?, parts))
}

/// Lengths of shortest paths between all vertices, by Dijkstra's method (Numerische Mathematik 1,
/// 1959) from each; and how many pairs have none.
async fn distances(
    n: usize,
    edges: &BTreeMap<(usize, usize), Number>,
    stream: &Stream<'_, '_>,
) -> Option<(Datum, usize)> {
    let (lengths, parts) = scaled(edges)?;
    let mut near: Vec<Vec<(usize, i64)>> = vec![Vec::new(); n];
    for (i, j, length) in lengths {
        near[i - 1].push((j - 1, length));
        near[j - 1].push((i - 1, length));
    }
    let (mut all, mut apart) = (Vec::with_capacity(n * n), 0);
    for from in 0..n {
        stream.spend(n + edges.len()).await;
        for length in search(from, &near) {
            apart += usize::from(length.is_none());
            all.push(length.map(|length| Number::from(length) / &parts));
        }
    }
    Some((super::grid(all, n), apart))
}

/// The shortest lengths from a vertex.
fn search(from: usize, near: &[Vec<(usize, i64)>]) -> Vec<Option<i64>> {
    let mut best: Vec<Option<i64>> = vec![None; near.len()];
    let mut done = vec![false; near.len()];
    let mut open = BinaryHeap::from([Reverse((0, from))]);
    best[from] = Some(0);
    while let Some(Reverse((length, i))) = open.pop() {
        if std::mem::replace(&mut done[i], true) {
            continue;
        }
        for &(j, step) in &near[i] {
            let way = length + step;
            if best[j].is_none_or(|best| way < best) {
                best[j] = Some(way);
                open.push(Reverse((way, j)));
            }
        }
    }
    best
}
