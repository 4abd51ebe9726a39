//! Optima of families by plain enumeration in this file: every choice, partition, path or order is tried. A slip
//! that all rivals of a family share is caught here; that they agree with each other is held elsewhere
//! (`rivals.rs`). Project schedules are tried by all orders, each set as early as it can be: among them is an
//! optimum (Kolisch, European Journal of Operational Research 90 (1996) 320-333).

#![allow(clippy::unwrap_used, clippy::panic, reason = "a check fails by it")]

use std::collections::BTreeMap;

use hullward_tests_reference::agree;
use hullward_tests_reference::round_trip::{rival, solve};
use hullward_tests_reference::seeded::{extent, seeded};
use hullward_tests_reference::theory::{labels, least, table};
use instance::{Datum, Instance};
use model::nearest_f64;
use tree::{Settings, Status};

pub(crate) fn number(on: &Instance, name: &str) -> f64 {
    let Some(Datum::Number(value)) = on.get(name) else { panic!("no number {name}") };
    nearest_f64(value)
}

fn element(on: &Instance, name: &str) -> String {
    let Some(Datum::Element(label)) = on.get(name) else { panic!("no element {name}") };
    label.clone()
}

fn largest(numbers: impl Iterator<Item = f64>) -> f64 {
    -least(numbers.map(|number| -number))
}

/// Holds every rival of a family to what `plain` finds on the instances that optima are compared on.
fn held(family: &str, plain: impl Fn(&Instance) -> f64) {
    let extent = extent(family);
    held_on(family, extent.optima, extent.searched, plain);
}

/// Holds every rival of a family to what `plain` finds on so many instances of each size and class.
pub(crate) fn held_on(family: &str, sizes: &[u32], seeds: u64, plain: impl Fn(&Instance) -> f64) {
    let rivals: Vec<String> = catalogue::entries()
        .into_iter()
        .filter(|entry| entry.family == family && !entry.relaxation)
        .map(|entry| entry.id)
        .collect();
    for (name, on) in seeded(family, sizes, seeds) {
        let wanted = plain(&on);
        for id in &rivals {
            let found = solve(&rival(id, &on), Settings::default());
            assert_eq!(found.status, Status::Optimal, "{id} on {name}");
            let found = found.incumbent.unwrap();
            assert!(agree(found, wanted, 1e-6), "{id} on {name}: {found} for {wanted}");
        }
    }
}

/// Every subset of so many things, as who is in.
fn subsets(count: usize) -> impl Iterator<Item = Vec<bool>> {
    (0..1_u32 << count).map(move |mask| (0..count).map(|at| mask >> at & 1 == 1).collect())
}

/// The sum of the pairs of a table for which `counts` holds of the places of their two labels.
fn pairs(
    cells: &BTreeMap<Vec<String>, f64>,
    of: &[String],
    counts: impl Fn(usize, usize) -> bool,
) -> f64 {
    let place = |label: &String| of.iter().position(|one| one == label).unwrap();
    let counted = cells.iter().filter(|(key, _)| counts(place(&key[0]), place(&key[1])));
    counted.map(|(_, value)| value).sum()
}

#[test]
fn yes_or_no_decisions_by_every_choice() {
    held("quadratic", |on| {
        let (nodes, alone, together) = (labels(on, "V"), table(on, "p"), table(on, "q"));
        largest(subsets(nodes.len()).map(|yes| {
            let own: f64 = (0..nodes.len())
                .filter(|&at| yes[at])
                .map(|at| alone[&vec![nodes[at].clone()]])
                .sum();
            own + pairs(&together, &nodes, |i, j| yes[i] && yes[j])
        }))
    });
}

#[test]
fn cuts_by_every_side() {
    held("max-cut", |on| {
        let (nodes, worth) = (labels(on, "V"), table(on, "w"));
        largest(subsets(nodes.len()).map(|side| pairs(&worth, &nodes, |i, j| side[i] != side[j])))
    });
}

/// Every way to put things into groups: each joins a group that is there, or opens the next.
fn partitions(count: usize) -> Vec<Vec<usize>> {
    let mut all = vec![Vec::new()];
    for _ in 0..count {
        all = all
            .into_iter()
            .flat_map(|groups: Vec<usize>| {
                let open = groups.iter().max().map_or(0, |most| most + 1);
                (0..=open).map(move |group| [groups.clone(), vec![group]].concat())
            })
            .collect();
    }
    all
}

#[test]
fn groups_by_every_partition() {
    assert_eq!(partitions(5).len(), 52, "Bell’s number");
    held("grouping", |on| {
        let (items, cost) = (labels(on, "V"), table(on, "c"));
        let all = partitions(items.len()).into_iter();
        least(all.map(|groups| pairs(&cost, &items, |i, j| groups[i] == groups[j])))
    });
}

/// Every way to give each of `count` places one of `choices`.
pub(crate) fn allocations(count: usize, choices: &[usize]) -> Vec<Vec<usize>> {
    (0..count).fold(vec![Vec::new()], |all, _| {
        let longer = |one: Vec<usize>| {
            choices.iter().map(move |&choice| [one.clone(), vec![choice]].concat())
        };
        all.into_iter().flat_map(longer).collect()
    })
}

#[test]
fn hubs_by_every_allocation() {
    held("hub", |on| {
        let (places, way, units) = (labels(on, "V"), table(on, "c"), table(on, "w"));
        let [hubs, to, between, from] = ["p", "χ", "α", "δ"].map(|name| number(on, name));
        let far = |i: usize, j: usize| {
            way.get(&vec![places[i].clone(), places[j].clone()]).copied().unwrap_or(0.0)
        };
        let place = |label: &String| places.iter().position(|one| one == label).unwrap();
        let cost = |own: &Vec<usize>| -> f64 {
            let path = |(key, units): (&Vec<String>, &f64)| {
                let (i, j) = (place(&key[0]), place(&key[1]));
                let (k, m) = (own[i], own[j]);
                units * (to * far(i, k) + between * far(k, m) + from * far(m, j))
            };
            units.iter().map(path).sum()
        };
        let chosen = subsets(places.len())
            .map(|open| (0..places.len()).filter(|&at| open[at]).collect::<Vec<usize>>());
        let chosen = chosen.filter(|open| open.len() as f64 == hubs);
        let all = chosen.flat_map(|open| {
            let all = allocations(places.len(), &open).into_iter();
            all.filter(move |own| open.iter().all(|&hub| own[hub] == hub))
        });
        least(all.map(|own| cost(&own)))
    });
}

#[test]
fn centres_by_every_choice_of_sites() {
    held("p-centre", |on| {
        let (sites, clients, far) = (labels(on, "I"), labels(on, "J"), table(on, "d"));
        let count = number(on, "p");
        let chosen = subsets(sites.len())
            .filter(|open| open.iter().filter(|open| **open).count() as f64 == count);
        least(chosen.map(|open| {
            largest(clients.iter().map(|client| {
                let open = sites.iter().zip(&open).filter(|(_, open)| **open);
                least(open.map(|(site, _)| far[&vec![site.clone(), client.clone()]]))
            }))
        }))
    });
}

/// The lengths of all ways from the last node of `way` to `t` that meet no node twice, each with what
/// it takes of `taken`.
fn ways(
    arcs: &BTreeMap<Vec<String>, f64>,
    taken: &BTreeMap<Vec<String>, f64>,
    (way, t): (&[String], &str),
) -> Vec<(f64, f64)> {
    let at = way.last().unwrap();
    if at == t {
        return vec![(0.0, 0.0)];
    }
    let next = arcs.iter().filter(|(arc, _)| arc[0] == *at && !way.contains(&arc[1]));
    next.flat_map(|(arc, length)| {
        let longer = [way.to_vec(), vec![arc[1].clone()]].concat();
        let takes = taken.get(arc).copied().unwrap_or(0.0);
        let rest = ways(arcs, taken, (&longer, t)).into_iter();
        rest.map(move |(far, much)| (far + length, much + takes)).collect::<Vec<_>>()
    })
    .collect()
}

#[test]
fn paths_by_every_way() {
    held("elementary-path", |on| {
        let (arcs, none) = (table(on, "c"), BTreeMap::new());
        let all = ways(&arcs, &none, (&[element(on, "s")], &element(on, "t")));
        least(all.into_iter().map(|(far, _)| far))
    });
    held("limited-path", |on| {
        let (arcs, taken, most) = (table(on, "c"), table(on, "a"), number(on, "W"));
        let all = ways(&arcs, &taken, (&[element(on, "s")], &element(on, "t")));
        least(all.into_iter().filter(|(_, much)| *much <= most).map(|(far, _)| far))
    });
}

/// A project: times, what each activity takes, what there is, and who comes before whom.
struct Project {
    time: Vec<usize>,
    takes: Vec<Vec<f64>>,
    there: Vec<f64>,
    before: Vec<Vec<usize>>,
}

impl Project {
    fn of(on: &Instance) -> Self {
        let (activities, resources) = (labels(on, "J"), labels(on, "R"));
        let (time, taken, there) = (table(on, "p"), table(on, "b"), table(on, "B"));
        let Some(Datum::Tuples { rows, .. }) = on.get("N") else { panic!("no order") };
        let take =
            |j: &String, k: &String| taken.get(&vec![j.clone(), k.clone()]).copied().unwrap_or(0.0);
        let whole = |time: f64| (0..1_000).find(|&whole| whole as f64 == time).unwrap();
        let place = |label: &String| activities.iter().position(|one| one == label).unwrap();
        let earlier = |j: &String| {
            rows.iter().filter(|row| row[1] == *j).map(|row| place(&row[0])).collect::<Vec<_>>()
        };
        Self {
            time: activities.iter().map(|j| whole(time[&vec![j.clone()]])).collect(),
            takes: activities
                .iter()
                .map(|j| resources.iter().map(|k| take(j, k)).collect())
                .collect(),
            there: resources.iter().map(|k| there[&vec![k.clone()]]).collect(),
            before: activities.iter().map(earlier).collect(),
        }
    }

    /// Whether an activity can run at a time beside those that have a start.
    fn fits(&self, j: usize, at: usize, starts: &[Option<usize>]) -> bool {
        let runs =
            |i: usize| starts[i].is_some_and(|start| start <= at && at < start + self.time[i]);
        (0..self.there.len()).all(|k| {
            let used: f64 = (0..starts.len()).filter(|&i| runs(i)).map(|i| self.takes[i][k]).sum();
            used + self.takes[j][k] <= self.there[k] + 1e-9
        })
    }

    /// The least length of all orders from here on, each activity set as early as it can be.
    fn shortest(&self, starts: &mut Vec<Option<usize>>) -> usize {
        let ends = |starts: &[Option<usize>], i: usize| starts[i].map(|start| start + self.time[i]);
        let mut least = usize::MAX;
        for j in 0..self.time.len() {
            let earlier: Option<Vec<usize>> =
                self.before[j].iter().map(|&i| ends(starts, i)).collect();
            let (None, Some(earlier)) = (starts[j], earlier) else { continue };
            let ready = earlier.into_iter().max().unwrap_or(0);
            let free = |at: usize| (at..at + self.time[j]).all(|hour| self.fits(j, hour, starts));
            let start = (ready..).find(|&at| free(at)).unwrap();
            starts[j] = Some(start);
            least = least.min(self.shortest(starts));
            starts[j] = None;
        }
        if least == usize::MAX {
            return (0..starts.len()).filter_map(|i| ends(starts, i)).max().unwrap_or(0);
        }
        least
    }
}

#[test]
fn projects_by_every_order() {
    held("rcpsp", |on| {
        let project = Project::of(on);
        project.shortest(&mut vec![None; project.time.len()]) as f64
    });
}
