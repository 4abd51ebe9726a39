//! How the shipped rivals are drawn on the shipped scenarios: each by what its variables stand over.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by it")]

use hullward_engine::Worker;
use record::event::NodeNumber;
use record::file;
use record::message::{LaneJob, NodeDetail, Picture, Reply, Request};
use record::scenario::{InstanceText, Rival, Scenario};

const PATHS: &str = include_str!("../../../scenarios/paths.toml");
const LOTS: &str = include_str!("../../../scenarios/lots.toml");
const DEPOTS: &str = include_str!("../../../scenarios/open-depots.toml");

fn root(instance: InstanceText, id: &str) -> Option<NodeDetail> {
    let rival = Rival { from: Some(id.to_owned()), ..Rival::default() };
    let job = LaneJob { instance: Some(instance), rival, ..LaneJob::default() };
    let mut worker = Worker::new();
    worker.handle(Request::Load(Box::new(job)));
    while worker.advance(100_000) {}
    worker.handle(Request::Inspect(NodeNumber(1)));
    while worker.advance(100_000) {}
    let replies = worker.take().into_iter().map(|envelope| envelope.reply);
    let mut nodes = replies.filter_map(|reply| match reply {
        Reply::Node(detail) => Some(*detail),
        _ => None,
    });
    nodes.next()
}

fn scenario(text: &str) -> Scenario {
    file::parse(text).scenario.unwrap()
}

fn names(detail: &NodeDetail) -> Vec<&str> {
    detail.drawings.iter().map(|drawing| drawing.name.as_str()).collect()
}

/// 4 + 3 + 7 + 3 + 5 + 3 minutes: Garage, Station, Market, West bridge, Church, Fair, Car; found
/// by hand with Dijkstra's algorithm.
#[test]
fn a_path_is_drawn_as_arcs_and_potentials_as_values_with_tight_arcs() {
    let instance = scenario(PATHS).instance.unwrap();
    let flow = root(instance.clone(), "path/flow").unwrap();
    assert_eq!(names(&flow), ["x on the map"]);
    let Picture::Map { arcs, at } = &flow.drawings[0].picture else { panic!("{flow:?}") };
    assert!(at.is_empty() && arcs.iter().all(|arc| (arc.value - 1.0).abs() < 1e-9));
    let mut path = vec![0];
    while let Some(arc) = arcs.iter().find(|arc| Some(&arc.from) == path.last()) {
        path.push(arc.to);
    }
    assert_eq!((path.first(), path.last(), path.len()), (Some(&0), Some(&12), arcs.len() + 1));

    let potentials = root(instance, "path/potentials").unwrap();
    assert_eq!(names(&potentials), ["p and tight rows on the map"]);
    let Picture::Map { arcs: tight, at } = &potentials.drawings[0].picture else {
        panic!("{potentials:?}")
    };
    let of = |stop: u32| at.iter().find(|(known, _)| *known == stop).unwrap().1;
    assert_eq!((at.len(), of(0), of(12)), (13, 0.0, 25.0));
    for arc in arcs {
        let tight = tight.iter().any(|other| (other.from, other.to) == (arc.from, arc.to));
        assert!(tight, "complementary slackness: the path runs along tight arcs");
    }
}

#[test]
fn lots_are_bars_over_time_and_their_pairs_a_grid() {
    let instance = scenario(LOTS).instance.unwrap();
    let big_m = root(instance.clone(), "lot/big-m").unwrap();
    let Picture::Bars { periods, series } = &big_m.drawings[0].picture else { panic!("{big_m:?}") };
    assert_eq!(periods.first(), Some(&0), "the stock at the start is a column too");
    assert_eq!((periods.last(), periods.len()), (Some(&12), 13));
    let names_of: Vec<&str> = series.iter().map(|(name, _)| name.as_str()).collect();
    assert!(["x", "y", "s"].iter().all(|name| names_of.contains(name)), "{names_of:?}");
    for (name, values) in series {
        assert_eq!((values.len(), values[0].is_some()), (13, name == "s"), "{name}");
        assert!(values[1..].iter().all(Option::is_some), "{name}");
    }
    let location = root(instance, "lot/location-form").unwrap();
    let pictures: Vec<_> = location.drawings.iter().map(|drawing| &drawing.picture).collect();
    assert!(matches!(pictures[..], [Picture::Bars { .. }, Picture::Grid { .. }]), "{pictures:?}");
}

#[test]
fn assignments_without_places_are_a_grid() {
    let split = root(scenario(DEPOTS).instance.unwrap(), "ufl/split").unwrap();
    let Picture::Grid { rows, columns, cells } = &split.drawings[0].picture else {
        panic!("{split:?}")
    };
    assert_eq!((rows.len(), columns.len()), (6, 12));
    for column in 0..12 {
        let served: f64 = cells.iter().filter(|cell| cell.1 == column).map(|cell| cell.2).sum();
        assert!((served - 1.0).abs() < 1e-9, "{column}");
    }
}

/// Facilities and clients that are the stops of a map are drawn there.
#[test]
fn assignments_between_stops_are_drawn_on_the_map() {
    let mut instance = scenario(DEPOTS).instance.unwrap();
    instance.text = "V\nAsh Birch Cedar\n\nf by i\nAsh 3\nBirch 1\nCedar 9\n\nc by i, j\n\
        Ash Ash 0\nAsh Birch 4\nAsh Cedar 6\nBirch Ash 4\nBirch Birch 0\nBirch Cedar 2\n\
        Cedar Ash 6\nCedar Birch 2\nCedar Cedar 0\n"
        .to_owned();
    for name in ["I", "J"] {
        instance.bind.insert(name.to_owned(), "V".to_owned());
    }
    let split = root(instance, "ufl/split").unwrap();
    assert!(matches!(split.drawings[0].picture, Picture::Map { .. }), "{:?}", names(&split));
}

#[test]
fn a_negative_cycle_is_named() {
    let mut instance = scenario(PATHS).instance.unwrap();
    instance.text =
        instance.text.replace("Island School 2\n", "Island School 2\nSchool Island -5\n");
    for id in ["path/potentials", "path/flow"] {
        let cycle = root(instance.clone(), id).unwrap().cycle.unwrap();
        let mut stops = cycle.stops;
        stops.sort_unstable();
        assert_eq!((stops, cycle.total), (vec!["Island".to_owned(), "School".to_owned()], -3.0));
    }
}
