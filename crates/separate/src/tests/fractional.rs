//! At random fractional points a violated member is found exactly when there is one.

use model::{LabelId, Number, SubsetCondition, SubsetFamilyId};
use rand_pcg::Pcg64Mcg;

use super::build::{CROSSING, ENTERING, Graph, INSIDE, LEAVING, Shape, check, size};
use crate::{Exactness, Separator};

/// Every combination of size, degree equations and conditions, at several points each; the
/// method must be exact, and both outcomes must occur.
fn sweep(shape: &Shape, directed: bool, conditions: fn(u32) -> Vec<Vec<SubsetCondition>>) {
    let mut random = Pcg64Mcg::new(1954);
    for nodes in 4..=8 {
        let (mut violated, mut met) = (0, 0);
        for degrees in [true, false] {
            for conditions in conditions(nodes) {
                let graph = Graph { nodes, directed, degrees };
                let model = graph.model(shape, conditions);
                let mut separator = Separator::new(&model, SubsetFamilyId(0));
                assert_eq!(separator.exactness(), Some(Exactness::Exact));
                for _ in 0..25 {
                    if check(&model, &mut separator, &graph.point(&mut random)) {
                        violated += 1;
                    } else {
                        met += 1;
                    }
                }
            }
        }
        assert!(violated > 0 && met > 0, "{violated} violated, {met} met");
    }
}

fn subtours(nodes: u32) -> Vec<Vec<SubsetCondition>> {
    let (first, last) = (LabelId(0), LabelId(nodes - 1));
    vec![
        vec![size(2, nodes - 1)],
        vec![size(1, nodes)],
        vec![size(2, nodes), SubsetCondition::Avoids(first)],
        vec![size(2, nodes - 1), SubsetCondition::Contains(last)],
        vec![size(2, nodes - 1), SubsetCondition::Contains(first), SubsetCondition::Avoids(last)],
    ]
}

fn cuts(nodes: u32) -> Vec<Vec<SubsetCondition>> {
    let (first, last) = (LabelId(0), LabelId(nodes - 1));
    vec![
        vec![size(1, nodes - 1)],
        vec![size(2, nodes - 1)],
        vec![size(1, nodes), SubsetCondition::Avoids(first)],
        vec![size(0, nodes - 1), SubsetCondition::Contains(last)],
        vec![size(1, nodes - 1), SubsetCondition::Meets(vec![first, last])],
    ]
}

/// Cuts between terminals: S ∩ T ≠ ∅ and T ∖ S ≠ ∅, the second as the weight condition that
/// fewer than |T| of T are in S.
fn steiner(nodes: u32) -> Vec<Vec<SubsetCondition>> {
    let terminals: Vec<LabelId> = (0..nodes).step_by(2).map(LabelId).collect();
    let weights: Vec<_> = terminals.iter().map(|&t| (t, Number::from(-1))).collect();
    let over = -Number::from(weights.len());
    let lacks = SubsetCondition::WeightOver { weights, over };
    let one = terminals.iter().map(|&t| (t, Number::from(2))).collect();
    let holds = SubsetCondition::WeightOver { weights: one, over: Number::ONE };
    vec![vec![SubsetCondition::Meets(terminals), lacks.clone()], vec![holds, lacks]]
}

#[test]
fn between_terminals() {
    sweep(&CROSSING, false, steiner);
    sweep(&LEAVING, true, steiner);
}

#[test]
fn inside_directed() {
    sweep(&INSIDE, true, subtours);
}

#[test]
fn inside_undirected() {
    sweep(&INSIDE, false, subtours);
}

#[test]
fn leaving() {
    sweep(&LEAVING, true, cuts);
}

#[test]
fn entering() {
    sweep(&ENTERING, true, cuts);
}

#[test]
fn crossing() {
    sweep(&CROSSING, false, cuts);
}

/// With the degree equations in, sets of up to half of the nodes (or a few more) are enough,
/// and the set that is returned is one of these.
#[test]
fn up_to_half() {
    let mut random = Pcg64Mcg::new(7);
    for (shape, directed) in
        [(&INSIDE, true), (&INSIDE, false), (&LEAVING, true), (&CROSSING, false)]
    {
        let mut violated = 0;
        for nodes in 4..=8 {
            let graph = Graph { nodes, directed, degrees: true };
            let most = if nodes % 2 == 0 { nodes / 2 } else { nodes - 2 };
            let model = graph.model(shape, vec![size(2, most)]);
            let mut separator = Separator::new(&model, SubsetFamilyId(0));
            assert_eq!(separator.exactness(), Some(Exactness::Exact));
            for _ in 0..40 {
                violated += u32::from(check(&model, &mut separator, &graph.point(&mut random)));
            }
        }
        assert!(violated > 0);
    }
}

/// Without the degree equations the same family is listed, or, where it is too large for
/// that, said to be heuristic.
#[test]
fn up_to_half_without_degree_equations() {
    for (nodes, exactness) in [(8, Exactness::Enumerated), (16, Exactness::Heuristic)] {
        let graph = Graph { nodes, directed: true, degrees: false };
        let model = graph.model(&INSIDE, vec![size(2, nodes / 2)]);
        let separator = Separator::new(&model, SubsetFamilyId(0));
        assert_eq!(separator.exactness(), Some(exactness));
    }
}

#[test]
fn methods_are_named() {
    let graph = |degrees| Graph { nodes: 5, directed: true, degrees };
    let named = |degrees, shape: &Shape, conditions| {
        let model = graph(degrees).model(shape, conditions);
        Separator::new(&model, SubsetFamilyId(0)).description().to_owned()
    };
    let plain = || vec![size(2, 4)];
    let root = || vec![size(1, 5), SubsetCondition::Avoids(LabelId(0))];
    let expected = [
        (named(true, &INSIDE, plain()), "exact minimum cut (the degree equations make it one)"),
        (
            named(false, &INSIDE, plain()),
            "exact closure: minimum cut with node weights, one for each forced element",
        ),
        (named(true, &LEAVING, plain()), "exact minimum cut between the elements"),
        (named(false, &LEAVING, root()), "exact minimum cut from each element to v0"),
    ];
    for (name, wanted) in expected {
        assert_eq!(name, wanted);
    }
}
