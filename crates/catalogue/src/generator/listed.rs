//! What a form with a column for each plan of a part takes as data: all rounds that a vehicle
//! holds, all lists of jobs that an agent does, all stable sets that hold no further node, all paths
//! between two nodes, all groups of items.

use super::blocks::{Blocks, names};

/// Up to so many customers, jobs or nodes everything is listed; beyond, nothing is: their number
/// doubles with each.
const MOST: usize = 12;

/// Sets of numbers below `count` as bits, the empty one left out.
fn sets(count: usize) -> std::ops::Range<usize> {
    if count > MOST { 1..1 } else { 1..1 << count }
}

fn members(set: usize, count: usize) -> impl Iterator<Item = usize> {
    (0..count).filter(move |i| set >> i & 1 == 1)
}

/// The cheapest round through each set of customers that a vehicle holds, as blocks `P` and `R`:
/// the dynamic program of Held & Karp (1962). Place 0 is the depot. `O(2ⁿ n²)`.
pub(super) fn rounds(
    out: &mut Blocks,
    places: &[String],
    costs: &[Vec<i64>],
    (demands, room): (&[i64], i64),
) {
    let count = places.len().saturating_sub(1);
    let shortest = shortest(costs, count);
    let (mut rows, mut found) = (Vec::new(), 0);
    for set in sets(count) {
        if members(set, count).map(|i| demands[i + 1]).sum::<i64>() > room {
            continue;
        }
        found += 1;
        let (mut left, mut last) = (set, 0);
        while left > 0 {
            let ends = members(left, count);
            let before = ends.min_by_key(|&i| shortest[left][i] + costs[i + 1][last]);
            let Some(before) = before else { break };
            rows.push(format!("p{found} {} {}", places[before + 1], places[last]));
            (left, last) = (left & !(1 << before), before + 1);
        }
        rows.push(format!("p{found} {} {}", places[0], places[last]));
    }
    out.list("P", &names('p', found));
    out.by("R", "p, i, j", &rows);
}

/// The shortest way from the depot through each set of customers, by its last one.
fn shortest(costs: &[Vec<i64>], count: usize) -> Vec<Vec<i64>> {
    let mut best = vec![vec![i64::MAX / 4; count]; sets(count).end];
    for set in sets(count) {
        for last in members(set, count) {
            let before = set & !(1 << last);
            let ways = members(before, count).map(|i| best[before][i] + costs[i + 1][last + 1]);
            best[set][last] =
                if before == 0 { costs[0][last + 1] } else { ways.min().unwrap_or(i64::MAX / 4) };
        }
    }
    best
}

/// All lists of jobs that an agent has the hours for, as blocks `P`, `g` and `t`. `O(agents 2ⁿ n)`.
pub(super) fn lists(
    out: &mut Blocks,
    (agents, jobs): (&[String], &[String]),
    hours: &[Vec<i64>],
    there: &[i64],
) {
    let (mut owners, mut marks, mut found) = (Vec::new(), Vec::new(), 0);
    for (i, agent) in agents.iter().enumerate() {
        for set in sets(jobs.len()) {
            if members(set, jobs.len()).map(|j| hours[i][j]).sum::<i64>() <= there[i] {
                found += 1;
                owners.push(format!("{agent} p{found} 1"));
                marks.extend(members(set, jobs.len()).map(|j| format!("{} p{found} 1", jobs[j])));
            }
        }
    }
    out.list("P", &names('p', found));
    out.by("g", "i, p", &owners);
    out.by("t", "j, p", &marks);
}

/// All stable sets that hold no further node, as blocks `P` and `a`. `O(2ⁿ n²)`.
pub(super) fn stable_sets(out: &mut Blocks, nodes: &[String], edges: &[(usize, usize)]) {
    let count = nodes.len();
    let mut beside = vec![0_usize; count];
    for &(i, j) in edges {
        beside[i] |= 1 << j;
        beside[j] |= 1 << i;
    }
    let (mut marks, mut found) = (Vec::new(), 0);
    for set in sets(count) {
        // Stable where no member is beside the set, and full where every other node is.
        if (0..count).all(|i| (set >> i & 1 == 1) != (beside[i] & set > 0)) {
            found += 1;
            marks.extend(members(set, count).map(|i| format!("{} p{found} 1", nodes[i])));
        }
    }
    out.list("P", &names('p', found));
    out.by("a", "i, p", &marks);
}

/// All paths that meet no node twice, of each pair of ends, as blocks `P`, `B` and `R`: a
/// depth-first search. Their number grows exponentially with the nodes.
pub(super) fn paths(
    out: &mut Blocks,
    nodes: &[String],
    arcs: &[(usize, usize)],
    pairs: &[(usize, usize)],
) {
    let (mut owners, mut rows, mut found) = (Vec::new(), Vec::new(), 0);
    let listed = if nodes.len() > MOST { &[][..] } else { pairs };
    for &(from, to) in listed {
        let mut open = vec![vec![from]];
        while let Some(path) = open.pop() {
            let last = path[path.len() - 1];
            if last != to {
                let ahead = arcs.iter().filter(|(i, j)| *i == last && !path.contains(j));
                open.extend(ahead.map(|&(_, j)| [path.as_slice(), &[j]].concat()));
                continue;
            }
            found += 1;
            owners.push(format!("p{found} {} {}", nodes[from], nodes[to]));
            let steps = path.windows(2);
            rows.extend(
                steps.map(|step| format!("p{found} {} {}", nodes[step[0]], nodes[step[1]])),
            );
        }
    }
    out.list("P", &names('p', found));
    out.by("B", "p, s, t", &owners);
    out.by("R", "p, i, j", &rows);
}

/// All groups of items but none, as blocks `Q` and `a`. `O(2ⁿ n)`.
pub(super) fn groups(out: &mut Blocks, items: &[String]) {
    let mut marks = Vec::new();
    for set in sets(items.len()) {
        marks.extend(members(set, items.len()).map(|i| format!("{} q{set} 1", items[i])));
    }
    out.list("Q", &names('q', sets(items.len()).len()));
    out.by("a", "i, q", &marks);
}

#[cfg(test)]
mod tests {
    use super::*;

    #[test]
    fn a_square_has_two_full_stable_sets() {
        let mut out = Blocks::new();
        stable_sets(&mut out, &names('n', 4), &[(0, 1), (1, 2), (2, 3), (0, 3)]);
        assert_eq!(out.text(), "P\np1 p2\n\na by i, p\nn1 p1 1\nn3 p1 1\nn2 p2 1\nn4 p2 1\n\n");
    }

    #[test]
    fn a_round_takes_the_shorter_way() {
        let mut out = Blocks::new();
        let costs = vec![vec![0, 9, 1], vec![1, 0, 9], vec![9, 1, 0]];
        rounds(&mut out, &names('n', 3), &costs, (&[0, 2, 2], 4));
        let rows = "p1 n2 n1\np1 n1 n2\np2 n3 n1\np2 n1 n3\np3 n2 n1\np3 n3 n2\np3 n1 n3";
        assert_eq!(out.text(), format!("P\np1 p2 p3\n\nR by p, i, j\n{rows}\n\n"));
    }

    #[test]
    fn paths_meet_no_node_twice() {
        let mut out = Blocks::new();
        let arcs = [(0, 1), (1, 0), (1, 2), (0, 2), (2, 0)];
        paths(&mut out, &names('n', 3), &arcs, &[(0, 2)]);
        let text = "P\np1 p2\n\nB by p, s, t\np1 n1 n3\np2 n1 n3\n\n\
            R by p, i, j\np1 n1 n3\np2 n1 n2\np2 n2 n3\n\n";
        assert_eq!(out.text(), text);
    }

    #[test]
    fn two_items_make_three_groups() {
        let mut out = Blocks::new();
        groups(&mut out, &names('n', 2));
        let text = "Q\nq1 q2 q3\n\na by i, q\nn1 q1 1\nn2 q2 1\nn1 q3 1\nn2 q3 1\n\n";
        assert_eq!(out.text(), text);
    }

    #[test]
    fn lists_are_those_that_fit() {
        let mut out = Blocks::new();
        let (agents, jobs) = (names('m', 1), names('j', 2));
        lists(&mut out, (&agents, &jobs), &[vec![2, 3]], &[4]);
        let text = "P\np1 p2\n\ng by i, p\nm1 p1 1\nm1 p2 1\n\nt by j, p\nj1 p1 1\nj2 p2 1\n\n";
        assert_eq!(out.text(), text);
    }
}
