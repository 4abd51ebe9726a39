//! Membership of integer points against enumeration, on all 0/1 assignments.

use model::{LabelId, Number, SubsetCondition, SubsetFamilyId};

use super::build::{CROSSING, Graph, INSIDE, LEAVING, Shape, enumerated, size, violation};
use crate::{Membership, Separator};

/// Every 0/1 point of the graph; how many of them meet every member.
fn all_points(graph: &Graph, shape: &Shape, conditions: Vec<SubsetCondition>) -> u32 {
    let model = graph.model(shape, conditions);
    let family = model.subset_family(SubsetFamilyId(0));
    let separator = Separator::new(&model, SubsetFamilyId(0));
    let columns = graph.pairs().len();
    let mut members = 0;
    for mask in 0..1_u32 << columns {
        let x: Vec<f64> = (0..columns).map(|k| f64::from(mask >> k & 1)).collect();
        let holds = enumerated(family, &x).iter().all(|(_, violation)| *violation <= 0.0);
        let noisy: Vec<f64> = x.iter().map(|value| value + 1e-7).collect();
        match separator.membership(&noisy) {
            Membership::Satisfied => assert!(holds, "{x:?}"),
            Membership::Violated(member) => {
                assert!(!holds && family.admits(&member.subset));
                assert!(violation(&member.row, &x) > 0.0);
            }
            Membership::Unknown => panic!("the shape is recognised"),
        }
        members += u32::from(holds);
    }
    members
}

#[test]
fn forests_are_counted() {
    // 38 labelled forests on 4 nodes, 291 on 5 (OEIS A001858).
    for (nodes, forests) in [(4, 38), (5, 291)] {
        let graph = Graph { nodes, directed: false, degrees: false };
        assert_eq!(all_points(&graph, &INSIDE, vec![size(2, nodes)]), forests);
    }
}

#[test]
fn connected_graphs_are_counted() {
    // 38 connected labelled graphs on 4 nodes, 728 on 5 (OEIS A001187).
    let shape = Shape { constant: -1, ..CROSSING };
    for (nodes, connected) in [(4, 38), (5, 728)] {
        let graph = Graph { nodes, directed: false, degrees: false };
        assert_eq!(all_points(&graph, &shape, vec![size(1, nodes - 1)]), connected);
    }
}

#[test]
fn strongly_connected_graphs_are_counted() {
    // 1606 strongly connected labelled digraphs on 4 nodes (OEIS A003030).
    let graph = Graph { nodes: 4, directed: true, degrees: false };
    assert_eq!(all_points(&graph, &LEAVING, vec![size(1, 3)]), 1606);
}

#[test]
fn conditions_are_respected() {
    for degrees in [false, true] {
        let graph = Graph { nodes: 4, directed: true, degrees };
        let root = LabelId(2);
        let avoids = vec![size(2, 4), SubsetCondition::Avoids(root)];
        let holds = vec![size(1, 3), SubsetCondition::Contains(root)];
        for (shape, conditions) in [
            (&INSIDE, avoids.clone()),
            (&INSIDE, holds.clone()),
            (&LEAVING, avoids),
            (&LEAVING, holds),
        ] {
            assert!(all_points(&graph, shape, conditions) > 0);
        }
        for shape in [&INSIDE, &LEAVING] {
            assert!(all_points(&graph, shape, vec![size(2, 2)]) > 0);
            assert!(all_points(&graph, shape, vec![SubsetCondition::Odd(true), size(2, 4)]) > 0);
        }
    }
}

/// A violation under every tolerance is still one: a third of a unit over 10⁷.
#[test]
fn small_violations_count_at_integer_points() {
    let graph = Graph { nodes: 4, directed: true, degrees: false };
    let mut family =
        graph.model(&INSIDE, vec![size(2, 3)]).subset_family(SubsetFamilyId(0)).clone();
    family.constant = Number::from(1) + Number::from_parts(1.into(), 30_000_000_u32.into());
    let model = super::others::with_family(12, family);
    let separator = Separator::new(&model, SubsetFamilyId(0));
    let mut x = vec![0.0; 12];
    assert_eq!(separator.membership(&x), Membership::Satisfied);
    x[0] = 1.0;
    assert!(matches!(separator.membership(&x), Membership::Violated(_)));
}
