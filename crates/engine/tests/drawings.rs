//! How the shipped rivals are drawn on the shipped scenarios: each by what its variables stand over.

#![allow(clippy::unwrap_used, clippy::panic, reason = "a test fails by it")]

use hullward_engine::Worker;
use record::event::NodeNumber;
use record::file;
use record::message::{LaneJob, NodeDetail, Picture, Reply, Request};
use record::scenario::{InstanceText, Rival, Scenario};

const PATHS: &str = include_str!("../../../scenarios/paths.toml");
const LOTS: &str = include_str!("../../../scenarios/lots.toml");
const BENCHES: &str = include_str!("../../../scenarios/three-benches.toml");
const ROLLS: &str = include_str!("../../../scenarios/rolls.toml");
const EXAMS: &str = include_str!("../../../scenarios/exams.toml");
const HALL: &str = include_str!("../../../scenarios/let-the-hall.toml");
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

/// Each job's steps stand on their machines, each as long as the data say; a chart comes first.
#[test]
fn starts_are_a_chart_of_machines_over_time() {
    let instance = scenario(BENCHES).instance.unwrap();
    let detail = root(instance, "job-shop/disjunctive").unwrap();
    let Picture::Strips { strips, time: true } = &detail.drawings[0].picture else {
        panic!("{detail:?}")
    };
    let machines: Vec<&str> = strips.iter().map(|strip| strip.name.as_str()).collect();
    assert_eq!(machines, ["saw", "plane", "paint"]);
    let of = |machine: usize, job: &str| {
        let part = strips[machine].parts.iter().find(|part| part.name == job).unwrap();
        (part.from, part.to)
    };
    for (machine, job, time) in [(0, "chair", 5.0), (1, "frame", 5.0), (2, "gate", 1.0)] {
        let (from, to) = of(machine, job);
        assert!((to - from - time).abs() < 1e-9, "{job} on {machine}");
    }
    // frame: saw, then plane, then paint
    assert!(of(0, "frame").1 <= of(1, "frame").0 + 1e-9);
    assert!(of(1, "frame").1 <= of(2, "frame").0 + 1e-9);
}

/// Completion times are a strip for each ship that ends there and is as long as its unloading, whether
/// two ships or an order of all are chosen; starts of a job shop are not taken for ends.
#[test]
fn completion_times_are_a_chart_that_ends_there() {
    let crane = scenario(include_str!("../../../scenarios/one-crane.toml")).instance.unwrap();
    let hours = [2.0, 5.0, 1.0, 3.0, 1.0, 4.0, 4.0];
    for id in ["machine/big-m", "machine/linear-ordering", "machine/parallel"] {
        let detail = root(crane.clone(), id).unwrap();
        let Picture::Strips { strips, time: true } = &detail.drawings[0].picture else {
            panic!("{id}: {:?}", names(&detail))
        };
        assert_eq!(strips.len(), 7, "{id}");
        for (strip, hours) in strips.iter().zip(hours) {
            let part = &strip.parts[0];
            assert!((part.to - part.from - hours).abs() < 1e-9, "{id}: {strip:?}");
            assert!(part.from >= -1e-9, "{id}: {strip:?}");
        }
    }
}

/// Of a graph that is too large to be drawn whole, the part is drawn in which values are not whole.
#[test]
fn a_large_graph_is_drawn_where_values_are_not_whole() {
    let ring = |first: u32, many: u32| {
        let last = first + many - 1;
        let steps = (first..last).map(|one| format!("v{one} v{}\n", one + 1));
        let steps: String = steps.collect();
        format!("{steps}v{last} v{first}\n")
    };
    // A ring whose every second vertex is worth more, and a triangle, at which alone 0.5 is best.
    let vertices: String = (1..=123).map(|v| format!("v{v} ")).collect();
    let worth = |v: u32| if v <= 120 && v % 2 == 1 { 3 } else { 1 };
    let worths: String = (1..=123).map(|v| format!("v{v} {}\n", worth(v))).collect();
    let pairs = format!("{}{}", ring(1, 120), ring(121, 3));
    let text = format!("V\n{vertices}\n\nE by i, j\n{pairs}\nw by i\n{worths}");
    let instance =
        InstanceText { text, reader: Some("blocks".to_owned()), ..InstanceText::default() };
    let detail = root(instance, "stable-set/edges").unwrap();
    let graph = detail.drawings.iter().find_map(|drawing| match &drawing.picture {
        Picture::Graph { vertices, edges, .. } => Some((&drawing.name, vertices, edges)),
        _ => None,
    });
    let (name, vertices, edges) = graph.unwrap_or_else(|| panic!("{:?}", names(&detail)));
    assert!(name.contains("80 of 123 nodes"), "{name}");
    assert_eq!(vertices.len(), 80);
    let half = vertices.iter().filter(|vertex| vertex.value == Some(0.5));
    let half: Vec<&str> = half.map(|vertex| vertex.label.as_str()).collect();
    assert!(["v121", "v122", "v123"].iter().all(|label| half.contains(label)), "{half:?}");
    assert!(edges.iter().all(|&(one, other)| one < 80 && other < 80) && edges.len() > 30);
}

/// Of starts by the hour, the rows of the hours say how long each takes.
#[test]
fn starts_by_period_are_a_chart_too() {
    let instance = scenario(BENCHES).instance.unwrap();
    let detail = root(instance, "job-shop/time-indexed").unwrap();
    let Picture::Strips { strips, time: true } = &detail.drawings[0].picture else {
        panic!("{detail:?}")
    };
    assert_eq!(strips.len(), 3, "a strip for each machine");
    let parts = || strips.iter().flat_map(|strip| &strip.parts);
    let begun: f64 = parts().map(|part| part.value).sum();
    assert!((begun - 12.0).abs() < 1e-6, "each of twelve steps begins once: {begun}");
    let saw = strips.iter().find(|strip| strip.name == "saw").unwrap();
    let chair = saw.parts.iter().filter(|part| part.name == "chair");
    assert!(chair.clone().count() > 0);
    chair.for_each(|part| assert_eq!(part.to - part.from, 5.0));
}

/// Pieces lie in bins by weight times value, and what lies in a bin is within its room.
#[test]
fn pieces_lie_in_bins() {
    let instance = scenario(ROLLS).instance.unwrap();
    let detail = root(instance, "bins/assignment").unwrap();
    let Picture::Strips { strips, time: false } = &detail.drawings[0].picture else {
        panic!("{detail:?}")
    };
    let mut lies = 0.0;
    for strip in strips {
        let end = strip.parts.last().map_or(0.0, |part| part.to);
        assert!(end <= strip.limit.unwrap() + 1e-6, "{strip:?}");
        lies += end;
    }
    // 2 of 15, 3 of 13, 3 of 10, 3 of 8 and 2 of 7
    assert!((lies - 137.0).abs() < 1e-6, "{lies}");
}

/// Vertices that may not share a colour are joined, as the data say; a colour is the class of its
/// vertex.
#[test]
fn colours_and_stable_sets_are_drawn_on_their_graph() {
    let edges = |detail: &NodeDetail| {
        let graph = detail.drawings.iter().find_map(|drawing| match &drawing.picture {
            Picture::Graph { vertices, edges, .. } => Some((vertices.clone(), edges.len())),
            _ => None,
        });
        graph.unwrap_or_else(|| panic!("{:?}", detail.drawings))
    };
    let exams = root(scenario(EXAMS).instance.unwrap(), "colouring/assignment").unwrap();
    let (vertices, joined) = edges(&exams);
    assert_eq!((vertices.len(), joined), (10, 26));
    assert!(vertices.iter().all(|vertex| !vertex.class.is_empty()));

    let hall = root(scenario(HALL).instance.unwrap(), "stable-set/edges").unwrap();
    let (vertices, joined) = edges(&hall);
    assert_eq!((vertices.len(), joined), (14, 34));
    assert!(vertices.iter().all(|vertex| vertex.value.is_some()));
}

/// The solutions of every ready scenario's rivals are drawn somehow.
#[test]
fn every_ready_scenario_has_a_drawing() {
    let folder = concat!(env!("CARGO_MANIFEST_DIR"), "/../../scenarios");
    let mut files: Vec<_> =
        std::fs::read_dir(folder).unwrap().map(|entry| entry.unwrap().path()).collect();
    files.sort();
    for path in files {
        let scenario = scenario(&std::fs::read_to_string(&path).unwrap());
        let instance = scenario.instance.clone().unwrap();
        for rival in scenario.rivals.iter().filter_map(|rival| rival.from.as_deref()) {
            let Some(detail) = root(instance.clone(), rival) else { continue };
            assert!(!detail.drawings.is_empty(), "{rival}");
        }
    }
}
