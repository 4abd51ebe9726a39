//! A cycle of negative length makes potentials infeasible and a flow unbounded: both say which.

use std::rc::Rc;

use model::{ColumnSpec, FamilyState, Model, ModelBuilder, Sense};

use super::support::{finish, row, rules, spec, whole};
use crate::{Cycle, NodeId, NodeState, Search};

/// Arcs over five places; 1 → 3 → 2 → 1 has length 4 + 1 − 8 = −3.
const ARCS: [(usize, usize, i64); 7] =
    [(0, 1, 5), (1, 3, 4), (3, 2, 1), (2, 1, -8), (3, 4, 2), (0, 2, 9), (4, 0, 6)];

const NAMES: [&str; 5] = ["Yard", "Ash", "Cedar", "Birch", "End"];

fn potentials(at_least: bool) -> Rc<Model> {
    let mut builder = ModelBuilder::new("potentials", Sense::Maximise);
    let places: Vec<_> = NAMES.iter().map(|name| builder.label(name)).collect();
    builder.variable("p", false);
    let free = |cost| ColumnSpec { lower: None, upper: None, cost: whole(cost), integer: false };
    let mut columns = Vec::new();
    for (at, &place) in places.iter().enumerate() {
        let cost = i64::from(at == 4);
        let column = if at == 0 { spec((0, 0), 0, false) } else { free(cost) };
        columns.push(builder.column(&[place], &column).unwrap());
    }
    builder.family("length", FamilyState::In, true);
    for (i, j, length) in ARCS {
        let up = row(&[(columns[j], 1), (columns[i], -1)], None, Some(length));
        let down = row(&[(columns[i], 1), (columns[j], -1)], Some(-length), None);
        builder.row(&[places[i], places[j]], if at_least { down } else { up }).unwrap();
    }
    Rc::new(builder.build())
}

fn flow() -> Rc<Model> {
    let mut builder = ModelBuilder::new("flow", Sense::Minimise);
    let places: Vec<_> = NAMES.iter().map(|name| builder.label(name)).collect();
    builder.variable("x", true);
    let mut columns = Vec::new();
    for (i, j, cost) in ARCS {
        let column =
            ColumnSpec { lower: Some(whole(0)), upper: None, cost: whole(cost), integer: false };
        columns.push(builder.column(&[places[i], places[j]], &column).unwrap());
    }
    builder.family("balance", FamilyState::In, false);
    for (at, &place) in places.iter().enumerate() {
        let sign = |&(i, j, _): &(usize, usize, i64)| i64::from(i == at) - i64::from(j == at);
        let terms: Vec<_> = columns.iter().copied().zip(ARCS.iter().map(sign)).collect();
        let terms: Vec<_> = terms.into_iter().filter(|term| term.1 != 0).collect();
        let supply = i64::from(at == 0) - i64::from(at == 4);
        builder.row(&[place], row(&terms, Some(supply), Some(supply))).unwrap();
    }
    Rc::new(builder.build())
}

fn cycle(model: Rc<Model>, state: NodeState) -> Cycle {
    let mut search = Search::new(model, rules()[0].clone());
    finish(&mut search, 500);
    let view = search.inspect(NodeId::ROOT).unwrap();
    assert_eq!(view.state, state);
    view.cycle.unwrap_or_else(|| panic!("no cycle in {:?}", view.ray))
}

fn check(model: &Rc<Model>, state: NodeState) {
    let Cycle { stops, total } = cycle(Rc::clone(model), state);
    assert_eq!(total, whole(-3));
    let mut names: Vec<&str> = stops.iter().map(|&stop| model.labels().name(stop)).collect();
    let first = names.iter().position(|name| *name == "Ash").unwrap();
    names.rotate_left(first);
    assert_eq!(names, ["Ash", "Birch", "Cedar"]);
}

#[test]
fn the_rows_of_the_ray_are_those_of_the_cycle() {
    check(&potentials(false), NodeState::Infeasible);
    check(&potentials(true), NodeState::Infeasible);
}

#[test]
fn an_unbounded_flow_runs_around_the_cycle() {
    check(&flow(), NodeState::Unbounded);
}
