//! What node work and priorities do.

use std::rc::Rc;

use model::{ModelBuilder, Sense};

use super::support::{Form, Random, best_trip, random_model, round_trip, row, run, spec, working};
use crate::{Class, Classes, Cuts, Event, NodeState, NodeWork, Settings, Status};

/// Tightened bounds take nodes away, never solutions, and every leaf stays checked.
#[test]
fn bounds_are_tightened_and_proved() {
    let costs = Random(9).distances(7);
    let model = round_trip(&costs, Form::Labels, Sense::Minimise);
    let value = best_trip(&costs) as f64;
    let bare = run(&model, &Settings::default(), u64::MAX).1;
    for settings in working() {
        for cutoff in [None, Some(value)] {
            let settings = Settings { cutoff, ..settings.clone() };
            let summary = run(&model, &settings, u64::MAX).1;
            let place = format!("{settings:?}: {summary:?}");
            assert_eq!((summary.status, summary.checked), (Status::Optimal, true), "{place}");
            assert_eq!(summary.bound, Some(value), "{place}");
            let counts = summary.node_work;
            assert_eq!(counts.tightened > 0, settings.node_work.propagation, "{place}");
            assert!(counts.fixed == 0 || settings.node_work.fixing, "{place}");
            assert!(summary.nodes <= bare.nodes, "{place}");
        }
    }
}

/// With the step of the objective switched off only a bound at the best value closes a node.
#[test]
fn the_step_of_the_objective_can_be_switched_off() {
    let mut fewer = 0;
    for seed in 0..20 {
        let model = random_model(seed, 8, 0);
        let node_work = NodeWork { lattice: false, ..NodeWork::default() };
        let with = run(&model, &Settings::default(), u64::MAX).1;
        let without = run(&model, &Settings { node_work, ..Settings::default() }, u64::MAX).1;
        assert_eq!((with.status, with.incumbent), (without.status, without.incumbent));
        assert!(with.nodes <= without.nodes);
        fewer += u32::from(with.nodes < without.nodes);
    }
    assert!(fewer > 0);
}

/// A variable that is named is branched on before the others, whatever its fractions.
#[test]
fn priorities_come_first() {
    let mut builder = ModelBuilder::new("two", Sense::Maximise);
    let mut entries = Vec::new();
    for (name, weight) in [("x", 6), ("y", 5)] {
        builder.variable(name, false);
        for k in 0..3 {
            let column = builder.column(&[], &spec((0, 3), weight + k, true)).unwrap();
            entries.push((column, 2 * weight + 3));
            builder.row(&[], row(&[(column, 4)], None, Some(6))).unwrap();
        }
    }
    builder.row(&[], row(&entries, None, Some(61))).unwrap();
    let model = Rc::new(builder.build());
    for name in ["x", "y"] {
        let settings = Settings { priority: vec![name.to_owned()], ..Settings::default() };
        let (events, _) = run(&model, &settings, u64::MAX);
        let first = events.iter().find_map(|event| match event {
            Event::Solved { branch_column, .. } => *branch_column,
            _ => None,
        });
        let name_of = |c: model::ColumnId| {
            model.variables()[model.columns()[c.index()].variable.index()].name.clone()
        };
        assert_eq!(first.map(name_of).as_deref(), Some(name));
    }
}

/// Each part of node work alone: the others count nothing, and what it counts is what the events say.
#[test]
fn each_part_is_switched_and_counted_alone() {
    let none = NodeWork { propagation: false, fixing: false, lattice: false };
    let parts = [
        none,
        NodeWork { propagation: true, ..none },
        NodeWork { fixing: true, ..none },
        NodeWork { lattice: true, ..none },
        none,
    ];
    let mut all = [[0_u64; 5]; 5];
    for seed in 0..40 {
        let model = random_model(seed, 12, 0);
        for (place, &node_work) in parts.iter().enumerate() {
            let classes: Classes = [Class::Gomory, Class::Cover].into_iter().collect();
            let cuts = Cuts { classes, every: 1, rounds: 2 };
            let cuts = if place == 4 { cuts } else { Cuts::default() };
            let settings = Settings { node_work, cuts, ..Settings::default() };
            let (events, summary) = run(&model, &settings, u64::MAX);
            let counts = summary.node_work;
            let counted = [
                u64::from(counts.closed),
                counts.tightened,
                counts.fixed,
                u64::from(counts.stepped),
                u64::from(counts.cut_off),
            ];
            all[place].iter_mut().zip(counted).for_each(|(sum, count)| *sum += count);
            let unpriced = events.iter().filter(|event| {
                matches!(event, Event::Solved { state: NodeState::Infeasible, iterations: 0, .. })
            });
            assert!(unpriced.count() >= counts.closed as usize, "seed {seed}");
            assert!(counts.stepped <= summary.leaves_checked + summary.leaves_unchecked);
        }
    }
    let used = all.map(|counts| counts.map(|count| count > 0));
    let wanted = [
        [false, false, false, false, false],
        [true, true, false, false, false],
        [false, false, true, false, false],
        [false, false, false, true, false],
        [false, false, false, false, true],
    ];
    assert_eq!(used, wanted, "{all:?}");
}
