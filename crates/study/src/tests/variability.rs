//! The same model in another order has the same optimum; the root matters to some formulations.

use super::{driven, instance, shipped};
use crate::{Ground, Plan, Subject};

/// Cheap circles of three and of five stops, dear drives between: labels without the root break one
/// of them, and which one it is depends on the root.
fn two_circles() -> String {
    let names: Vec<char> = ('a'..='h').collect();
    let next = |place: usize| match place {
        2 => 0,
        7 => 3,
        place => place + 1,
    };
    let mut text: String = names.iter().map(|name| format!("\t{name}")).collect();
    for (from, name) in names.iter().enumerate() {
        text += &format!("\n{name}");
        for to in 0..names.len() {
            text += match to {
                to if to == from => "\t",
                to if to == next(from) => "\t1",
                _ => "\t100",
            };
        }
    }
    text + "\n"
}

/// The rivals on the only instance.
fn alone(subjects: Vec<Subject>) -> Vec<Ground> {
    vec![Ground { title: String::new(), subjects }]
}

#[test]
fn every_order_has_the_same_optimum_and_only_some_bounds_know_the_root() {
    let data = instance(&two_circles());
    let rivals = ["atsp/labels", "atsp/subtours", "atsp/one-commodity"];
    let subjects: Vec<Subject> =
        rivals.iter().zip(["A", "B", "C"]).map(|(id, letter)| shipped(letter, id, &data)).collect();
    let plan = Plan { orders: 4, ..Plan::default() };
    let found =
        driven(100_000, |desk| crate::variability::variability(desk, alone(subjects), plan));
    let optimum = found.rivals[0].written.incumbent.expect("a plan");
    for rival in &found.rivals {
        assert_eq!(rival.runs.len(), 4);
        for run in &rival.runs {
            let value = run.incumbent.expect("a plan");
            assert!(run.solved && (value - optimum).abs() < 1e-6, "{run:?}");
        }
        assert!(rival.work.0 <= rival.work.1 && rival.work.1 <= rival.work.2, "{rival:?}");
    }
    // Another order is another search.
    let labels = &found.rivals[0];
    assert!(labels.runs.iter().any(|run| run.work != labels.written.work), "{labels:?}");
    assert_eq!(found.pairs.len(), 3);
    for pair in &found.pairs {
        assert_eq!(pair.wins + pair.ties + pair.losses, 5);
    }
    // Padberg, Sung 1991: no root stands in the bound of subtours.
    assert_eq!(found.root, "r");
    let spread = |rival: usize| {
        let bounds: Vec<f64> = found.rivals[rival].roots.iter().filter_map(|one| one.1).collect();
        assert_eq!(bounds.len(), 8);
        let mut sorted = bounds.clone();
        sorted.sort_by(f64::total_cmp);
        sorted[7] - sorted[0]
    };
    assert!(spread(0) > 1e-3 && spread(1) < 1e-6 && spread(2) > 1e-3, "{found:?}");
}
